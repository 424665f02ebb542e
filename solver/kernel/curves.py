"""Piecewise linear curves as sums of hinges.

``f(v) = f0 + s0 v + sum ds_i max(0, v - v_i)``: exact at and between the points,
goes on with the end slopes, costs two multiplications a knot.
"""

from solver.kernel import layout as L
from solver.kernel.jit import jit


@jit
def curve(p, n, which, v):
    """Value of curve `which` at `v`."""
    at = n[L.CURVES + 2 * which]
    count = n[L.CURVES + 2 * which + 1]
    value = p[at] + p[at + 1] * v
    for i in range(count):
        past = v - p[at + 2 + 2 * i]
        if past > 0.0:
            value += p[at + 3 + 2 * i] * past
    return value


@jit
def slope_at_rest(p, n, which):
    """Slope at zero; the mean of the two sides when a knot stands there."""
    at = n[L.CURVES + 2 * which]
    slope = p[at + 1]
    for i in range(n[L.CURVES + 2 * which + 1]):
        knot = p[at + 2 + 2 * i]
        if knot < 0.0:
            slope += p[at + 3 + 2 * i]
        elif knot == 0.0:
            slope += 0.5 * p[at + 3 + 2 * i]
    return slope


@jit
def steepest(p, n, which):
    """The greatest slope anywhere on the curve."""
    at = n[L.CURVES + 2 * which]
    slope = p[at + 1]
    greatest = slope
    for i in range(n[L.CURVES + 2 * which + 1]):
        slope += p[at + 3 + 2 * i]
        greatest = max(greatest, slope)
    return greatest
