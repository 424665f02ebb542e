"""From the drive table to the tyres' forward force and the housing's torque reaction.

Drive mode 1 prescribes the force. Drive mode 2 turns the wheels: the tyre's slip
lags behind the wheels by its relaxation length, ``s k' + |V| k = w R - V``
(stretched string; Pacejka, *Tire and Vehicle Dynamics*, from memory), which
also makes it a plain spring at standstill.
"""

from solver.kernel import layout as L
from solver.kernel.curves import curve
from solver.kernel.jit import jit
from solver.kernel.tyre import fiala


@jit
def start_up(p, y):
    """State at the start: everything at rest, the engine at its launch speed."""
    y[:] = 0.0
    y[L.ENGINE_RATE] = p[L.ENGINE_SPEED]


@jit
def thrust(p, n, drive, y, load, dy, out):
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
    # A tyre that slides all over lags no further behind.
    if abs(y[L.SLIP]) >= 1.0 and slip_rate * y[L.SLIP] > 0.0:
        slip_rate = 0.0
    dy[L.SLIP] = slip_rate / p[L.RELAXATION]
    dy[L.GEAR] = 0.0
    out[L.O_WHEEL_TORQUE], out[L.O_SPIN] = torque, y[L.SPIN]
    out[L.O_SLIP], out[L.O_ENGINE] = y[L.SLIP], y[L.ENGINE_RATE]
    return force, torque


@jit
def wheel_torque(p, n, drive, y, dy):
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


@jit
def shift(p, n, y):
    """Take the next gear when the gearbox's input has reached the shift speed.

    At once; the engine then has to be pulled down through the coupling.
    """
    driven = y[L.SPIN] * p[L.GEARS + int(y[L.GEAR])] * p[L.FINAL_DRIVE]
    if driven < p[L.SHIFT_SPEED] or y[L.GEAR] >= n[L.N_GEARS] - 1:
        return False
    y[L.GEAR] += 1.0
    return True
