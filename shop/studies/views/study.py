"""A study: how far it is, what ranks best, and what to do with a choice."""

from __future__ import annotations

import csv
import io
import math

import numpy as np
from django.contrib import messages
from django.http import Http404, HttpRequest, HttpResponse, JsonResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.drawing.side_view import side_view
from shop.launches import bridge
from shop.launches.models import Job
from shop.launches.services import request_cancel
from shop.people.access import action_view, shop_view
from shop.people.permissions import ISSUE, WRITE
from shop.refusals import Refused, Stale
from shop.setups.choices import Choices
from shop.setups.services import start_draft
from shop.studies import services
from shop.studies.models import Study
from shop.studies.plan import Choice, read_plan
from shop.studies.ranking import pareto_front
from shop.studies.rows import changes_of, choice_of, same, standing
from shop.studies.trying import choices_with, revision_with
from shop.studies.yardsticks import (
    FIGURES,
    SHOWN,
    USUAL,
    WEIGHTS,
    read_limits,
    read_weights,
    step_text,
    study_measure,
    yards,
)
from shop.units import unit_of

REFUSED = 422


def _study(pk: int) -> Study:
    related = (
        "job",
        "shop",
        "revision__car__customer",
        "revision__survey",
        "revision__shop",
        "revision__author",
        "author",
    )
    return get_object_or_404(Study.objects.select_related(*related).defer("job__input"), pk=pk)


def _table(request: HttpRequest, study: Study) -> dict[str, object]:
    units, linkage = request.shop.units, study.revision.survey.linkage
    stand = standing(study, units, list(SHOWN))
    left = study.choices - stand.solved - len(stand.refused)
    return {
        "study": study,
        "stand": stand,
        "left": left,
        "job": study.job,
        "running": not study.job.settled,
        "heads": [study_measure(key, units, linkage) for key in SHOWN],
        "refused": list(stand.refused.items())[:5],
        "may_write": request.member.may(WRITE),
        "may_issue": request.member.may(ISSUE),
    }


def _page(request: HttpRequest, study: Study, typed=None, faults=None, *, stale: bool = False, status: int = 200):
    units, linkage = request.shop.units, study.revision.survey.linkage
    weights = study.weights or USUAL
    context = _table(request, study) | {
        "car": study.revision.car,
        "revision": study.revision,
        "stale": stale,
        "weights": WEIGHTS.items(),
        "yards": yards(study.limits, weights, units, linkage, typed, faults),
        "usual": not study.weights,
        "figures": [study_measure(key, units, linkage) for key in FIGURES],
        "provisional": bridge.provisional(study.revision),
    }
    return render(request, "studies/study.html", context, status=status)


@shop_view()
def study(request: HttpRequest, pk: int) -> HttpResponse:
    return _page(request, _study(pk))


@shop_view()
def table(request: HttpRequest, pk: int) -> HttpResponse:
    """The ranked table alone, asked for again while the study runs."""
    return render(request, "studies/_table.html", _table(request, _study(pk)))


@action_view(WRITE)
def rank(request: HttpRequest, pk: int) -> HttpResponse:
    """Set limits and weights; keep them under a name where one is given."""
    study, typed = _study(pk), request.POST.dict()
    try:
        limits = read_limits(typed, request.shop.units, study.revision.survey.linkage)
        weights = read_weights(typed)
        version = typed.get("version", "")
        services.set_yardstick(request.member, study, int(version) if version.isdecimal() else 0, limits, weights)
        if typed.get("do") == "keep":
            kept = services.keep_yardstick(request.member, typed.get("name", ""), limits, weights)
            messages.success(request, f"Kept as “{kept.name}” for the next study.")
    except Refused as refused:
        if "name" in refused.faults:
            messages.error(request, refused.faults["name"])
        return _page(request, study, typed, refused.faults, status=REFUSED)
    except Stale:
        return _page(request, _study(pk), typed, stale=True, status=409)
    return redirect("studies:study", pk)


@action_view(ISSUE)
def cancel(request: HttpRequest, pk: int) -> HttpResponse:
    study = _study(pk)
    try:
        request_cancel(request.member, study.job)
        messages.success(request, "Cancelled. What is solved so far stays here.")
    except Refused as refused:
        messages.error(request, str(refused))
    return redirect("studies:study", pk)


@action_view(ISSUE)
def go_on(request: HttpRequest, pk: int) -> HttpResponse:
    """Take a cancelled or failed study up again where it stopped."""
    study = _study(pk)
    try:
        services.resume(request.member, study)
        messages.success(request, "It goes on where it stopped.")
    except Refused as refused:
        messages.error(request, str(refused))
    return redirect("studies:study", pk)


def _number(study: Study, text: str) -> int:
    if not text.isdecimal() or len(text) > 9 or int(text) >= study.choices:
        raise Http404("the study has no such choice")
    return int(text)


@shop_view()
def choice(request: HttpRequest, pk: int, number: int) -> HttpResponse:
    """One choice opened: the drawing with it on the car, its figures, and the way to make it the next revision."""
    study = _study(pk)
    plan = read_plan(study.plan)
    chosen = choice_of(plan, _number(study, str(number)))
    draft = revision_with(study.revision, _choices(study, chosen))
    units, linkage = request.shop.units, study.revision.survey.linkage
    columns, refused = services.columns_so_far(study)
    try:
        drawing, bars = side_view(bridge.scene_of(draft, ghost=study.revision)), bridge.bar_rows(draft, units)
    except Refused as fault:
        drawing, bars = None, []
        refused.setdefault(str(number), str(fault))
    base = _base_number(plan)
    rows = []
    for key in FIGURES:
        known = study_measure(key, units, linkage)
        if key not in columns or not math.isfinite(columns[key][number]):
            continue
        before = columns[key][base] if base is not None else math.nan
        change = step_text(known, float(columns[key][number] - before)) if math.isfinite(before) else ""
        rows.append((known, known.text(float(columns[key][number])), change))
    context = {
        "study": study,
        "car": study.revision.car,
        "revision": study.revision,
        "number": number,
        "drawing": drawing,
        "changes": changes_of(chosen, plan.base, units),
        "rows": rows,
        "bars": bars,
        "fault": refused.get(str(number)),
        "may_write": request.member.may(WRITE),
    }
    return render(request, "studies/choice.html", context)


def _base_number(plan) -> int | None:
    """The choice that is the revision itself, where the plan has it."""
    for number, chosen in enumerate(plan.between(0, len(plan))):
        if all(key in plan.base and same(value, plan.base[key]) for key, value in chosen.items()):
            return number
    return None


def _choices(study: Study, chosen: Choice) -> Choices:
    words = ", ".join(changes_of(chosen, study.plan["base"], study.shop.units))
    return choices_with(study.revision, chosen, study.shop.units, f"From study “{study.name}”: {words}")


@action_view(WRITE)
def make_revision(request: HttpRequest, pk: int, number: int) -> HttpResponse:
    """Begin the next revision with this choice on the car."""
    study = _study(pk)
    chosen = choice_of(read_plan(study.plan), _number(study, str(number)))
    choices = _choices(study, chosen)
    draft = start_draft(request.member, study.revision.car, study.revision.survey, study.revision, choices)
    messages.success(request, "Kept as a draft with this choice on the car. Look at it once more, then issue it.")
    return redirect("setups:edit", draft.pk)


@shop_view()
def columns(request: HttpRequest, pk: int) -> JsonResponse:
    """Chosen figures of every choice in the shop's units, for the plots; null where there is none yet."""
    study = _study(pk)
    units, linkage = request.shop.units, study.revision.survey.linkage
    stand = standing(study, units, list(SHOWN), most=0)
    plan = read_plan(study.plan)
    wanted = [key for key in request.GET.get("figures", "").split(",") if key in FIGURES] or list(SHOWN[:2])
    channels = {}
    for key in wanted:
        known = study_measure(key, units, linkage)
        unit = unit_of(known.dimension, known.unit)
        values = stand.columns[key] * known.scale / unit.factor - unit.offset
        channels[key] = {"label": known.label, "unit": known.unit, "values": _rounded(values)}
    answer = {
        "count": study.choices,
        "columns": channels,
        "meets": stand.among.astype(int).tolist(),
        "words": [
            ", ".join(changes_of(chosen, plan.base, units)) or "as on the car"
            for chosen in plan.between(0, study.choices)
        ],
        "front": [],
        "running": not study.job.settled,
    }
    if len(wanted) >= 2:
        first, second = (np.where(stand.among, stand.columns[key], np.nan) for key in wanted[:2])
        more = [request.GET.get(name, "more") != "less" for name in ("first", "second")]
        answer["front"] = pareto_front(first, second, more_first=more[0], more_second=more[1]).tolist()
    return JsonResponse(answer)


def _rounded(values) -> list[float | None]:
    return [float(f"{value:.6g}") if math.isfinite(value) else None for value in values.tolist()]


@shop_view()
def export(request: HttpRequest, pk: int) -> HttpResponse:
    """Every choice with every figure, SI, as CSV (RFC 4180): what it varies first, then what it did."""
    study = _study(pk)
    found, refused = services.columns_so_far(study)
    plan = read_plan(study.plan)
    names = sorted(found)
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\r\n")
    keys = [axis.key for axis in plan.axes]
    writer.writerow(["choice", *keys, *names, "refused"])
    for number, chosen in enumerate(plan.between(0, study.choices)):
        figures = ["" if not math.isfinite(found[name][number]) else repr(float(found[name][number])) for name in names]
        writer.writerow(
            [number, *(chosen.get(key, plan.base.get(key, "")) for key in keys), *figures, refused.get(str(number), "")]
        )
    answer = HttpResponse(out.getvalue(), content_type="text/csv; charset=utf-8")
    answer["Content-Disposition"] = f'attachment; filename="study-{pk}.csv"'
    return answer


@shop_view()
def stored(request: HttpRequest, pk: int) -> JsonResponse:
    """The stored input the study can be run again from."""
    job = get_object_or_404(Job, study__pk=pk)
    return JsonResponse(job.input)
