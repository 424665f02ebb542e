"""The survey form laid out for its page: sections in walking order, each field with its unit, tolerance and fault."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from shop.garage.models import Survey
from shop.garage.quantities import BRACKETS, BRACKETS_OF, QUANTITIES, SECTIONS
from shop.garage.readings import SurveyReading
from shop.quantities import Quantity
from shop.units import DIMENSIONS, default_unit, show, unit_of


@dataclass(frozen=True)
class Entry:
    """One quantity as the form shows it."""

    quantity: Quantity
    typed: str
    unit: str
    units: list[str]
    tolerance: str
    usual_tolerance: str
    fault: str
    tolerance_fault: str
    typical: str
    allowed: str

    @property
    def needed(self) -> bool:
        return not self.quantity.optional and self.quantity.typical is None


@dataclass(frozen=True)
class BracketEntry:
    """One bracket as the form shows it."""

    place: str
    label: str
    entry: str
    unit: str
    tolerance: str
    row: dict[str, str]
    lines: str
    faults: dict[str, str]
    holes: list[tuple[int, str, str]] = field(default_factory=list)


def sections(
    typed: Mapping[str, str], reading: SurveyReading | None, linkage: str, system: str
) -> list[tuple[str, str, list[Entry]]]:
    """(key, title, entries) in the order in which one walks around the car."""
    by_section: dict[str, list[Entry]] = {key: [] for key in SECTIONS}
    for quantity in QUANTITIES:
        if linkage in quantity.linkages:
            by_section[quantity.section].append(_entry(quantity, typed, reading, system))
    return [(key, SECTIONS[key], entries) for key, entries in by_section.items() if entries]


def _entry(quantity: Quantity, typed: Mapping[str, str], reading: SurveyReading | None, system: str) -> Entry:
    units = list(DIMENSIONS[quantity.dimension])
    unit = typed.get(f"{quantity.key}_unit") or quantity.unit(system)
    if unit not in units:
        unit = quantity.unit(system)
    usual = f"{quantity.tolerance / unit_of(quantity.dimension, unit).factor:.3g}"
    faults = reading.faults if reading else {}
    taken = reading.taken.get(quantity.key) if reading else None
    typical = ""
    if taken is not None and taken.origin == "typical":
        typical = f"{taken.value:g} {taken.unit}, give or take {taken.tolerance:g}".strip()
    low, high = (show(bound, quantity.dimension, unit) for bound in (quantity.least, quantity.most))
    return Entry(
        quantity, typed.get(quantity.key, ""), unit, units, typed.get(f"{quantity.key}_tol", ""), usual,
        faults.get(quantity.key, ""), faults.get(f"{quantity.key}_tol", ""), typical, f"{low} to {high}",
    )


def brackets(typed: Mapping[str, str], reading: SurveyReading | None, linkage: str, system: str) -> list[BracketEntry]:
    faults = reading.faults if reading else {}
    entries = []
    for place in BRACKETS_OF[linkage]:
        unit = typed.get(f"{place}_unit") or default_unit("length", system)
        drilled = reading.brackets.get(place) if reading else None
        holes = []
        if drilled is not None:
            holes = [(n, f"{x:g}", f"{z:g}") for n, (x, z) in enumerate(drilled.holes, 1)]
        own = {name: words for name, words in faults.items() if name == place or name.startswith(f"{place}_")}
        row = {name: typed.get(f"{place}_{name}", "") for name in ("first_x", "first_z", "last_x", "last_z", "count")}
        entries.append(BracketEntry(
            place, BRACKETS[place], typed.get(f"{place}_entry", "row"), unit, typed.get(f"{place}_tol", ""), row,
            typed.get(f"{place}_lines", ""), own, holes,
        ))
    return entries


def typed_of(survey: Survey) -> dict[str, str]:
    """A stored survey back in the words of its form; typical values are left blank, as they were."""
    typed: dict[str, str] = {"linkage": survey.linkage, "taken_on": survey.taken_on.isoformat(), "notes": survey.notes}
    for row in survey.measurements.all():
        typed[f"{row.key}_unit"] = row.unit
        if row.origin != "typical":
            typed[row.key] = row.typed
            typed[f"{row.key}_tol"] = f"{row.tolerance:g}"
    for bracket in survey.brackets.all():
        typed[f"{bracket.place}_entry"] = bracket.entry
        typed[f"{bracket.place}_unit"] = bracket.unit
        typed[f"{bracket.place}_tol"] = f"{bracket.tolerance:g}"
        if bracket.row:
            typed |= {f"{bracket.place}_{name}": str(value) for name, value in bracket.row.items()}
        else:
            typed[f"{bracket.place}_lines"] = "\n".join(f"{x:.9g}, {z:.9g}" for x, z in bracket.holes)
    return typed
