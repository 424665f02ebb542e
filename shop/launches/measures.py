"""In which unit a shop reads each figure and curve of a launch."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from shop.launches.bridge import LAUNCH_FIGURES, LAUNCH_HISTORIES, LAUNCH_STATICS
from shop.setups.differences import signed
from shop.units import default_unit, show, unit_of

# A ladder bar is solved as one bar: what the registry calls upper and lower are its two parts.
LADDER_WORDS = {"Upper bars": "Ladder bars, across at the pin", "Lower bars": "Ladder bars, along"}


@dataclass(frozen=True)
class Measure:
    """How one number of a launch is called and shown. `scale` brings the solver's number to the dimension's SI."""

    key: str
    label: str
    description: str
    dimension: str
    unit: str
    decimals: int | None = None
    scale: float = 1.0

    def value(self, si: float | None) -> float | None:
        """The number alone, in the shop's unit, with as many figures as a float of the solver is good for."""
        if si is None:
            return None
        return float(f"{unit_of(self.dimension, self.unit).from_si(si * self.scale):.7g}")

    def text(self, si: float | None) -> str:
        return show(None if si is None else si * self.scale, self.dimension, self.unit, decimals=self.decimals)

    def difference(self, step: float) -> str:
        return signed(step * self.scale, self.dimension, self.unit, decimals=self.decimals)


def measure(key: str, units: str, linkage: str = "four-link") -> Measure:
    """The measure of a figure or a curve of the registries; KeyError for another name."""
    known = LAUNCH_FIGURES.get(key) or LAUNCH_HISTORIES.get(key) or LAUNCH_STATICS[key]
    label, description = known.label, known.description
    if linkage == "ladder-bar":
        for words, own in LADDER_WORDS.items():
            label = label.replace(words, own)
    description = description.partition("; ladder bar:")[0]
    return Measure(key, label, description, *_reading(key, known.dimension, units))


def _reading(key: str, dimension: str, units: str) -> tuple[str, str, int | None, float]:
    """(the house's dimension, unit, decimals, scale) for one of the solver's dimensions."""
    if dimension == "coefficient":
        return "ratio", "", 2, 1.0
    if dimension == "percent":  # the solver gives whole percents, the house's percent is a share
        return "percent", "%", 1, 0.01
    if dimension == "ratio":
        return "percent", "%", 1, 1.0
    if dimension == "spin":
        return "rotation", "rpm", None, 1.0
    if dimension == "speed" and key not in ("speed", "end_speed"):
        dimension = "shaft_speed"
    if dimension == "length" and key in ("distance", "end_distance"):
        dimension = "distance"
    return dimension, default_unit(dimension, units), None, 1.0


def measures(registry: Mapping[str, Any], units: str, linkage: str) -> dict[str, Measure]:
    return {key: measure(key, units, linkage) for key in registry}
