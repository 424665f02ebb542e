"""Solving a piece of a study from its stored input. No rows are read: the input is all there is."""

from __future__ import annotations

import io
import math
from collections.abc import Mapping
from dataclasses import replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from shop.launches import bridge
from shop.refusals import Refused
from shop.setups.car_file import Inputs, build_from, inputs_of
from shop.setups.models import Revision
from shop.studies.plan import Choice, Plan, read_plan

Columns = dict[str, NDArray[np.float64]]


def stored_input(revision: Revision, plan: Plan | None = None) -> dict[str, Any]:
    """All that a study needs, as plain data: the revision in SI, every hole there is, and the plan."""
    inputs = inputs_of(revision)
    brackets = {bracket.place: bracket.si_holes() for bracket in revision.survey.brackets.all()}
    return {
        "survey": dict(inputs.survey),
        # Ballast can be tried before anybody has said where it would sit; what is set wins.
        "settings": {**usual_ballast_place(inputs), **inputs.settings},
        "holes": dict(revision.holes),
        "brackets": {place: [list(hole) for hole in holes] for place, holes in brackets.items()},
        "linkage": inputs.linkage,
        "hit_table": inputs.hit_table,
        "hit_force": inputs.hit_force,
        **({"plan": plan.to_dict()} if plan else {}),
    }


def inputs_with(stored: Mapping[str, Any], choice: Choice) -> Inputs:
    """The stored car with one choice made on it; Refused where a bracket lacks the hole."""
    numbers = dict(stored["holes"])
    settings = dict(stored["settings"])
    for key, value in choice.items():
        if key in stored["brackets"]:
            numbers[key] = int(value)
        else:
            settings[key] = value
    points = {}
    for place, number in numbers.items():
        drilled = stored["brackets"].get(place, [])
        if not 1 <= number <= len(drilled):
            raise Refused({place: f"hole {number} is not drilled; the bracket has 1 to {len(drilled)}"})
        points[place] = tuple(drilled[number - 1])
    return Inputs(stored["survey"], settings, points, stored["linkage"], stored["hit_table"], stored.get("hit_force"))


def usual_ballast_place(inputs: Inputs) -> dict[str, float]:
    """Over the front axle, at its height: where ballast does most against front lift. Common practice, no source."""
    return {"ballast_x": inputs.survey["wheelbase"], "ballast_z": inputs.survey["front_tyre_radius"]}


def solve_choices(stored: Mapping[str, Any], start: int, stop: int) -> tuple[Columns, dict[str, str]]:
    """Figures of choices [start, stop) as columns, and the words for those that cannot be solved."""
    plan = read_plan(stored["plan"])
    files: list[dict[str, Any] | None] = []
    refused: dict[str, str] = {}
    for number, choice in enumerate(plan.between(start, stop), start):
        try:
            files.append(build_from(inputs_with(stored, choice), f"choice {number}"))
        except Refused as refusal:
            files.append(None)
            refused[str(number)] = str(refusal)
    columns, faults = bridge.sweep(files)
    refused |= {str(start + lane): words for lane, words in faults.items()}
    return columns, refused


def packed(columns: Columns) -> bytes:
    buffer = io.BytesIO()
    np.savez(buffer, **columns)
    return buffer.getvalue()


def unpacked(data: bytes) -> Columns:
    with np.load(io.BytesIO(bytes(data)), allow_pickle=False) as archive:
        return {name: archive[name] for name in archive.files}


def joined(pieces: list[tuple[int, int, Columns]], count: int) -> Columns:
    """One column per figure over all choices, NaN where a piece is still missing."""
    whole: Columns = {}
    for start, stop, columns in pieces:
        for name, values in columns.items():
            if name not in whole:
                whole[name] = np.full(count, math.nan)
            whole[name][start:stop] = values
    return whole


def base_values(revision: Revision, keys: list[str]) -> dict[str, float]:
    """What the revision itself has on each axis: hole number, or setting in SI (survey's where unset)."""
    inputs = inputs_of(revision)
    known = {**revision.holes, **{key: inputs.value(key) for key in keys if key not in revision.holes}}
    if "ballast_weight" in keys and known["ballast_weight"] is None:
        known["ballast_weight"] = 0.0
    return {key: float(known[key]) for key in keys if known.get(key) is not None}


def with_base(plan: Plan, revision: Revision) -> Plan:
    return replace(plan, base=base_values(revision, [axis.key for axis in plan.axes]))
