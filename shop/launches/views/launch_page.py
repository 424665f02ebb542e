"""The page of one piece of work: how it stands, then what the car does on the hit."""

from __future__ import annotations

from typing import Any

from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, render
from django.urls import reverse

from shop.drawing.side_view import side_view
from shop.launches import bridge
from shop.launches.curves import CHARTS
from shop.launches.figures import figure_groups, headline, lifts, mode_rows
from shop.launches.models import Job
from shop.launches.standing import standing
from shop.people.access import shop_view
from shop.people.permissions import ISSUE
from shop.refusals import Refused
from shop.setups.models import Revision


def job_of(pk: int, *related: str) -> Job:
    """The shop's own job with what every page about it needs; another shop's is not found."""
    jobs = Job.objects.select_related("revision__car__customer", "revision__survey", "requested_by", *related)
    return get_object_or_404(jobs, pk=pk)


@shop_view()
def launch(request: HttpRequest, pk: int) -> HttpResponse:
    job = job_of(pk, "result")
    context = {"job": job, "revision": job.revision, "car": job.revision.car, **_standing(request, job)}
    if job.kind != "launch":
        return render(request, "launches/other_work.html", context)
    if job.state == Job.DONE:
        context |= _answer(job, request.shop.units)
    return render(request, "launches/launch.html", context)


@shop_view()
def stands(request: HttpRequest, pk: int) -> HttpResponse:
    """Only how the work stands, asked for each second while it is under way."""
    job = job_of(pk)
    response = render(request, "launches/_standing.html", {"job": job, **_standing(request, job)})
    if job.settled:
        response["HX-Refresh"] = "true"
    return response


def _standing(request: HttpRequest, job: Job) -> dict[str, Any]:
    return {"standing": standing(job), "may_issue": request.member.may(ISSUE)}


def _answer(job: Job, units: str) -> dict[str, Any]:
    """Everything below the head of a solved launch, as finished text."""
    result, linkage = job.result, job.revision.survey.linkage
    with_survey = Revision.objects.select_related("car", "survey", "parent__survey", "parent__car", "shop")
    revision = with_survey.prefetch_related(*Revision.WITH_SURVEY).get(pk=job.revision_id)
    before = _parents_launch(revision)
    histories = reverse("launches:histories", args=[job.pk])
    return {
        "headline": headline(result.figures, result.statics, units),
        "events": [(f"{event['time']:.3f} s", event["words"]) for event in result.events],
        "charts": CHARTS,
        "histories": f"{histories}?compare={before.pk}" if before else histories,
        "before": before,
        "groups": figure_groups(result.figures, units, linkage),
        "at_rest": bridge.static_rows(result.statics, units),
        "modes": mode_rows(result.modes),
        "lifts": lifts(result.figures),
        "provisional": bridge.provisional(revision),
        **_drawing(revision),
    }


def _drawing(revision: Revision) -> dict[str, Any]:
    try:
        return {"drawing": side_view(bridge.scene_of(revision, revision.holes))}
    except Refused as refused:
        return {"fault": str(refused)}


def _parents_launch(revision: Revision) -> Job | None:
    """The solved launch of the revision this one came from, to see it beside."""
    if revision.parent is None:
        return None
    done = revision.parent.jobs.filter(kind="launch", state=Job.DONE)
    return done.select_related("revision").order_by("-id").first()
