"""The launch of choices nobody has saved yet, beside the launch of the revision they start from."""

from __future__ import annotations

import bisect
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from django.utils.safestring import SafeString

from shop.drawing.chart_svg import Curve, line_chart
from shop.launches import bridge
from shop.launches.measures import measure
from shop.launches.models import Job
from shop.setups.models import Revision

CHANNELS = (
    "rear_load",
    "front_load",
    "grip_needed",
    "rear_shock_velocity",
    "lower_link_force",
    "upper_link_force",
    "pitch",
    "housing_angle",
)
# What the trade looks at first, in words below the curve.
FIGURES = ("mean_rear_load_100ms", "mean_rear_load_250ms", "rear_load_dip")


@dataclass(frozen=True)
class TriedFigure:
    label: str
    text: str
    difference: str


@dataclass(frozen=True)
class Tried:
    """One curve of both launches, and a few figures."""

    chart: SafeString
    figures: list[TriedFigure]


def try_channels(units: str, linkage: str) -> list[tuple[str, str]]:
    """The curves one can look at while choosing."""
    return [(key, measure(key, units, linkage).label) for key in CHANNELS]


def tried(draft: Revision, channel: str, units: str) -> Tried:
    """Solve the unsaved draft here and now. Refused or CannotSolve say why there is no launch."""
    now = bridge.solve(bridge.check(draft))
    before = _launch_of(draft.parent) if draft.parent is not None else None
    known = measure(channel, units, draft.survey.linkage)
    times = now["histories"]["t"]
    curves = [Curve("as chosen now", [known.value(value) for value in now["histories"][channel]])]
    if before is not None:
        series = _at(times, before["histories"], channel)
        curves.append(Curve(draft.parent.label, [known.value(value) for value in series]))
    chart = line_chart(known.label, known.unit, times, curves, width=560, height=170)
    return Tried(chart, _figures(now["figures"], before["figures"] if before else {}, units, draft.survey.linkage))


def _figures(now: Mapping[str, Any], before: Mapping[str, Any], units: str, linkage: str) -> list[TriedFigure]:
    rows = []
    for key in FIGURES:
        value, other = now.get(key), before.get(key)
        if value is None:
            continue
        known = measure(key, units, linkage)
        moved = other is not None and known.text(abs(value - other)) != known.text(0.0)
        rows.append(TriedFigure(known.label, known.text(value), known.difference(value - other) if moved else ""))
    return rows


def _launch_of(parent: Revision) -> Mapping[str, Any] | None:
    """The parent's own launch as it is on record, else solved now; None where it cannot be."""
    job = parent.jobs.filter(kind="launch", state=Job.DONE).select_related("result").defer("input").order_by("-id").first()
    if job is not None:
        return {"histories": job.result.histories, "figures": job.result.figures}
    try:
        return bridge.solve(parent.car_file or {})
    except bridge.CannotSolve:
        return None


def _at(times: Sequence[float], histories: Mapping[str, Any], channel: str) -> list[float | None]:
    """A curve of another launch at these times: the sample at or before each, None once it has ended."""
    own, values = histories["t"], histories.get(channel)
    if values is None:
        return [None] * len(times)
    places = [bisect.bisect_right(own, time + 1e-9) - 1 for time in times]
    return [
        values[place] if place >= 0 and time <= own[-1] + 1e-9 else None
        for place, time in zip(places, times, strict=True)
    ]
