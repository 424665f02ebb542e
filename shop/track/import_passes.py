"""The fate of each row of a file of passes, found before anything is written."""

from __future__ import annotations

import hashlib
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any

from shop.garage.models import Car
from shop.people.models import Shop
from shop.track.csv_table import Row, Table, guarded, read_table, written
from shop.track.forms import PassForm
from shop.track.known_passes import DUPLICATE, FILLS, NEW, REFUSED, KnownPasses
from shop.track.models import Pass, Weekend
from shop.track.pass_csv import HEADERS, NAMES, Reader
from shop.track.slip import COLUMNS, figure_text


@dataclass(frozen=True)
class Fate:
    """One row: what becomes of it, why, and how it reads. One that fills in `run` has only what it adds as `values`."""

    line: int
    fate: str
    words: str = ""
    title: str = ""
    figures: str = ""
    values: Mapping[str, Any] = field(default_factory=dict)
    raw: tuple[str, ...] = ()
    run: Pass | None = None


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
    def fills(self) -> list[Fate]:
        return self.of(FILLS)

    @property
    def to_write(self) -> int:
        return len(self.new) + len(self.fills)

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
    known = KnownPasses(weekend.passes.select_related("car", "revision"))
    fates = [_fate(row, table, weekend, shop, reader, known) for row in table.rows]
    return Plan(fates, table.notes, table.header)


def _fate(row: Row, table: Table, weekend: Weekend, shop: Shop, reader: Reader, known: KnownPasses) -> Fate:
    if row.fault:
        return Fate(row.line, REFUSED, row.fault, raw=row.raw)
    data, faults = reader.data(row.cells)
    form = PassForm(data, weekend=weekend, shop=shop)
    form.is_valid()
    for name, errors in form.errors.items():
        faults.setdefault(name, " ".join(map(str, errors)))
    title = f"{row.cells.get('car', '') or reader.car or ''} {row.cells.get('clock', '')}".strip()
    if faults:
        words = "; ".join(f"{HEADERS.get(name, '')}: {text}".lstrip(": ") for name, text in faults.items())
        return Fate(row.line, REFUSED, words, title, raw=row.raw)
    values = form.values
    figures = _figures(values)
    title = str(values["car"]) + (f", {values['clock']:%H:%M}" if values["clock"] else "")
    match = known.look_up(values, row.line)
    if match.fate != NEW:
        return Fate(row.line, match.fate, match.words, title, figures, match.fields, row.raw, match.run)
    words = " ".join([*_assumed(row, values, weekend), *form.doubts])
    return Fate(row.line, NEW, words, title, figures, values, row.raw)


def _assumed(row: Row, values: Mapping[str, Any], weekend: Weekend) -> list[str]:
    """What the row leaves open, and what is made of it."""
    words = ["no revision: not counted in comparisons."] if values["revision"] is None else []
    if not row.cells.get("day") and weekend.starts_on != weekend.ends_on:
        words.append(f"no day: taken as {values['day'].day} {values['day']:%b}.")
    return words


def _figures(values: Mapping[str, Any]) -> str:
    shown = [
        f"{column.label} {figure_text(column, values[column.field], values['speed_unit'])}"
        for column in COLUMNS if values[column.field] is not None
    ]
    return ", ".join(shown) or "no figures"
