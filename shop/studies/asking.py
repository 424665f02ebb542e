"""The form that asks for a study: which brackets, which settings over which values, how they combine."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from shop.garage.quantities import BRACKETS, BRACKETS_OF
from shop.refusals import Refused
from shop.setups.models import Revision
from shop.setups.quantities import BY_KEY
from shop.studies.work import base_values
from shop.units import ReadingError, default_unit, show

# What may be varied beside holes, and the step a shop would try. SI comes from the shop's own unit.
SETTINGS = {
    "rear_spring_rate": {"lb/in": 25, "N/mm": 5},
    "front_spring_rate": {"lb/in": 25, "N/mm": 5},
    "rear_shock_rate": {"lb·s/in": 1, "N·s/mm": 0.2},
    "front_shock_rate": {"lb·s/in": 1, "N·s/mm": 0.2},
    "rear_pressure": {"psi": 0.5, "kPa": 3},
    "front_pressure": {"psi": 2, "kPa": 15},
    "ride_height_rear": {"in": 0.25, "mm": 6},
    "ride_height_front": {"in": 0.25, "mm": 6},
    "front_limiter": {"in": 0.5, "mm": 12},
    "wheelie_bar_height": {"in": 0.5, "mm": 12},
    "ballast_weight": {"lb": 10, "kg": 5},
    "ballast_x": {"in": 12, "mm": 300},
    "hit_peak": {"g": 0.1, "m/s²": 1},
    "hit_rise": {"s": 0.01, "ms": 10},
}


@dataclass(frozen=True)
class AxisField:
    """One thing that can be varied, as the form shows it."""

    key: str
    label: str
    is_hole: bool
    chosen: bool
    values: str
    unit: str
    now: str
    hint: str
    fault: str


def axis_fields(revision: Revision, units: str, typed: Mapping[str, str] | None = None, faults=None) -> list[AxisField]:
    places = BRACKETS_OF[revision.survey.linkage]
    drilled = {bracket.place: len(bracket.holes) for bracket in revision.survey.brackets.all()}
    base = base_values(revision, [*places, *SETTINGS])
    fields = []
    for place in places:
        every = ", ".join(str(number) for number in range(1, drilled.get(place, 0) + 1))
        fields.append(
            _field(place, BRACKETS[place], True, "", f"hole {base.get(place, 0):g}", every, True, typed, faults, every)
        )
    for key, steps in SETTINGS.items():
        if key not in base or (revision.hit_table and key in ("hit_peak", "hit_rise")):
            continue
        quantity = BY_KEY[key]
        unit = default_unit(quantity.dimension, units)
        now = base.get(key)
        hint = f"steps of {steps.get(unit, '')} {unit}".strip()
        fields.append(
            _field(
                key,
                quantity.label,
                False,
                unit,
                "not set" if now is None else show(now, quantity.dimension, unit),
                hint,
                False,
                typed,
                faults,
                "",
            )
        )
    return fields


def _field(key, label, is_hole, unit, now, hint, chosen, typed, faults, values) -> AxisField:
    if typed is not None:
        chosen, values = f"vary_{key}" in typed, typed.get(f"values_{key}", "")
    return AxisField(key, label, is_hole, chosen, values, unit, now, hint, (faults or {}).get(key, ""))


def read_asking(typed: Mapping[str, str], revision: Revision, units: str) -> dict[str, Any]:
    """A plan as plain data (read_plan judges the whole); Refused where a list of values cannot be read."""
    axes, faults = [], {}
    for field in axis_fields(revision, units, typed):
        if not field.chosen:
            continue
        try:
            axes.append({"key": field.key, "values": _values(field)})
        except ReadingError as error:
            faults[field.key] = str(error)
    if faults:
        raise Refused(faults)
    size, seed = typed.get("size", ""), typed.get("seed", "1")
    if typed.get("mode") == "sample" and not size.isdecimal():
        raise Refused({"size": f"“{size}” is not how many samples to take; write a whole number"})
    return {
        "mode": typed.get("mode", "every"),
        "axes": axes,
        "size": int(size) if size.isdecimal() else 0,
        "seed": int(seed) if seed.isdecimal() and len(seed) < 10 else 1,
    }


def _values(field: AxisField) -> list[float]:
    """`1, 2, 3` or `140 to 180 step 20`, in the unit that stands beside the field."""
    text = field.values.strip()
    if " to " in text:
        return _range(field, text)
    parts = [part for part in text.replace(";", ",").split(",") if part.strip()]
    if not parts:
        raise ReadingError("give the values to try, like 140, 165, 190, or 140 to 190 step 25")
    return [_one(field, part) for part in parts]


def _one(field: AxisField, part: str) -> float:
    if field.is_hole:
        if not part.strip().isdecimal():
            raise ReadingError(f"“{part.strip()}” is not a hole number")
        return int(part)
    return BY_KEY[field.key].read(part, field.unit).si


def _range(field: AxisField, text: str) -> list[float]:
    first, _, rest = text.partition(" to ")
    last, found, step = rest.partition("step")
    start, stop = _one(field, first), _one(field, last)
    if field.is_hole:
        return [float(number) for number in range(int(start), int(stop) + 1)]
    if not found:
        raise ReadingError("say the step, like 140 to 190 step 25")
    from shop.units import parse_reading, unit_of

    read = parse_reading(step, field.unit, BY_KEY[field.key].dimension)
    width = read.value * unit_of(BY_KEY[field.key].dimension, read.unit).factor
    if width <= 0 or stop < start:
        raise ReadingError("a range goes up, by a step above zero")
    count = int((stop - start) / width + 1e-6) + 1
    if count > 200:
        raise ReadingError(f"{count:,} values; at most 200 fit on one axis")
    return [start + number * width for number in range(count)]
