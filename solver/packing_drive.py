"""The drive laid out for the kernel: tyre grip, engine, coupling, gears."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from solver.car import Clutch, Hit, WheelTorque
from solver.hinges import hinges
from solver.kernel import layout as L

if TYPE_CHECKING:
    import numpy as np

    from solver.car import Car, Powertrain, Rear, Table
    from solver.packing import Curves

# Of a large soft slick, m: common practice, no source. `CARFILE.md` says so.
RELAXATION = 0.3
FLAT = [0.0, 0.0]


def put_drive(scalars: np.ndarray, n: np.ndarray, curves: Curves, car: Car) -> Table:
    """Write the drive's numbers and curves; returns the table that runs over time."""
    _put_tyre(scalars, curves.columns, car.rear)
    drive = car.hit
    n[L.N_STATES] = L.PLAIN_STATES if isinstance(drive, Hit) else L.STATES
    if isinstance(drive, Hit | WheelTorque):
        n[L.DRIVE] = L.FORCE_DRIVE if isinstance(drive, Hit) else L.TORQUE_DRIVE
        for which in (L.ENGINE, L.CONVERTER_CAPACITY, L.TORQUE_RATIO):
            curves.add(which, FLAT)
        return drive.table
    _put_engine(scalars, n, curves, drive)
    coupling = drive.coupling
    if isinstance(coupling, Clutch):
        n[L.DRIVE] = L.CLUTCH_DRIVE
        scalars[L.CREEP] = coupling.creep
        for which in (L.CONVERTER_CAPACITY, L.TORQUE_RATIO):
            curves.add(which, FLAT)
        return coupling.capacity
    n[L.DRIVE] = L.CONVERTER_DRIVE
    scalars[L.CONVERTER_SIZE] = coupling.stall_torque / coupling.stall_speed**2
    curves.add(L.CONVERTER_CAPACITY, hinges(coupling.capacity))
    curves.add(L.TORQUE_RATIO, hinges(coupling.torque_ratio))
    return coupling.throttle


def _put_tyre(scalars: np.ndarray, columns: dict, rear: Rear) -> None:
    tyre = rear.tyre
    scalars[L.RELAXATION] = tyre.relaxation_length or RELAXATION
    for where, path, value in (
        (L.GRIP, "rear.tyre.grip", tyre.grip),
        (L.SLIDING_GRIP, "rear.tyre.sliding_grip", tyre.sliding_grip or tyre.grip),
        (L.SLIP_STIFFNESS, "rear.tyre.slip_stiffness", tyre.slip_stiffness),
        (L.WHEEL_INERTIA, "rear.wheel_inertia", rear.wheel_inertia),
    ):
        if value is not None:
            scalars[where] = value
            columns[path] = (where, 1.0)


def _put_engine(scalars: np.ndarray, n: np.ndarray, curves: Curves, drive: Powertrain) -> None:
    engine, gears = drive.engine, drive.gears
    scalars[L.ENGINE_INERTIA], scalars[L.ENGINE_SPEED] = engine.inertia, engine.launch_speed
    curves.add(L.ENGINE, hinges(engine.curve))
    scalars[L.FINAL_DRIVE], scalars[L.EFFICIENCY] = gears.final_drive, gears.efficiency
    scalars[L.SHIFT_SPEED] = gears.shift_speed if gears.shift_speed is not None else math.inf
    n[L.N_GEARS] = len(gears.ratios)
    for i, ratio in enumerate(gears.ratios):
        scalars[L.GEARS + i] = ratio
    curves.columns["hit.gears.final_drive"] = (L.FINAL_DRIVE, 1.0)
    curves.columns["hit.engine.launch_speed"] = (L.ENGINE_SPEED, 1.0)
