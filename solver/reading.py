"""Reading one section of a car file: every value checked, every fault collected.

A `Section` hands out the keys it is asked for and remembers them, so that what
nobody asked for is refused at the end.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from itertools import pairwise
from typing import TYPE_CHECKING, Any

from solver.faults import Fault

if TYPE_CHECKING:
    from solver.car import Point, Table

MAX_TABLE = 40


class Section:
    """One JSON object of the car file, at a dotted path, with the faults found so far."""

    def __init__(self, data: Any, path: str, faults: list[Fault]) -> None:
        self.path, self.faults = path, faults
        self.asked: set[str] = set()
        self.data = data if isinstance(data, dict) else {}
        if not isinstance(data, dict):
            self.fault("", data, "must be an object with named values")

    def at(self, key: str) -> str:
        return f"{self.path}.{key}" if self.path and key else self.path or key

    def fault(self, key: str, value: Any, message: str) -> None:
        self.faults.append(Fault(self.at(key), value, message))

    def has(self, key: str) -> bool:
        """Whether the key is there and not null."""
        self.asked.add(key)
        return self.data.get(key) is not None

    def take(self, key: str, what: str) -> Any:
        """The raw value of a key that must be there, or None with a fault."""
        self.asked.add(key)
        if self.data.get(key) is None:
            self.fault(key, None, f"is missing: {what} is needed")
            return None
        return self.data[key]

    def number(self, key: str, low: float, high: float, unit: str, default: Any = None) -> float:
        """A finite number from `low` to `high`; `default` stands in for a missing key."""
        if default is not None and not self.has(key):
            if key in self.data:
                self.fault(key, None, f"must be a number from {low:g} to {high:g} {unit}".rstrip())
            return default
        value = self.take(key, f"a number from {low:g} to {high:g} {unit}".rstrip())
        if value is None:
            return math.nan
        return checked_number(value, self.at(key), low, high, unit, self.faults)

    def optional_number(self, key: str, low: float, high: float, unit: str) -> float | None:
        return self.number(key, low, high, unit) if self.has(key) else None

    def text(self, key: str, longest: float = 200) -> str:
        value = self.take(key, "a text")
        if value is not None and (not isinstance(value, str) or len(value) > longest):
            self.fault(key, value, f"must be a text of at most {longest} characters")
        return value if isinstance(value, str) else ""

    def choice(self, key: str, allowed: Sequence[str], default: Any = None) -> Any:
        if default is not None and not self.has(key):
            return default
        value = self.take(key, "one of " + ", ".join(allowed))
        if value is not None and value not in allowed:
            self.fault(key, value, "must be one of " + ", ".join(allowed))
        return value

    def point(self, key: str, reach: float = 10.0) -> Point:
        """A point [x, z] in metres, each within `reach` of the origin."""
        value = self.take(key, "a point [x, z] in metres")
        if value is None:
            return (math.nan, math.nan)
        if not isinstance(value, list | tuple) or len(value) != 2:
            self.fault(key, value, "must be a point [x, z] in metres")
            return (math.nan, math.nan)
        where = self.at(key)
        x, z = (
            checked_number(part, f"{where}.{axis}", -reach, reach, "m", self.faults)
            for part, axis in zip(value, "xz", strict=True)
        )
        return x, z

    def table(self, key: str, columns: tuple[str, str], limits: tuple, fewest: int = 2, most: int = MAX_TABLE) -> Table:
        """Pairs of numbers whose first column rises strictly.

        `columns` names the two columns with their units; `limits` holds
        (low, high) of each.
        """
        words = f"a table of [{columns[0]}, {columns[1]}] pairs"
        value = self.take(key, words)
        if value is None:
            return ()
        if not isinstance(value, list | tuple) or any(not isinstance(row, list | tuple) or len(row) != 2 for row in value):
            self.fault(key, value, f"must be {words}")
            return ()
        if not fewest <= len(value) <= most:
            self.fault(key, value, f"must have from {fewest} to {most} points")
            return ()
        rows = tuple(self._row(key, i, row, columns, limits) for i, row in enumerate(value))
        if any(not b[0] > a[0] for a, b in pairwise(rows)):
            self.fault(key, value, f"the {columns[0]} must rise from point to point")
        return rows

    def _row(self, key: str, i: int, row: Any, columns: tuple[str, str], limits: tuple) -> tuple:
        where = f"{self.at(key)}.{i}"
        return tuple(
            checked_number(cell, where, low, high, name.split(" in ")[-1], self.faults)
            for cell, name, (low, high) in zip(row, columns, limits, strict=True)
        )

    def section(self, key: str) -> Section | None:
        """The section under a key that must be there."""
        value = self.take(key, "this section")
        return Section({} if value is None else value, self.at(key), self.faults) if (value is not None) else None

    def optional_section(self, key: str) -> Section | None:
        return self.section(key) if self.has(key) else None

    def sections(self, key: str, fewest: int, most: int) -> list[Section]:
        """A list of sections."""
        value = self.take(key, "a list")
        if value is None:
            return []
        if not isinstance(value, list | tuple) or not fewest <= len(value) <= most:
            self.fault(key, value, f"must be a list of {fewest} to {most} entries")
            return []
        return [Section(v, f"{self.at(key)}.{i}", self.faults) for i, v in enumerate(value)]

    def refuse_the_rest(self) -> None:
        """Fault every key that nobody asked for."""
        for key in self.data:
            if key not in self.asked:
                allowed = ", ".join(sorted(self.asked))
                self.fault(str(key), self.data[key], f"is not in the format here; known: {allowed}")


def checked_number(value: Any, where: str, low: float, high: float, unit: str, faults: list[Fault]) -> float:
    """The value as a float; NaN with a fault when it is no number or out of range."""
    allowed = f"must be a number from {low:g} to {high:g} {unit}".rstrip()
    if isinstance(value, bool) or not isinstance(value, int | float):
        faults.append(Fault(where, value, allowed))
        return math.nan
    try:
        number = float(value)
    except OverflowError:
        number = math.inf
    if not low <= number <= high:
        faults.append(Fault(where, value, allowed))
        return math.nan
    return number
