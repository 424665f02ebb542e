"""From the drive table to the tyres' forward force and the housing's torque reaction.

Drive mode 1 prescribes the force. Drive mode 2 turns the wheels: the tyre's slip
lags behind the wheels by its relaxation length, ``s k' + |V| k = w R - V``
(stretched string; Pacejka, *Tire and Vehicle Dynamics*, from memory), which
also makes it a plain spring at standstill.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.curves import curve
from solver.kernel.jit import inlined
from solver.kernel.tyre import fiala

if TYPE_CHECKING:
    import numpy as np


@inlined
def start_up(p: np.ndarray, y: np.ndarray) -> None:
    """State at the start: everything at rest, the engine at its launch speed."""
    y[:] = 0.0
    y[L.ENGINE_RATE] = p[L.ENGINE_SPEED]


@inlined
def thrust(p: np.ndarray, n: np.ndarray, drive: float, y: np.ndarray, load: float, dy: np.ndarray, out: np.ndarray) -> tuple:
    """Forward force on the axle and torque reaction on the housing (nose up positive).

    In drive mode 2 also fills the rates of spin, slip and engine speed.
    """
    height = p[L.REAR_RADIUS] + y[L.HZ]
    if n[L.DRIVE] == L.FORCE_DRIVE:
        return drive, drive * height
    force = fiala(y[L.SLIP], load, p[L.SLIP_STIFFNESS], p[L.GRIP], p[L.SLIDING_GRIP])
    torque = wheel_torque(p, n, drive, y, dy)
    speed = y[7 + L.HX]
    dy[L.SPIN] = (torque - force * height) / p[L.WHEEL_INERTIA]
    slip_rate = y[L.SPIN] * p[L.REAR_RADIUS] - speed - abs(speed) * y[L.SLIP]
    # Slip is told up to 1, where the whole patch slides; the carcass then lags no further.
    if slip_rate * y[L.SLIP] > 0.0:
        slip_rate *= min(1.0, max(0.0, 10.0 * (1.0 - abs(y[L.SLIP]))))
    dy[L.SLIP] = slip_rate / p[L.RELAXATION]
    dy[L.GEAR] = 0.0
    out[L.O_WHEEL_TORQUE], out[L.O_SPIN] = torque, y[L.SPIN]
    out[L.O_SLIP], out[L.O_ENGINE] = y[L.SLIP], y[L.ENGINE_RATE]
    if n[L.DRIVE] >= L.CLUTCH_DRIVE:
        out[L.O_GATE + L.GATE_SHIFT] = past_shift(p, n, y)
    return force, torque


@inlined
def wheel_torque(p: np.ndarray, n: np.ndarray, drive: float, y: np.ndarray, dy: np.ndarray) -> float:
    """Torque at both rear wheels, N m; fills the engine's rate."""
    if n[L.DRIVE] == L.TORQUE_DRIVE:
        dy[L.ENGINE_RATE] = 0.0
        return drive
    gearing = p[L.GEARS + int(y[L.GEAR])] * p[L.FINAL_DRIVE]
    engine, driven = y[L.ENGINE_RATE], y[L.SPIN] * gearing
    made = curve(p, n, L.ENGINE, engine)
    if n[L.DRIVE] == L.CLUTCH_DRIVE:
        # Full capacity while it slips; locked, it creeps in proportion.
        taken = drive * max(-1.0, min(1.0, (engine - driven) / p[L.CREEP]))
        passed = taken
    else:
        made *= drive
        ratio = min(2.0, driven / engine) if engine > 1.0 else 2.0
        taken = curve(p, n, L.CONVERTER_CAPACITY, ratio) * p[L.CONVERTER_SIZE] * engine * engine
        passed = taken * max(1.0, curve(p, n, L.TORQUE_RATIO, ratio))
    dy[L.ENGINE_RATE] = (made - taken) / p[L.ENGINE_INERTIA]
    return passed * gearing * p[L.EFFICIENCY]


@inlined
def past_shift(p: np.ndarray, n: np.ndarray, y: np.ndarray) -> float:
    """How far the gearbox's input is past the shift speed, rad/s; negative in the last gear."""
    if y[L.GEAR] >= n[L.N_GEARS] - 1:
        return -1.0
    return y[L.SPIN] * p[L.GEARS + int(y[L.GEAR])] * p[L.FINAL_DRIVE] - p[L.SHIFT_SPEED]


@inlined
def shift(p: np.ndarray, n: np.ndarray, y: np.ndarray) -> bool:
    """Take the next gear when its time has come.

    At once; the engine then has to be pulled down through the coupling.
    """
    if past_shift(p, n, y) <= 0.0:
        return False
    y[L.GEAR] += 1.0
    return True
