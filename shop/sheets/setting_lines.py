"""What is to be set on the car, line by line, with what it was on the revision before."""

from __future__ import annotations

from dataclasses import dataclass

from shop.launches import bridge
from shop.setups.differences import NOT_SET
from shop.setups.models import Revision
from shop.setups.setting_rows import SettingRow, groups_of

LONGEST = 44  # characters of a value that fit in its cell


@dataclass(frozen=True)
class Line:
    """One thing to set; `was` is empty unless it changed."""

    label: str
    text: str
    was: str = ""
    note: str = ""

    @property
    def changed(self) -> bool:
        return bool(self.was)


def setting_groups(revision: Revision, units: str) -> list[tuple[str, list[Line]]]:
    """Holes, bars, springs and shocks, pressures, heights, ballast, hit: in the order in which one sets them."""
    groups = [(group.title, [_line(row) for row in group.rows]) for group in groups_of(revision, revision.parent)]
    return [groups[0], ("Bars, centre to centre", _bars(revision, units)), *groups[1:]]


def _line(row: SettingRow) -> Line:
    was = ""
    if row.changed:
        was = "newly set" if row.before == NOT_SET else f"was {_short(row.before)}"
    return Line(row.label, _short(row.text), was, "typical" if row.note.startswith("typical") else row.note)


def _short(text: str) -> str:
    return text if len(text) <= LONGEST else f"{text[: LONGEST - 1]}…"


def _bars(revision: Revision, units: str) -> list[Line]:
    """The bars are re-adjusted when a hole changes, so that the axle stays where the survey found it."""
    lines = []
    for row in bridge.bar_rows(revision, units):
        label = row.label.partition(", centre to centre")[0]
        way, _, change = row.note.partition(" than on ")[0].partition(" by ")
        lines.append(Line(label, row.text, f"{change} {way}".strip()))
    return lines
