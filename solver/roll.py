"""The roll plane, quasi-static beside the planar run.

The driveshaft turns the axle housing one way and, through engine and gearbox,
the chassis the other. The chassis hands its share back through the front and
rear springs; what the front carries is missing at the rear, and the rear tyres
differ by ``Td/t Kf/(Kf + Kr)`` (Gillespie, *Fundamentals of Vehicle Dynamics*,
solid drive axle, and Milliken and Milliken, *Race Car Vehicle Dynamics*, from
memory). A driveshaft that turns anticlockwise seen from behind, as behind an
engine of standard rotation, loads the left rear tyre.

No lateral acceleration, so at every instant the tyres' couple about the centre
line is that of the standing car: whatever the front tyres' difference loses,
the rear tyres' difference gains. That holds when the front tyres unload and
leave the ground too, where the formula alone does not.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from solver.checks import one_of
from solver.roll_stiffness import RollAxle, front_share, stiffness_on_tyres
from solver.weights import Corners, weigh

GRAVITY = 9.80665
CAUTION = "Quasi-static: roll inertia, dampers and side forces are not in it, so short peaks are only near the truth."


@dataclass(frozen=True)
class RollHistory:
    """Tyre loads left and right against time.

    Attributes
    ----------
    t : ndarray, shape (n,)
        s.
    front_left, front_right, rear_left, rear_right : ndarray, shape (n,)
        N.
    rear_difference : ndarray, shape (n,)
        Left less right, N.
    driveshaft_torque : ndarray, shape (n,)
        N m.
    roll : ndarray, shape (n,)
        Chassis roll from rest against the ground, rad, left side up positive;
        of the torque reaction only, and NaN where a tyre is off the ground.
    front_share : float
        Part of the driveshaft torque that the front tyres react.
    doubts : tuple of str
    caution : str
    """

    t: np.ndarray
    front_left: np.ndarray
    front_right: np.ndarray
    rear_left: np.ndarray
    rear_right: np.ndarray
    rear_difference: np.ndarray
    driveshaft_torque: np.ndarray
    roll: np.ndarray
    front_share: float
    doubts: tuple
    caution: str = CAUTION


def roll_history(
    t: ArrayLike,
    front_load: ArrayLike,
    rear_load: ArrayLike,
    shaft_torque: ArrayLike,
    corners: Corners,
    front: RollAxle,
    rear: RollAxle,
    rotation: str = "standard",
    gravity: float = GRAVITY,
) -> RollHistory:
    """Left and right tyre loads over a planar run.

    Parameters
    ----------
    t, front_load, rear_load, shaft_torque : array_like, shape (n,)
        Times, s; axle loads of the planar run, N; driveshaft torque, N m.
    corners : Corners
        Corner weights of the standing car, kg; only their differences are used.
    front, rear : RollAxle
    rotation : {'standard', 'reverse'}
        Standard: driveshaft anticlockwise seen from behind, which loads the left rear.
    gravity : float
        m/s^2.

    Returns
    -------
    RollHistory

    Raises
    ------
    ValueError
        When lengths differ or a value is out of range.
    """
    one_of("the rotation", rotation, ("standard", "reverse"))
    weigh(corners)
    time, ahead, behind, torque = (
        np.asarray(series, dtype=float) for series in (t, front_load, rear_load, shaft_torque)
    )
    if not time.ndim == 1 or not time.shape == ahead.shape == behind.shape == torque.shape:
        raise ValueError("times, axle loads and torque must be of one length.")
    turned = torque if rotation == "standard" else -torque
    share = front_share(front, rear)
    standing = standing_difference(corners, gravity)
    # Twice the couple about the centre line, which stays as it is standing.
    couple = standing.front * front.track + standing.rear * rear.track
    free = standing.front - 2.0 * turned * share / front.track
    front_difference = np.clip(free, -ahead, ahead)
    free_rear = (couple - front_difference * front.track) / rear.track
    rear_difference = np.clip(free_rear, -behind, behind)
    on_ground = (free == front_difference) & (free_rear == rear_difference)
    roll = turned * share / stiffness_on_tyres(front) if share > 0.0 else turned / rear.roll_stiffness
    return RollHistory(
        t=time,
        front_left=(ahead + front_difference) / 2.0,
        front_right=(ahead - front_difference) / 2.0,
        rear_left=(behind + rear_difference) / 2.0,
        rear_right=(behind - rear_difference) / 2.0,
        rear_difference=rear_difference,
        driveshaft_torque=torque,
        roll=np.where(on_ground, roll, np.nan),
        front_share=share,
        doubts=_doubts(time, free, ahead, free_rear, behind),
    )


@dataclass(frozen=True)
class StandingDifference:
    """Left less right of the standing car, N."""

    front: float
    rear: float


def standing_difference(corners: Corners, gravity: float = GRAVITY) -> StandingDifference:
    """Left less right of each axle of the standing car, N, from corner weights in kg."""
    return StandingDifference(
        front=(corners.front_left - corners.front_right) * gravity,
        rear=(corners.rear_left - corners.rear_right) * gravity,
    )


def _doubts(
    time: NDArray[np.float64],
    free: NDArray[np.float64],
    ahead: NDArray[np.float64],
    free_rear: NDArray[np.float64],
    behind: NDArray[np.float64],
) -> tuple[str, ...]:
    found = []
    lifted = np.abs(free) > ahead
    if lifted.any():
        found.append(
            f"From {time[np.argmax(lifted)]:.3f} s a front tyre is off the ground: from then on the front"
            " springs no longer react the torque, and the rear tyres even out."
        )
    tipped = np.abs(free_rear) > behind
    if tipped.any():
        found.append(
            f"At {time[np.argmax(tipped)]:.3f} s a rear tyre would leave the ground: the roll plane no"
            " longer holds."
        )
    return tuple(found)
