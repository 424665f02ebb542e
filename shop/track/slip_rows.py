"""Passes as a page shows them: the slip as it was, with the corrected figures beside it."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from decimal import Decimal

from shop.launches import bridge
from shop.track.models import Pass, WeatherReading, Weekend
from shop.track.slip import COLUMNS, Column, figure_text
from shop.track.weather import AirText, air_of, air_text


@dataclass(frozen=True)
class Cell:
    """One figure of one pass; `raw` is empty where the slip shows none."""

    label: str
    raw: str = ""
    corrected: str = ""
    bare: str = ""  # as run, without its unit, for a column whose header has it
    bare_corrected: str = ""


@dataclass(frozen=True)
class SlipRow:
    """A pass with everything of it as finished text."""

    run: Pass
    title: str
    setup: str
    state: str
    cells: tuple[Cell, ...]
    air: AirText
    doubts: tuple[str, ...] = ()

    @property
    def shown(self) -> list[Cell]:
        return [cell for cell in self.cells if cell.raw]


def slip_rows(passes: Iterable[Pass], weekend: Weekend, units: str) -> list[SlipRow]:
    """Rows of a weekend's passes (with car and revision), in the order given."""
    station = list(weekend.weather.all())
    return [slip_row(run, station, units) for run in passes]


def slip_row(run: Pass, station: list[WeatherReading], units: str) -> SlipRow:
    found = air_of(run, station)
    factor = found.air.factor if found.air else None
    cells = tuple(_cell(run, column, factor) for column in COLUMNS)
    return SlipRow(
        run, _title(run), run.revision.label if run.revision else "no revision: not counted in comparisons",
        _state(run), cells, air_text(found, units),
    )


def _cell(run: Pass, column: Column, factor: float | None) -> Cell:
    value = getattr(run, column.field)
    if value is None:
        return Cell(column.label)
    raw = _both(column, value, run)
    if factor is None or column.kind == "reaction":
        return Cell(column.label, raw[0], "", raw[1])
    standard = _both(column, bridge.corrected(float(value), factor, speed=column.kind == "speed"), run)
    return Cell(column.label, raw[0], standard[0], raw[1], standard[1])


def _both(column: Column, value: Decimal | float, run: Pass) -> tuple[str, str]:
    return figure_text(column, value, run.speed_unit), figure_text(column, value, unit=False)


def _title(run: Pass) -> str:
    return f"Pass {run.number}, {when_text(run)}"


def when_text(run: Pass) -> str:
    return f"{run.day.day} {run.day:%b}" + (f" {run.clock:%H:%M}" if run.clock else "")


def _state(run: Pass) -> str:
    if not run.aborted:
        return ""
    why = f": {run.abort_reason}" if run.abort_reason else ""
    counts = f"; counts to {dict(Pass.GOOD_TO)[run.good_to]}" if run.good_to else "; not counted in comparisons"
    return f"aborted{why}{counts}"
