"""What a quantity is: its label, dimension, range and the help a person needs to measure it.

The lists themselves live where they are used: garage/quantities.py (what a survey
measures) and setups/quantities.py (what a revision sets).
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field

from shop.units import Reading, ReadingError, default_unit, parse_reading, show

Values = Mapping[str, float]


@dataclass(frozen=True)
class Quantity:
    """One number of the trade. Ranges and typical values are SI; people see their own unit.

    `typical` returns an SI value from the SI values already known, or None when those do
    not suffice; a quantity without one must be measured unless it is optional.
    """

    key: str
    label: str
    dimension: str
    least: float
    most: float
    tolerance: float
    help: str = ""
    typical: Callable[[Values], float | None] | None = None
    typical_tolerance: Callable[[Values], float] | None = None
    typical_source: str = "common practice, no source"
    optional: bool = False
    section: str = ""
    linkages: tuple[str, ...] = field(default=("four-link", "ladder-bar"))

    def read(self, typed: str, unit: str) -> Reading:
        """The reading, within this quantity's range, or ReadingError in the unit typed."""
        reading = parse_reading(typed, unit, self.dimension)
        # A tape read in fractions may fall a rounding error outside the range.
        slack = 1e-9 * max(abs(self.least), abs(self.most), 1.0)
        if not self.least - slack <= reading.si <= self.most + slack:
            low = show(self.least, self.dimension, reading.unit)
            high = show(self.most, self.dimension, reading.unit)
            raise ReadingError(f"{reading.typed} is outside {low} to {high}")
        return reading

    def unit(self, system: str) -> str:
        return default_unit(self.dimension, system)
