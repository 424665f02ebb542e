"""Does a four-link close over all of its travel, without locking on the way?"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from solver.faults import Fault

if TYPE_CHECKING:
    from solver.car import Car

STEPS = 12
ASSUMED_TRAVEL = 0.08
# Below this share of full leverage the bars line up and their forces run away.
LOCKED = 0.02


def travel_faults(car: Car) -> list[Fault]:
    """Walk the axle from droop to bump along the linkage and report where it locks.

    The travel is that of the stops where the car has them, else
    `ASSUMED_TRAVEL` each way (common practice, no source).

    Parameters
    ----------
    car : Car
        With a four-link.

    Returns
    -------
    list of Fault
    """
    linkage, rear = car.rear.linkage, car.rear
    for direction, stop in ((1.0, rear.bump_stop), (-1.0, rear.droop_stop)):
        travel = min(stop.clearance, 0.3) if stop else ASSUMED_TRAVEL
        for i in range(STEPS + 1):
            rise = direction * travel * i / STEPS
            grip = _leverage(linkage, rise)
            if grip is None or grip < LOCKED:
                words = "bump" if direction > 0 else "droop"
                return [
                    Fault(
                        "rear.linkage",
                        f"{abs(rise):.3f} m of {words}",
                        "the bars lock before the axle has gone there: choose other holes",
                    )
                ]
    return []


def _leverage(linkage: Any, rise: float) -> float | None:
    """How far the two bars' lines are from being one line, 0 to 1, or None if open.

    The lower bar's housing pin is raised by `rise` about its chassis pin; the
    upper bar then closes the loop (the two circles' intersection).
    """
    (ax, az), (bx, bz) = linkage.lower.chassis, linkage.lower.housing
    (cx, cz), (dx, dz) = linkage.upper.chassis, linkage.upper.housing
    lower, upper = math.dist((ax, az), (bx, bz)), math.dist((cx, cz), (dx, dz))
    coupler = math.dist((bx, bz), (dx, dz))
    height = bz + rise - az
    if abs(height) >= lower:
        return None
    px, pz = ax - math.sqrt(lower * lower - height * height), az + height
    gap = math.dist((px, pz), (cx, cz))
    if not abs(upper - coupler) < gap < upper + coupler:
        return None
    along = (upper * upper - coupler * coupler + gap * gap) / (2.0 * gap)
    across = math.sqrt(max(0.0, upper * upper - along * along))
    # Sine of the angle between the upper bar and the coupler: nil at a dead centre.
    return across * gap / (upper * coupler)
