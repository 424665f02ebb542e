"""Whether a typed-in slip can be right."""

from __future__ import annotations

import itertools
from dataclasses import dataclass

from solver.timing import MARKS, TRAPPED, Slip, mean_acceleration

GRAVITY = 9.80665
# Quicker than this from the line is a typing error: common practice, no source.
GREATEST_LAUNCH = 6.0 * GRAVITY


@dataclass(frozen=True)
class SlipCheck:
    """What is wrong with a slip.

    ``faults`` cannot be (times out of order); ``doubts`` are rare but possible
    (the driver lifted, a clock missed).
    """

    faults: tuple
    doubts: tuple

    @property
    def holds(self) -> bool:
        """Whether there is no fault."""
        return not self.faults


def check_slip(slip: Slip) -> SlipCheck:
    """Check a slip's times and speeds against each other.

    Times must rise with distance; the mean speed from mark to mark should rise
    too; the speed in a trap should lie above the mean of the stretch that ends in it,
    and below what the car could still gain there (kinematics). The launch is
    held against 6 g (common practice, no source).

    Parameters
    ----------
    slip : solver.timing.Slip
        Marks by the names of `solver.timing.MARKS`; any may be absent.

    Returns
    -------
    SlipCheck
    """
    faults = _values(slip)
    if faults:
        return SlipCheck(faults=tuple(faults), doubts=())
    order = sorted(slip.times, key=lambda name: MARKS[name])
    for first, second in itertools.pairwise(order):
        if slip.times[second] <= slip.times[first]:
            faults.append(
                f"The time at {second} is {slip.times[second]:.3f} s: it must be above that at"
                f" {first}, {slip.times[first]:.3f} s."
            )
    if faults:
        return SlipCheck(faults=tuple(faults), doubts=())
    faults += _too_quick(slip, order)
    stretches = _stretches(slip, order)
    return SlipCheck(faults=tuple(faults), doubts=tuple(_slowing(stretches) + _traps(slip, stretches)))


@dataclass(frozen=True)
class _Stretch:
    start: str
    end: str
    speed: float


def _values(slip: Slip) -> list[str]:
    faults = []
    for what, entries, known in (("time", slip.times, MARKS), ("speed", slip.speeds, TRAPPED)):
        for name, value in entries.items():
            if name not in known:
                faults.append(f"There is no {what} at {name!r}: marks are {', '.join(known)}.")
            elif not 0.0 < value < float("inf"):
                faults.append(f"The {what} at {name} is {value!r}: it must be above zero.")
    return faults


def _too_quick(slip: Slip, order: list[str]) -> list[str]:
    for name in order:
        pull = mean_acceleration(MARKS[name], slip.times[name], slip.rollout)
        if pull > GREATEST_LAUNCH:
            return [
                (
                    f"{slip.times[name]:.3f} s to {name} takes {pull / GRAVITY:.1f} g all the way:"
                    " no car does that."
                )
            ]
    return []


def _stretches(slip: Slip, order: list[str]) -> list[_Stretch]:
    found = []
    previous, gone, clock = "the start", 0.0, 0.0
    for name in order:
        speed = (MARKS[name] - gone) / (slip.times[name] - clock)
        found.append(_Stretch(previous, name, speed))
        previous, gone, clock = name, MARKS[name], slip.times[name]
    return found


def _slowing(stretches: list[_Stretch]) -> list[str]:
    return [
        f"From {later.start} to {later.end} the car is slower on average than before it: did the"
        " driver lift, or is a time mistyped?"
        for earlier, later in itertools.pairwise(stretches)
        if later.speed < earlier.speed
    ]


def _traps(slip: Slip, stretches: list[_Stretch]) -> list[str]:
    doubts = []
    ends = {stretch.end: (index, stretch) for index, stretch in enumerate(stretches)}
    for name, speed in slip.speeds.items():
        if name not in ends:
            continue
        index, stretch = ends[name]
        if speed < stretch.speed:
            doubts.append(
                f"The speed at {name} is below the mean from {stretch.start}: check it, and its unit."
            )
            continue
        # A car pulls less at the far end than at the near one, so it gains at most
        # what constant acceleration would: v1 <= 2 mean - v0, and v0 >= the mean before.
        entry = stretches[index - 1].speed if index else 0.0
        if speed > 1.01 * (2.0 * stretch.speed - entry):
            doubts.append(f"The speed at {name} is more than the times allow: check it, and its unit.")
    return doubts
