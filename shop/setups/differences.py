"""What differs between two revisions of a car, in finished text: for the form, the page, the sheet and the comparison."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

from shop.garage.models import Survey
from shop.garage.quantities import BRACKETS, BRACKETS_OF
from shop.garage.quantities import QUANTITIES as MEASURED
from shop.setups.car_file import setting_si
from shop.setups.models import Revision
from shop.setups.quantities import QUANTITIES, quantity_of
from shop.units import DIMENSIONS, show, unit_of

NOT_SET = "not set"


@dataclass(frozen=True)
class Change:
    """One thing that differs; `difference` is b less a in b's unit, empty where it has no meaning."""

    key: str
    label: str
    before: str
    after: str
    difference: str = ""


def as_typed(entry: dict[str, Any] | None) -> str:
    """A set value as it was typed, with its unit."""
    if entry is None:
        return NOT_SET
    typed, unit = str(entry["typed"]), entry["unit"]
    if not unit or not typed or (not typed[-1].isdigit() and typed[-1] != "."):
        return typed
    return f"{typed}°" if unit == "°" else f"{typed} {unit}"


def setting_changes(a: Revision, b: Revision) -> list[Change]:
    """Settings in which `b` differs from `a`, the hit included."""
    return [change for quantity in QUANTITIES if (change := _setting_change(quantity.key, a, b))] + _hit_change(a, b)


def _setting_change(key: str, a: Revision, b: Revision) -> Change | None:
    before, after = a.settings.get(key), b.settings.get(key)
    if before is None and after is None:
        return None
    label = quantity_of(key, (after or before)["unit"]).label
    if before is None or after is None:
        return Change(key, label, as_typed(before), as_typed(after))
    old, new = quantity_of(key, before["unit"]), quantity_of(key, after["unit"])
    if old is not new:
        return Change(key, label, as_typed(before), as_typed(after))
    step = setting_si(key, after) - setting_si(key, before)
    if abs(step) <= 1e-9 * max(abs(setting_si(key, before)), 1e-9):
        return None
    return Change(key, label, as_typed(before), as_typed(after), signed(step, new.dimension, after["unit"]))


def signed(step: float, dimension: str, unit: str, *, decimals: int | None = None) -> str:
    """A difference with its sign, in a unit; an offset such as that of °F does not enter it."""
    chosen = unit_of(dimension, unit)
    text = show(chosen.to_si(abs(step) / chosen.factor), dimension, unit, decimals=decimals)
    return f"{'+' if step > 0 else '−'}{text}"


def _hit_change(a: Revision, b: Revision) -> list[Change]:
    if a.hit_table == b.hit_table:
        return []
    return [Change("hit_lines", "The hit as a table", _table_text(a), _table_text(b))]


def _table_text(revision: Revision) -> str:
    if not revision.hit_table:
        return "none: peak and rise"
    last = revision.hit_table[-1]
    return f"{len(revision.hit_table)} lines, to {last[0]:g} s"


def hole_changes(a: Revision, b: Revision) -> list[Change]:
    """Brackets in which another hole is used."""
    places = dict.fromkeys([*BRACKETS_OF[a.survey.linkage], *BRACKETS_OF[b.survey.linkage]])
    rows = ((place, a.holes.get(place), b.holes.get(place)) for place in places)
    return [
        Change(place, BRACKETS[place], hole_text(old), hole_text(new))
        for place, old, new in rows
        if old != new
    ]


def hole_text(number: int | None) -> str:
    return "—" if number is None else f"hole {number}"


def survey_changes(a: Survey, b: Survey) -> list[Change]:
    """Measured values that differ between two surveys; empty for one and the same."""
    return [] if a.pk == b.pk else [*_measured_changes(a, b), *_bracket_changes(a, b)]


def _measured_changes(a: Survey, b: Survey) -> Iterator[Change]:
    old = {measurement.key: measurement for measurement in a.measurements.all()}
    new = {measurement.key: measurement for measurement in b.measurements.all()}
    for quantity in MEASURED:
        before, after = old.get(quantity.key), new.get(quantity.key)
        if before is None and after is None:
            continue
        texts = (_measured_text(before), _measured_text(after))
        if before is None or after is None:
            yield Change(quantity.key, quantity.label, *texts)
        elif abs(after.si - before.si) > 1e-9 * max(abs(before.si), 1e-9):
            yield Change(quantity.key, quantity.label, *texts, signed(after.si - before.si, quantity.dimension, after.unit))


def _measured_text(measurement: Any) -> str:
    if measurement is None:
        return "not measured"
    text = as_typed({"typed": measurement.typed, "unit": measurement.unit})
    return text if measurement.origin == "measured" else f"{text} ({measurement.origin})"


def _bracket_changes(a: Survey, b: Survey) -> Iterator[Change]:
    old = {bracket.place: bracket for bracket in a.brackets.all()}
    new = {bracket.place: bracket for bracket in b.brackets.all()}
    for place, label in BRACKETS.items():
        before, after = old.get(place), new.get(place)
        if before is None and after is None:
            continue
        if before and after and _close(before.si_holes(), after.si_holes()):
            continue
        yield Change(place, label, _bracket_text(before), _bracket_text(after))


def _close(a: list[tuple[float, float]], b: list[tuple[float, float]]) -> bool:
    return len(a) == len(b) and all(
        abs(p[0] - q[0]) < 1e-7 and abs(p[1] - q[1]) < 1e-7 for p, q in zip(a, b, strict=True)
    )


def _bracket_text(bracket: Any) -> str:
    if bracket is None:
        return "no bracket"
    first = bracket.holes[0]
    decimals = DIMENSIONS["length"][bracket.unit].decimals
    return f"{len(bracket.holes)} holes, first at {first[0]:.{decimals}f}, {first[1]:.{decimals}f} {bracket.unit}"
