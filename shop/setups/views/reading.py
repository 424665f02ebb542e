"""Reading one revision, and taking its car file along."""

from __future__ import annotations

import json
import re

from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.drawing.side_view import side_view
from shop.launches import bridge
from shop.people.access import shop_view
from shop.people.permissions import ISSUE, WRITE
from shop.refusals import Refused
from shop.setups.differences import survey_changes
from shop.setups.figures import beside, figures_at_rest
from shop.setups.models import Revision
from shop.setups.setting_rows import groups_of


@shop_view()
def revision(request: HttpRequest, pk: int) -> HttpResponse:
    """What is on the car, why, by whom and when; for a draft, its form instead."""
    related = Revision.objects.select_related("car__customer", "survey", "parent__survey", "parent__car", "author")
    chosen = get_object_or_404(related.prefetch_related(*Revision.WITH_SURVEY), pk=pk)
    if not chosen.issued:
        return redirect("setups:edit", pk)
    parent = chosen.parent
    context = {
        "revision": chosen,
        "car": chosen.car,
        "settings": groups_of(chosen, parent),
        "surveyed": survey_changes(parent.survey, chosen.survey) if parent else [],
        "job": chosen.jobs.filter(kind="launch").order_by("-id").first(),
        "children": chosen.children.filter(number__isnull=False).order_by("number"),
        "may_write": request.member.may(WRITE),
        "may_issue": request.member.may(ISSUE),
        **_at_rest(chosen, request.shop.units),
    }
    return render(request, "setups/revision.html", context)


@shop_view()
def download_car_file(request: HttpRequest, pk: int) -> HttpResponse:
    """The solver's input of an issued revision, exactly as frozen."""
    chosen = get_object_or_404(Revision.objects.select_related("car"), pk=pk)
    if not chosen.issued:
        raise Http404("a draft has no car file yet")
    name = re.sub(r"[^a-z0-9]+", "-", f"{chosen.car} {chosen.label}".lower()).strip("-")
    response = HttpResponse(
        json.dumps(chosen.car_file, indent=2, ensure_ascii=False) + "\n", content_type="application/json; charset=utf-8"
    )
    response["Content-Disposition"] = f'attachment; filename="{name}.json"'
    return response


def _at_rest(chosen: Revision, units: str) -> dict:
    try:
        figures = figures_at_rest(chosen, units)
        before = figures_at_rest(chosen.parent, units) if chosen.parent else None
        drawing = side_view(bridge.scene_of(chosen, chosen.holes))
        return {"groups": beside(before, figures, units), "figures": figures, "drawing": drawing}
    except Refused as refused:
        return {"groups": [], "figures": None, "drawing": "", "fault": str(refused)}
