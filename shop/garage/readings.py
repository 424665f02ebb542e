"""A survey as read from what was typed: measured values, typical ones for the blanks, holes; and what it checks."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from shop.garage.quantities import (
    BRACKETS,
    BRACKETS_OF,
    BY_KEY,
    HOLE_X,
    HOLE_Z,
    HOLES_AT_MOST,
    QUANTITIES,
)
from shop.quantities import Quantity
from shop.units import Reading, ReadingError, parse_reading, show, unit_of

# No hole is known worse than this and still worth writing down.
WIDEST = 0.05


@dataclass(frozen=True)
class Taken:
    """One value of a survey, whoever it comes from. `tolerance` is in `unit`."""

    key: str
    typed: str
    value: float
    unit: str
    tolerance: float
    origin: str

    @property
    def si(self) -> float:
        return unit_of(BY_KEY[self.key].dimension, self.unit).to_si(self.value)


@dataclass(frozen=True)
class Drilled:
    """The holes of one bracket as entered; `holes` are in `unit`, `row` what was typed for a row."""

    place: str
    entry: str
    unit: str
    tolerance: float
    holes: list[list[float]]
    row: dict[str, str] | None = None

    def si(self) -> list[tuple[float, float]]:
        unit = unit_of("length", self.unit)
        return [(unit.to_si(x), unit.to_si(z)) for x, z in self.holes]


@dataclass
class SurveyReading:
    """Everything a survey form holds, with a fault in words for each field that cannot be used."""

    linkage: str
    taken: dict[str, Taken] = field(default_factory=dict)
    brackets: dict[str, Drilled] = field(default_factory=dict)
    faults: dict[str, str] = field(default_factory=dict)

    def fault(self, name: str, words: str) -> None:
        self.faults.setdefault(name, words)

    def si(self) -> dict[str, float]:
        return {key: taken.si for key, taken in self.taken.items()}


def read_survey(typed: Mapping[str, str], linkage: str, system: str) -> SurveyReading:
    """Read a form's fields: `<key>`, `<key>_unit`, `<key>_tol`, and `<place>_...` for the brackets."""
    reading = SurveyReading(linkage)
    for quantity in QUANTITIES:
        if linkage in quantity.linkages:
            _take(reading, quantity, typed, system)
    for place in BRACKETS_OF[linkage]:
        _drill(reading, place, typed, system)
    if not reading.faults:
        _check(reading)
    return reading


def _take(reading: SurveyReading, quantity: Quantity, typed: Mapping[str, str], system: str) -> None:
    text = typed.get(quantity.key, "").strip()
    unit = typed.get(f"{quantity.key}_unit") or quantity.unit(system)
    if not text:
        _fill(reading, quantity, unit)
        return
    try:
        value = quantity.read(text, unit)
    except ReadingError as error:
        reading.fault(quantity.key, str(error))
        return
    tolerance = _tolerance(reading, quantity, typed, value)
    reading.taken[quantity.key] = Taken(
        quantity.key, value.typed, value.value, value.unit, tolerance, "measured"
    )


def _tolerance(reading: SurveyReading, quantity: Quantity, typed: Mapping[str, str], value: Reading) -> float:
    factor = unit_of(quantity.dimension, value.unit).factor
    text = typed.get(f"{quantity.key}_tol", "").strip().lstrip("±").strip()
    if not text:
        return float(f"{quantity.tolerance / factor:.3g}")
    try:
        read = parse_reading(text, value.unit, quantity.dimension)
    except ReadingError as error:
        reading.fault(f"{quantity.key}_tol", f"tolerance {error}")
        return 0.0
    width = read.value * unit_of(quantity.dimension, read.unit).factor / factor
    widest = (quantity.most - quantity.least) / factor
    if not 0 <= width <= widest:
        reading.fault(f"{quantity.key}_tol", f"a tolerance is between 0 and {widest:.4g} {value.unit}; “{text}” is not")
    return width


def _fill(reading: SurveyReading, quantity: Quantity, unit: str) -> None:
    """A blank field: the typical value where there is one, nothing where it may be blank, else a fault."""
    if quantity.section == "wheelie" and "wheelie_bar_x" not in reading.taken:
        return
    typical = quantity.typical(reading.si()) if quantity.typical else None
    if typical is None:
        if not quantity.optional and not (quantity.typical and reading.faults):
            reading.fault(quantity.key, f"{quantity.label} must be measured; it has no typical value")
        return
    wide = quantity.typical_tolerance(reading.si()) if quantity.typical_tolerance else quantity.tolerance
    chosen = unit_of(quantity.dimension, unit)
    value = float(f"{chosen.from_si(typical):.6g}")
    reading.taken[quantity.key] = Taken(
        quantity.key, f"{value:g}", value, unit, float(f"{wide / chosen.factor:.3g}"), "typical"
    )


def _coordinate(reading: SurveyReading, name: str, text: str, unit: str, window: tuple[float, float], what: str) -> float:
    try:
        read = parse_reading(text, unit, "length")
    except ReadingError as error:
        reading.fault(name, f"{what}: {error}" if text.strip() else f"{what}: fill it in")
        return 0.0
    if not window[0] <= read.si <= window[1]:
        low, high = show(window[0], "length", unit), show(window[1], "length", unit)
        reading.fault(name, f"{what}: {text.strip()} is outside {low} to {high}")
    return unit_of("length", unit).from_si(read.si)


def _drill(reading: SurveyReading, place: str, typed: Mapping[str, str], system: str) -> None:
    unit = typed.get(f"{place}_unit") or BY_KEY["wheelbase"].unit(system)
    try:
        factor = unit_of("length", unit).factor
    except ReadingError as error:
        reading.fault(f"{place}_unit", str(error))
        return
    text = typed.get(f"{place}_tol", "").strip().lstrip("±").strip()
    tolerance = float(f"{0.0015 / factor:.2g}")
    if text:
        try:
            width = parse_reading(text, unit, "length").si
            tolerance = float(f"{width / factor:.6g}")
            if not 0 <= width <= WIDEST:
                most = show(WIDEST, "length", unit)
                reading.fault(f"{place}_tol", f"a tolerance is between 0 and {most}; “{text}” is not")
        except ReadingError as error:
            reading.fault(f"{place}_tol", str(error))
    before = dict(reading.faults)
    if typed.get(f"{place}_entry", "row") == "each":
        row, holes = None, _each(reading, place, typed.get(f"{place}_lines", ""), unit)
    else:
        row, holes = _row(reading, place, typed, unit)
    if reading.faults == before:
        entry = "row" if row else "each"
        reading.brackets[place] = Drilled(place, entry, unit, tolerance, holes, row)


def _row(reading, place: str, typed: Mapping[str, str], unit: str) -> tuple[dict[str, str], list[list[float]]]:
    """First hole, last hole and count: the holes between are evenly spaced."""
    row = {name: typed.get(f"{place}_{name}", "").strip() for name in ("first_x", "first_z", "last_x", "last_z", "count")}
    ends = []
    for end, words in (("first", "first hole"), ("last", "last hole")):
        x = _coordinate(reading, f"{place}_{end}_x", row[f"{end}_x"], unit, HOLE_X, f"{words}, ahead of axle")
        z = _coordinate(reading, f"{place}_{end}_z", row[f"{end}_z"], unit, HOLE_Z, f"{words}, above ground")
        ends.append((x, z))
    if not row["count"].isdecimal() or len(row["count"]) > 3 or not 1 <= int(row["count"]) <= HOLES_AT_MOST:
        shown = row["count"][:20]
        reading.fault(f"{place}_count", f"a bracket has 1 to {HOLES_AT_MOST} holes; “{shown}” is not a count of them")
        return row, []
    count = int(row["count"])
    if count == 1 and ends[0] != ends[1]:
        reading.fault(f"{place}_count", "one hole, yet the first and the last differ")
    if count > 1 and ends[0] == ends[1]:
        reading.fault(f"{place}_last_z", f"{count} holes, yet the first and the last are the same point")
    steps = max(count - 1, 1)
    holes = [[ends[0][axis] + (ends[1][axis] - ends[0][axis]) * n / steps for axis in (0, 1)] for n in range(count)]
    return row, holes


def _each(reading: SurveyReading, place: str, text: str, unit: str) -> list[list[float]]:
    """Hole by hole: a line each, ahead of axle and above ground, separated by a comma or a semicolon."""
    name = f"{place}_lines"
    lines = [line for line in text.splitlines() if line.strip()]
    if not 1 <= len(lines) <= HOLES_AT_MOST:
        reading.fault(name, f"{BRACKETS[place]}: write 1 to {HOLES_AT_MOST} holes, a line each; there are {len(lines)}")
        return []
    holes = []
    for number, line in enumerate(lines, 1):
        parts = [part for part in line.replace(";", ",").replace("\t", ",").split(",") if part.strip()]
        if len(parts) != 2:
            words = "write ahead of axle, comma, above ground, like 21 1/2, 8"
            reading.fault(name, f"hole {number}: {words}; got “{line.strip()}”")
            return []
        x = _coordinate(reading, name, parts[0], unit, HOLE_X, f"hole {number}, ahead of axle")
        z = _coordinate(reading, name, parts[1], unit, HOLE_Z, f"hole {number}, above ground")
        holes.append([x, z])
    if len({(round(x, 6), round(z, 6)) for x, z in holes}) < len(holes):
        reading.fault(name, f"{BRACKETS[place]}: two holes are at the same point")
    return holes


def _check(reading: SurveyReading) -> None:
    """What only several values together can show to be wrong."""
    from shop.garage.checks import check_together

    for name, words in check_together(reading).items():
        reading.fault(name, words)


def check_ranges(reading: SurveyReading) -> None:
    """The form's ranges and checks for values that were not typed into it, such as a car file's."""
    for key, taken in reading.taken.items():
        quantity = BY_KEY[key]
        slack = 1e-9 * max(abs(quantity.least), abs(quantity.most), 1.0)
        if not quantity.least - slack <= taken.si <= quantity.most + slack:
            low, high = (show(bound, quantity.dimension, taken.unit) for bound in (quantity.least, quantity.most))
            reading.fault(key, f"{quantity.label}: {taken.typed} {taken.unit} is outside {low} to {high}")
    if not reading.faults:
        _check(reading)
