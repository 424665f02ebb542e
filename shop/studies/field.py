"""Every hole at once: the figures at rest of all combinations of a survey's holes, for static/js/field.js."""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

import numpy as np
from numpy.typing import NDArray

from shop.garage.quantities import BRACKETS, BRACKETS_OF
from shop.launches import bridge
from shop.refusals import Refused
from shop.setups.car_file import inputs_of
from shop.setups.models import Revision
from shop.studies.plan import MOST_CHOICES, Axis, Plan
from shop.units import default_unit, unit_of

Array = NDArray[np.float64]

# How far the axle goes up and down for the pinion's change: as one checks it on stands. Common practice, no source.
TRAVEL = {"in": 2 * 0.0254, "mm": 0.050}

# Label, dimension, decimals in inches or degrees, and which linkages have it.
FIGURES = {
    "ic_x": ("Instant centre, ahead of axle", "length", 1),
    "ic_z": ("Instant centre, above ground", "length", 1),
    "anti_squat": ("Anti-squat, whole car", "percent", 1),
    "anti_squat_dynamic": ("Anti-squat, sprung mass", "percent", 1),
    "lower_length": ("Lower bars, centre to centre", "length", 2),
    "upper_length": ("Upper bars, centre to centre", "length", 2),
    "bar_gap": ("Least gap between the bars' centre lines", "length", 2),
    "lower_angle": ("Lower bars, uphill to the front", "angle", 1),
    "upper_angle": ("Upper bars, uphill to the front", "angle", 1),
    "pinion_change": ("Pinion angle, change from droop to bump", "angle", 2),
}
LADDER_WORDS = {"lower_length": "Ladder bars, pin to axle centre", "lower_angle": "Ladder bars, uphill to the front"}
FILTERS = ("ic_x", "ic_z", "anti_squat", "lower_length", "upper_length", "bar_gap", "pinion_change")


def hole_plan(revision: Revision) -> Plan:
    """Every combination of the survey's holes, numbered as a study numbers them."""
    drilled = {bracket.place: len(bracket.holes) for bracket in revision.survey.brackets.all()}
    places = BRACKETS_OF[revision.survey.linkage]
    axes = tuple(Axis(place, tuple(range(1, drilled.get(place, 0) + 1))) for place in places)
    return Plan("every", axes, {place: float(revision.holes[place]) for place in places})


def field_answer(revision: Revision, units: str) -> dict[str, Any]:
    """The field as the page's script reads it: columns over the choices, lengths in the shop's unit."""
    plan = hole_plan(revision)
    count = plan.combinations
    if count > MOST_CHOICES:
        return {"count": 0, "why_empty": f"{count:,} combinations of holes; at most {MOST_CHOICES:,} can be drawn."}
    try:
        columns = _columns(revision, plan, units)
        scene = _scene(revision, units)
    except Refused as refused:
        return {"count": 0, "why_empty": f"This cannot be drawn: {refused}"}
    figures = {key: _figure(key, values, revision.survey.linkage, units) for key, values in columns.items()}
    return {
        "count": count,
        "x": "ic_x",
        "z": "ic_z",
        "colour": "anti_squat",
        "current": _number(plan, plan.base),
        "filters": [key for key in FILTERS if key in figures],
        "figures": figures,
        "holes": {place: numbers.tolist() for place, numbers in _numbers(plan).items()},
        "bracket_labels": {axis.key: BRACKETS[axis.key] for axis in plan.axes},
        "scene": scene,
        "why_empty": None,
    }


def _numbers(plan: Plan) -> dict[str, NDArray[np.int64]]:
    """Hole number of each bracket in each choice, in the plan's own order."""
    digits = np.unravel_index(np.arange(plan.combinations), [len(axis.values) for axis in plan.axes])
    return {axis.key: digit + 1 for axis, digit in zip(plan.axes, digits, strict=True)}


def _number(plan: Plan, holes: Mapping[str, float]) -> int:
    return int(np.ravel_multi_index([int(holes[a.key]) - 1 for a in plan.axes], [len(a.values) for a in plan.axes]))


def _columns(revision: Revision, plan: Plan, units: str) -> dict[str, Array]:
    drilled = {bracket.place: np.array(bracket.si_holes()) for bracket in revision.survey.brackets.all()}
    pins = {place: drilled[place][numbers - 1] for place, numbers in _numbers(plan).items()}
    found = bridge.hole_field(inputs_of(revision), pins, TRAVEL[default_unit("length", units)])
    found["pinion_change"] = np.abs(found["pinion_bump"] - found["pinion_droop"])
    # A ladder bar has no upper bar: what no choice has is not offered.
    return {key: found[key] for key in FIGURES if np.isfinite(found[key]).any()}


def _figure(key: str, values: Array, linkage: str, units: str) -> dict[str, Any]:
    label, dimension, decimals = FIGURES[key]
    if linkage == "ladder-bar":
        label = LADDER_WORDS.get(key, label)
    symbol = default_unit(dimension, units)
    if symbol == "mm":
        decimals = 0
    # The solver gives whole percents.
    shown = values if dimension == "percent" else unit_of(dimension, symbol).from_si(values)
    rounded = np.round(shown, decimals + 1).tolist()
    finite = [value if math.isfinite(value) else None for value in rounded]
    return {"label": label, "unit": symbol, "decimals": decimals, "values": finite}


def _scene(revision: Revision, units: str) -> dict[str, Any]:
    scene = bridge.scene_of(revision)
    unit = unit_of("length", default_unit("length", units))

    def length(metres: float) -> float:
        return round(unit.from_si(metres), 3)

    return {
        "wheelbase": length(scene.wheelbase),
        "rear_radius": length(scene.rear_radius),
        "front_radius": length(scene.front_radius),
        "cg": [length(value) for value in scene.cg],
        "brackets": {place: [[length(x), length(z)] for x, z in holes] for place, holes in scene.brackets.items()},
    }
