"""Passes put into groups that can be held against each other, and what was left out of them."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field

from shop.launches import bridge
from shop.track.figures import Figure
from shop.track.models import Pass, WeatherReading, Weekend
from shop.track.weather import PassAir, air_of
from shop.units import default_unit, show

BY_REVISION, BY_WEEKEND, BY_BOTH = "revision", "weekend", "both"
GROUPINGS = {
    BY_REVISION: "each revision, over all weekends",
    BY_BOTH: "each revision on each weekend",
    BY_WEEKEND: "each weekend, whatever was on the car",
}


@dataclass
class Group:
    """Passes that are alike in what is asked about; `values` in the order in which they ran."""

    key: str
    label: str
    runs: list[Pass] = field(default_factory=list)
    values: list[float] = field(default_factory=list)
    altitudes: list[float] = field(default_factory=list)

    @property
    def count_text(self) -> str:
        return f"{len(self.values)} pass{'' if len(self.values) == 1 else 'es'}"

    @property
    def lanes(self) -> Counter[str]:
        return Counter(run.lane or "lane not noted" for run in self.runs)

    @property
    def lanes_text(self) -> str:
        order = ("left", "right", "lane not noted")
        return ", ".join(f"{self.lanes[lane]} {lane}" for lane in order if self.lanes[lane])

    def altitude_text(self, units: str) -> str:
        """Mean density altitude, and over how many of the passes it is known."""
        if not self.altitudes:
            return "not known"
        mean = show(sum(self.altitudes) / len(self.altitudes), "distance", default_unit("distance", units), decimals=0)
        known = len(self.altitudes)
        return mean if known == len(self.values) else f"{mean} ({known} of {len(self.values)})"


@dataclass(frozen=True)
class Grouped:
    groups: list[Group]
    left_out: list[str]


@dataclass(frozen=True)
class Question:
    """What is compared, and how passes are counted."""

    figure: Figure
    units: str
    by: str = BY_REVISION
    lane: str = ""
    corrected: bool = False


def group(runs: Sequence[Pass], station: dict[int, list[WeatherReading]], question: Question) -> Grouped:
    """Group `runs` (with revision and weekend, in order of time); `station` holds readings by weekend id."""
    groups: dict[str, Group] = {}
    names = weekend_names({run.weekend_id: run.weekend for run in runs}.values())
    left_out: Counter[str] = Counter()
    for run in runs:
        air = air_of(run, station.get(run.weekend_id, []))
        reason = _why_not(run, air, question)
        if reason:
            left_out[reason] += 1
            continue
        key, label = _place(run, question.by, names)
        found = groups.setdefault(key, Group(key, label))
        found.runs.append(run)
        factor = air.air.factor if question.corrected and air.air else None
        value = question.figure.value(run, question.units, factor)
        if value is not None:  # _why_not has seen to it
            found.values.append(value)
        if air.air:
            found.altitudes.append(air.air.density_altitude)
    words = [
        f"{count} {'pass was' if count == 1 else 'passes were'} left out: {reason}." for reason, count in left_out.items()
    ]
    return Grouped(list(groups.values()), words)


def _why_not(run: Pass, air: PassAir, question: Question) -> str:
    figure = question.figure
    if question.lane and run.lane != question.lane:
        return f"not in the {question.lane} lane"
    if question.by != BY_WEEKEND and run.revision is None:
        return "no revision"
    if figure.value(run, question.units) is None:
        return f"the slip has no {figure.label}"
    if not all(run.counts_to(name) for name in figure.fields):
        return f"aborted before {figure.where.split()[-2]} ft"
    if question.corrected and air.air is None:
        return "no weather to correct by"
    return ""


def weekend_names(weekends: Iterable[Weekend]) -> dict[int, str]:
    """The shortest name that tells the weekends apart: the place, with its days where they came to it twice."""
    chosen = list(weekends)
    places = Counter(weekend.place for weekend in chosen)
    return {w.pk: w.place if places[w.place] == 1 else f"{w.place}, {w.days_text}" for w in chosen}


def _place(run: Pass, by: str, names: dict[int, str]) -> tuple[str, str]:
    weekend = names[run.weekend_id]
    if by == BY_WEEKEND or run.revision is None:
        return f"w{run.weekend_id}", weekend
    if by == BY_BOTH and len(names) > 1:
        return f"r{run.revision_id}w{run.weekend_id}", f"{run.revision.label} at {weekend}"
    return f"r{run.revision_id}", run.revision.label


def summary(group: Group, figure: Figure) -> bridge.Summary:
    return bridge.summarise_passes(group.values, lower_is_better=not figure.speed)
