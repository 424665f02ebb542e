"""Whether a row of a file is of a pass already here: the same, more of the same, or a contradiction."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from datetime import datetime, timedelta
from typing import Any

from shop.track.models import Pass
from shop.track.pass_csv import HEADERS
from shop.track.slip import COLUMNS, SPEEDS, TIMES, order_faults

NEW, DUPLICATE, FILLS, REFUSED = "new", "duplicate", "fills in", "refused"
# A pass entered by phone carries the minute it was typed, not that of the slip.
NEAR = timedelta(minutes=30)
_TEXTS = ("lane", "drive_notes", "staging_notes", "driver_saw", "crew_saw")
Values = Mapping[str, Any]
Key = tuple[object, ...]


@dataclass(frozen=True)
class Match:
    """What becomes of a row; `fields` are what it adds to `run`."""

    fate: str
    words: str = ""
    run: Pass | None = None
    fields: Values = field(default_factory=dict)


@dataclass(frozen=True)
class _Entry:
    values: Values
    where: str
    run: Pass | None


class KnownPasses:
    """The passes a row may repeat: those entered, and the rows above it."""

    def __init__(self, entered: Iterable[Pass]) -> None:
        self.by_key: dict[Key, _Entry] = {}
        self.entered: list[_Entry] = []
        self.filled: dict[int, int] = {}
        for run in entered:
            values = {column.field: getattr(run, column.field) for column in COLUMNS}
            values |= {"car": run.car, "number": run.number, "day": run.day, "clock": run.clock}
            entry = _Entry(values, f"pass {run.number}, entered before", run)
            self.entered.append(entry)
            self._note(entry)

    def look_up(self, values: Values, line: int) -> Match:
        """The row's match; a new row is remembered for the rows below it."""
        found = self._find(values)
        if found is None:
            self._note(_Entry(values, f"line {line}", None))
            return Match(NEW)
        entry, key = found
        match = _against(entry, values, key)
        if match.fate == FILLS and match.run:
            earlier = self.filled.setdefault(match.run.pk, line)
            if earlier != line:
                return Match(REFUSED, f"line {earlier} fills in {entry.where}, already")
        return match

    def _find(self, values: Values) -> tuple[_Entry, Key] | None:
        for key in _keys(values):
            if entry := self.by_key.get(key):
                return entry, key
        near = (entry for entry in self.entered if _likely_the_same(entry.values, values))
        entry = next(near, None)
        return (entry, ("near",)) if entry else None

    def _note(self, entry: _Entry) -> None:
        for key in _keys(entry.values):
            self.by_key.setdefault(key, entry)


def _slip(values: Values) -> Key:
    return tuple(values[column.field] for column in COLUMNS)


def _keys(values: Values) -> list[Key]:
    """What tells that two rows are of one pass: number, time of day, or a whole slip that agrees."""
    car, slip = values["car"].pk, _slip(values)
    keys: list[Key] = []
    if values["number"]:
        keys.append(("number", car, values["number"]))
    if values["clock"]:
        keys.append(("clock", car, values["day"], values["clock"]))
    if sum(value is not None for value in slip) >= 3:
        keys.append(("slip", car, *slip))
    elif not keys:
        # Nothing else names this pass, and the same time on the same day is more likely the same line.
        keys.append(("slip", car, values["day"], *slip))
    return keys


def _contradict(a: Values, b: Values) -> bool:
    pairs = [(a[column.field], b[column.field]) for column in COLUMNS]
    return any(one is not None and other is not None and one != other for one, other in pairs)


def _likely_the_same(entered: Values, row: Values) -> bool:
    """One time in common to the last digit, nothing that contradicts, and half an hour at most between them."""
    if entered["car"].pk != row["car"].pk or entered["day"] != row["day"] or not (entered["clock"] and row["clock"]):
        return False
    apart = abs(datetime.combine(row["day"], row["clock"]) - datetime.combine(entered["day"], entered["clock"]))
    shared = any(entered[c.field] is not None and entered[c.field] == row[c.field] for c in TIMES)
    return shared and apart <= NEAR and not _contradict(entered, row)


def _against(entry: _Entry, values: Values, key: Key) -> Match:
    if _contradict(entry.values, values):
        what = {"number": "pass number", "clock": "time of day"}.get(str(key[0]), "slip")
        words = f"the {what} is that of {entry.where}, with other figures; correct it there, or change it here"
        return Match(REFUSED, words)
    if entry.run is None:
        return Match(DUPLICATE, f"the same as {entry.where}")
    added = _additions(entry.run, values)
    if not added:
        return Match(DUPLICATE, f"the same as {entry.where}")
    merged = {column.field: added.get(column.field, entry.values[column.field]) for column in TIMES}
    if faults := order_faults(merged):
        return Match(REFUSED, f"together with {entry.where}: {'; '.join(faults.values())}")
    if "speed_unit" in added and any(entry.values[column.field] is not None for column in SPEEDS):
        return Match(REFUSED, f"the speeds of {entry.where}, are in {entry.run.speed_unit}")
    return Match(FILLS, f"adds to {entry.where}: {_named(added)}", entry.run, added)


def _additions(run: Pass, values: Values) -> dict[str, Any]:
    """What the row knows and the pass does not; nothing that is there is written over."""
    added = {
        column.field: values[column.field]
        for column in COLUMNS if getattr(run, column.field) is None and values[column.field] is not None
    }
    if any(column.field in added for column in SPEEDS) and run.speed_unit != values["speed_unit"]:
        added["speed_unit"] = values["speed_unit"]
    added |= {name: values[name] for name in _TEXTS if values[name] and not getattr(run, name)}
    if run.revision is None and values["revision"] is not None:
        added["revision"] = values["revision"]
    readings = {key: entry for key, entry in values["readings"].items() if key not in run.readings}
    if readings:
        added["readings"] = {**run.readings, **readings}
    if "pressure" in readings:
        added["pressure_kind"] = values["pressure_kind"]
    return added


def _named(added: Values) -> str:
    names = [HEADERS.get(name, name.replace("_", " ")) for name in added if name not in ("speed_unit", "pressure_kind")]
    return ", ".join(names)
