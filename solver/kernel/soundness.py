"""Whether a lane of a study can be solved at all; the same rules as `solver.soundness`."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.jit import jit
from solver.kernel.rest import GRAVITY

if TYPE_CHECKING:
    import numpy as np

SAME_PIN, SHORTEST_LINK, MOST_LOAD = 1e-3, 0.05, 50.0
# As in `solver.linkage_travel`, which says it in words and needs no compiler.
TRAVEL_STEPS, ASSUMED_TRAVEL, LOCKED = 12, 0.08, 0.02


@jit
def unsound(p: np.ndarray, n: np.ndarray) -> int:
    """A refusal code of `layout`, or SOLVED, for a settled lane."""
    spare = min(p[L.FRONT_SPRING_STATIC], p[L.REAR_STATIC] - p[L.REAR_MASS] * GRAVITY)
    if not (min(p[L.SPRUNG_MASS], p[L.SPRUNG_Z], spare) > 0.0 and p[L.CG_Z] > axles(p)):
        return L.BAD_WEIGHTS
    if n[L.KIND] == L.FOUR_LINK and not links_stand(p):
        return L.BAD_LINKS
    if n[L.KIND] == L.FOUR_LINK and locks(p, n):
        return L.LINKS_LOCK
    spring = p[L.REAR_SPRING_STATIC]
    most = max(spring, abs(p[L.LOWER_STATIC]), abs(p[L.UPPER_STATIC]))
    if not (spring > 0.0 and most < MOST_LOAD * p[L.REAR_STATIC]):
        return L.NO_REST
    return L.SOLVED


@jit
def axles(p: np.ndarray) -> float:
    """The lower of the two axle heights."""
    return min(p[L.FRONT_RADIUS], p[L.REAR_RADIUS])


@jit
def links_stand(p: np.ndarray) -> bool:
    """No identical or crossed pins, and bars that run forward."""
    lower = min(p[L.LOWER_LENGTH], p[L.UPPER_LENGTH])
    forward = min(p[L.LCX] - p[L.LHX], p[L.UCX] - p[L.UHX])
    chassis = math.hypot(p[L.UCX] - p[L.LCX], p[L.UCZ] - p[L.LCZ])
    housing = math.hypot(p[L.UHX] - p[L.LHX], p[L.UHZ] - p[L.LHZ])
    above = min(p[L.UCZ] - p[L.LCZ], p[L.UHZ] - p[L.LHZ])
    return lower >= SHORTEST_LINK and forward > 0.0 and min(chassis, housing) >= SAME_PIN and above > 0.0


@jit
def locks(p: np.ndarray, n: np.ndarray) -> bool:
    """Whether the links lock on the way to bump or droop."""
    bump = min(p[L.REAR_BUMP_CLEARANCE], 0.3) if n[L.BUMP_LINE] >= 0 else ASSUMED_TRAVEL
    droop = min(p[L.REAR_DROOP_CLEARANCE], 0.3) if n[L.DROOP_LINE] >= 0 else ASSUMED_TRAVEL
    for i in range(TRAVEL_STEPS + 1):
        share = i / TRAVEL_STEPS
        if min(leverage(p, bump * share), leverage(p, -droop * share)) < LOCKED:
            return True
    return False


@jit
def leverage(p: np.ndarray, rise: float) -> float:
    """Sine of the angle between the upper link and the coupler with the axle raised; -1 when open."""
    lower, upper = p[L.LOWER_LENGTH], p[L.UPPER_LENGTH]
    coupler = math.hypot(p[L.UHX] - p[L.LHX], p[L.UHZ] - p[L.LHZ])
    height = p[L.LHZ] + rise - p[L.LCZ]
    if abs(height) >= lower:
        return -1.0
    x, z = p[L.LCX] - math.sqrt(lower * lower - height * height), p[L.LCZ] + height
    gap = math.hypot(x - p[L.UCX], z - p[L.UCZ])
    if not abs(upper - coupler) < gap < upper + coupler:
        return -1.0
    along = (upper * upper - coupler * coupler + gap * gap) / (2.0 * gap)
    return math.sqrt(max(0.0, upper * upper - along * along)) * gap / (upper * coupler)
