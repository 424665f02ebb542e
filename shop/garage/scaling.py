"""Scaling day: four pads as they read, what they say, and what to turn at each corner to reach a cross weight."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from shop.garage.models import Survey
from shop.garage.quantities import BY_KEY
from shop.launches import bridge
from shop.launches.bridge import Row
from shop.quantities import Quantity
from shop.refusals import Refused
from shop.units import INCH, ReadingError, show, unit_of

PADS = ("weight_lf", "weight_rf", "weight_lr", "weight_rr")
# Common practice, no source: a door car's tracks; a coil-over sleeve of twelve threads to the inch.
EXTRA = (
    Quantity("cross", "Cross weight to reach", "percent", 0.3, 0.7, 0.001, help="Right front plus left rear."),
    Quantity("front_track", "Front track", "length", 30 * INCH, 90 * INCH, 0.25 * INCH, help="Tyre centre to tyre centre."),
    Quantity("rear_track", "Rear track", "length", 30 * INCH, 90 * INCH, 0.25 * INCH),
    Quantity("spring_base", "Rear springs apart, across the car", "length", 8 * INCH, 80 * INCH, 0.25 * INCH,
             help="A solid axle is softer in roll the closer its springs stand."),
    Quantity("thread_pitch", "Seat travel of one turn", "length", 0.02 * INCH, 0.5 * INCH, 0.001 * INCH),
)
STATED = {
    "cross": 0.5, "front_track": 58 * INCH, "rear_track": 56 * INCH, "spring_base": 40 * INCH, "thread_pitch": INCH / 12,
}
FIELDS = {quantity.key: quantity for quantity in (*(BY_KEY[key] for key in PADS), *EXTRA)}


@dataclass
class Scaling:
    """The page's content: fields as typed, faults beside them, and what follows from them."""

    typed: dict[str, str]
    units: dict[str, str]
    faults: dict[str, str] = field(default_factory=dict)
    weights: list[Row] = field(default_factory=list)
    turns: list[tuple[str, str, str]] = field(default_factory=list)
    after: str = ""


def begin(survey: Survey, system: str) -> Scaling:
    """The survey's own pads, and stated defaults for what a survey does not hold."""
    found = {row.key: row for row in survey.measurements.all()}
    units = {key: quantity.unit(system) for key, quantity in FIELDS.items()}
    typed = {}
    for key, quantity in FIELDS.items():
        if key in found:
            typed[key], units[key] = found[key].typed, found[key].unit
        elif key in STATED:
            typed[key] = f"{unit_of(quantity.dimension, units[key]).from_si(STATED[key]):.4g}"
    return Scaling(typed, units)


def work_out(survey: Survey, sent: Mapping[str, str], system: str) -> Scaling:
    """Percentages and turns for what is typed now; nothing is kept."""
    page = begin(survey, system)
    values: dict[str, float] = {}
    for key, quantity in FIELDS.items():
        page.typed[key] = sent.get(key, "")
        page.units[key] = sent.get(f"{key}_unit") or page.units[key]
        try:
            values[key] = quantity.read(page.typed[key], page.units[key]).si
        except ReadingError as error:
            page.faults[key] = str(error)
    if page.faults:
        return page
    page.weights = bridge.weight_rows([values[key] for key in PADS], system)
    try:
        found = bridge.turns_to(survey, values, keep_height=sent.get("height", "keep") == "keep")
    except Refused as refused:
        page.faults[""] = str(refused)
        return page
    unit = page.units["weight_lf"]
    for name, turn, weight in found.corners:
        words = "leave it" if abs(turn) < 0.05 else f"{abs(turn):.1f} turns {'up' if turn > 0 else 'down'}"
        page.turns.append((name, words, show(weight, "mass", unit)))
    page.after = f"{100 * found.cross:.1f} %"
    return page
