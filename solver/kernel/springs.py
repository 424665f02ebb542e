"""Springs, shocks and stops, rear lines and front slide."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.curves import curve
from solver.kernel.jit import inlined

if TYPE_CHECKING:
    import numpy as np


@inlined
def rear_line(p: np.ndarray, y: np.ndarray, co: float, si: float, ch: float, sh: float, at: int) -> tuple:
    """One rear spring line: direction from housing to chassis, arms, squeeze and its speed."""
    ax = co * (p[at + L.LINE_CX] - p[L.SPRUNG_X]) - si * (p[at + L.LINE_CZ] - p[L.SPRUNG_Z])
    az = si * (p[at + L.LINE_CX] - p[L.SPRUNG_X]) + co * (p[at + L.LINE_CZ] - p[L.SPRUNG_Z])
    bx = ch * p[at + L.LINE_HX] - sh * (p[at + L.LINE_HZ] - p[L.REAR_RADIUS])
    bz = sh * p[at + L.LINE_HX] + ch * (p[at + L.LINE_HZ] - p[L.REAR_RADIUS])
    ex = p[L.SPRUNG_X] + y[L.X] + ax - y[L.HX] - bx
    ez = p[L.SPRUNG_Z] + y[L.Z] + az - y[L.HZ] - p[L.REAR_RADIUS] - bz
    length = math.sqrt(ex * ex + ez * ez)
    per_length = 1.0 / length
    ux, uz = ex * per_length, ez * per_length
    speed_x = y[7 + L.X] - y[7 + L.PITCH] * az - y[7 + L.HX] + y[7 + L.HOUSING] * bz
    speed_z = y[7 + L.Z] + y[7 + L.PITCH] * ax - y[7 + L.HZ] - y[7 + L.HOUSING] * bx
    squeeze = p[at + L.LINE_LENGTH] - length
    return ux, uz, ax * uz - az * ux, bx * uz - bz * ux, squeeze, -ux * speed_x - uz * speed_z


@inlined
def rear_springs(
    p: np.ndarray, n: np.ndarray, y: np.ndarray, co: float, si: float, ch: float, sh: float, out: np.ndarray
) -> tuple:
    """All rear springs, shocks and stops: their force and moments on chassis and housing."""
    fx, fz, chassis_moment, housing_moment = 0.0, 0.0, 0.0, 0.0
    coil, shock, stops = 0.0, 0.0, 0.0
    for i in range(n[L.N_LINES]):
        at = L.LINES + L.LINE_WIDTH * i
        ux, uz, arm, housing_arm, squeeze, speed = rear_line(p, y, co, si, ch, sh, at)
        spring = p[at + L.LINE_PRELOAD] + curve(p, n, L.LINE_SPRING + i, squeeze)
        damper = curve(p, n, L.LINE_DAMPER + i, speed)
        force = spring + damper
        coil += spring
        shock += damper
        if n[L.BUMP_LINE] == i:
            past = squeeze - p[L.REAR_BUMP_CLEARANCE]
            gate = curve(p, n, L.REAR_BUMP, past) + p[L.REAR_BUMP_DAMPING] * speed
            out[L.O_GATE + L.GATE_REAR_BUMP], out[L.O_REAR_BUMP_PAST] = gate, past
            force += max(0.0, gate)
            stops += max(0.0, gate)
        if n[L.DROOP_LINE] == i:
            past = -squeeze - p[L.REAR_DROOP_CLEARANCE]
            gate = curve(p, n, L.REAR_DROOP, past) - p[L.REAR_DROOP_DAMPING] * speed
            out[L.O_GATE + L.GATE_REAR_DROOP], out[L.O_REAR_DROOP_PAST] = gate, past
            force -= max(0.0, gate)
            stops -= max(0.0, gate)
        fx += force * ux
        fz += force * uz
        chassis_moment += force * arm
        housing_moment -= force * housing_arm
        if n[L.TRAVEL_LINE] == i:
            out[L.O_TRAVEL], out[L.O_TRAVEL_SPEED] = squeeze, speed
        if n[L.SHOCK_LINE] == i:
            out[L.O_SHOCK_TRAVEL], out[L.O_SHOCK_SPEED] = squeeze, speed
    out[L.O_REAR_COIL], out[L.O_REAR_SHOCK], out[L.O_REAR_STOP] = coil, shock, stops
    out[L.O_REAR_SPRING] = coil + shock
    return fx, fz, chassis_moment, housing_moment


@inlined
def front_spring(p: np.ndarray, n: np.ndarray, y: np.ndarray, out: np.ndarray) -> float:
    """Force along the front slide, spring and shock and stops, pushing the chassis up."""
    travel, speed = y[L.SLIDE], y[7 + L.SLIDE]
    spring = p[L.FRONT_SPRING_STATIC] + curve(p, n, L.FRONT_SPRING, travel)
    force = spring + curve(p, n, L.FRONT_DAMPER, speed)
    out[L.O_FRONT_SPRING] = force
    out[L.O_FRONT_TRAVEL], out[L.O_FRONT_SPEED] = travel, speed
    if n[L.FRONT_STOPS] == 0:
        return force
    past = travel - p[L.FRONT_BUMP_CLEARANCE]
    bump = curve(p, n, L.FRONT_BUMP, past) + p[L.FRONT_BUMP_DAMPING] * speed
    past = -travel - p[L.FRONT_DROOP_CLEARANCE]
    droop = curve(p, n, L.FRONT_DROOP, past) - p[L.FRONT_DROOP_DAMPING] * speed
    stops = max(0.0, bump) - max(0.0, droop)
    out[L.O_GATE + L.GATE_FRONT_BUMP], out[L.O_GATE + L.GATE_FRONT_DROOP] = bump, droop
    out[L.O_FRONT_STOP] = stops
    return force + stops
