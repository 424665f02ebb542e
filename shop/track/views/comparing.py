"""Which revision was better, and is it real?"""

from __future__ import annotations

from dataclasses import dataclass

from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, render

from shop.garage.models import Car
from shop.people.access import shop_view
from shop.setups.models import Revision
from shop.track.comparing import compare
from shop.track.dots import DotChart, dot_chart
from shop.track.figures import BY_KEY, FIGURES
from shop.track.groups import BY_REVISION, GROUPINGS, Group, Grouped, Question, group, summary
from shop.track.models import Pass, Weekend
from shop.track.slip import TIMES
from shop.track.station import station_of
from shop.track.weather import CORRECTION

MOST_GROUPS = 12
LANES = [("", "both lanes"), ("left", "left lane only"), ("right", "right lane only")]


@dataclass(frozen=True)
class Line:
    """One group's figures as finished text."""

    label: str
    count: str
    median: str
    best: str
    mean: str
    spread: str
    lanes: str
    altitude: str


@shop_view()
def compare_passes(request: HttpRequest, car_id: int) -> HttpResponse:
    car = get_object_or_404(Car.objects.select_related("customer"), pk=car_id)
    runs = Pass.objects.filter(car=car).select_related("revision", "weekend", "car")
    weekends = list(Weekend.objects.filter(passes__car=car).distinct())
    revisions = list(Revision.objects.filter(passes__car=car).distinct().order_by("number"))
    chosen_weekends = _ids(request, "weekend", weekends)
    chosen_revisions = _ids(request, "revision", revisions)
    if chosen_weekends:
        runs = runs.filter(weekend__in=chosen_weekends)
    if chosen_revisions:
        runs = runs.filter(revision__in=chosen_revisions)
    question = _question(request)
    found = group(list(runs.order_by("day", "clock", "id")), station_of(weekends), question)
    groups = found.groups[-MOST_GROUPS:]
    base = _base(request, groups)
    others = [each for each in groups if each is not base]
    statements = [compare(other, base, question, len(others)) for other in others] if base else []
    context = {
        "car": car, "question": question, "figures": [(f.key, f.label) for f in FIGURES], "lanes": LANES,
        "groupings": GROUPINGS.items(), "weekends": weekends, "revisions": revisions,
        "chosen_weekends": chosen_weekends, "chosen_revisions": chosen_revisions, "groups": groups, "base": base,
        "lines": [_line(each, question) for each in groups], "statements": statements, "left_out": _left_out(found, groups),
        "chart": _chart(groups, question), "correction": CORRECTION, "first_figure": TIMES[0].label,
    }
    return render(request, "track/compare_passes.html", context)


def _question(request: HttpRequest) -> Question:
    lane = request.GET.get("lane", "")
    by = request.GET.get("by", BY_REVISION)
    return Question(
        BY_KEY.get(request.GET.get("figure", ""), FIGURES[0]), request.shop.units,
        by if by in GROUPINGS else BY_REVISION, lane if lane in dict(LANES) else "", request.GET.get("times") == "corrected",
    )


def _ids(request: HttpRequest, name: str, rows: list) -> list[int]:
    """Ids asked for that are among the rows; anything else is an id of nothing and chooses nothing."""
    asked = set(request.GET.getlist(name))
    return [row.pk for row in rows if str(row.pk) in asked]


def _base(request: HttpRequest, groups: list[Group]) -> Group | None:
    """The group the others are held against: the one asked for, else the last but one."""
    asked = next((each for each in groups if each.key == request.GET.get("against")), None)
    if len(groups) < 2:
        return None
    return asked or groups[-2]


def _line(each: Group, question: Question) -> Line:
    figures = summary(each, question.figure)

    def text(value: float) -> str:
        return question.figure.text(value, question.units)

    return Line(
        each.label, str(figures.count), text(figures.median), text(figures.best), text(figures.mean),
        text(figures.spread) if figures.count > 1 else "—", each.lanes_text, each.altitude_text(question.units),
    )


def _left_out(found: Grouped, shown: list[Group]) -> list[str]:
    dropped = len(found.groups) - len(shown)
    words = [f"{dropped} older groups are not shown: choose fewer revisions or weekends to see them."] if dropped else []
    return [*words, *found.left_out]


def _chart(groups: list[Group], question: Question) -> DotChart | None:
    if not groups:
        return None
    title = f"{question.figure.label}, {question.figure.unit(question.units)}"
    return dot_chart([(each.label, each.values) for each in groups], title, 2 if question.figure.speed else 3)
