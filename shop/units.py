"""Units a shop works in, and reading what a person typed with a tape in hand.

A value is kept as it was typed, in its own unit; SI exists only past the bridge.
Factors: exact definitions (international yard and pound, 1959; standard gravity).
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from fractions import Fraction

INCH = 0.0254
POUND = 0.45359237
GRAVITY = 9.80665
POUND_FORCE = POUND * GRAVITY
FOOT = 12 * INCH
RPM = math.pi / 30


class ReadingError(ValueError):
    """What was typed is not a reading; the message says what would be."""


@dataclass(frozen=True)
class Unit:
    """One unit: SI = (shown + offset) * factor."""

    symbol: str
    factor: float
    decimals: int
    offset: float = 0.0

    def to_si(self, shown: float) -> float:
        return (shown + self.offset) * self.factor

    def from_si(self, si: float) -> float:
        return si / self.factor - self.offset


def _units(*units: Unit) -> dict[str, Unit]:
    return {unit.symbol: unit for unit in units}


# First of each dimension: US customary; second: metric as shops use it.
DIMENSIONS: dict[str, dict[str, Unit]] = {
    "length": _units(
        Unit("in", INCH, 3), Unit("mm", 0.001, 1), Unit("ft", FOOT, 3), Unit("cm", 0.01, 2), Unit("m", 1.0, 4)
    ),
    "distance": _units(Unit("ft", FOOT, 1), Unit("m", 1.0, 2)),
    "mass": _units(Unit("lb", POUND, 1), Unit("kg", 1.0, 1)),
    "force": _units(Unit("lbf", POUND_FORCE, 0), Unit("N", 1.0, 0), Unit("kgf", GRAVITY, 1)),
    "rate": _units(Unit("lb/in", POUND_FORCE / INCH, 1), Unit("N/mm", 1000.0, 2)),
    "damping": _units(
        Unit("lb·s/in", POUND_FORCE / INCH, 2), Unit("N·s/mm", 1000.0, 3), Unit("N·s/m", 1.0, 0)
    ),
    "pressure": _units(Unit("psi", POUND_FORCE / INCH**2, 1), Unit("kPa", 1000.0, 1), Unit("bar", 1e5, 3)),
    "inertia": _units(Unit("lb·ft²", POUND * FOOT**2, 0), Unit("kg·m²", 1.0, 1)),
    "angle": _units(Unit("°", math.pi / 180, 2)),
    "time": _units(Unit("s", 1.0, 3), Unit("ms", 0.001, 0)),
    "speed": _units(Unit("mph", 1609.344 / 3600, 2), Unit("km/h", 1 / 3.6, 2), Unit("m/s", 1.0, 2)),
    "shaft_speed": _units(Unit("in/s", INCH, 1), Unit("mm/s", 0.001, 0)),
    "acceleration": _units(Unit("g", GRAVITY, 2), Unit("m/s²", 1.0, 2)),
    "torque": _units(Unit("lbf·ft", POUND_FORCE * FOOT, 0), Unit("N·m", 1.0, 0)),
    "temperature": _units(Unit("°F", 5 / 9, 1, 459.67), Unit("°C", 1.0, 1, 273.15)),
    "barometer": _units(Unit("inHg", 3386.389, 2), Unit("hPa", 100.0, 1)),
    "density": _units(Unit("lb/ft³", POUND / FOOT**3, 4), Unit("kg/m³", 1.0, 4)),
    "frequency": _units(Unit("Hz", 1.0, 2)),
    "rotation": _units(Unit("rpm", RPM, 0)),
    "percent": _units(Unit("%", 0.01, 1)),
    "ratio": _units(Unit("", 1.0, 3)),
    "turns": _units(Unit("turns", 1.0, 2)),
    "clicks": _units(Unit("clicks", 1.0, 0)),
    "slope": _units(Unit("", 1.0, 4)),
    "energy": _units(Unit("ft·lbf", POUND_FORCE * FOOT, 0), Unit("J", 1.0, 0)),
    "power": _units(Unit("hp", 550 * POUND_FORCE * FOOT, 0), Unit("kW", 1000.0, 1)),
    "stress": _units(Unit("ksi", 1000 * POUND_FORCE / INCH**2, 1), Unit("MPa", 1e6, 0)),
}

SYSTEMS = {"us": 0, "metric": 1}

# What people type for a unit, beside its symbol.
_SPELLINGS = {
    '"': "in", "inch": "in", "inches": "in", "lbs": "lb", "#": "lb", "lb/in.": "lb/in", "lbs/in": "lb/in",
    "lbf/in": "lb/in", "#/in": "lb/in", "deg": "°", "f": "°F", "c": "°C", "sec": "s", "n": "N",
    "n/mm": "N/mm", "kpa": "kPa", "lb*s/in": "lb·s/in", "lbs*s/in": "lb·s/in", "lb-s/in": "lb·s/in",
    "n*s/mm": "N·s/mm", "ns/mm": "N·s/mm", "n*s/m": "N·s/m", "ns/m": "N·s/m", "lb-ft2": "lb·ft²",
    "lb*ft2": "lb·ft²", "lb*ft^2": "lb·ft²", "kg*m2": "kg·m²", "kgm2": "kg·m²", "kg*m^2": "kg·m²",
    "lb-ft": "lbf·ft", "ft-lb": "lbf·ft", "nm": "N·m", "n*m": "N·m", "rpm": "rpm", "g's": "g", "gs": "g",
    "inhg": "inHg", "hpa": "hPa", "mbar": "hPa", "kph": "km/h", "'": "ft", "pct": "%", "click": "clicks",
}

_NUMBER = re.compile(
    r"""^\s*(?P<sign>[-+−]?)\s*
    (?:(?P<whole>\d+)[\s-]+(?P<num>\d+)\s*[/⁄]\s*(?P<den>\d+)   # 21 3/8
      |(?P<fnum>\d+)\s*[/⁄]\s*(?P<fden>\d+)                     # 3/8
      |(?P<thousands>\d{1,3}(?:,\d{3})+(?:\.\d*)?)              # 3,200
      |(?P<plain>\d+(?:\.\d*)?(?:[eE][-+]?\d+)?|\.\d+(?:[eE][-+]?\d+)?))
    \s*(?P<unit>[^\d\s,].*)?$""",
    re.VERBOSE,
)


@dataclass(frozen=True)
class Reading:
    """A number as it was typed, in the unit it was typed in."""

    typed: str
    value: float
    unit: str
    dimension: str

    @property
    def si(self) -> float:
        return unit_of(self.dimension, self.unit).to_si(self.value)


def unit_of(dimension: str, symbol: str) -> Unit:
    """The unit of that symbol; ReadingError names what the dimension allows."""
    units = DIMENSIONS[dimension]
    if symbol in units:
        return units[symbol]
    allowed = ", ".join(name or "no unit" for name in units)
    raise ReadingError(f"unit “{symbol}” does not fit here; use {allowed}")


def default_unit(dimension: str, system: str) -> str:
    """The symbol in which a shop that works in `system` reads a dimension."""
    symbols = list(DIMENSIONS[dimension])
    return symbols[min(SYSTEMS[system], len(symbols) - 1)]


def _fraction(top: str, bottom: str, typed: str) -> Fraction:
    if int(bottom) == 0:
        raise ReadingError(f"“{typed}” divides by zero; write a fraction such as 21 3/8")
    return Fraction(int(top), int(bottom))


def parse_reading(typed: str, unit: str, dimension: str) -> Reading:
    """Read `21 3/8`, `8.5`, `3,200` or `542 mm`; a unit typed with the number wins.

    Raises ReadingError with the words to show beside the field.
    """
    text = typed.strip()
    if len(text) > 60:
        raise ReadingError("too long to be a number; write it like 21 3/8, 8.5 or 542 mm")
    match = _NUMBER.match(text)
    if not match:
        if re.search(r"\b(nan|inf(inity)?)\b", text, re.IGNORECASE):
            raise ReadingError(f"“{text}” is not a finite number")
        if re.fullmatch(r"[-+−]?\d+,\d+.*", text):
            raise ReadingError(f"“{text}”: write the decimal mark as a point, like 8.5")
        raise ReadingError(f"“{text}” is not a number; write it like 21 3/8, 8.5 or 542 mm")
    symbol = unit
    if match["unit"]:
        raw = match["unit"].strip().rstrip(".")
        symbol = raw if raw in DIMENSIONS[dimension] else _SPELLINGS.get(raw.lower(), raw)
    unit_of(dimension, symbol)
    if match["whole"]:
        value = float(int(match["whole"]) + _fraction(match["num"], match["den"], text))
    elif match["fnum"]:
        value = float(_fraction(match["fnum"], match["fden"], text))
    else:
        value = float((match["thousands"] or match["plain"]).replace(",", ""))
    if match["sign"] in ("-", "−"):
        value = -value
    if not math.isfinite(value):
        raise ReadingError(f"“{text}” is not a finite number")
    return Reading(text, value, symbol, dimension)


def show(si: float | None, dimension: str, unit: str, *, decimals: int | None = None) -> str:
    """An SI value as the shop reads it, unit included; a dash when there is none."""
    if si is None or not math.isfinite(si):
        return "—"
    chosen = unit_of(dimension, unit)
    places = chosen.decimals if decimals is None else decimals
    shown = round(chosen.from_si(si), places) + 0.0
    number = f"{shown:,.{places}f}".replace("-", "−")
    return f"{number} {unit}".strip()
