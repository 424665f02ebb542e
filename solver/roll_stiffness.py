"""Roll stiffness of axles, and how the driveshaft's torque divides between them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from solver.checks import not_negative, positive


@dataclass(frozen=True)
class RollAxle:
    """How one axle resists roll.

    Attributes
    ----------
    track : float
        Between the middles of the tyre patches, m.
    roll_stiffness : float
        Of springs and anti-roll bar, N m/rad: see `roll_stiffness`.
    tyre_rate : float or None
        One tyre's vertical rate, N/m; None for rigid tyres, as in the published
        formula.
    """

    track: float
    roll_stiffness: float
    tyre_rate: float | None = None


def roll_stiffness(
    spring_rates: tuple[float, float], motion_ratio: float, base: float, bar_stiffness: float = 0.0
) -> float:
    """Roll stiffness of one axle's springs and anti-roll bar.

    Two springs a distance apart resist roll with ``kl kr b^2/(kl + kr)``, which
    is ``k b^2/2`` for a pair alike (statics; pure couple, no heave load).

    Parameters
    ----------
    spring_rates : tuple of float
        Left and right, N/m.
    motion_ratio : float
        Spring travel per travel at `base`.
    base : float
        For a solid axle the distance between the springs, for independent wheels
        the track, m.
    bar_stiffness : float
        Anti-roll bar, N m/rad of chassis roll.

    Returns
    -------
    float
        N m/rad.

    Raises
    ------
    ValueError
        When a value is out of range.
    """
    left, right = (positive("the spring rate", rate, "N/m") for rate in spring_rates)
    ratio = positive("the motion ratio", motion_ratio)
    width = positive("the distance between the springs", base, "m")
    bar = not_negative("the anti-roll bar stiffness", bar_stiffness, "N m/rad")
    return left * right / (left + right) * (ratio * width) ** 2 + bar


def front_share(front: RollAxle, rear: RollAxle) -> float:
    """Part of the driveshaft torque that ends in the front tyres.

    ``Kf/(Kf + Kr)`` on rigid tyres, the published formula. With tyre rates the
    front is softer (its tyres in series) and the axle rolls on its own tyres:
    ``Kf'/(Kf' + Kr (1 + Kf'/Kt))``, by balance of moments on chassis and axle.

    Parameters
    ----------
    front, rear : RollAxle

    Returns
    -------
    float
        0 to 1.

    Raises
    ------
    ValueError
        When a value is out of range or neither axle resists roll.
    """
    _check(front, "front")
    _check(rear, "rear")
    stiff = stiffness_on_tyres(front)
    turned = 0.0 if rear.tyre_rate is None else stiff / _tyre_roll(rear.tyre_rate, rear.track)
    whole = stiff + rear.roll_stiffness * (1.0 + turned)
    if whole <= 0.0:
        raise ValueError("neither axle resists roll: front and rear roll stiffness are both zero.")
    return stiff / whole


def torque_difference(driveshaft_torque: float, front: RollAxle, rear: RollAxle) -> float:
    """Rear tyre load left less right from the torque alone, front tyres on the ground.

    ``2 Td/t share``: each tyre changes by half of it, which is the published
    ``Td/t Kf/(Kf + Kr)``.

    Parameters
    ----------
    driveshaft_torque : float
        N m.
    front, rear : RollAxle

    Returns
    -------
    float
        N.

    Raises
    ------
    ValueError
        As `front_share`.
    """
    return 2.0 * driveshaft_torque / rear.track * front_share(front, rear)


def driveshaft_torque(wheel_torque: ArrayLike, final_drive: float) -> NDArray[np.float64]:
    """Driveshaft torque from the torque at both wheels: ``T/N`` (no losses).

    Parameters
    ----------
    wheel_torque : array_like
        Sum of both wheels, N m; for a run driven by a hit it is the force times
        the rear axle's height.
    final_drive : float
        Ratio, above zero.

    Returns
    -------
    ndarray
        N m.

    Raises
    ------
    ValueError
        When the ratio is not above zero.
    """
    return np.asarray(wheel_torque, dtype=float) / positive("the final drive ratio", final_drive)


def stiffness_on_tyres(axle: RollAxle) -> float:
    """Roll stiffness of one axle against the ground, its tyres in series, N m/rad."""
    if axle.tyre_rate is None or axle.roll_stiffness == 0.0:
        return axle.roll_stiffness
    tyres = _tyre_roll(axle.tyre_rate, axle.track)
    return axle.roll_stiffness * tyres / (axle.roll_stiffness + tyres)


def _check(axle: RollAxle, name: str) -> None:
    positive(f"the {name} track", axle.track, "m")
    not_negative(f"the {name} roll stiffness", axle.roll_stiffness, "N m/rad")
    if axle.tyre_rate is not None:
        positive(f"the {name} tyre rate", axle.tyre_rate, "N/m")


def _tyre_roll(tyre_rate: float, track: float) -> float:
    return tyre_rate * track**2 / 2.0
