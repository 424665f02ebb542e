"""Ride height: what the measured weights say the springs and links carry at rest."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.curves import slope_at_rest, steepest
from solver.kernel.jit import jit

if TYPE_CHECKING:
    import numpy as np

GRAVITY = 9.80665
VIRTUAL_LINK = 0.3
FASTEST_CAR = 50.0  # m/s within the seconds a launch is solved for
FASTEST_ENGINE = 1200.0  # rad/s


@jit
def unit(from_x: float, from_z: float, to_x: float, to_z: float) -> tuple:
    """Unit vector from one point to another, and their distance."""
    dx, dz = to_x - from_x, to_z - from_z
    length = math.sqrt(dx * dx + dz * dz)
    return dx / length, dz / length, length


@jit
def place_links(p: np.ndarray, n: np.ndarray) -> None:
    """Write the two links to solve.

    A ladder bar is one rigid bar on the housing, pinned to the chassis. Two links
    from that one pin to two points of the housing hold it exactly so: the lower one
    along the bar to the axle centre, the upper one square to it, so that their
    forces are the pin's load along and across the bar.
    """
    if n[L.KIND] == L.FOUR_LINK:
        for i in range(8):
            p[L.LCX + i] = p[L.LOWER_CX + i]
        return
    px, pz = p[L.LOWER_CX], p[L.LOWER_CZ]
    ux, uz, _ = unit(px, pz, 0.0, p[L.REAR_RADIUS])
    p[L.LCX], p[L.LCZ], p[L.LHX], p[L.LHZ] = px, pz, 0.0, p[L.REAR_RADIUS]
    p[L.UCX], p[L.UCZ] = px, pz
    p[L.UHX], p[L.UHZ] = px + VIRTUAL_LINK * uz, pz - VIRTUAL_LINK * ux


@jit
def weigh(p: np.ndarray) -> None:
    """Sprung mass and its CG by subtraction; the axles' static loads."""
    front, rear, mass = p[L.FRONT_MASS], p[L.REAR_MASS], p[L.MASS]
    sprung = mass - front - rear
    p[L.SPRUNG_MASS] = sprung
    p[L.SPRUNG_X] = (mass * p[L.CG_X] - front * p[L.WHEELBASE]) / sprung
    p[L.SPRUNG_Z] = (mass * p[L.CG_Z] - front * p[L.FRONT_RADIUS] - rear * p[L.REAR_RADIUS]) / sprung
    p[L.FRONT_STATIC] = mass * GRAVITY * p[L.CG_X] / p[L.WHEELBASE]
    p[L.REAR_STATIC] = mass * GRAVITY - p[L.FRONT_STATIC]
    p[L.FRONT_SPRING_STATIC] = p[L.FRONT_STATIC] - front * GRAVITY
    p[L.PER_SPRUNG_MASS], p[L.PER_REAR_MASS], p[L.PER_FRONT_MASS] = 1 / sprung, 1 / rear, 1 / front
    p[L.PER_CHASSIS_INERTIA] = 1.0 / p[L.CHASSIS_INERTIA]
    p[L.PER_HOUSING_INERTIA] = 1.0 / p[L.HOUSING_INERTIA]
    p[L.FRONT_SQUASH] = p[L.FRONT_STATIC] / p[L.FRONT_TYRE_RATE]
    p[L.REAR_SQUASH] = p[L.REAR_STATIC] / p[L.REAR_TYRE_RATE]


@jit
def spring_pull(p: np.ndarray, n: np.ndarray) -> tuple:
    """Direction and moment about the axle of all rear springs, for one newton in sum.

    Springs that share the axle carry their share in proportion to their rates.
    """
    sx, sz, sm, rates = 0.0, 0.0, 0.0, 0.0
    for i in range(n[L.N_LINES]):
        at = L.LINES + L.LINE_WIDTH * i
        hx, hz = p[at + L.LINE_HX], p[at + L.LINE_HZ]
        ux, uz, length = unit(hx, hz, p[at + L.LINE_CX], p[at + L.LINE_CZ])
        p[at + L.LINE_LENGTH] = length
        rate = slope_at_rest(p, n, L.LINE_SPRING + i)
        rates += rate
        sx += rate * ux
        sz += rate * uz
        sm += rate * (hx * uz - (hz - p[L.REAR_RADIUS]) * ux)
    for i in range(n[L.N_LINES]):
        p[L.LINES + L.LINE_WIDTH * i + L.LINE_PRELOAD] = slope_at_rest(p, n, L.LINE_SPRING + i) / rates
    return sx / rates, sz / rates, sm / rates


@jit
def balance_axle(p: np.ndarray, n: np.ndarray) -> None:
    """Rear spring force and both link tensions from the housing's equilibrium.

    Forces on the housing: each link pulls it towards the chassis, the springs push
    it away; the tyre carries the axle's static load through its centre.
    """
    sx, sz, sm = spring_pull(p, n)
    lx, lz, p[L.LOWER_LENGTH] = unit(p[L.LHX], p[L.LHZ], p[L.LCX], p[L.LCZ])
    ux, uz, p[L.UPPER_LENGTH] = unit(p[L.UHX], p[L.UHZ], p[L.UCX], p[L.UCZ])
    lm = p[L.LHX] * lz - (p[L.LHZ] - p[L.REAR_RADIUS]) * lx
    um = p[L.UHX] * uz - (p[L.UHZ] - p[L.REAR_RADIUS]) * ux
    carried = p[L.REAR_STATIC] - p[L.REAR_MASS] * GRAVITY
    # lx Tl + ux Tu = sx S; lz Tl + uz Tu = sz S - carried; lm Tl + um Tu = sm S.
    determinant = lx * (uz * sm - sz * um) - ux * (lz * sm - sz * lm) + sx * (lz * um - uz * lm)
    spring = -carried * (lx * um - ux * lm) / determinant
    lower = carried * (ux * sm - um * sx) / determinant
    upper = -carried * (lx * sm - lm * sx) / determinant
    p[L.REAR_SPRING_STATIC], p[L.LOWER_STATIC], p[L.UPPER_STATIC] = spring, lower, upper
    for i in range(n[L.N_LINES]):
        p[L.LINES + L.LINE_WIDTH * i + L.LINE_PRELOAD] *= spring


@jit
def fastest(rate: float, damping: float, mass: float) -> float:
    """Greatest magnitude of an eigenvalue of one mass on a spring and a damper."""
    half = 0.5 * damping / mass
    if half * half <= rate / mass:
        return math.sqrt(rate / mass)
    return half + math.sqrt(half * half - rate / mass)


@jit
def bound_eigenvalues(p: np.ndarray, n: np.ndarray) -> None:
    """A bound on the model's fastest eigenvalue, from steepest slopes everywhere.

    Each wheel against a chassis that gives way as its own effective mass does;
    stops count as if always in contact. Sets the longest stable step.
    """
    k = steepest(p, n, L.FRONT_SPRING)
    k += max(steepest(p, n, L.FRONT_BUMP), steepest(p, n, L.FRONT_DROOP))
    c = steepest(p, n, L.FRONT_DAMPER) + max(p[L.FRONT_BUMP_DAMPING], p[L.FRONT_DROOP_DAMPING])
    give = p[L.WHEELBASE] - p[L.SPRUNG_X]
    give = 1.0 / p[L.SPRUNG_MASS] + give * give / p[L.CHASSIS_INERTIA]
    front = 1.0 / (1.0 / p[L.FRONT_MASS] + give)
    front = fastest(k + p[L.FRONT_TYRE_RATE], c + p[L.FRONT_TYRE_DAMPING], front)
    k = max(steepest(p, n, L.REAR_BUMP), steepest(p, n, L.REAR_DROOP))
    c = max(p[L.REAR_BUMP_DAMPING], p[L.REAR_DROOP_DAMPING])
    for i in range(n[L.N_LINES]):
        k += steepest(p, n, L.LINE_SPRING + i)
        c += steepest(p, n, L.LINE_DAMPER + i)
    give = p[L.SPRUNG_X]
    give = 1.0 / p[L.SPRUNG_MASS] + give * give / p[L.CHASSIS_INERTIA]
    rear = 1.0 / (1.0 / p[L.REAR_MASS] + give)
    rear = fastest(k + p[L.REAR_TYRE_RATE], c + p[L.REAR_TYRE_DAMPING], rear)
    p[L.LAMBDA] = max(front, rear)
    if n[L.DRIVE] != L.FORCE_DRIVE:
        p[L.LAMBDA] = max(p[L.LAMBDA], fastest_drive(p, n))


@jit
def fastest_drive(p: np.ndarray, n: np.ndarray) -> float:
    """The same bound for wheel spin against the tyre's carcass, and for the coupling.

    The carcass is a spring of slip stiffness over relaxation length; it also
    forgets at road speed over relaxation length.
    """
    radius, spin = p[L.REAR_RADIUS], p[L.WHEEL_INERTIA]
    rate = p[L.SLIP_STIFFNESS] / p[L.RELAXATION]
    bound = math.sqrt(rate * (radius * radius / spin + 1.0 / p[L.REAR_MASS]))
    bound = max(bound, FASTEST_CAR / p[L.RELAXATION])
    if n[L.DRIVE] == L.CLUTCH_DRIVE:
        gearing = p[L.GEARS] * p[L.FINAL_DRIVE]
        strongest = 0.0
        for i in range(n[L.HIT_COUNT]):
            strongest = max(strongest, p[L.HIT_SCALE] * p[n[L.HIT_AT] + 2 * i + 1])
        slope = strongest / p[L.CREEP]
        bound = max(bound, slope * (1.0 / p[L.ENGINE_INERTIA] + gearing * gearing / spin))
    elif n[L.DRIVE] == L.CONVERTER_DRIVE:
        bound = max(bound, FASTEST_ENGINE * 4.0 * p[L.CONVERTER_SIZE] / p[L.ENGINE_INERTIA])
    return bound


@jit
def settle(p: np.ndarray, n: np.ndarray) -> None:
    """Work out everything derived from the inputs of one lane, in place."""
    place_links(p, n)
    weigh(p)
    balance_axle(p, n)
    bound_eigenvalues(p, n)
