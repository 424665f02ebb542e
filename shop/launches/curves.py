"""The curves of a launch in the shop's units: for the charts, and to take away."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

import numpy as np

from shop.launches.bridge import LAUNCH_HISTORIES
from shop.launches.measures import Measure, measure
from shop.launches.models import Job

# Which curves share a chart on a launch's page, with its heading.
CHARTS = (
    ("rear_load,front_load", "Tyre loads"),
    ("rear_coil_force,rear_shock_force,front_spring_force", "Spring and shock forces"),
    ("upper_link_force,lower_link_force", "Bar forces"),
    ("pitch,housing_angle", "Pitch and pinion angle"),
    ("ride_height_front,ride_height_rear,front_clearance", "Body rise and front lift"),
    ("rear_shock_velocity,front_velocity", "Shock and wheel speeds"),
    ("hit", "The hit"),
    ("grip_needed", "Grip needed"),
)

# A curve that keeps within this share of its whole range over the last of the run has settled.
SETTLED_SHARE = 0.02
SETTLED_OVER = 0.15  # seconds

Series = list[float | None]
Histories = Mapping[str, Any]  # of Series; the times, "t", have no gaps


def curves(job: Job, other: Job | None, units: str) -> dict[str, Any]:
    """What js/charts.js draws: every curve of a solved launch, and beside it that of another."""
    histories: Histories = job.result.histories
    linkage = job.revision.survey.linkage
    time = histories["t"]
    compared = other.result.histories if other is not None else {}
    channels = {
        key: _channel(measure(key, units, linkage), values, time, compared)
        for key, values in histories.items()
        if key != "t" and key in LAUNCH_HISTORIES
    }
    labels = {"run": job.revision.label}
    if other is not None:
        labels["compare"] = _label(other, job)
    events = [{"time": event["time"], "label": event["words"]} for event in job.result.events]
    return {"time": time, "unit": "s", "channels": channels, "events": events, "labels": labels, "why_empty": None}


def _label(other: Job, job: Job) -> str:
    same_car = other.revision.car_id == job.revision.car_id
    return other.revision.label if same_car else str(other.revision)


def empty(words: str) -> dict[str, Any]:
    """The same shape with nothing in it but the sentence that says why."""
    return {"time": [], "unit": "s", "channels": {}, "events": [], "labels": {}, "why_empty": words}


def _channel(shown: Measure, values: Series, time: list[float], compared: Histories) -> dict[str, Any]:
    channel: dict[str, Any] = {
        "label": shown.label, "unit": shown.unit, "values": [shown.value(value) for value in values]
    }
    settled = settled_value(time, values)
    if settled is not None:
        channel["settled"] = shown.value(settled)
    if shown.key in compared:
        channel["compare"] = [shown.value(value) for value in on_times(time, compared["t"], compared[shown.key])]
    return channel


def settled_value(time: list[float], values: Series) -> float | None:
    """Where a curve has come to rest by the end of the run; None where it still moves, or never did."""
    if not time or any(value is None for value in values):
        return None
    series = np.asarray(values, dtype=float)
    span = float(np.ptp(series))
    last = series[np.asarray(time) >= time[-1] - SETTLED_OVER]
    if span == 0.0 or len(last) < 3 or float(np.ptp(last)) > SETTLED_SHARE * span:
        return None
    return float(series[-1])


def on_times(wanted: list[float], time: list[float], values: Series) -> Series:
    """Another run's curve at this run's times; None outside of it and beside its gaps."""
    if time == wanted:
        return values
    series = np.asarray([np.nan if value is None else value for value in values], dtype=float)
    placed = np.interp(wanted, time, series, left=np.nan, right=np.nan)
    return [None if np.isnan(value) else float(value) for value in placed]


def table(job: Job, units: str | None) -> Iterator[list[Any]]:
    """The curves as lines: names with units first. `units` None: SI, every digit as the solver gave it."""
    histories: Histories = job.result.histories
    keys = [key for key in histories if key in LAUNCH_HISTORIES and any(value is not None for value in histories[key])]
    if units is None:
        yield [f"{key} [{SI[LAUNCH_HISTORIES[key].dimension]}]" for key in keys]
        columns = [histories[key] for key in keys]
    else:
        shown = [measure(key, units, job.revision.survey.linkage) for key in keys]
        yield [f"{one.label} [{one.unit or '1'}]" for one in shown]
        columns = [[one.value(value) for value in histories[one.key]] for one in shown]
    for line in zip(*columns, strict=True):
        yield ["" if value is None else value for value in line]


SI = {
    "time": "s", "force": "N", "length": "m", "speed": "m/s", "acceleration": "m/s²", "angle": "rad", "torque": "N·m",
    "spin": "rad/s", "ratio": "1", "coefficient": "1", "percent": "%",
}
