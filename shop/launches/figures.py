"""The figures, natural frequencies and events of one launch as finished text."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from shop.launches.bridge import LAUNCH_FIGURES
from shop.launches.measures import measure
from shop.units import default_unit, show

WHEN = "_time"

# Headings in the order in which one follows a launch; a figure under none of them comes last.
GROUPS = {
    "Tyres on the ground": ("peak_rear_load", "first_peak_rear_load", "rear_load_dip", "mean_rear_load_100ms",
                            "mean_rear_load_250ms", "mean_rear_load_500ms", "least_rear_load", "rear_unload_time",
                            "peak_front_load", "least_front_load", "peak_grip_needed", "peak_grip_used"),
    "Front lift": ("front_lift_time", "front_lift_height", "front_landing_time", "wheelie_bar_time",
                   "peak_wheelie_bar_load"),
    "Body and pinion": ("peak_pitch", "front_rise", "rear_rise", "rear_drop", "peak_housing_angle", "least_housing_angle",
                        "peak_acceleration"),
    "Rear springs and shocks": ("rear_squat", "rear_separation", "peak_rear_spring_force", "least_rear_spring_force",
                                "peak_rear_shock_force", "least_rear_shock_force", "rear_shock_compression_speed",
                                "rear_shock_rebound_speed", "rear_bump_travel_left", "rear_droop_travel_left",
                                "rear_bottoming_time", "rear_topping_time", "peak_rear_bump_stop_force",
                                "peak_rear_droop_stop_force"),
    "Front springs and shocks": ("front_bump", "front_droop", "peak_front_spring_force", "least_front_spring_force",
                                 "front_bump_travel_left", "front_droop_travel_left", "front_bottoming_time",
                                 "front_topping_time", "peak_front_bump_stop_force", "peak_front_droop_stop_force"),
    "Bars": ("upper_link_tension", "upper_link_compression", "lower_link_tension", "lower_link_compression"),
}
REST = "Drive and distance"


@dataclass(frozen=True)
class FigureRow:
    """One figure; `when` is empty where it has no time of its own."""

    key: str
    label: str
    text: str
    when: str
    description: str


def figure_groups(figures: Mapping[str, float | None], units: str, linkage: str) -> list[tuple[str, list[FigureRow]]]:
    """Every figure that happened, under its heading; what did not happen is left out."""
    placed = {key for keys in GROUPS.values() for key in keys}
    others = tuple(key for key in LAUNCH_FIGURES if key not in placed and not _is_when(key))
    found = []
    for title, keys in {**GROUPS, REST: others}.items():
        rows = [figure_row(key, figures, units, linkage) for key in keys if happened(key, figures)]
        if rows:
            found.append((title, rows))
    return found


def happened(key: str, figures: Mapping[str, float | None]) -> bool:
    """A greatest lift or stop force of nothing, and a bar's compression that is a tension, did not happen."""
    value = figures.get(key)
    if value is None:
        return False
    if key.endswith("_link_tension"):
        return value > 0
    if key.endswith("_link_compression"):
        return value < 0
    return bool(value) or f"{key}{WHEN}" not in LAUNCH_FIGURES


def bar_rows(figures: Mapping[str, float | None], units: str, linkage: str) -> list[FigureRow]:
    """The greatest load of each pair of bars, whichever way it goes."""
    rows = []
    for name in ("upper_link", "lower_link"):
        keys = [key for key in (f"{name}_tension", f"{name}_compression") if happened(key, figures)]
        if keys:
            key = max(keys, key=lambda one: abs(figures[one] or 0.0))
            row = figure_row(key, {**figures, key: abs(figures[key] or 0.0)}, units, linkage)
            way = key.rpartition("_")[2]
            label = f"{row.label.partition(', greatest')[0]}, greatest load"
            rows.append(FigureRow(key, label, f"{row.text} {way}", row.when, row.description))
    return rows


def figure_row(key: str, figures: Mapping[str, float | None], units: str, linkage: str) -> FigureRow:
    shown = measure(key, units, linkage)
    when = figures.get(f"{key}{WHEN}")
    at = "" if when is None or f"{key}{WHEN}" not in LAUNCH_FIGURES else f"at {show(when, 'time', 's')}"
    return FigureRow(key, shown.label, shown.text(figures.get(key)), at, shown.description)


def _is_when(key: str) -> bool:
    # A peak's time stands beside the peak.
    return key.endswith(WHEN) and key.removesuffix(WHEN) in LAUNCH_FIGURES


def headline(figures: Mapping[str, float | None], statics: Mapping[str, Any], units: str) -> list[tuple[str, str]]:
    """What one asks first of a launch."""
    force = default_unit("force", units)
    lines = [
        ("Anti-squat, whole car", measure("anti_squat", units).text(statics.get("anti_squat"))),
        ("Anti-squat, sprung mass", measure("anti_squat", units).text(statics.get("anti_squat_dynamic"))),
        ("Peak rear load, both tyres", _at("peak_rear_load", figures, units)),
        ("Rear load over the first 0.25 s", show(figures.get("mean_rear_load_250ms"), "force", force)),
        ("Front tyres", lift_words(figures, units)),
    ]
    return [(label, text) for label, text in lines if text != "—"]


def _at(key: str, figures: Mapping[str, float | None], units: str) -> str:
    row = figure_row(key, figures, units, "four-link")
    return f"{row.text} {row.when}".strip()


def lift_words(figures: Mapping[str, float | None], units: str) -> str:
    lifted = figures.get("front_lift_time")
    if lifted is None:
        return "stay on the ground"
    height = show(figures.get("front_lift_height"), "length", default_unit("length", units), decimals=1)
    return f"leave at {show(lifted, 'time', 's')}, up to {height}"


def lifts(figures: Mapping[str, float | None]) -> bool:
    """Whether the cautions about lifting belong beside these figures."""
    return figures.get("front_lift_time") is not None or figures.get("wheelie_bar_time") is not None


@dataclass(frozen=True)
class ModeRow:
    name: str
    frequency: str
    damping: str
    halves: str


def mode_rows(modes: Sequence[Mapping[str, Any]]) -> list[ModeRow]:
    """Natural frequencies, each named after what moves most; with the time in which a swing halves."""
    rows = []
    for mode in modes:
        frequency, ratio = mode["frequency_hz"], mode["damping_ratio"]
        decay = ratio * 2 * math.pi * frequency
        halves = show(math.log(2) / decay, "time", "s") if decay > 0 else "it does not die away"
        rows.append(ModeRow(_name(mode["shape"]), show(frequency, "frequency", "Hz"), f"{100 * ratio:.0f} %", halves))
    return rows


def _name(shape: Mapping[str, float]) -> str:
    most = max(shape, key=lambda part: abs(shape[part]))
    if most == "rear_axle":
        return "Rear axle on its tyres"
    if most == "front_wheels":
        return "Front wheels on their tyres"
    front, rear = shape["front_body"], shape["rear_body"]
    small, large = sorted((abs(front), abs(rear)))
    if small < 0.25 * large:
        return "Body, front end up and down" if abs(front) > abs(rear) else "Body, rear end up and down"
    return "Body, both ends together" if front * rear > 0 else "Body, pitching"
