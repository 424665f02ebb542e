"""The fate of each row of a file of passes, found before anything is written."""

from __future__ import annotations

import hashlib
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from typing import Any

from shop.garage.models import Car
from shop.people.models import Shop
from shop.track.csv_table import Row, Table, guarded, read_table, written
from shop.track.forms import PassForm
from shop.track.models import Pass, Weekend
from shop.track.pass_csv import HEADERS, NAMES, Reader
from shop.track.slip import COLUMNS, figure_text

NEW, DUPLICATE, REFUSED = "new", "duplicate", "refused"
Key = tuple[object, ...]


@dataclass(frozen=True)
class Fate:
    """One row: what becomes of it, why, and how it reads."""

    line: int
    fate: str
    words: str = ""
    title: str = ""
    figures: str = ""
    values: Mapping[str, Any] = field(default_factory=dict)
    raw: tuple[str, ...] = ()


@dataclass(frozen=True)
class Plan:
    """What importing a file would do."""

    fates: list[Fate]
    notes: list[str]
    header: list[str]

    def of(self, fate: str) -> list[Fate]:
        return [row for row in self.fates if row.fate == fate]

    @property
    def new(self) -> list[Fate]:
        return self.of(NEW)

    @property
    def duplicates(self) -> list[Fate]:
        return self.of(DUPLICATE)

    @property
    def refused(self) -> list[Fate]:
        return self.of(REFUSED)

    @property
    def seal(self) -> str:
        """Stands for the fates as shown: confirming a file whose fates changed meanwhile shows them anew."""
        said = "|".join(f"{row.line}{row.fate}{row.words}" for row in self.fates)
        return hashlib.sha256(said.encode()).hexdigest()[:16]

    def left_over(self) -> str:
        """The refused rows as a file again, each with its reason, to mend and send once more."""
        rows = [[*row.raw, guarded(row.words)] for row in self.refused]
        return written([*self.header, "refused because"], rows)


def plan_passes(text: str, weekend: Weekend, shop: Shop, car: Car | None = None) -> Plan:
    """Each row's fate. Refused when the file as a whole cannot be read."""
    table = read_table(text, NAMES)
    reader = Reader(shop, table.units, car)
    known = Known(weekend.passes.select_related("car"))
    fates = [_fate(row, table, weekend, shop, reader, known) for row in table.rows]
    return Plan(fates, table.notes, table.header)


def _fate(row: Row, table: Table, weekend: Weekend, shop: Shop, reader: Reader, known: Known) -> Fate:
    if row.fault:
        return Fate(row.line, REFUSED, row.fault, raw=row.raw)
    data, faults = reader.data(row.cells)
    form = PassForm(data, weekend=weekend, shop=shop)
    form.is_valid()
    for name, errors in form.errors.items():
        faults.setdefault(name, " ".join(errors))
    title = f"{row.cells.get('car', '') or reader.car or ''} {row.cells.get('clock', '')}".strip()
    if faults:
        words = "; ".join(f"{HEADERS.get(name, '')}: {text}".lstrip(": ") for name, text in faults.items())
        return Fate(row.line, REFUSED, words, title, raw=row.raw)
    values = form.values
    figures = _figures(values)
    title = str(values["car"]) + (f", {values['clock']:%H:%M}" if values["clock"] else "")
    fate, words = known.look_up(values, row.line)
    if fate == NEW:
        missing = "no revision: not counted in comparisons" if values["revision"] is None else ""
        words = " ".join([*([missing + "."] if missing else []), *form.doubts])
    return Fate(row.line, fate, words, title, figures, values, row.raw)


def _figures(values: Mapping[str, Any]) -> str:
    shown = [
        f"{column.label} {figure_text(column, values[column.field], values['speed_unit'])}"
        for column in COLUMNS if values[column.field] is not None
    ]
    return ", ".join(shown) or "no figures"


class Known:
    """The passes a row may repeat: those entered, and the rows above it."""

    def __init__(self, entered: Iterable[Pass]) -> None:
        self.slips: dict[Key, tuple[Key, str]] = {}
        for run in entered:
            values = {column.field: getattr(run, column.field) for column in COLUMNS}
            values |= {"car": run.car, "number": run.number, "day": run.day, "clock": run.clock}
            self._note(values, f"pass {run.number}, entered before")

    def look_up(self, values: Mapping[str, Any], line: int) -> tuple[str, str]:
        """The row's fate and why; a new one is remembered for the rows below it."""
        slip = _slip(values)
        for key in _keys(values):
            if key not in self.slips:
                continue
            theirs, where = self.slips[key]
            if theirs == slip:
                return DUPLICATE, f"the same as {where}"
            what = "pass number" if key[0] == "number" else "time of day"
            return REFUSED, f"the {what} is that of {where}, with other figures; correct it there, or change it here"
        self._note(values, f"line {line}")
        return NEW, ""

    def _note(self, values: Mapping[str, Any], where: str) -> None:
        for key in _keys(values):
            self.slips.setdefault(key, (_slip(values), where))


def _slip(values: Mapping[str, Any]) -> Key:
    return tuple(values[column.field] for column in COLUMNS)


def _keys(values: Mapping[str, Any]) -> list[Key]:
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
