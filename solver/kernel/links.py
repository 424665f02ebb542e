"""The two links: where they point, what they ask of the accelerations, what they carry."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.jit import inlined

if TYPE_CHECKING:
    import numpy as np

FEEDBACK = 50.0  # rad/s, both roots of the drift's decay

# Coefficients of the sine's and the cosine's series.
S3, S5, S7, S9, S11, S13, S15, S17 = ((-1.0) ** k / math.factorial(2 * k + 1) for k in range(1, 9))
C2, C4, C6, C8, C10, C12, C14, C16, C18 = ((-1.0) ** k / math.factorial(2 * k) for k in range(1, 10))


@inlined
def turn(angle: float) -> tuple:
    """Cosine and sine, by their series to the last bit below 1.3 rad.

    A car beyond that has turned over and its run ends; the library's own
    functions, made for any angle, take a fifth of the whole right-hand side.
    """
    q = angle * angle
    sine = S13 + q * (S15 + q * S17)
    sine = S5 + q * (S7 + q * (S9 + q * (S11 + q * sine)))
    sine = 1.0 + q * (S3 + q * sine)
    cosine = C12 + q * (C14 + q * (C16 + q * C18))
    cosine = C4 + q * (C6 + q * (C8 + q * (C10 + q * cosine)))
    cosine = 1.0 + q * (C2 + q * cosine)
    return cosine, angle * sine


@inlined
def link(
    p: np.ndarray,
    y: np.ndarray,
    co: float,
    si: float,
    ch: float,
    sh: float,
    chassis_x: int,
    chassis_z: int,
    housing_x: int,
    housing_z: int,
    length: int,
) -> tuple:
    """One link: direction, moment arms, and the acceleration its motion asks for."""
    ax = co * (p[chassis_x] - p[L.SPRUNG_X]) - si * (p[chassis_z] - p[L.SPRUNG_Z])
    az = si * (p[chassis_x] - p[L.SPRUNG_X]) + co * (p[chassis_z] - p[L.SPRUNG_Z])
    bx = ch * p[housing_x] - sh * (p[housing_z] - p[L.REAR_RADIUS])
    bz = sh * p[housing_x] + ch * (p[housing_z] - p[L.REAR_RADIUS])
    ex = y[L.HX] + bx - p[L.SPRUNG_X] - y[L.X] - ax
    ez = y[L.HZ] + p[L.REAR_RADIUS] + bz - p[L.SPRUNG_Z] - y[L.Z] - az
    actual = math.sqrt(ex * ex + ez * ez)
    per_length = 1.0 / actual
    ux, uz = ex * per_length, ez * per_length
    w, v = y[7 + L.PITCH], y[7 + L.HOUSING]
    speed_x = y[7 + L.HX] - v * bz - y[7 + L.X] + w * az
    speed_z = y[7 + L.HZ] + v * bx - y[7 + L.Z] - w * ax
    along = ux * speed_x + uz * speed_z
    across = ux * speed_z - uz * speed_x
    stretch = actual - p[length]
    wanted = (
        -across * across * per_length
        - FEEDBACK * (2.0 * along + FEEDBACK * stretch)
        + v * v * (ux * bx + uz * bz)
        - w * w * (ux * ax + uz * az)
    )
    return ux, uz, ax * uz - az * ux, bx * uz - bz * ux, wanted, stretch


@inlined
def reactions(p: np.ndarray, lower: tuple, upper: tuple, slide: tuple, free: tuple, housing_free: tuple) -> tuple:
    """Link tensions and the slide's side load from the motion without them.

    ``S (lower, upper, side) = free motion - wanted``: a symmetric system of three, the
    side load taken out first.

    Parameters
    ----------
    lower, upper : tuple
        Direction, arm on the chassis, arm on the housing, acceleration wanted, drift.
    slide : tuple
        Cosine and sine of the pitch, arm, acceleration wanted.
    free, housing_free : tuple
        Accelerations (x, z, angle) that all other forces would give.

    Returns
    -------
    lower, upper, side, leverage : float
        Forces, N; how far the system is from singular, 1 to 0.
    """
    lx, lz, la, lb, wanted, _ = lower
    ux, uz, ua, ub, upper_wanted, _ = upper
    co, si, js, side_wanted = slide
    per_s, per_i, per_h = p[L.PER_SPRUNG_MASS], p[L.PER_CHASSIS_INERTIA], p[L.PER_HOUSING_INERTIA]
    masses = per_s + p[L.PER_REAR_MASS]
    s11 = masses + la * la * per_i + lb * lb * per_h
    s22 = masses + ua * ua * per_i + ub * ub * per_h
    s12 = masses * (lx * ux + lz * uz) + la * ua * per_i + lb * ub * per_h
    s13 = (lx * co + lz * si) * per_s + la * js * per_i
    s23 = (ux * co + uz * si) * per_s + ua * js * per_i
    per_s33 = 1.0 / (per_s + js * js * per_i + p[L.PER_FRONT_MASS])
    r1 = lx * (housing_free[0] - free[0]) + lz * (housing_free[1] - free[1]) - wanted
    r1 += lb * housing_free[2] - la * free[2]
    r2 = ux * (housing_free[0] - free[0]) + uz * (housing_free[1] - free[1]) - upper_wanted
    r2 += ub * housing_free[2] - ua * free[2]
    r3 = co * free[0] + si * free[1] + js * free[2] - side_wanted
    a11, a22 = s11 - s13 * s13 * per_s33, s22 - s23 * s23 * per_s33
    a12 = s12 - s13 * s23 * per_s33
    b1, b2 = r1 + s13 * r3 * per_s33, r2 + s23 * r3 * per_s33
    determinant = a11 * a22 - a12 * a12
    per_determinant = 1.0 / determinant
    low = (b1 * a22 - b2 * a12) * per_determinant
    high = (b2 * a11 - b1 * a12) * per_determinant
    side = (r3 + s13 * low + s23 * high) * per_s33
    return low, high, side, determinant / (a11 * a22)
