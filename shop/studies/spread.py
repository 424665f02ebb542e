"""How sure the figures are: every tolerance of the survey carried through the launch, and which of them matters.

GUM (JCGM 100:2008, 5.1.2), first order, central differences; the lanes are solved as one batch. A
tolerance is a half-width between which the tape or the scale reads, all values alike likely: its
standard uncertainty is the half-width over the square root of three (JCGM 100:2008, 4.3.7).
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from typing import Any

import numpy as np

from shop.garage.quantities import BRACKETS, BRACKETS_OF, BY_KEY
from shop.launches import bridge
from shop.launches.models import Job
from shop.setups.car_file import build_from
from shop.setups.models import Revision
from shop.setups.quantities import FROM_SURVEY
from shop.studies.work import inputs_with, stored_input
from shop.studies.yardsticks import FIGURES
from shop.units import unit_of

SQRT3 = math.sqrt(3.0)
# What is halved when one asks what measuring again would buy.
BETTER = 0.5
# A setting that stands on the car overrides what the survey found for it.
_SET_BY = {surveyed: setting for setting, surveyed in FROM_SURVEY.items()}


def tolerances_of(revision: Revision) -> dict[str, dict[str, Any]]:
    """Half-width (SI) and origin of every value of the survey that is known only within one."""
    brackets = {bracket.place: bracket for bracket in revision.survey.brackets.all()}
    places = BRACKETS_OF[revision.survey.linkage]
    tolerances: dict[str, dict[str, Any]] = {}
    for row in revision.survey.measurements.all():
        if row.si_tolerance > 0 and not row.key.startswith(("empty_", "total_")):
            tolerances[row.key] = {"tolerance": row.si_tolerance, "origin": row.origin}
    for place in places:
        bracket = brackets[place]
        width = unit_of("length", bracket.unit).to_si(bracket.tolerance)
        for axis in ("x", "z"):
            tolerances[f"{place}.{axis}"] = {"tolerance": width, "origin": bracket.origin}
    return tolerances


def spread_input(revision: Revision) -> dict[str, Any]:
    """All that the spread of a revision needs, as plain data."""
    return stored_input(revision) | {"tolerances": tolerances_of(revision)}


def label_of(key: str) -> str:
    place, _, axis = key.partition(".")
    if place in BRACKETS:
        return f"{BRACKETS[place]}, {'ahead of axle' if axis == 'x' else 'above ground'}"
    return BY_KEY[key].label


def moved(stored: Mapping[str, Any], key: str, by: float) -> dict[str, Any]:
    """The stored car with one value of its survey read differently by `by` (SI)."""
    place, _, axis = key.partition(".")
    if place in BRACKETS:
        holes = [list(hole) for hole in stored["brackets"][place]]
        holes[stored["holes"][place] - 1][0 if axis == "x" else 1] += by
        return {**stored, "brackets": {**stored["brackets"], place: holes}}
    other = {**stored, "survey": {**stored["survey"], key: stored["survey"][key] + by}}
    setting = _SET_BY.get(key, key)
    if setting in other["settings"]:
        # What is set was set with the same instrument: the doubt about the spring is the doubt about the setting.
        other["settings"] = {**stored["settings"], setting: stored["settings"][setting] + by}
    return other


def run(job: Job, report: Callable[[float], None]) -> dict[str, Any]:
    """The job: base, and each doubtful value a standard uncertainty up and down."""
    stored = job.input
    report(0.05)
    keys = list(stored["tolerances"])
    steps = np.array([stored["tolerances"][key]["tolerance"] / SQRT3 for key in keys])
    files = [build_from(inputs_with(stored, {}), "base")]
    for key, step in zip(keys, steps, strict=True):
        files += [build_from(inputs_with(moved(stored, key, sign * step), {}), key) for sign in (1, -1)]
    report(0.2)
    columns, reasons = bridge.sweep(files)
    if 0 in reasons:
        raise bridge.CannotSolve(reasons[0])
    report(0.9)
    figures = {name: _figure(columns[name], keys) for name in FIGURES if name in columns}
    return {
        "figures": {name: found for name, found in figures.items() if found},
        "events": [{"refused": keys[(lane - 1) // 2], "words": words} for lane, words in reasons.items()],
        "solver_version": bridge.SOLVER_VERSION,
    }


def _figure(values: np.ndarray, keys: list[str]) -> dict[str, Any] | None:
    """Value, standard uncertainty and each source's part of it; None where a lane lacks the figure."""
    base = values[0]
    parts = (values[1::2] - values[2::2]) / 2
    if not math.isfinite(base) or not np.isfinite(parts).all():
        return None
    # The figure must be nearly straight within the tolerances for the first order to hold.
    bend = np.abs(values[1::2] + values[2::2] - 2 * base) / 2
    total = float(np.sqrt(np.sum(parts**2)))
    ranked = np.argsort(-np.abs(parts), kind="stable")[:6]
    return {
        "value": float(base),
        "uncertainty": total,
        "curved": bool(np.max(bend, initial=0.0) > 0.25 * max(total, 1e-12)),
        "parts": [{"key": keys[n], "part": float(abs(parts[n]))} for n in ranked if parts[n] != 0.0],
    }


def bought(found: Mapping[str, Any]) -> float:
    """The uncertainty left when the largest source is measured twice as well."""
    if not found["parts"]:
        return found["uncertainty"]
    part = found["parts"][0]["part"]
    return math.sqrt(max(found["uncertainty"] ** 2 - part**2 * (1 - BETTER**2), 0.0))
