"""Passes as CSV: the headers, a pass as a row, a row as what the pass form takes."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

from shop.garage.models import Car
from shop.people.models import Shop
from shop.refusals import Refused
from shop.setups.models import Revision
from shop.track.csv_table import guarded, unit_symbol, written
from shop.track.forms import clock_text
from shop.track.models import Pass
from shop.track.on_the_car import NONE
from shop.track.quantities import ALTIMETER, PRESSURE_KINDS, QUANTITIES, STATION
from shop.track.slip import COLUMNS, SPEED_UNITS, SPEEDS, TIMES, figure_text
from shop.units import ReadingError, default_unit

TEXT_COLUMNS = {
    "drive_notes": "clutch or converter", "staging_notes": "staging",
    "driver_saw": "driver saw", "crew_saw": "crew saw", "abort_reason": "aborted because",
}
PLAIN = {
    "car": "car", "number": "pass", "day": "day", "clock": "time", "lane": "lane", "revision": "revision",
    "aborted": "aborted", "good_to": "counts to", "pressure_kind": "pressure kind",
}
HEADERS = {
    **PLAIN,
    **{column.field: column.label.lower() for column in COLUMNS},
    **{quantity.key: quantity.label.lower() for quantity in QUANTITIES},
    **TEXT_COLUMNS,
}
# Header spelling -> field. The headers above, and what people write instead.
NAMES = {
    **{header: field for field, header in HEADERS.items()},
    "number": "number", "no": "number", "run": "number", "date": "day", "clock": "clock", "time of day": "clock",
    "rev": "revision", "rt": "reaction", "reaction time": "reaction", "launch rpm": "launch_rpm",
    "temperature": "temperature", "pressure": "pressure", "humidity": "humidity",
    "clutch": "drive_notes", "converter": "drive_notes", "notes": "crew_saw",
    **{f"{column.field[5:]}{mark}": column.field for column in TIMES for mark in ("", "ft", "'", " foot")},
    **{f"{column.field[6:]}{end}": column.field for column in SPEEDS for end in (" mph", " ft mph", " speed", " ft speed")},
}
MARKS = {mark: field for field, mark in Pass.GOOD_TO}
_YES, _NO = {"yes", "y", "true", "1", "x", "aborted"}, {"", "no", "n", "false", "0"}


def header_of(system: str) -> list[str]:
    """The header line, with each column's unit."""
    units = {column.field: _slip_unit(column.kind, system) for column in COLUMNS}
    units |= {quantity.key: quantity.unit(system) for quantity in QUANTITIES}
    return [f"{header} ({units[field]})" if units.get(field) else header for field, header in HEADERS.items()]


def _slip_unit(kind: str, system: str) -> str:
    return ("km/h" if system == "metric" else "mph") if kind == "speed" else "s"


def write_passes(passes: Iterable[Pass], system: str) -> str:
    return written(header_of(system), [_row_of(run, system) for run in passes])


def _row_of(run: Pass, system: str) -> list[str]:
    cells: dict[str, str] = {
        "car": guarded(str(run.car)), "number": str(run.number), "day": run.day.isoformat(), "clock": clock_text(run),
        "lane": run.lane, "revision": str(run.revision.number) if run.revision else "",
        "aborted": "yes" if run.aborted else "", "good_to": dict(Pass.GOOD_TO).get(run.good_to, ""),
        "pressure_kind": run.pressure_kind if "pressure" in run.readings else "",
    }
    for column in COLUMNS:
        value = getattr(run, column.field)
        text = "" if value is None else figure_text(column, value, unit=False).replace("−", "-")
        # The header names one unit; a slip in the other one says so in its cell.
        foreign = text and column.kind == "speed" and run.speed_unit != _slip_unit("speed", system)
        cells[column.field] = f"{text} {run.speed_unit}" if foreign else text
    for quantity in QUANTITIES:
        entry = run.readings.get(quantity.key)
        cells[quantity.key] = "" if not entry else _cell(entry, quantity.unit(system))
    cells |= {field: guarded(getattr(run, field)) for field in TEXT_COLUMNS}
    return [cells[field] for field in HEADERS]


def _cell(entry: Mapping[str, Any], unit: str) -> str:
    typed = str(entry["typed"])
    # What was typed with its own unit stays as it is; a bare number gets its unit where the header's is another.
    bare = typed[-1:].isdigit() or typed.endswith(".")
    return f"{typed} {entry['unit']}" if bare and entry["unit"] != unit else typed


def _known_units(units: Mapping[str, str]) -> dict[str, str]:
    """The units the headers name, by their symbols; Refused when one does not fit, as no row can be read then."""
    dimensions = {q.key: q.dimension for q in QUANTITIES}
    dimensions |= {column.field: "speed" if column.kind == "speed" else "time" for column in COLUMNS}
    known = {}
    for field in units.keys() & dimensions.keys():
        try:
            known[field] = unit_symbol(units[field], dimensions[field])
        except ReadingError as error:
            raise Refused({"file": f"column “{HEADERS[field]}”: {error}"}) from error
    return known


class Reader:
    """Turns rows into the pass form's data; knows the cars and revisions of the shop once, not per row."""

    def __init__(self, shop: Shop, units: Mapping[str, str], car: Car | None) -> None:
        self.shop, self.units, self.car = shop, _known_units(units), car
        self.cars: dict[str, set[Car]] = {}
        for each in Car.objects.all():
            for name in {each.name, str(each), each.racing_number} - {""}:
                self.cars.setdefault(name.lower(), set()).add(each)
        self.revisions = {
            (car_id, number): pk
            for pk, car_id, number in Revision.objects.filter(number__isnull=False).values_list("pk", "car_id", "number")
        }

    def data(self, cells: Mapping[str, str]) -> tuple[dict[str, str], dict[str, str]]:
        """Form data, and faults by field for what the form itself cannot know."""
        data = {field: cell for field, cell in cells.items() if cell}
        faults: dict[str, str] = {}
        car, faults["car"] = self._car(cells.get("car", ""))
        data["car"] = str(car.pk) if car else ""
        data["revision"], faults["revision"] = self._revision(car, cells.get("revision", ""))
        data["lane"] = {"l": "left", "r": "right"}.get(cells.get("lane", "").lower(), cells.get("lane", "").lower())
        data["aborted"], faults["aborted"] = self._yes(cells.get("aborted", ""))
        kind, faults["pressure_kind"] = self._kind(cells.get("pressure_kind", ""))
        data["pressure_kind"] = kind
        good_to = cells.get("good_to", "")
        data["good_to"] = MARKS.get(good_to, MARKS.get(f"{good_to} ft", good_to))
        self._speeds(cells, data, faults)
        for column in COLUMNS:
            if column.kind != "speed" and column.field in data:
                data[column.field] = self._seconds(column.field, data[column.field])
        for quantity in QUANTITIES:
            data[f"{quantity.key}_unit"] = self.units.get(quantity.key) or quantity.unit(self.shop.units)
        return data, {field: words for field, words in faults.items() if words}

    def _seconds(self, field: str, cell: str) -> str:
        unit = self.units.get(field, "s")
        return f"{cell} {unit}" if unit != "s" and cell[-1:].isdigit() else cell

    def _car(self, typed: str) -> tuple[Car | None, str]:
        if not typed:
            return self.car, "" if self.car else "no car; give its name or racing number"
        found = self.cars.get(typed.lower(), set())
        if len(found) == 1:
            return next(iter(found)), ""
        if found:
            return None, f"“{typed}” fits {len(found)} cars; write name and racing number"
        return None, f"no car here is called “{typed}”"

    def _revision(self, car: Car | None, typed: str) -> tuple[str, str]:
        text = typed.lower().removeprefix("revision").removeprefix("rev").strip(" .")
        if car is None or text in ("", "none", "-"):
            return NONE, ""
        pk = self.revisions.get((car.pk, int(text))) if text.isdecimal() and len(text) < 10 else None
        if pk is None:
            return NONE, f"{car} has no issued revision “{typed}”"
        return str(pk), ""

    def _yes(self, typed: str) -> tuple[str, str]:
        text = typed.lower()
        if text in _YES | _NO:
            return ("on" if text in _YES else ""), ""
        return "", f"“{typed}”: write yes or leave it empty"

    def _kind(self, typed: str) -> tuple[str, str]:
        text = typed.lower()
        if text in ("", STATION, ALTIMETER):
            return text or STATION, ""
        return STATION, f"“{typed}”: write {' or '.join(kind for kind, _ in PRESSURE_KINDS)}"

    def _speeds(self, cells: Mapping[str, str], data: dict[str, str], faults: dict[str, str]) -> None:
        """One unit for the slip: what the cells name, else the header, else the shop's."""
        fields = [column.field for column in COLUMNS if column.kind == "speed" and cells.get(column.field)]
        named = {unit for field in fields for unit in SPEED_UNITS if cells[field].endswith(unit)}
        headers = {self.units[field] for field in fields if field in self.units}
        bare = [field for field in fields if not cells[field].endswith(SPEED_UNITS)]
        if len(named | headers if bare else named) > 1:
            faults[fields[0]] = "the speeds of one slip are in two units"
            return
        unit = next(iter(named or headers), default_unit("speed", self.shop.units))
        if unit not in SPEED_UNITS:
            faults[fields[0]] = f"speeds are read in {' or '.join(SPEED_UNITS)}, not {unit}"
            return
        data["speed_unit"] = unit
