"""By what a study is ranked: which figures, how limits and weights are read, and what is taken when none is set."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from shop.launches.measures import Measure, measure
from shop.refusals import Refused
from shop.studies.ranking import Limit
from shop.units import ReadingError, parse_reading, unit_of

# Figures a study lists, in the order of the trade's questions: what the rear tyres feel, what the front does, what breaks.
FIGURES = (
    "mean_rear_load_100ms",
    "mean_rear_load_250ms",
    "mean_rear_load_500ms",
    "peak_rear_load",
    "rear_load_dip",
    "least_rear_load",
    "peak_grip_needed",
    "front_lift_height",
    "peak_pitch",
    "rear_squat",
    "rear_separation",
    "rear_droop_travel_left",
    "rear_bump_travel_left",
    "lower_link_compression",
    "upper_link_tension",
    "peak_housing_angle",
    "anti_squat",
    "anti_squat_dynamic",
    "instant_centre_x",
    "instant_centre_z",
    "lower_bar_length",
    "upper_bar_length",
)
# What the table shows beside the score before anybody chooses.
SHOWN = (
    "mean_rear_load_250ms",
    "rear_load_dip",
    "front_lift_height",
    "peak_grip_needed",
    "anti_squat",
    "instant_centre_x",
    "instant_centre_z",
    "lower_link_compression",
)
WEIGHTS = {"2": "more, much", "1": "more is better", "0": "does not count", "-1": "less is better", "-2": "less, much"}
# A stated default: load on the rear tyres early, held, at little grip. Common practice, no source.
USUAL = {"mean_rear_load_250ms": 2.0, "rear_load_dip": 1.0, "peak_grip_needed": -1.0}


@dataclass(frozen=True)
class Yard:
    """One figure as the ranking form shows it."""

    measure: Measure
    least: str
    most: str
    weight: str
    fault: str = ""


def study_measure(key: str, units: str, linkage: str) -> Measure:
    return measure(key, units, linkage)


def step_text(known: Measure, step: float) -> str:
    """A difference with its sign; empty where it rounds to nothing in the unit that is shown."""
    return "" if known.text(abs(step)) == known.text(0.0) else known.difference(step)


def read_limits(typed: Mapping[str, str], units: str, linkage: str) -> dict[str, dict[str, float | None]]:
    """Limits in SI by figure, from `<figure>_least` and `<figure>_most` in the shop's units; Refused by field."""
    limits: dict[str, dict[str, float | None]] = {}
    faults = {}
    for key in FIGURES:
        bounds = {}
        for side in ("least", "most"):
            text = typed.get(f"{key}_{side}", "").strip()
            if not text:
                continue
            try:
                bounds[side] = si_of(text, study_measure(key, units, linkage))
            except ReadingError as error:
                faults[key] = str(error)
        if bounds.get("least") is not None and bounds.get("most") is not None and bounds["least"] > bounds["most"]:
            faults[key] = "the least is more than the most"
        if bounds:
            limits[key] = {"least": bounds.get("least"), "most": bounds.get("most")}
    if faults:
        raise Refused(faults)
    return limits


def si_of(text: str, known: Measure) -> float:
    """What was typed in the shop's unit, as the solver gives that figure."""
    reading = parse_reading(text, known.unit, known.dimension)
    return reading.si / known.scale


def read_weights(typed: Mapping[str, str]) -> dict[str, float]:
    weights = {}
    for key in FIGURES:
        text = typed.get(f"{key}_weight", "0")
        if text not in WEIGHTS:
            raise Refused({key: f"“{text}” is not a weight"})
        if text != "0":
            weights[key] = float(text)
    return weights


def limits_of(stored: Mapping[str, Mapping[str, float | None]]) -> list[Limit]:
    return [Limit(key, bounds.get("least"), bounds.get("most")) for key, bounds in stored.items() if key in FIGURES]


def yards(
    limits: Mapping[str, Mapping[str, float | None]],
    weights: Mapping[str, float],
    units: str,
    linkage: str,
    typed: Mapping[str, str] | None = None,
    faults: Mapping[str, str] | None = None,
) -> list[Yard]:
    """The ranking form's rows: as typed where something was refused, else as stored."""
    rows = []
    for key in FIGURES:
        known = study_measure(key, units, linkage)
        bounds = limits.get(key, {})
        least, most = (_shown(bounds.get(side), known) for side in ("least", "most"))
        weight = f"{weights.get(key, 0):g}"
        if typed is not None:
            least, most = typed.get(f"{key}_least", ""), typed.get(f"{key}_most", "")
            weight = typed.get(f"{key}_weight", "0")
        rows.append(Yard(known, least, most, weight, (faults or {}).get(key, "")))
    return rows


def _shown(si: float | None, known: Measure) -> str:
    return "" if si is None else f"{unit_of(known.dimension, known.unit).from_si(si * known.scale):.6g}"
