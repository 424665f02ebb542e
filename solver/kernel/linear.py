"""The model linearised at ride height, by differences of its own right-hand side."""

from __future__ import annotations

import numpy as np

from solver.kernel import layout as L
from solver.kernel.curves import curve, slope_at_rest
from solver.kernel.jit import jit
from solver.kernel.links import link
from solver.kernel.physics import accelerate

# Independent coordinates: chassis x, z, pitch, axle height, front slide.
FREE = (L.X, L.Z, L.PITCH, L.HZ, L.SLIDE)
SMALL = 2e-5


@jit
def straighten(p: np.ndarray, n: np.ndarray) -> None:
    """Replace every curve by its tangent at rest, in place (mean of both sides at a knot)."""
    for which in range(L.N_CURVES):
        at = n[L.CURVES + 2 * which]
        value, slope = curve(p, n, which, 0.0), slope_at_rest(p, n, which)
        p[L.LEGS + 2 * which], p[L.LEGS + 2 * which + 1] = value, slope
        for i in range(n[L.CURVES + 2 * which + 1]):
            p[at + 2 * i + 1] = 0.0


@jit
def both_links(p: np.ndarray, y: np.ndarray) -> tuple:
    co, si = np.cos(y[L.PITCH]), np.sin(y[L.PITCH])
    ch, sh = np.cos(y[L.HOUSING]), np.sin(y[L.HOUSING])
    lower = link(p, y, co, si, ch, sh, L.LCX, L.LCZ, L.LHX, L.LHZ, L.LOWER_LENGTH)
    upper = link(p, y, co, si, ch, sh, L.UCX, L.UCZ, L.UHX, L.UHZ, L.UPPER_LENGTH)
    return lower, upper


@jit
def close(p: np.ndarray, y: np.ndarray) -> None:
    """Place the housing so that both links keep their length, in position and speed."""
    for _ in range(6):
        (lx, lz, la, lb, _, drift), (ux, uz, ua, ub, _, upper_drift) = both_links(p, y)
        determinant = lx * ub - ux * lb
        y[L.HX] -= (drift * ub - upper_drift * lb) / determinant
        y[L.HOUSING] -= (lx * upper_drift - ux * drift) / determinant
    (lx, lz, la, lb, _, drift), (ux, uz, ua, ub, _, upper_drift) = both_links(p, y)
    determinant = lx * ub - ux * lb
    vx, vz, w, axle = y[7 + L.X], y[7 + L.Z], y[7 + L.PITCH], y[7 + L.HZ]
    first = lx * vx + lz * (vz - axle) + la * w
    second = ux * vx + uz * (vz - axle) + ua * w
    y[7 + L.HX] = (first * ub - second * lb) / determinant
    y[7 + L.HOUSING] = (lx * second - ux * first) / determinant


@jit
def linearise(p: np.ndarray, n: np.ndarray, matrix: np.ndarray) -> None:
    """Fill the (10, 10) state matrix of a settled lane; straightens `p`.

    Five-point differences: exact to 1e-9 of each entry.
    """
    straighten(p, n)
    n = n.copy()
    n[L.DRIVE] = L.FORCE_DRIVE
    y, dy, out = np.zeros(L.STATES), np.zeros(L.STATES), np.zeros(L.OUTPUTS)
    matrix[:] = 0.0
    for i in range(5):
        matrix[i, 5 + i] = 1.0
    for column in range(10):
        where = FREE[column % 5] + (7 if column >= 5 else 0)
        for point, weight in ((-2, 1.0), (-1, -8.0), (1, 8.0), (2, -1.0)):
            y[:] = 0.0
            y[where] = point * SMALL
            close(p, y)
            accelerate(p, n, 0.0, y, dy, out)
            for i in range(5):
                matrix[5 + i, column] += weight * dy[7 + FREE[i]] / (12.0 * SMALL)
