"""Two issued revisions of a car beside each other: what was changed, and what came of it."""

from __future__ import annotations

from typing import Any

from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, render
from django.urls import reverse

from shop.drawing.side_view import side_view
from shop.garage.models import Car
from shop.launches import bridge
from shop.launches.figures import lifts
from shop.launches.models import Job
from shop.people.access import shop_view
from shop.refusals import Refused
from shop.setups.differences import hole_changes, setting_changes, survey_changes
from shop.setups.figures import beside, figures_at_rest
from shop.setups.launch_figures import pairs_of
from shop.setups.models import Revision

# Channels of a launch's histories that share a chart, with its heading.
CHARTS = (
    ("rear_load,front_load", "Tyre loads"),
    ("rear_spring_force,front_spring_force", "Spring and shock forces"),
    ("upper_link_force,lower_link_force", "Bar forces"),
    ("pitch,housing_angle", "Pitch and pinion angle"),
    ("ride_height_front,ride_height_rear", "Body rise"),
    ("rear_shock_velocity", "Rear shock speed"),
)


@shop_view()
def compare(request: HttpRequest, car_id: int) -> HttpResponse:
    """Without a choice: the newest issued revision against its parent."""
    car = get_object_or_404(Car.objects.select_related("customer"), pk=car_id)
    revisions = Revision.objects.select_related("survey", "parent", "author", "car")
    issued = list(revisions.filter(car=car, number__isnull=False).order_by("-number"))
    if len(issued) < 2:
        return render(request, "setups/compare_few.html", {"car": car, "issued": issued})
    b = _asked(request, "b", issued) or issued[0]
    a = _asked(request, "a", issued) or _usual_other(b, issued)
    context = {"car": car, "issued": issued, "a": a, "b": b, "same": a.pk == b.pk}
    if a.pk != b.pk:
        context |= {
            "changed": [*hole_changes(a, b), *setting_changes(a, b)],
            "surveyed": survey_changes(a.survey, b.survey),
            **_at_rest(a, b, request.shop.units),
            **_launches(a, b, request.shop.units),
        }
    return render(request, "setups/compare.html", context)


def _asked(request: HttpRequest, name: str, issued: list[Revision]) -> Revision | None:
    text = request.GET.get(name, "")
    if not text:
        return None
    for revision in issued:
        if str(revision.pk) == text:
            return revision
    raise Http404("this car has no such revision")


def _usual_other(b: Revision, issued: list[Revision]) -> Revision:
    if b.parent_id:
        return next(revision for revision in issued if revision.pk == b.parent_id)
    return next(revision for revision in issued if revision.pk != b.pk)


def _at_rest(a: Revision, b: Revision, units: str) -> dict[str, Any]:
    try:
        return {
            "groups": beside(figures_at_rest(a, units), figures_at_rest(b, units), units),
            "drawing": side_view(bridge.scene_of(b, b.holes, ghost=a)),
        }
    except Refused as refused:
        return {"groups": [], "drawing": "", "fault": str(refused)}


def _launches(a: Revision, b: Revision, units: str) -> dict[str, Any]:
    jobs = [revision.jobs.filter(kind="launch").select_related("result").order_by("-id").first() for revision in (a, b)]
    if not all(job is not None and job.state == Job.DONE for job in jobs):
        return {"jobs": jobs, "both_done": False}
    solved = [job.result.figures for job in jobs]
    histories = f"{reverse('launches:histories', args=[jobs[1].pk])}?compare={jobs[0].pk}"
    return {
        "jobs": jobs, "both_done": True, "charts": CHARTS, "histories": histories,
        "figure_pairs": pairs_of(*solved, units, b.survey.linkage),
        "lifts": any(lifts(figures) for figures in solved),
    }
