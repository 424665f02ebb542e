"""The preload that evens out the rear tyres at one instant of a launch."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from solver.checks import between, one_of
from solver.roll import GRAVITY, standing_difference
from solver.roll_stiffness import RollAxle, front_share
from solver.weights import Corners, weigh


@dataclass(frozen=True)
class Preload:
    """What to set standing so that the rear tyres carry alike at `time`.

    Attributes
    ----------
    time : float
        s.
    couple : float
        Couple by which the rear springs or anti-roll bar must load the right
        rear tyre (and the left front) more than now, N m; below zero the left.
    change : Corners
        Change of the standing corner weights, kg.
    corners : Corners
        Corner weights to set, kg: `solver.turns.seat_turns` says the turns.
    cross_percent : float
        Of those.
    doubts : tuple of str
    """

    time: float
    couple: float
    change: Corners
    corners: Corners
    cross_percent: float
    doubts: tuple


def cancelling_preload(
    t: ArrayLike,
    front_load: ArrayLike,
    shaft_torque: ArrayLike,
    corners: Corners,
    front: RollAxle,
    rear: RollAxle,
    time: float | None = None,
    rotation: str = "standard",
    gravity: float = GRAVITY,
) -> Preload:
    """Standing preload that cancels the rear tyres' difference at one time.

    With equal rear tyres the whole couple about the centre line sits at the
    front: ``dF(time) = C/tf``; the springs take ``2 share Td/tf`` from the
    standing difference by then, so it must start higher by that (balance of
    moments, see `solver.roll`).

    Parameters
    ----------
    t, front_load, shaft_torque : array_like, shape (n,)
        Of the planar run: s, N, N m.
    corners : Corners
        Corner weights of the standing car now, kg.
    front, rear : RollAxle
    time : float or None
        Instant to even out, s; None takes that of the greatest torque.
    rotation : {'standard', 'reverse'}
    gravity : float
        m/s^2.

    Returns
    -------
    Preload

    Raises
    ------
    ValueError
        When the time is outside the run, the front tyres are off the ground
        then, or a corner would have to carry less than nothing.
    """
    one_of("the rotation", rotation, ("standard", "reverse"))
    weighing = weigh(corners)
    times, ahead, torque = (np.asarray(series, dtype=float) for series in (t, front_load, shaft_torque))
    at = float(times[np.argmax(np.abs(torque))]) if time is None else time
    between("the time", at, float(times[0]), float(times[-1]), "s")
    shaft = float(np.interp(at, times, torque)) * (1.0 if rotation == "standard" else -1.0)
    carried = float(np.interp(at, times, ahead))
    standing = standing_difference(corners, gravity)
    needed_then = standing.front + standing.rear * rear.track / front.track
    if abs(needed_then) > carried or carried <= 0.0:
        raise ValueError(
            f"at {at:.3f} s the front tyres carry {carried:.0f} N, too little for a preload to reach"
            " the rear tyres: choose an earlier time."
        )
    more = needed_then + 2.0 * shaft * front_share(front, rear) / front.track - standing.front
    half = more / 2.0 / gravity
    across = half * front.track / rear.track
    change = Corners(half, -half, -across, across)
    after = Corners.from_array(corners.as_array() + change.as_array())
    if min(after.as_array()) < 0.0:
        raise ValueError(
            f"evening out the rear tyres at {at:.3f} s takes {abs(half):.0f} kg across the front axle,"
            " more than a corner carries: no seat or bar can do it."
        )
    cross = weigh(after).cross_percent
    return Preload(
        time=at,
        couple=more * front.track / 2.0,
        change=change,
        corners=after,
        cross_percent=cross,
        doubts=_doubts(weighing.cross_percent, cross),
    )


def _doubts(before: float, after: float) -> tuple[str, ...]:
    if abs(after - before) < 3.0:
        return ()
    return (
        (
            f"Cross weight goes from {before:.1f} to {after:.1f} percent: the car will pull to one side off"
            " the power and under the brakes. Make the change in steps."
        ),
    )
