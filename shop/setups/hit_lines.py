"""The hit as a table: one line for each time, with the force at the tyres, both together."""

from __future__ import annotations

import re

from shop.setups.quantities import HIT_FORCE
from shop.units import ReadingError, parse_reading, show

LINES_AT_MOST = 200
LAST_TIME = 10.0

_LINE = re.compile(r"^\s*(?P<time>[-+]?[\d.]+\s*(?:ms\b|s\b)?)\s*[\s,;:]\s*(?P<force>\S.*)$", re.IGNORECASE)


def parse_hit_lines(typed: str, force_unit: str) -> list[list[float]]:
    """[[seconds, newtons], ...] of lines such as `0.05 3,200` or `50 ms; 14,200 N`.

    Raises ReadingError, naming the line.
    """
    table: list[list[float]] = []
    lines = [line for line in typed.splitlines() if line.strip()]
    if len(lines) > LINES_AT_MOST:
        raise ReadingError(f"{len(lines)} lines; at most {LINES_AT_MOST}")
    for number, line in enumerate(lines, start=1):
        try:
            table.append(_read_line(line, force_unit))
        except ReadingError as error:
            raise ReadingError(f"line {number}: {error}") from error
        if number > 1 and table[-1][0] <= table[-2][0]:
            raise ReadingError(f"line {number}: the time must be later than the line before it")
    if len(table) < 2:
        raise ReadingError("write at least two lines, each a time and a force, such as 0.05 3200")
    if not any(force for _, force in table):
        raise ReadingError("every force is zero: the car would stand still")
    return table


def _read_line(line: str, force_unit: str) -> list[float]:
    match = _LINE.match(line)
    if not match:
        raise ReadingError(f"“{line.strip()[:40]}” is not a time and a force, such as 0.05 3200")
    time = parse_reading(match["time"], "s", "time")
    if not 0 <= time.si <= LAST_TIME:
        raise ReadingError(f"time {time.typed} is outside 0 to {LAST_TIME:g} s")
    force = parse_reading(match["force"], force_unit, "force")
    if not 0 <= force.si <= HIT_FORCE.most:
        most = show(HIT_FORCE.most, "force", force.unit)
        raise ReadingError(f"force {force.typed} is outside 0 to {most}")
    return [time.si, force.si]


def table_text(table: list[list[float]], force_unit: str) -> str:
    """`0 s 0 lbf, 0.05 s 3,200 lbf`: the whole table in a line."""
    return ", ".join(f"{time:g} s {show(force, 'force', force_unit)}" for time, force in table)
