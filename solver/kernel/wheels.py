"""What stands on the ground: front wheels, rear tyres, the wheelie bar's wheels."""

from __future__ import annotations

from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.jit import inlined
from solver.kernel.rest import GRAVITY
from solver.kernel.tyre import push

if TYPE_CHECKING:
    import numpy as np


@inlined
def front_wheels(p: np.ndarray, y: np.ndarray, co: float, si: float, out: np.ndarray) -> tuple:
    """Where the front wheels are from the sprung CG, and the pull on them across the track."""
    rx, rz = p[L.WHEELBASE] - p[L.SPRUNG_X], p[L.FRONT_RADIUS] - p[L.SPRUNG_Z] + y[L.SLIDE]
    wx, wz = co * rx - si * rz, si * rx + co * rz
    rise = p[L.SPRUNG_Z] + y[L.Z] + wz - p[L.FRONT_RADIUS]
    speed = y[7 + L.Z] + y[7 + L.PITCH] * wx + co * y[7 + L.SLIDE]
    gate = push(p[L.FRONT_TYRE_RATE], p[L.FRONT_TYRE_DAMPING], p[L.FRONT_SQUASH] - rise, -speed)
    load = max(0.0, gate)
    out[L.O_GATE + L.GATE_FRONT_TYRE] = gate
    out[L.O_FRONT_LOAD] = load
    out[L.O_FRONT_CLEARANCE] = max(0.0, rise - p[L.FRONT_SQUASH])
    out[L.O_DISTANCE] = y[L.X] + wx - rx
    return wx, wz, load - p[L.FRONT_MASS] * GRAVITY


@inlined
def rear_tyres(p: np.ndarray, y: np.ndarray, out: np.ndarray) -> float:
    """Load on the rear tyres."""
    squash, speed = p[L.REAR_SQUASH] - y[L.HZ], -y[7 + L.HZ]
    gate = push(p[L.REAR_TYRE_RATE], p[L.REAR_TYRE_DAMPING], squash, speed)
    load = max(0.0, gate)
    out[L.O_GATE + L.GATE_REAR_TYRE] = gate
    out[L.O_REAR_LOAD] = load
    return load


@inlined
def wheelie_bar(
    p: np.ndarray, n: np.ndarray, y: np.ndarray, co: float, si: float, ch: float, sh: float, out: np.ndarray
) -> tuple:
    """Upward force of the wheelie bar's wheels and its moment about the body it is bolted to."""
    if n[L.WHEELIE_ON] == L.ON_CHASSIS:
        rx, rz = p[L.WHEELIE_X] - p[L.SPRUNG_X], p[L.WHEELIE_CLEARANCE] - p[L.SPRUNG_Z]
        arm = co * rx - si * rz
        height = p[L.SPRUNG_Z] + y[L.Z] + si * rx + co * rz
        speed = y[7 + L.Z] + y[7 + L.PITCH] * arm
    else:
        rx, rz = p[L.WHEELIE_X], p[L.WHEELIE_CLEARANCE] - p[L.REAR_RADIUS]
        arm = ch * rx - sh * rz
        height = p[L.REAR_RADIUS] + y[L.HZ] + sh * rx + ch * rz
        speed = y[7 + L.HZ] + y[7 + L.HOUSING] * arm
    gate = push(p[L.WHEELIE_RATE], p[L.WHEELIE_DAMPING], -height, -speed)
    out[L.O_GATE + L.GATE_WHEELIE] = gate
    force = max(0.0, gate)
    out[L.O_WHEELIE] = force
    return force, force * arm
