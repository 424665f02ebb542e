"""The revision form laid out for its page: rows under headings, each with its fault and its change since the parent."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from shop.garage.quantities import BRACKETS
from shop.quantities import Quantity
from shop.setups.differences import hole_changes, setting_changes
from shop.setups.forms import RevisionForm
from shop.setups.models import Revision
from shop.setups.quantities import BY_KEY, QUANTITIES, SECTIONS, units_for


@dataclass(frozen=True)
class FieldRow:
    """One input: what stands in it and what stands beside it."""

    name: str
    label: str
    value: str = ""
    unit: str = ""
    units: list[str] = field(default_factory=list)
    help: str = ""
    fault: str = ""
    change: str = ""
    note: str = ""
    optional: bool = False
    holes: range = range(0)


def rows_of(form: RevisionForm, draft: Revision) -> dict[str, FieldRow]:
    """Every row by its field's name, in the order of the page."""
    changes = changes_of(form, draft)
    rows = [*_hole_rows(form, changes), *(_setting_row(form, quantity, changes) for quantity in QUANTITIES)]
    rows.append(FieldRow(
        "hit_lines", "Force at the tyres over time", _shown(form, "hit_lines"), _shown(form, "hit_lines_unit"),
        help="A line for each time: seconds, then the force of both rear tyres. 0.05 3200", fault=_fault(form, "hit_lines"),
        change=changes.get("hit_lines", ""),
    ))
    rows.append(FieldRow("reason", "What this changes, and why", _shown(form, "reason"), fault=_fault(form, "reason")))
    rows.append(FieldRow("notes", "Notes", _shown(form, "notes"), fault=_fault(form, "notes"), optional=True))
    return {row.name: row for row in rows}


def sections_of(rows: dict[str, FieldRow]) -> list[tuple[str, str, list[FieldRow]]]:
    """(key, title, rows) for the settings' sections."""
    return [
        (key, title, [rows[quantity.key] for quantity in QUANTITIES if quantity.section == key])
        for key, title in SECTIONS.items()
    ]


def changes_of(form: RevisionForm, draft: Revision) -> dict[str, str]:
    """Words such as `rev 3: 110 lb/in` for each field that differs from the parent."""
    parent = draft.parent
    if parent is None:
        return {}
    faulty = set()
    if form.is_bound:
        faulty = set(form.errors)
        form.readable.put_on(draft)
    found = [*hole_changes(parent, draft), *setting_changes(parent, draft)]
    return {change.key: f"{parent.label}: {change.before}" for change in found if change.key not in faulty}


def _hole_rows(form: RevisionForm, changes: dict[str, str]) -> Iterator[FieldRow]:
    for place, count in form.surveyed.hole_counts.items():
        yield FieldRow(
            place, BRACKETS[place], _shown(form, place), holes=range(1, count + 1), fault=_fault(form, place),
            change=changes.get(place, ""),
        )


def _setting_row(form: RevisionForm, quantity: Quantity, changes: dict[str, str]) -> FieldRow:
    unit = form.unit_of(quantity.key)
    return FieldRow(
        quantity.key, quantity.label, _shown(form, quantity.key), unit, units_for(quantity.key), quantity.help,
        _fault(form, quantity.key), changes.get(quantity.key, ""), _origin(form, quantity.key), quantity.optional,
    )


def _origin(form: RevisionForm, key: str) -> str:
    """What is known of where an unmeasured value comes from, so that it shows as provisional."""
    typical = form.surveyed.typical(key)
    if typical is None or not _shown(form, key):
        return ""
    same = _shown(form, key).strip() == str(typical["typed"]) and form.unit_of(key) == typical["unit"]
    if not same:
        return ""
    return "stated default" if BY_KEY[key].section == "hit" else "typical, nobody measured it"


def _shown(form: RevisionForm, name: str) -> str:
    value = form[name].value()
    return "" if value is None else str(value)


def _fault(form: RevisionForm, name: str) -> str:
    return " ".join(form.errors.get(name, [])) if form.is_bound else ""
