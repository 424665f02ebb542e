"""Piecewise linear curves as sums of hinges.

``f(v) = f0 + s0 v + sum ds_i max(0, v - v_i)``: exact at and between the points,
goes on with the end slopes, costs two multiplications a knot.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.jit import inlined

if TYPE_CHECKING:
    import numpy as np


@inlined
def curve(p: np.ndarray, n: np.ndarray, which: int, v: float) -> float:
    """Value of curve `which` at `v`."""
    value = p[L.LEGS + 2 * which] + p[L.LEGS + 2 * which + 1] * v
    count = n[L.CURVES + 2 * which + 1]
    if count > 0:
        at = n[L.CURVES + 2 * which]
        for i in range(count):
            past = v - p[at + 2 * i]
            if past > 0.0:
                value += p[at + 2 * i + 1] * past
    return value


@inlined
def slope_at_rest(p: np.ndarray, n: np.ndarray, which: int) -> float:
    """Slope at zero; the mean of the two sides when a knot stands there."""
    at = n[L.CURVES + 2 * which]
    slope = p[L.LEGS + 2 * which + 1]
    for i in range(n[L.CURVES + 2 * which + 1]):
        knot = p[at + 2 * i]
        if knot < 0.0:
            slope += p[at + 2 * i + 1]
        elif knot == 0.0:
            slope += 0.5 * p[at + 2 * i + 1]
    return slope


@inlined
def steepest(p: np.ndarray, n: np.ndarray, which: int) -> float:
    """The greatest slope anywhere on the curve."""
    at = n[L.CURVES + 2 * which]
    slope = p[L.LEGS + 2 * which + 1]
    greatest = slope
    for i in range(n[L.CURVES + 2 * which + 1]):
        slope += p[at + 2 * i + 1]
        greatest = max(greatest, slope)
    return greatest
