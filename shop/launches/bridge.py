"""Where the shop's rows meet the solver: the only file that imports both.

Numbers go one way: rows -> setups.car_file (SI) -> solver -> plain dicts and finished text.
"""

from __future__ import annotations

import math
import time
from collections.abc import Mapping
from dataclasses import asdict, dataclass, field
from typing import Any

import numpy as np

import solver
from shop.drawing.scene import Scene, Strut
from shop.garage.models import Survey
from shop.garage.quantities import BRACKETS_OF
from shop.garage.quantities import BY_KEY as SURVEY_KEYS
from shop.quantities import Quantity
from shop.refusals import Refused
from shop.setups import car_file
from shop.setups.models import Revision
from shop.units import default_unit, show, unit_of
from solver import atmosphere, comparing, power, significance, slip_check, timing, turns, weather, weights
from solver.carfile import parse_car
from solver.corner_springs import Axle
from solver.hole_field import Masses, four_link_field, ladder_bar_field
from solver.many import sweep_files
from solver.statics import statics as solve_statics

SOLVER_VERSION = solver.SOLVER_VERSION
# Label, dimension and meaning of every figure of a launch, in the order in which pages show them.
LAUNCH_FIGURES = solver.FIGURES
# The same of every curve.
LAUNCH_HISTORIES = solver.HISTORIES
# The same of the car at rest.
LAUNCH_STATICS = solver.STATIC_FIGURES


class CannotSolve(Exception):
    """The launch has no answer; the message says when in the run, and why."""


# Which form field a fault of the car file stands beside.
_FIELDS = {
    "wheelbase": "wheelbase",
    "mass": "weight_lr",
    "cg": "cg_height",
    "chassis.pitch_inertia": "pitch_inertia",
    "front.unsprung_mass": "front_unsprung_weight",
    "front.tyre_radius": "front_tyre_radius",
    "front.spring": "front_spring_rate",
    "front.damper": "front_shock_rate",
    "front.tyre": "front_tyre_rate",
    "front.droop_stop": "front_limiter",
    "front.bump_stop": "front_bump_clearance",
    "rear.unsprung_mass": "rear_unsprung_weight",
    "rear.housing_inertia": "housing_inertia",
    "rear.tyre_radius": "rear_tyre_radius",
    "rear.linkage.lower.chassis": "lower_chassis",
    "rear.linkage.lower.housing": "lower_housing",
    "rear.linkage.lower": "lower_chassis",
    "rear.linkage.upper.chassis": "upper_chassis",
    "rear.linkage.upper.housing": "upper_housing",
    "rear.linkage.upper": "upper_chassis",
    "rear.linkage.chassis": "ladder_chassis",
    "rear.linkage": "upper_chassis",
    "rear.springs": "rear_spring_rate",
    "rear.tyre": "rear_tyre_rate",
    "rear.droop_stop": "rear_droop_clearance",
    "rear.bump_stop": "rear_bump_clearance",
    "wheelie_bar": "wheelie_bar_height",
    "hit": "hit_peak",
}


def _field_of(path: str) -> str:
    """The longest known start of a car-file path such as `rear.springs[0].spring.rate`."""
    plain = path.split("[")[0]
    while plain:
        if plain in _FIELDS:
            return _FIELDS[plain]
        plain = plain.rpartition(".")[0]
    return ""


def _refused(error: solver.CarError) -> Refused:
    faults: dict[str, str] = {}
    for fault in error.faults:
        name = _field_of(fault.field)
        faults[name] = f"{faults[name]}; {fault.message}" if name in faults else fault.message
    return Refused(faults)


def car_of(revision: Revision) -> solver.Car:
    """The solver's car of a (possibly unsaved) revision; Refused names the form fields."""
    try:
        return solver.car_from_dict(car_file.build(revision))
    except solver.CarError as error:
        raise _refused(error) from error


def check(revision: Revision) -> dict[str, Any]:
    """The car file, once it is known that it can be solved from; Refused otherwise."""
    return solver.car_to_dict(car_of(revision))


def read_car_file(text: str) -> dict[str, Any]:
    """A car file's content, sound in every number; Refused has a line for each fault, naming the field."""
    try:
        return solver.car_to_dict(parse_car(text))
    except solver.CarError as error:
        faults = {fault.field: f"{fault.field or 'a number in the file'}: {fault.message}" for fault in error.faults}
        raise Refused(faults) from error


def provisional(revision: Revision) -> list[Quantity]:
    """Typical values in use that nobody measured, in the order of the survey."""
    typical = {m.key for m in revision.survey.measurements.all() if m.origin == "typical"}
    # A setting somebody typed replaces the typical value; one merely carried over does not.
    overridden = {key for key, setting in revision.settings.items() if "origin" not in setting}
    links = revision.survey.linkage
    return [q for key, q in SURVEY_KEYS.items() if key in typical - overridden and links in q.linkages]


@dataclass(frozen=True)
class Row:
    """One figure as a page or a sheet shows it."""

    key: str
    label: str
    text: str
    note: str = ""
    si: float | None = None


@dataclass(frozen=True)
class Preview:
    """What the choice of holes and settings means at rest, before anything is saved."""

    figures: list[Row]
    bars: list[Row]
    provisional: list[Quantity]
    statics: dict[str, Any] = field(default_factory=dict)


def length_text(si: float | None, units: str) -> str:
    return show(si, "length", default_unit("length", units))


def _percent(value: float | None) -> str:
    return "—" if value is None or not math.isfinite(value) else f"{value:.1f} %".replace("-", "−")


def static_rows(statics: Mapping[str, Any], units: str) -> list[Row]:
    """The figures of the car at rest, in the order in which the trade asks for them."""
    length, force = default_unit("length", units), default_unit("force", units)
    centre = statics["instant_centre"]
    far = centre["x"] is None
    height = "links parallel" if far else show(centre["z"], "length", length)
    ahead = "links parallel" if far else show(centre["x"], "length", length)
    return [
        Row("ic_x", "Instant centre, ahead of axle", ahead, si=centre["x"]),
        Row("ic_z", "Instant centre, above ground", height, si=centre["z"]),
        Row(
            "anti_squat",
            "Anti-squat, whole car",
            _percent(statics["anti_squat"]),
            "force line against the line to the whole car's CG",
            statics["anti_squat"],
        ),
        Row(
            "anti_squat_dynamic",
            "Anti-squat, sprung mass",
            _percent(statics["anti_squat_dynamic"]),
            "unsprung weights taken out: at 100 % the rear springs stay still",
            statics["anti_squat_dynamic"],
        ),
        Row(
            "rear_load",
            "Rear tyres at rest, both",
            show(statics["rear_load"], "force", force),
            si=statics["rear_load"],
        ),
        Row(
            "front_load",
            "Front tyres at rest, both",
            show(statics["front_load"], "force", force),
            si=statics["front_load"],
        ),
        Row(
            "rear_spring_force",
            "Rear springs at rest, both",
            show(statics["rear_spring_force"], "force", force),
            si=statics["rear_spring_force"],
        ),
    ]


def bar_lengths(revision: Revision) -> dict[str, float]:
    """Centre-to-centre length of each bar in metres, plan angle counted: where it must be set."""
    inputs = car_file.inputs_of(revision)
    stance = car_file.attitude(inputs)
    if revision.survey.linkage == "ladder-bar":
        pin = stance.move(inputs.holes["ladder_chassis"])
        return {"ladder": math.hypot(pin[0], pin[1] - inputs.survey["rear_tyre_radius"])}
    lengths = {}
    for link in ("lower", "upper"):
        chassis = stance.move(inputs.holes[f"{link}_chassis"])
        housing = inputs.holes[f"{link}_housing"]
        planar = math.dist(chassis, housing)
        lengths[link] = planar / math.cos(inputs.survey.get(f"{link}_plan_angle", 0.0))
    return lengths


BAR_NAMES = {
    "lower": "Lower bars, centre to centre",
    "upper": "Upper bars, centre to centre",
    "ladder": "Ladder bar, chassis pin to axle centre",
}


def bar_rows(revision: Revision, units: str) -> list[Row]:
    """Each bar's length, with its change against the parent revision in the note."""
    before = {}
    if revision.parent is not None:
        before = bar_lengths(revision.parent)
    rows = []
    for name, length in bar_lengths(revision).items():
        change = length - before[name] if name in before else 0.0
        note = ""
        if abs(change) > 5e-5:
            comparison = "longer" if change > 0 else "shorter"
            note = f"{comparison} by {length_text(abs(change), units)} than on {revision.parent.label}"
        rows.append(Row(name, BAR_NAMES[name], length_text(length, units), note, length))
    return rows


def statics_of(revision: Revision) -> dict[str, Any]:
    return asdict(solve_statics(car_of(revision)))


def scene_of(revision: Revision, holes: Mapping[str, int] | None = None, ghost: Revision | None = None) -> Scene:
    """What there is to draw of a (possibly unsaved) revision; `holes` are the ones to mark."""
    inputs = car_file.inputs_of(revision)
    stance = car_file.attitude(inputs)
    built = car_file.build_from(inputs, "")
    centre = statics_of(revision)["instant_centre"]
    chassis = [place for place in BRACKETS_OF[revision.survey.linkage] if place.endswith("chassis")]
    brackets = {
        bracket.place: tuple(
            stance.move(hole) if bracket.place in chassis else hole for hole in bracket.si_holes()
        )
        for bracket in revision.survey.brackets.all()
        if bracket.place in BRACKETS_OF[revision.survey.linkage]
    }
    bar = built["wheelie_bar"]
    origins = {measurement.key: measurement.origin for measurement in revision.survey.measurements.all()}
    units = revision.shop.units
    return Scene(
        wheelbase=built["wheelbase"],
        front_radius=built["front"]["tyre_radius"],
        rear_radius=built["rear"]["tyre_radius"],
        cg=(built["cg"]["x"], built["cg"]["z"]),
        cg_provisional=origins.get("cg_height") == "typical",
        brackets=brackets,
        chosen=dict(holes if holes is not None else revision.holes),
        centre=None if centre["x"] is None else (centre["x"], centre["z"]),
        slope=centre["slope"],
        length=lambda metres: length_text(metres, units),
        struts=tuple(_strut(line) for line in built["rear"]["springs"]),
        wheelie_bar=None if bar is None else (bar["x"], bar["clearance"]),
        title=f"{revision.car}, {revision.label}",
        ghost=None if ghost is None else scene_of(ghost),
    )


def _strut(line: Mapping[str, Any]) -> Strut:
    both = line["spring"] is not None and line["damper"] is not None
    label = "spring and shock" if both else "spring" if line["spring"] is not None else "shock"
    return Strut(tuple(line["chassis"]), tuple(line["housing"]), label)


def hole_field(inputs: car_file.Inputs, pins: Mapping[str, np.ndarray], travel: float) -> dict[str, np.ndarray]:
    """Statics of many hole choices as arrays over them, SI, NaN where there is none.

    `pins` has the surveyed point of each choice by bracket, shape (choices, 2); `travel` is how far
    (m) the axle goes either way for the pinion's change.
    """
    built, stance = car_file.build_from(inputs, ""), car_file.attitude(inputs)
    moved = {
        place: np.column_stack(stance.move((points[:, 0], points[:, 1]))) if place.endswith("chassis") else points
        for place, points in pins.items()
    }
    rear = built["rear"]
    masses = Masses(built["wheelbase"], built["cg"]["z"], built["mass"], rear["unsprung_mass"], rear["tyre_radius"])
    ends = (travel, -travel)
    if inputs.linkage == "ladder-bar":
        return vars(ladder_bar_field(moved["ladder_chassis"], masses, travel=ends))
    angles = tuple(inputs.survey.get(f"{link}_plan_angle", 0.0) for link in ("lower", "upper"))
    return vars(four_link_field(**moved, masses=masses, plan_angles=angles, travel=ends))


def preview(revision: Revision, units: str) -> Preview:
    """Figures at rest for a revision that need not be saved; Refused where it cannot be."""
    statics = statics_of(revision)
    return Preview(static_rows(statics, units), bar_rows(revision, units), provisional(revision), statics)


def solve(input_file: Mapping[str, Any]) -> dict[str, Any]:
    """Run one launch from its frozen car file. CannotSolve carries the words for the page."""
    started = time.perf_counter()
    try:
        run = solver.launch(solver.car_from_dict(dict(input_file)))
    except solver.CarError as error:
        raise CannotSolve("; ".join(f"{fault.field}: {fault.message}" for fault in error.faults)) from error
    except solver.LaunchFailed as error:
        raise CannotSolve(f"at {error.time:.3f} s: {error.reason}") from error
    answer = run.to_dict()
    return {
        "statics": answer["statics"],
        "modes": answer["modes"],
        "figures": answer["figures"],
        "events": answer.get("events", []),
        "histories": answer["histories"],
        "solver_version": SOLVER_VERSION,
        "seconds": time.perf_counter() - started,
    }


def sweep(files: list[dict[str, Any] | None]) -> tuple[dict[str, Any], dict[int, str]]:
    """Figures of many car files as columns over their order, and the words for those that cannot be solved."""
    return sweep_files(files)


# --- the track: plain numbers to the solver's weather, slip and comparison functions, and back ------------------------

Summary = comparing.Summary
Comparison = comparing.Comparison
Interval = significance.Interval


@dataclass(frozen=True)
class Air:
    """The air of a pass, SI, with the published power correction and what stretches it."""

    density: float
    density_altitude: float
    factor: float
    standard: str
    warnings: tuple[str, ...]


def station_pressure(altimeter_setting: float, elevation: float) -> float:
    """Pa at the track from a setting reduced to sea level."""
    try:
        return atmosphere.station_from_altimeter(altimeter_setting, elevation)
    except ValueError as error:
        raise Refused(str(error)) from error


def air(temperature: float, pressure: float, humidity: float) -> Air:
    """Moist air at station pressure (K, Pa, fraction). Refused where the numbers are no weather."""
    try:
        moist = weather.moist_air(temperature, pressure, humidity)
        correction = power.j1349_correction(temperature, moist.dry_pressure)
    except ValueError as error:
        raise Refused(str(error)) from error
    return Air(
        moist.density,
        moist.density_altitude,
        correction.factor,
        correction.standard,
        (*moist.warnings, *correction.warnings),
    )


def corrected(value: float, factor: float, *, speed: bool) -> float:
    """A time or a speed as it would have been in standard air."""
    return power.corrected_speed(value, factor) if speed else power.corrected_time(value, factor)


def check_slip(times: Mapping[str, Any], speeds: Mapping[str, Any], speed_unit: str) -> slip_check.SlipCheck:
    """Faults and doubts of a slip given by the marks' names."""
    metres = unit_of("speed", speed_unit)
    return slip_check.check_slip(
        timing.Slip(
            {mark: float(value) for mark, value in times.items()},
            {mark: metres.to_si(float(value)) for mark, value in speeds.items()},
        )
    )


@dataclass(frozen=True)
class RunSlip:
    """Times by mark of a solved launch; `continued_from` is how far the run itself went (m) where 60 ft lies beyond it."""

    times: dict[str, float]
    continued_from: float | None = None


def slip_of_run(histories: Mapping[str, Any]) -> RunSlip:
    """The slip of a solved launch. One that ends short of 60 ft is continued at its last acceleration:
    the hit holds its last value, and the car has settled by then."""
    needed = [histories.get(name) for name in ("t", "distance", "speed")]
    if not all(needed):
        return RunSlip({})
    t, distance, speed = ([float(value) for value in series] for series in needed)
    mark = timing.MARKS["60 ft"] + timing.TYPICAL_ROLLOUT
    short = distance[-1] < mark
    if short:
        # Over the last tenth of a second, or what there is of it.
        start = next(i for i, at in enumerate(t) if at >= t[-1] - 0.1)
        pull = (speed[-1] - speed[start]) / (t[-1] - t[start]) if t[-1] > t[start] else 0.0
        if distance[-1] < mark / 3 or pull <= 0.0:
            return RunSlip({})
        left = (math.sqrt(speed[-1] ** 2 + 2 * pull * (mark - distance[-1])) - speed[-1]) / pull
        ran = distance[-1]
        t, distance, speed = [*t, t[-1] + left], [*distance, mark], [*speed, speed[-1] + pull * left]
    try:
        # A hair's breadth short of its own mark would lose it.
        times = timing.slip_from_run(t, [*distance[:-1], distance[-1] + 1e-9], speed).times
    except ValueError:
        return RunSlip({})
    return RunSlip(dict(times), ran if short else None)


def compare_passes(
    first: list[float], second: list[float], *, lower_is_better: bool, confidence: float
) -> Comparison:
    return comparing.compare_passes(first, second, lower_is_better, confidence)


def summarise_passes(values: list[float], *, lower_is_better: bool) -> Summary:
    return comparing.summarise_passes(values, lower_is_better)


def survey_figures(survey: Survey, units: str) -> list[Row]:
    """Weights, percentages and where the CG is along the car, from the scales and the tape."""
    values = car_file.survey_si(survey)
    corners = [values.get(f"weight_{corner}") for corner in ("lf", "rf", "lr", "rr")]
    if None in corners or "wheelbase" not in values:
        return []
    found = weights.weigh(weights.Corners(*corners))
    mass = default_unit("mass", units)
    ahead = values["wheelbase"] * found.front / found.total
    rows = [*weight_rows(corners, units), Row("cg_x", "CG, ahead of rear axle", length_text(ahead, units), si=ahead)]
    if all(f"empty_{corner}" in values for corner in ("lf", "rf", "lr", "rr")):
        driver = found.total - sum(values[f"empty_{corner}"] for corner in ("lf", "rf", "lr", "rr"))
        rows.append(Row("driver", "Driver", show(driver, "mass", mass), "with driver less driver out", driver))
    return rows


def weight_rows(corners: list[float], units: str) -> list[Row]:
    """What four pads say (kg: left front, right front, left rear, right rear)."""
    found = weights.weigh(weights.Corners(*corners))
    mass = default_unit("mass", units)
    return [
        Row("total", "Total with driver", show(found.total, "mass", mass), si=found.total),
        Row("front", "Front", f"{show(found.front, 'mass', mass)}, {_percent(found.front_percent)}", si=found.front),
        Row("rear", "Rear", f"{show(found.rear, 'mass', mass)}, {_percent(found.rear_percent)}", si=found.rear),
        Row("left", "Left", f"{show(found.left, 'mass', mass)}, {_percent(found.left_percent)}", si=found.left),
        Row("cross", "Cross weight", f"{show(found.cross_weight, 'mass', mass)}, {_percent(found.cross_percent)}",
            "right front and left rear", found.cross_weight),
    ]


@dataclass(frozen=True)
class Turns:
    """Corner, turns (up is positive) and expected reading (kg), and the cross weight then, a share."""

    corners: list[tuple[str, float, float]]
    cross: float


def turns_to(survey: Survey, values: Mapping[str, float], *, keep_height: bool) -> Turns:
    """Spring-seat turns to a cross weight, from the pads and what the survey knows of springs and tyres (SI)."""
    known = car_file.survey_si(survey)
    ends = {}
    for end in ("front", "rear"):
        ends[end] = Axle(
            track=values[f"{end}_track"],
            spring_rates=(known[f"{end}_spring_rate"],) * 2,
            motion_ratio=known["front_motion_ratio"] if end == "front" else 1.0,
            thread_pitch=values["thread_pitch"],
            tyre_rate=known[f"{end}_tyre_rate"],
            spring_base=values["spring_base"] if end == "rear" else None,
        )
    measured = weights.Corners(*(values[f"weight_{corner}"] for corner in ("lf", "rf", "lr", "rr")))
    try:
        target = turns.target_from_cross(measured, 100 * values["cross"])
        found = turns.seat_turns(
            measured, target, known["wheelbase"], ends["front"], ends["rear"], keep_height=keep_height
        )
    except ValueError as error:
        raise Refused(str(error)) from error
    names = ("Left front", "Right front", "Left rear", "Right rear")
    rows = zip(names, found.turns.as_array(), found.corner_weights.as_array(), strict=True)
    return Turns([(name, float(turn), float(weight)) for name, turn, weight in rows], found.cross_percent / 100)
