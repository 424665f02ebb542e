"""What the car carries at ride height, and what its links say about the hit."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from solver.car import FourLink
from solver.carfile import ensure_sound
from solver.faults import CarError, Fault
from solver.kernel import layout as L
from solver.kernel.lanes import settle_one
from solver.packing import pack
from solver.rest_figures import plan_angles, rest_figures

if TYPE_CHECKING:
    import numpy as np

    from solver.car import Car
    from solver.packing import Row


@dataclass(frozen=True)
class InstantCentre:
    """Where the link lines meet, m; x and z are None when they are parallel.

    `slope` is that of the force line from the rear patch.
    """

    x: float | None
    z: float | None
    slope: float


@dataclass(frozen=True)
class Bar:
    """One pair of bars: true centre-to-centre length of one (m), angle from level (rad)
    rising forward, tension of both together (N), plan angle (rad)."""

    length: float
    angle: float
    force: float
    plan_angle: float


@dataclass(frozen=True)
class Statics:
    """Ride height of one car. Forces N, both sides summed; anti-squat in percent.

    Attributes
    ----------
    anti_squat : float
        Trade definition: whole-car CG, force line from patch to instant centre.
    anti_squat_dynamic : float
        Of the sprung mass: at 100 a steady hit moves no rear spring.
    neutral_slope : float
        ``h/L``: the line from the rear patch on which the trade's figure is 100.
    sprung_neutral_line : tuple of float
        (height above the rear patch, slope) of the line on which the dynamic
        figure is 100: ``z = [m h/L x - m_r r]/(m - m_r)``.
    load_transfer_per_newton : float
        Rear load gained for each newton of hit, ``h/L``.
    rear_spring_forces, rear_spring_lengths : tuple of float
        One per entry of ``rear.springs``.
    """

    rear_load: float
    front_load: float
    rear_spring_force: float
    front_spring_force: float
    upper_link_force: float
    lower_link_force: float
    instant_centre: InstantCentre
    anti_squat: float
    anti_squat_dynamic: float
    neutral_slope: float
    sprung_neutral_line: tuple[float, float]
    load_transfer_per_newton: float
    sprung_mass: float
    sprung_cg: tuple[float, float]
    rear_spring_forces: tuple[float, ...]
    rear_spring_lengths: tuple[float, ...]
    rear_tyre_squash: float
    front_tyre_squash: float
    upper: Bar | None
    lower: Bar


def statics(car: Car) -> Statics:
    """Solve ride height: preloads, link loads, instant centre, anti-squat.

    Anti-squat ``100 (z_ic/x_ic)/(h/L)``; of the sprung mass
    ``100 [((m - m_r) z_ic + m_r r)/x_ic]/(m h/L)``, the rear axle's inertia acting
    at its own height r. Derived from the housing's moments about the instant
    centre; agrees with Barton and Fieldhouse, *Automotive Chassis Engineering*
    (2018), eqs 3.63 to 3.69, in the limit of a massless axle.

    Parameters
    ----------
    car : Car

    Returns
    -------
    Statics

    Raises
    ------
    CarError
        When the car cannot stand at ride height as described.
    """
    ensure_sound(car)
    row = pack(car)
    settle_one(row.p, row.n)
    return statics_of_row(car, row)


def statics_of_row(car: Car, row: Row) -> Statics:
    """`Statics` from a settled row of the kernel."""
    p = row.p
    faults = rest_faults(p)
    if faults:
        raise CarError(faults)
    rest = {name: float(values[0]) for name, values in rest_figures(car, p[None]).items()}
    centre = _instant_centre(rest)
    neutral = car.cg[1] / car.wheelbase
    rear, sprung = car.rear.unsprung_mass, car.mass - car.rear.unsprung_mass
    lower_plan, upper_plan = plan_angles(car)
    lower = _bar(p, L.LCX, L.LOWER_LENGTH, L.LOWER_STATIC, lower_plan)
    upper = _bar(p, L.UCX, L.UPPER_LENGTH, L.UPPER_STATIC, upper_plan)
    share = [float(v) for v in p[L.LINES : L.LINES + L.LINE_WIDTH * len(car.rear.springs)]]
    return Statics(
        rear_load=float(p[L.REAR_STATIC]),
        front_load=float(p[L.FRONT_STATIC]),
        rear_spring_force=float(p[L.REAR_SPRING_STATIC]),
        front_spring_force=float(p[L.FRONT_SPRING_STATIC]),
        upper_link_force=upper.force,
        lower_link_force=lower.force,
        instant_centre=centre,
        anti_squat=rest["anti_squat"],
        anti_squat_dynamic=rest["anti_squat_dynamic"],
        neutral_slope=neutral,
        sprung_neutral_line=(
            -rear * car.rear.tyre_radius / sprung,
            car.mass * neutral / sprung,
        ),
        load_transfer_per_newton=neutral,
        sprung_mass=float(p[L.SPRUNG_MASS]),
        sprung_cg=(float(p[L.SPRUNG_X]), float(p[L.SPRUNG_Z])),
        rear_spring_forces=tuple(share[L.LINE_PRELOAD :: L.LINE_WIDTH]),
        rear_spring_lengths=tuple(share[L.LINE_LENGTH :: L.LINE_WIDTH]),
        rear_tyre_squash=float(p[L.REAR_SQUASH]),
        front_tyre_squash=float(p[L.FRONT_SQUASH]),
        upper=upper if isinstance(car.rear.linkage, FourLink) else None,
        lower=lower,
    )


def rest_faults(p: np.ndarray) -> list[Fault]:
    """Why a settled row cannot stand at ride height; empty when it can."""
    spring, lower, upper = (float(p[i]) for i in (L.REAR_SPRING_STATIC, L.LOWER_STATIC, L.UPPER_STATIC))
    most = 50.0 * float(p[L.REAR_STATIC])
    if not max(abs(spring), abs(lower), abs(upper)) < most:
        return [
            Fault(
                "rear.linkage",
                None,
                "the bars and springs cannot hold the axle at ride height: their lines nearly meet in one point",
            )
        ]
    if spring <= 0.0:
        return [
            Fault(
                "rear.springs",
                round(spring, 1),
                "the rear springs would have to pull at ride height: check weights and mounts",
            )
        ]
    if float(p[L.FRONT_SPRING_STATIC]) <= 0.0:
        return [Fault("front.spring", None, "the front springs would carry nothing at ride height")]
    return []


def _instant_centre(rest: dict) -> InstantCentre:
    """`InstantCentre` from ride height's figures; refuses one straight above the rear patch."""
    x, z, slope = (rest[f"instant_centre_{part}"] for part in ("x", "z", "slope"))
    if not abs(slope) < 1e9:
        raise CarError([Fault("rear.linkage", None, "the bars' lines meet straight above the rear tyres")])
    return InstantCentre(None, None, slope) if math.isnan(x) else InstantCentre(x, z, slope)


def _bar(p: np.ndarray, at: int, length: int, force: int, plan: float) -> Bar:
    rise, run = p[at + 1] - p[at + 3], p[at] - p[at + 2]
    true = math.cos(plan)
    return Bar(float(p[length] / true), math.atan2(float(rise), float(run)), float(p[force] / true), plan)
