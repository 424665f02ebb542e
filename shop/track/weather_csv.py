"""A weather station's file: each reading's fate, before anything is written."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date, datetime, time, timedelta
from typing import Any

from shop.people.models import Shop
from shop.refusals import Refused
from shop.track.csv_table import Row, read_table, unit_symbol
from shop.track.import_passes import Fate, Plan
from shop.track.known_passes import DUPLICATE, NEW, REFUSED
from shop.track.models import Weekend
from shop.track.quantities import AIR, ALTIMETER, BY_KEY, STATION
from shop.units import Reading, ReadingError, default_unit, show

NAMES = {
    "day": "day", "date": "day", "time": "clock", "clock": "clock", "time of day": "clock", "timestamp": "at",
    "date time": "at", "datetime": "at", "date/time": "at",
    "temperature": "temperature", "air temperature": "temperature", "temp": "temperature",
    "pressure": "pressure", "air pressure": "pressure", "barometer": "pressure", "station pressure": "pressure",
    "altimeter": "altimeter", "altimeter setting": "altimeter", "sea level pressure": "altimeter",
    "humidity": "humidity", "relative humidity": "humidity", "rh": "humidity",
}
_DAYS = ("%Y-%m-%d", "%d.%m.%Y", "%Y/%m/%d")
_CLOCKS = ("%H:%M:%S", "%H:%M", "%I:%M %p", "%I:%M:%S %p")


def plan_weather(text: str, weekend: Weekend, shop: Shop, kind: str = STATION) -> Plan:
    """Each reading's fate. `kind` says what a column merely called pressure holds."""
    table = read_table(text, NAMES)
    units = _units(table.units, shop)
    if "altimeter" in table.columns:
        kind = ALTIMETER
    known = {reading.at for reading in weekend.weather.all()}
    fates = [_fate(row, weekend, units, kind, known) for row in table.rows]
    notes = [*table.notes, f"Units: {', '.join(f'{name} in {unit}' for name, unit in units.items())}."]
    notes.append(f"The pressure is taken as {'an altimeter setting' if kind == ALTIMETER else 'station pressure'}.")
    return Plan(fates, notes, table.header)


def _units(named: Mapping[str, str], shop: Shop) -> dict[str, str]:
    units = {}
    for key in AIR:
        named_unit = named.get(key) or (named.get("altimeter") if key == "pressure" else None)
        dimension = BY_KEY[key].dimension
        try:
            units[key] = unit_symbol(named_unit, dimension) if named_unit else BY_KEY[key].unit(shop.units)
        except ReadingError as error:
            raise Refused({"file": f"column “{key}”: {error}"}) from error
    return units


def _fate(row: Row, weekend: Weekend, units: Mapping[str, str], kind: str, known: set[datetime]) -> Fate:
    if row.fault:
        return Fate(row.line, REFUSED, row.fault, raw=row.raw)
    title = " ".join(row.cells.get(name, "") for name in ("at", "day", "clock")).strip()
    try:
        at = _when(row.cells, weekend)
        readings = {key: _reading(key, row.cells, units[key]) for key in AIR}
    except ReadingError as error:
        return Fate(row.line, REFUSED, str(error), title, raw=row.raw)
    figures = ", ".join(show(reading.si, reading.dimension, reading.unit) for reading in readings.values())
    if at in known:
        return Fate(row.line, DUPLICATE, "a reading of this time is already here", title, figures, raw=row.raw)
    known.add(at)
    return Fate(row.line, NEW, "", title, figures, _values(at, readings, kind), row.raw)


def _values(at: datetime, readings: Mapping[str, Reading], kind: str) -> dict[str, Any]:
    return {
        "day": at.date(), "clock": at.time(),
        "temperature": readings["temperature"].value, "temperature_unit": readings["temperature"].unit,
        "pressure": readings["pressure"].value, "pressure_unit": readings["pressure"].unit,
        "pressure_kind": kind, "humidity": readings["humidity"].value,
    }


def _reading(key: str, cells: Mapping[str, str], unit: str) -> Reading:
    typed = cells.get(key, "") or (cells.get("altimeter", "") if key == "pressure" else "")
    label = BY_KEY[key].label.lower()
    if not typed:
        raise ReadingError(f"no {label}")
    try:
        return BY_KEY[key].read(typed, unit)
    except ReadingError as error:
        raise ReadingError(f"{label}: {error}") from error


def _when(cells: Mapping[str, str], weekend: Weekend) -> datetime:
    at = _one_column(cells["at"]) if cells.get("at") else None
    if at is None:
        if not cells.get("clock"):
            raise ReadingError("no time of day")
        at = datetime.combine(_day(cells.get("day", ""), weekend), _clock(cells["clock"]))
    if not weekend.starts_on <= at.date() <= weekend.ends_on + timedelta(days=1):
        raise ReadingError(f"{at.date()} is outside this weekend, {weekend.days_text}")
    return at


def _one_column(text: str) -> datetime:
    try:
        # A zone, if any, is dropped: the page asks for the track's own clock.
        return datetime.fromisoformat(text).replace(tzinfo=None)
    except ValueError:
        raise ReadingError(f"“{text}” is not a time such as 2026-05-09 14:05") from None


def _day(text: str, weekend: Weekend) -> date:
    if not text:
        if weekend.starts_on == weekend.ends_on:
            return weekend.starts_on
        raise ReadingError("no day, and the weekend has more than one")
    for form in _DAYS:
        try:
            return datetime.strptime(text, form).date()
        except ValueError:
            continue
    raise ReadingError(f"“{text}” is not a day such as 2026-05-09")


def _clock(text: str) -> time:
    for form in _CLOCKS:
        try:
            return datetime.strptime(text, form).time()
        except ValueError:
            continue
    raise ReadingError(f"“{text}” is not a time of day such as 14:05")


def default_units(shop: Shop) -> str:
    """The units a column is read in when its header names none."""
    return ", ".join(f"{BY_KEY[key].label.lower()} in {default_unit(BY_KEY[key].dimension, shop.units)}" for key in AIR)
