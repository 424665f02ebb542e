"""Every hole and setting of one revision as a page or a sheet lists it, with what it was on the parent."""

from __future__ import annotations

from dataclasses import dataclass

from shop.garage.quantities import BRACKETS, BRACKETS_OF
from shop.setups.differences import NOT_SET, as_typed, hole_changes, hole_text, setting_changes
from shop.setups.hit_lines import table_text
from shop.setups.models import Revision
from shop.setups.quantities import QUANTITIES, SECTIONS, quantity_of


@dataclass(frozen=True)
class SettingRow:
    key: str
    label: str
    text: str
    before: str = ""
    difference: str = ""
    note: str = ""

    @property
    def changed(self) -> bool:
        return bool(self.before)


@dataclass(frozen=True)
class SettingGroup:
    key: str
    title: str
    rows: list[SettingRow]


def groups_of(revision: Revision, parent: Revision | None = None) -> list[SettingGroup]:
    """Holes first, then each section that has something set; a value taken away since the parent stays listed."""
    changed = {}
    if parent is not None:
        changed = {change.key: change for change in [*hole_changes(parent, revision), *setting_changes(parent, revision)]}
    holes = [
        _row(place, BRACKETS[place], hole_text(revision.holes.get(place)), changed)
        for place in BRACKETS_OF[revision.survey.linkage]
    ]
    groups = [SettingGroup("holes", "Holes", holes)]
    for key, title in SECTIONS.items():
        keys = [quantity.key for quantity in QUANTITIES if quantity.section == key]
        rows = [row for name in keys if (row := _setting(name, revision, changed))]
        if key == "hit":
            rows = _hit(revision, rows, changed)
        if rows:
            groups.append(SettingGroup(key, title, rows))
    return groups


def _setting(key: str, revision: Revision, changed: dict) -> SettingRow | None:
    setting = revision.settings.get(key)
    if setting is None and key not in changed:
        return None
    label = quantity_of(key, setting["unit"] if setting else "").label
    note = ""
    if setting and "origin" in setting:
        note = "stated default" if quantity_of(key, setting["unit"]).section == "hit" else "typical, nobody measured it"
    return _row(key, label, as_typed(setting), changed, note)


def _hit(revision: Revision, rows: list[SettingRow], changed: dict) -> list[SettingRow]:
    if not revision.hit_table:
        return rows
    unit = revision.hit_lines_unit or "N"
    return [_row("hit_lines", "Force at the tyres over time", table_text(revision.hit_table, unit), changed)]


def _row(key: str, label: str, text: str, changed: dict, note: str = "") -> SettingRow:
    change = changed.get(key)
    if change is None:
        return SettingRow(key, label, text, note=note)
    return SettingRow(key, label, text, change.before or NOT_SET, change.difference, note)
