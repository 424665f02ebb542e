"""The time slip: its columns in the order in which the car passes them, read from what was typed."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from itertools import combinations

from shop.units import ReadingError, parse_reading


@dataclass(frozen=True)
class Column:
    """One figure of a slip. `mark` is the distance by its name in the trade."""

    field: str
    label: str
    mark: str = ""
    kind: str = "time"


REACTION = Column("reaction", "Reaction", kind="reaction")
TIMES = (
    Column("time_60", "60 ft", "60 ft"),
    Column("time_330", "330 ft", "330 ft"),
    Column("time_660", "660 ft", "660 ft"),
    Column("time_1000", "1000 ft", "1000 ft"),
    Column("time_1320", "1320 ft", "1320 ft"),
)
SPEEDS = (
    Column("speed_660", "Speed at 660 ft", "660 ft", "speed"),
    Column("speed_1000", "Speed at 1000 ft", "1000 ft", "speed"),
    Column("speed_1320", "Speed at 1320 ft", "1320 ft", "speed"),
)
COLUMNS = (
    REACTION, TIMES[0], TIMES[1], TIMES[2], SPEEDS[0], TIMES[3], SPEEDS[1], TIMES[4], SPEEDS[2],
)
BY_FIELD = {column.field: column for column in COLUMNS}
SPEED_UNITS = ("mph", "km/h")

# What a slip can hold at all; whether its figures fit each other is asked separately.
LONGEST_TIME = Decimal(60)
FASTEST = {"mph": Decimal(450), "km/h": Decimal(725)}
REACTION_RANGE = (Decimal(-5), Decimal(30))


def read_figure(column: Column, typed: str, speed_unit: str) -> Decimal:
    """The figure as the slip prints it; ReadingError says what is allowed."""
    text = typed.strip()
    # 1,312 is a decimal comma here: no slip shows a thousand seconds.
    if "," in text:
        raise ReadingError(f"“{text}”: write the decimal mark as a point, like 1.312")
    if column.kind == "speed":
        reading = parse_reading(text, speed_unit, "speed")
        if reading.unit != speed_unit:
            raise ReadingError(f"“{text}”: the speeds of this slip are in {speed_unit}; choose {reading.unit} for the slip")
        value = _decimal(reading.value, 2)
        if not 0 < value <= FASTEST[speed_unit]:
            raise ReadingError(f"{text} is outside 0 to {FASTEST[speed_unit]} {speed_unit}")
        return value
    value = _decimal(parse_reading(text, "s", "time").si, 4)
    if column.kind == "reaction":
        if not REACTION_RANGE[0] <= value <= REACTION_RANGE[1]:
            raise ReadingError(f"{text} is outside {REACTION_RANGE[0]} to {REACTION_RANGE[1]} s")
    elif not 0 < value <= LONGEST_TIME:
        raise ReadingError(f"{text} is outside 0 to {LONGEST_TIME} s")
    return value


def _decimal(value: float, places: int) -> Decimal:
    # Through the shortest text of the float, so that 1.312 stays 1.312.
    return round(Decimal(repr(value)), places)


def order_faults(times: Mapping[str, Decimal | None]) -> dict[str, str]:
    """Field -> words for each time that is not later than one before it on the track."""
    faults: dict[str, str] = {}
    for earlier, later in combinations(TIMES, 2):
        first, second = times.get(earlier.field), times.get(later.field)
        if first is None or second is None or first < second:
            continue
        faults[later.field] = (
            f"{figure_text(later, second)} to {later.mark} cannot be: the car was already at {earlier.mark}"
            f" after {figure_text(earlier, first)}"
        )
    return faults


def figure_text(column: Column, value: Decimal | float | None, speed_unit: str = "mph", *, unit: bool = True) -> str:
    """A figure as slips print it: three places of a second (four where typed), two of a speed."""
    if value is None:
        return "—"
    if column.kind == "speed":
        text, symbol = f"{value:.2f}", speed_unit
    else:
        fine = f"{value:.4f}"
        text, symbol = (f"{value:.3f}" if fine.endswith("0") or isinstance(value, float) else fine), "s"
    text = text.replace("-", "−")
    return f"{text} {symbol}" if unit else text
