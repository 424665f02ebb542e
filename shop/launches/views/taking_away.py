"""A launch as data: for the page's charts, as a table, and whole."""

from __future__ import annotations

import csv
import io
import json
import re
from typing import Any

from django.http import Http404, HttpRequest, HttpResponse, JsonResponse

from shop.launches.curves import curves, empty, table
from shop.launches.models import Job
from shop.launches.services import RESULT_PARTS
from shop.launches.views.launch_page import job_of
from shop.people.access import shop_view

WHY_EMPTY = {
    Job.WAITING: "The launch waits for a worker; its curves come when it is solved.",
    Job.RUNNING: "The launch is being solved; its curves come when it is.",
    Job.CANCELLED: "The launch was cancelled; it has no curves.",
}


@shop_view()
def histories(request: HttpRequest, pk: int) -> HttpResponse:
    """The curves for js/charts.js in the shop's units; `compare` names another launch of the shop."""
    job = job_of(pk, "result")
    other = _compared(request)
    if not _solved(job):
        words = WHY_EMPTY.get(job.state, f"The launch failed: {job.error}")
        return JsonResponse(empty(words))
    return JsonResponse(curves(job, other if other is not None and _solved(other) else None, request.shop.units))


def _solved(job: Job) -> bool:
    return job.state == Job.DONE and bool(job.result.histories)


def _compared(request: HttpRequest) -> Job | None:
    asked = request.GET.get("compare", "")
    if not asked:
        return None
    if not re.fullmatch(r"[0-9]{1,18}", asked):
        raise Http404("no launch is called that")
    return job_of(int(asked), "result")


@shop_view()
def as_table(request: HttpRequest, pk: int) -> HttpResponse:
    """The curves as CSV, in SI or in the shop's units."""
    job, units = _wanted(request, pk)
    written = io.StringIO()
    csv.writer(written).writerows(table(job, units))
    return _file(written.getvalue(), "text/csv; charset=utf-8", _name(job, units, "csv"))


@shop_view()
def whole(request: HttpRequest, pk: int) -> HttpResponse:
    """Everything the launch answered as JSON: in SI exactly as it is kept, else its curves in the shop's units."""
    job, units = _wanted(request, pk)
    data: dict[str, Any] = {
        "format": "launch-ledger/run",
        "version": 1,
        "car": str(job.revision.car),
        "revision": job.revision.label,
        "job": job.pk,
        "solver_version": job.solver_version,
        "input_hash": job.input_hash,
    }
    if units is None:
        data |= {"units": "SI", **{name: getattr(job.result, name) for name in RESULT_PARTS}}
    else:
        data |= {"units": units, **curves(job, None, units)}
    text = json.dumps(data, ensure_ascii=False, allow_nan=False, indent=1)
    return _file(text + "\n", "application/json; charset=utf-8", _name(job, units, "json"))


def _wanted(request: HttpRequest, pk: int) -> tuple[Job, str | None]:
    """The solved job and the unit system asked for, None for SI."""
    job = job_of(pk, "result")
    asked = request.GET.get("units", "si")
    if asked not in ("si", "shop") or not _solved(job):
        raise Http404("this launch has nothing to take away in that form")
    return job, None if asked == "si" else request.shop.units


def _name(job: Job, units: str | None, ending: str) -> str:
    words = f"{job.revision.car} {job.revision.label} launch {job.pk}{'' if units else ' si'}"
    return f"{re.sub(r'[^a-z0-9]+', '-', words.lower()).strip('-')}.{ending}"


def _file(text: str, content_type: str, name: str) -> HttpResponse:
    response = HttpResponse(text, content_type=content_type)
    response["Content-Disposition"] = f'attachment; filename="{name}"'
    return response
