"""Time-slip arithmetic: from a run to the figures on a slip, and back.

Distances are metres and speeds m/s. On a drag strip the clock starts when the
front tyre has rolled out of the stage beam, and the speed on the slip is the
mean over the last 66 ft before the mark.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from solver.checks import not_negative, number, positive
from solver.power import EXPONENT, corrected_speed, corrected_time

FOOT = 0.3048
# How far the front tyre rolls before it leaves the stage beam: common practice, no
# source; shallow or deep staging and tyre size move it by some inches.
TYPICAL_ROLLOUT = 12 * 0.0254
TRAP_LENGTH = 66 * FOOT
# A body that pitches moves the front axle back by some millimetres before the car gets going.
ROCKING = 0.02
MARKS = {
    "60 ft": 60 * FOOT,
    "330 ft": 330 * FOOT,
    "660 ft": 660 * FOOT,
    "1000 ft": 1000 * FOOT,
    "1320 ft": 1320 * FOOT,
}
TRAPPED = ("660 ft", "1000 ft", "1320 ft")


@dataclass(frozen=True)
class Slip:
    """Elapsed times (s) and trap speeds (m/s) by mark; a missing mark is absent."""

    times: dict
    speeds: dict
    rollout: float = TYPICAL_ROLLOUT


@dataclass(frozen=True)
class SteadyRun:
    """A run at constant acceleration over one distance: s and m/s at the end."""

    seconds: float
    speed: float


def steady_run(acceleration: float, distance: float) -> SteadyRun:
    """Time and end speed at constant acceleration from rest: ``sqrt(2 s/a)``, ``sqrt(2 a s)``.

    Parameters
    ----------
    acceleration : float
        m/s^2.
    distance : float
        m.

    Returns
    -------
    SteadyRun

    Raises
    ------
    ValueError
        When a value is not above zero.
    """
    rate = positive("the acceleration", acceleration, "m/s^2")
    far = positive("the distance", distance, "m")
    return SteadyRun(seconds=math.sqrt(2.0 * far / rate), speed=math.sqrt(2.0 * rate * far))


def mean_acceleration(distance: float, seconds: float, rollout: float = TYPICAL_ROLLOUT) -> float:
    """Constant acceleration that covers a distance in a slip's time, rollout included.

    The car is already moving when the clock starts: with constant acceleration
    ``sqrt(2 (d + r)/a) - sqrt(2 r/a) = t``, so ``a = 2 (sqrt(d + r) - sqrt(r))^2/t^2``.

    Parameters
    ----------
    distance : float
        From the clock's start to the mark, m.
    seconds : float
        Elapsed time on the slip.
    rollout : float
        m.

    Returns
    -------
    float
        m/s^2.

    Raises
    ------
    ValueError
        When a value is out of range.
    """
    far = positive("the distance", distance, "m")
    time = positive("the elapsed time", seconds, "s")
    before = not_negative("the rollout", rollout, "m")
    return 2.0 * (math.sqrt(far + before) - math.sqrt(before)) ** 2 / time**2


def slip_from_run(
    t: ArrayLike,
    distance: ArrayLike,
    speed: ArrayLike,
    rollout: float = TYPICAL_ROLLOUT,
    marks: Mapping[str, float] | None = None,
) -> Slip:
    """The slip that a run would print.

    The clock runs from the instant at which the car has moved by the rollout. Between
    samples the distance is the cubic through distances and speeds (Hermite). A
    trap's speed is its length over the time in it.

    Parameters
    ----------
    t, distance, speed : array_like, shape (n,)
        s, m from standing, m/s.
    rollout : float
        m; the default is common practice, no source.
    marks : dict of str to float, optional
        Distances from the clock's start, m; None takes 60, 330, 660, 1000, 1320 ft.

    Returns
    -------
    Slip
        Marks which the run does not reach are absent.

    Raises
    ------
    ValueError
        When the run does not reach the rollout, goes backwards, or lengths differ.
    """
    times, gone, speeds = (np.asarray(series, dtype=float) for series in (t, distance, speed))
    if times.ndim != 1 or not times.shape == gone.shape == speeds.shape or times.size < 2:
        raise ValueError("times, distances and speeds must be of one length, two samples or more.")
    farthest = np.maximum.accumulate(gone)
    if np.any(farthest - gone > ROCKING):
        raise ValueError("the car rolls backwards in this run: a slip needs one that goes forward only.")
    gone = farthest
    start = time_at(times, gone, speeds, not_negative("the rollout", rollout, "m"))
    if start is None:
        raise ValueError(f"the run ends after {gone[-1]:.3f} m, before the rollout of {rollout:g} m.")
    found, trapped = {}, {}
    for name, mark in (MARKS if marks is None else marks).items():
        at = time_at(times, gone, speeds, rollout + mark)
        if at is None:
            continue
        found[name] = at - start
        if name in TRAPPED:
            entered = time_at(times, gone, speeds, rollout + mark - TRAP_LENGTH)
            if entered is not None:
                trapped[name] = TRAP_LENGTH / (at - entered)
    return Slip(times=found, speeds=trapped, rollout=rollout)


def time_at(
    t: NDArray[np.float64], distance: NDArray[np.float64], speed: NDArray[np.float64], mark: float
) -> float | None:
    """When the run passes a distance, or None when it does not reach it.

    Parameters
    ----------
    t, distance, speed : ndarray, shape (n,)
        s, m not falling, m/s.
    mark : float
        m.

    Returns
    -------
    float or None
        s.
    """
    if mark > distance[-1]:
        return None
    after = int(np.searchsorted(distance, mark, side="left"))
    if after == 0:
        return float(t[0])
    low, high, step = 0.0, 1.0, float(t[after] - t[after - 1])
    start, end = float(distance[after - 1]), float(distance[after])
    rise, fall = float(speed[after - 1]) * step, float(speed[after]) * step
    for _ in range(60):
        middle = (low + high) / 2.0
        if _hermite(middle, start, end, rise, fall) < mark:
            low = middle
        else:
            high = middle
    return float(t[after - 1]) + step * (low + high) / 2.0


def _hermite(u: float, start: float, end: float, rise: float, fall: float) -> float:
    back = 1.0 - u
    return (1 + 2 * u) * back**2 * start + u**2 * (3 - 2 * u) * end + u * back**2 * rise - u**2 * back * fall


def corrected_slip(slip: Slip, factor: float, exponent: float = EXPONENT) -> Slip:
    """The slip in standard air: see `solver.power` for the exponent and its standing.

    Parameters
    ----------
    slip : Slip
    factor : float
        Power in standard air over power as run.
    exponent : float

    Returns
    -------
    Slip

    Raises
    ------
    ValueError
        When the factor or exponent is out of range.
    """
    return Slip(
        times={name: corrected_time(value, factor, exponent) for name, value in slip.times.items()},
        speeds={name: corrected_speed(value, factor, exponent) for name, value in slip.speeds.items()},
        rollout=slip.rollout,
    )


def increments(slip: Slip, marks: Mapping[str, float] | None = None) -> dict[str, float]:
    """Times from mark to mark: dict of ``'60 ft to 330 ft'`` to s, in order of distance.

    Raises
    ------
    ValueError
        When a mark has no known distance.
    """
    known = MARKS if marks is None else marks
    for name in slip.times:
        if name not in known:
            raise ValueError(f"the mark {name!r} has no known distance: there are {', '.join(known)}.")
    order = sorted(slip.times, key=lambda name: known[name])
    return {
        f"{first} to {second}": number(f"the time at {second}", slip.times[second]) - slip.times[first]
        for first, second in itertools.pairwise(order)
    }
