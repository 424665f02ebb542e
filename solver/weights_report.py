"""Everything the weights of one car say together, for the command line and the shop."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from solver.car import Car
from solver.corner_section import CornerPlan
from solver.inertia import PitchInertia, typical_pitch_inertia
from solver.raised_end import CAUTION
from solver.raised_steps import FittedHeight, RaisedStep, fit_raised_steps
from solver.traction import AxleLoads, axle_loads
from solver.turns import SeatTurns, seat_turns, target_from_cross
from solver.weights import (
    Corners,
    PlanCG,
    SprungMass,
    Weighing,
    cg_from_scales,
    sprung_mass,
    weigh,
)

# A file and its scales that differ by more than this are not of one weighing.
MASS_TOLERANCE, CG_TOLERANCE = 2.0, 0.01


@dataclass(frozen=True)
class WeightsReport:
    """What the scales say.

    ``weighing``, ``plan_cg``, ``height`` and ``turns`` are None where the file does
    not hold what they need; ``doubts`` are sentences to show.
    """

    sprung: SprungMass
    axle_loads: AxleLoads
    typical_inertia: PitchInertia
    weighing: Weighing | None
    plan_cg: PlanCG | None
    height: FittedHeight | None
    target: Corners | None
    turns: SeatTurns | None
    doubts: tuple
    cautions: tuple


def report_weights(car: Car, gravity: float = 9.80665) -> WeightsReport:
    """Work out all that the weights of a car file allow.

    Parameters
    ----------
    car : solver.car.Car
        With or without its optional ``corners`` section.
    gravity : float
        m/s^2.

    Returns
    -------
    WeightsReport

    Raises
    ------
    ValueError
        When the car is lighter than its axles or a target asks for the
        impossible.
    """
    plan, (x, z) = car.corners, car.cg
    sprung = sprung_mass(
        car.mass,
        x,
        z,
        car.wheelbase,
        car.front.unsprung_mass,
        car.rear.unsprung_mass,
        car.front.tyre_radius,
        car.rear.tyre_radius,
    )
    height = _height(car, plan) if plan and plan.raised else None
    turns, target = None, _target(plan) if plan else None
    if plan and target:
        turns = seat_turns(
            plan.measured, target, car.wheelbase, plan.front, plan.rear, gravity, plan.keep_height
        )
    weighing = weigh(plan.measured) if plan else None
    return WeightsReport(
        sprung=sprung,
        axle_loads=axle_loads(car.mass, 0.0, x, z, car.wheelbase, gravity),
        typical_inertia=typical_pitch_inertia(sprung.mass, sprung.x, car.wheelbase),
        weighing=weighing,
        plan_cg=cg_from_scales(plan.measured, car.wheelbase, plan.front.track, plan.rear.track)
        if plan
        else None,
        height=height,
        target=target,
        turns=turns,
        doubts=_doubts(car, weighing, height, turns),
        cautions=((CAUTION,) if height else ()) + (turns.cautions if turns else ()),
    )


def _target(plan: CornerPlan) -> Corners | None:
    if plan.target_cross_percent is not None:
        return target_from_cross(plan.measured, plan.target_cross_percent)
    return plan.target


def _height(car: Car, plan: CornerPlan) -> FittedHeight:
    weighing = weigh(plan.measured)
    level = RaisedStep(0.0, plan.raised[0].raised, weighing.front, weighing.rear)
    return fit_raised_steps(
        [level, *plan.raised], weighing.total, car.wheelbase, car.front.tyre_radius, car.rear.tyre_radius
    )


def _doubts(
    car: Car, weighing: Weighing | None, height: FittedHeight | None, turns: SeatTurns | None
) -> tuple[str, ...]:
    doubts = []
    if weighing is not None:
        x = car.wheelbase * weighing.front / weighing.total
        if abs(weighing.total - car.mass) > MASS_TOLERANCE:
            doubts.append(
                f"The four scales add up to {weighing.total:.1f} kg and the car file says"
                f" {car.mass:.1f} kg: they are not of one weighing."
            )
        if abs(x - car.cg[0]) > CG_TOLERANCE:
            doubts.append(
                f"The scales put the CG {x:.3f} m ahead of the rear axle and the car file {car.cg[0]:.3f} m."
            )
    if height is not None:
        doubts.extend(height.doubts)
        if abs(height.height - car.cg[1]) > CG_TOLERANCE:
            doubts.append(
                f"The raised readings put the CG {height.height:.3f} m high and the car file {car.cg[1]:.3f} m."
            )
    if turns is not None and np.abs(turns.out_of_reach.as_array()).max() > 0.5:
        doubts.append(
            "Part of the target is out of reach of spring seats: axle weights and sides change only when"
            " weight is moved in the car."
        )
    return tuple(doubts)
