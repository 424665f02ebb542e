"""What one change does: each thing that can be set moved by a step of the trade, one at a time, and the chart of it."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

from shop.garage.quantities import BRACKETS_OF
from shop.launches.measures import Measure
from shop.setups.models import Revision
from shop.setups.quantities import BY_KEY
from shop.studies.asking import SETTINGS
from shop.studies.models import Study
from shop.studies.plan import read_plan
from shop.studies.rows import changes_of
from shop.studies.services import columns_so_far
from shop.studies.work import base_values
from shop.studies.yardsticks import FIGURES, step_text, study_measure
from shop.units import default_unit, unit_of

# The bar of the largest change of a figure reaches this far from the middle, in the drawing's own units.
REACH = 100.0
# Shorter than this share of the largest is not worth a line.
LEAST_SHARE = 0.01
MOST_BARS = 10


def steps_plan(revision: Revision, units: str) -> dict[str, Any]:
    """One hole each way in each bracket, one step each way of each setting the car has; plan data of mode "one"."""
    places = BRACKETS_OF[revision.survey.linkage]
    drilled = {bracket.place: len(bracket.holes) for bracket in revision.survey.brackets.all()}
    base = base_values(revision, [*places, *SETTINGS])
    axes = []
    for place in places:
        now = int(base[place])
        axes.append({"key": place, "values": [n for n in (now - 1, now, now + 1) if 1 <= n <= drilled[place]]})
    for key, by_unit in SETTINGS.items():
        if key not in base or (revision.hit_table and key in ("hit_peak", "hit_rise")):
            continue
        quantity = BY_KEY[key]
        symbol = default_unit(quantity.dimension, units)
        step = by_unit[symbol] * unit_of(quantity.dimension, symbol).factor
        tried = [base[key] - step, base[key], base[key] + step]
        axes.append({"key": key, "values": [value for value in tried if quantity.least <= value <= quantity.most]})
    return {"mode": "one", "axes": [axis for axis in axes if len(axis["values"]) > 1]}


@dataclass(frozen=True)
class Bar:
    """One change and what it does to one figure; `x` and `width` are where its bar stands about the middle."""

    number: int
    change: str
    text: str
    x: float
    width: float
    more: bool


@dataclass(frozen=True)
class Chart:
    """One figure: its value as the car is, and the changes that move it, largest first."""

    measure: Measure
    now: str
    bars: list[Bar]
    smaller: list[str]


def charts_of(study: Study, units: str) -> list[Chart]:
    """A chart for each figure that is known for the car as it is; choice 0 of mode "one" is that car."""
    columns, _ = columns_so_far(study)
    plan = read_plan(study.plan)
    words = [", ".join(changes_of(choice, plan.base, units)) for choice in plan.between(0, study.choices)]
    charts = []
    for key in FIGURES:
        if key in columns and math.isfinite(columns[key][0]):
            known = study_measure(key, units, study.revision.survey.linkage)
            charts.append(_chart(known, columns[key].tolist(), words))
    return charts


def _chart(known: Measure, values: list[float], words: list[str]) -> Chart:
    base = values[0]
    steps = {n: value - base for n, value in enumerate(values) if n and math.isfinite(value)}
    largest = max(map(abs, steps.values()), default=0.0)
    bars, smaller = [], []
    for number in sorted(steps, key=lambda n: (-abs(steps[n]), n)):
        step = steps[number]
        text = step_text(known, step)
        if not text or abs(step) < LEAST_SHARE * largest or len(bars) == MOST_BARS:
            smaller.append(f"{words[number]} {text}".strip())
            continue
        width = REACH * abs(step) / largest
        start = 0.0 if step > 0 else -width
        bars.append(Bar(number, words[number], text, start, width, step > 0))
    return Chart(known, known.text(base), bars, smaller)
