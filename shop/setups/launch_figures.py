"""The figures of two launches beside each other, in the shop's units. Says what differs, never which is better."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from shop.launches.bridge import LAUNCH_FIGURES
from shop.setups.differences import signed
from shop.units import default_unit, show

# What one looks at first; the rest unfolds below it.
FIRST = (
    "peak_rear_load", "first_peak_rear_load", "rear_load_dip", "mean_rear_load_250ms", "least_front_load", "front_lift_time",
    "front_lift_height", "peak_pitch", "peak_housing_angle", "rear_squat", "rear_separation", "peak_rear_spring_force",
    "upper_link_tension", "upper_link_compression", "lower_link_tension", "lower_link_compression", "peak_acceleration",
    "peak_grip_needed", "peak_grip_used", "peak_wheelie_bar_load",
)
_WHEN = "_time"


@dataclass(frozen=True)
class Pair:
    """One figure of launch a and launch b; a dash where it did not happen."""

    key: str
    label: str
    description: str
    a: str
    b: str
    difference: str = ""


def pairs_of(a: Mapping[str, Any], b: Mapping[str, Any], units: str) -> tuple[list[Pair], list[Pair]]:
    """(the first figures, the others); one that happened in neither launch is left out."""
    found = [
        _pair(key, a, b, units)
        for key in LAUNCH_FIGURES
        if not _is_when(key) and (a.get(key) is not None or b.get(key) is not None)
    ]
    first = sorted((pair for pair in found if pair.key in FIRST), key=lambda pair: FIRST.index(pair.key))
    return first, [pair for pair in found if pair.key not in FIRST]


def _is_when(key: str) -> bool:
    # A peak's time is shown with the peak.
    return key.endswith(_WHEN) and key.removesuffix(_WHEN) in LAUNCH_FIGURES


def _pair(key: str, a: Mapping[str, Any], b: Mapping[str, Any], units: str) -> Pair:
    quantity = LAUNCH_FIGURES[key]
    dimension, unit, decimals = _unit_of(key, quantity.dimension, units)
    difference = ""
    if a.get(key) is not None and b.get(key) is not None:
        texts = [show(values[key], dimension, unit, decimals=decimals) for values in (a, b)]
        if texts[0] != texts[1]:
            difference = signed(b[key] - a[key], dimension, unit, decimals=decimals)
    text_a, text_b = (_text(key, values, dimension, unit, decimals) for values in (a, b))
    return Pair(key, quantity.label, quantity.description, text_a, text_b, difference)


def _text(key: str, values: Mapping[str, Any], dimension: str, unit: str, decimals: int | None) -> str:
    text = show(values.get(key), dimension, unit, decimals=decimals)
    when = values.get(f"{key}{_WHEN}")
    if values.get(key) is None or when is None:
        return text
    return f"{text} at {show(when, 'time', 's')}"


def _unit_of(key: str, dimension: str, units: str) -> tuple[str, str, int | None]:
    """The house's dimension, the shop's unit and the decimals for one of the solver's dimensions."""
    if dimension == "coefficient":
        return "ratio", "", 2
    if dimension == "percent":  # the solver gives whole percents
        return "ratio", "", 1
    if dimension == "spin":
        return "rotation", "rpm", None
    if dimension == "speed" and "shock" in key:
        dimension = "shaft_speed"
    return dimension, default_unit(dimension, units), None
