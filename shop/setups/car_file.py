"""From a survey and a revision's choices to the car file: SI, both sides lumped.

Knows the file's format (see solver/CARFILE.md) but not the solver: what a revision means
can be read here without knowing how it is solved.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from shop.garage.models import Survey
from shop.garage.quantities import BRACKETS, BRACKETS_OF
from shop.garage.quantities import BY_KEY as SURVEY_KEYS
from shop.refusals import Refused
from shop.setups.models import Revision
from shop.setups.quantities import BY_KEY, HIT_FORCE, HIT_PEAK_G, HIT_RISE, quantity_of
from shop.units import GRAVITY, unit_of

# Stops are stiff beside the springs they limit. Common practice, no source.
STOP_RATE = 400e3
STOP_DAMPING = 2000.0
RUN_DURATION = 1.5
OUTPUT_STEP = 0.005

Point = tuple[float, float]


@dataclass(frozen=True)
class Inputs:
    """Everything one setup needs, SI: the survey's values and the settings on top of them."""

    survey: Mapping[str, float]
    settings: Mapping[str, float]
    holes: Mapping[str, Point]
    linkage: str
    hit_table: list[list[float]] | None = None
    hit_force: float | None = None

    def value(self, setting: str, surveyed: str | None = None) -> float | None:
        """A setting, or what the survey found where the revision does not set it."""
        if setting in self.settings:
            return self.settings[setting]
        return self.survey.get(surveyed or setting)


def setting_si(key: str, setting: Mapping[str, Any]) -> float:
    dimension = quantity_of(key, setting["unit"]).dimension
    return unit_of(dimension, setting["unit"]).to_si(float(setting["value"]))


def survey_si(survey: Survey) -> dict[str, float]:
    """The survey's values in SI, typical ones included."""
    return {measurement.key: measurement.si for measurement in survey.measurements.all()}


def chosen_holes(survey: Survey, holes: Mapping[str, int]) -> dict[str, Point]:
    """The point of each chosen hole; Refused where a bracket lacks it."""
    points: dict[str, Point] = {}
    faults: dict[str, str] = {}
    brackets = {bracket.place: bracket for bracket in survey.brackets.all()}
    for place in BRACKETS_OF[survey.linkage]:
        bracket = brackets.get(place)
        if bracket is None:
            faults[place] = f"{BRACKETS[place]}: the survey has no holes for it"
            continue
        drilled = bracket.si_holes()
        number = holes.get(place)
        if not isinstance(number, int) or not 1 <= number <= len(drilled):
            faults[place] = f"{BRACKETS[place]} has holes 1 to {len(drilled)}; “{number}” is not one of them"
            continue
        points[place] = drilled[number - 1]
    if faults:
        raise Refused(faults)
    return points


def inputs_of(revision: Revision) -> Inputs:
    """Read a (possibly unsaved) revision into SI; Refused when something needed is missing."""
    survey = survey_si(revision.survey)
    missing = {
        quantity.key: f"{quantity.label}: not measured in {revision.survey}"
        for quantity in SURVEY_KEYS.values()
        if not quantity.optional
        and quantity.key not in survey
        # A car without a wheelie bar need not say how stiff it is.
        and not (quantity.section == "wheelie" and "wheelie_bar_x" not in survey)
        and revision.survey.linkage in quantity.linkages
    }
    if missing:
        raise Refused(missing)
    settings = {key: setting_si(key, setting) for key, setting in revision.settings.items() if key in BY_KEY}
    holes = chosen_holes(revision.survey, revision.holes)
    hit = revision.settings.get(HIT_FORCE.key)
    by_force = hit is not None and quantity_of(HIT_FORCE.key, hit["unit"]) is HIT_FORCE
    force = settings.pop(HIT_FORCE.key) if by_force else None
    return Inputs(survey, settings, holes, revision.survey.linkage, revision.hit_table, force)


@dataclass(frozen=True)
class Attitude:
    """How far the chassis stands from where the survey found it: a lift and a pitch about the axle line."""

    lift: float = 0.0
    pitch: float = 0.0
    axle_height: float = 0.0

    def move(self, point: Point) -> Point:
        """A chassis point in the new attitude. The bars are re-adjusted, so the axle stays at x = 0."""
        x, z = point[0], point[1] - self.axle_height
        cosine, sine = math.cos(self.pitch), math.sin(self.pitch)
        return (x * cosine - z * sine, x * sine + z * cosine + self.axle_height + self.lift)


def attitude(inputs: Inputs) -> Attitude:
    rises = []
    for key in ("ride_height_rear", "ride_height_front"):
        surveyed, set_to = inputs.survey.get(key), inputs.settings.get(key)
        rises.append(0.0 if surveyed is None or set_to is None else set_to - surveyed)
    rear, front = rises
    pitch = math.atan2(front - rear, inputs.survey["wheelbase"])
    return Attitude(lift=rear, pitch=pitch, axle_height=inputs.survey["rear_tyre_radius"])


def _whole_car(inputs: Inputs, stance: Attitude) -> tuple[float, Point, float]:
    """Mass, CG and sprung pitch inertia, ballast and ride height counted."""
    v = inputs.survey
    front = v["weight_lf"] + v["weight_rf"]
    rear = v["weight_lr"] + v["weight_rr"]
    mass, length = front + rear, v["wheelbase"]
    m_front, m_rear = v["front_unsprung_weight"], v["rear_unsprung_weight"]
    sprung = mass - m_front - m_rear
    if sprung <= 0:
        raise Refused({"rear_unsprung_weight": "the unsprung weights are more than the car weighs"})
    # Sprung part by subtraction (launch model, Bodies), moved with the chassis, then put back together.
    x = (length * front - m_front * length) / sprung
    z = (mass * v["cg_height"] - m_front * v["front_tyre_radius"] - m_rear * v["rear_tyre_radius"]) / sprung
    x, z = stance.move((x, z))
    inertia = v["pitch_inertia"]
    added = inputs.settings.get("ballast_weight", 0.0)
    if added:
        missing = [key for key in ("ballast_x", "ballast_z") if key not in inputs.settings]
        if missing:
            raise Refused({key: f"{BY_KEY[key].label}: say where the ballast sits" for key in missing})
        bx, bz = inputs.settings["ballast_x"], inputs.settings["ballast_z"]
        total = sprung + added
        new_x, new_z = (sprung * x + added * bx) / total, (sprung * z + added * bz) / total
        inertia += sprung * ((x - new_x) ** 2 + (z - new_z) ** 2) + added * ((bx - new_x) ** 2 + (bz - new_z) ** 2)
        sprung, x, z = total, new_x, new_z
    mass = sprung + m_front + m_rear
    cg_x = (sprung * x + m_front * length) / mass
    cg_z = (sprung * z + m_front * v["front_tyre_radius"] + m_rear * v["rear_tyre_radius"]) / mass
    return mass, (cg_x, cg_z), inertia


def _tyre(inputs: Inputs, end: str) -> dict[str, float]:
    rate = inputs.survey[f"{end}_tyre_rate"]
    weighed, pressure = inputs.survey.get(f"{end}_pressure"), inputs.settings.get(f"{end}_pressure")
    if weighed and pressure:
        share = inputs.survey["tyre_pressure_share"]
        rate *= 1.0 - share + share * pressure / weighed
    return {"rate": 2 * rate, "damping": 2 * inputs.survey[f"{end}_tyre_damping"]}


def _stop(clearance: float | None) -> dict[str, float] | None:
    if clearance is None:
        return None
    return {"clearance": clearance, "rate": STOP_RATE, "damping": STOP_DAMPING}


def _front(inputs: Inputs) -> dict[str, Any]:
    ratio = inputs.survey["front_motion_ratio"]
    rate = inputs.value("front_spring_rate")
    damping = inputs.value("front_shock_rate")
    return {
        "unsprung_mass": inputs.survey["front_unsprung_weight"],
        "tyre_radius": inputs.survey["front_tyre_radius"],
        "spring": {"rate": 2 * rate * ratio**2},
        "damper": {"rate": 2 * damping * ratio**2},
        "tyre": _tyre(inputs, "front"),
        "droop_stop": _stop(inputs.value("front_limiter", "front_droop_clearance")),
        "bump_stop": _stop(inputs.survey.get("front_bump_clearance")),
    }


def _rear_springs(inputs: Inputs, stance: Attitude) -> list[dict[str, Any]]:
    v = inputs.survey

    def mounts(name: str) -> dict[str, list[float]]:
        chassis = stance.move((v[f"{name}_chassis_x"], v[f"{name}_chassis_z"]))
        return {"chassis": list(chassis), "housing": [v[f"{name}_housing_x"], v[f"{name}_housing_z"]]}

    spring = {"rate": 2 * inputs.value("rear_spring_rate")}
    damper = {"rate": 2 * inputs.value("rear_shock_rate")}
    if "shock_chassis_x" in v:
        return [
            {**mounts("spring"), "spring": spring, "damper": None},
            {**mounts("shock"), "spring": None, "damper": damper},
        ]
    return [{**mounts("spring"), "spring": spring, "damper": damper}]


def _linkage(inputs: Inputs, stance: Attitude) -> dict[str, Any]:
    if inputs.linkage == "ladder-bar":
        return {"kind": "ladder-bar", "chassis": list(stance.move(inputs.holes["ladder_chassis"]))}
    links: dict[str, Any] = {"kind": "four-link"}
    for link in ("lower", "upper"):
        links[link] = {
            "chassis": list(stance.move(inputs.holes[f"{link}_chassis"])),
            "housing": list(inputs.holes[f"{link}_housing"]),
        }
        angle = inputs.survey.get(f"{link}_plan_angle", 0.0)
        if angle:
            links[link]["plan_angle"] = angle
    return links


def _wheelie_bar(inputs: Inputs) -> dict[str, float] | None:
    reach = inputs.survey.get("wheelie_bar_x")
    clearance = inputs.value("wheelie_bar_height", "wheelie_bar_clearance")
    if reach is None or clearance is None:
        return None
    return {"x": -reach, "clearance": clearance, "rate": inputs.survey["wheelie_bar_rate"], "damping": STOP_DAMPING}


def hit_table(inputs: Inputs, mass: float) -> list[list[float]]:
    """Force at the tyres against time; a peak in g is of the car as it races."""
    if inputs.hit_table:
        return [[float(time), float(force)] for time, force in inputs.hit_table]
    peak = inputs.hit_force
    if peak is None:
        peak = mass * inputs.settings.get("hit_peak", HIT_PEAK_G * GRAVITY)
    return [[0.0, 0.0], [inputs.settings.get("hit_rise", HIT_RISE), peak]]


def build(revision: Revision, name: str | None = None) -> dict[str, Any]:
    """The car file of a revision, issued or not, saved or not. Refused names the field at fault."""
    return build_from(inputs_of(revision), name or f"{revision.car}, {revision.label}")


def build_from(inputs: Inputs, name: str) -> dict[str, Any]:
    """The car file of inputs already read: what a study of many choices calls for each."""
    stance = attitude(inputs)
    mass, (cg_x, cg_z), inertia = _whole_car(inputs, stance)
    return {
        "format": "launch-ledger/car",
        "version": 1,
        "name": name,
        "wheelbase": inputs.survey["wheelbase"],
        "mass": mass,
        "cg": {"x": cg_x, "z": cg_z},
        "chassis": {"pitch_inertia": inertia},
        "front": _front(inputs),
        "rear": {
            "unsprung_mass": inputs.survey["rear_unsprung_weight"],
            "housing_inertia": inputs.survey["housing_inertia"],
            "tyre_radius": inputs.survey["rear_tyre_radius"],
            "linkage": _linkage(inputs, stance),
            "springs": _rear_springs(inputs, stance),
            "tyre": _tyre(inputs, "rear"),
            "droop_stop": _stop(inputs.survey.get("rear_droop_clearance")),
            "bump_stop": _stop(inputs.survey.get("rear_bump_clearance")),
        },
        "wheelie_bar": _wheelie_bar(inputs),
        "hit": {"kind": "force", "table": hit_table(inputs, mass)},
        "run": {"duration": RUN_DURATION, "output_step": OUTPUT_STEP},
    }
