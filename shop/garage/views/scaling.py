"""The page beside the scales."""

from __future__ import annotations

from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, render

from shop.garage.models import Survey
from shop.garage.scaling import FIELDS, PADS, begin, work_out
from shop.people.access import shop_view
from shop.units import DIMENSIONS


@shop_view(methods=("GET", "HEAD", "POST"))
def scaling(request: HttpRequest, pk: int) -> HttpResponse:
    """Anybody in the shop may work it out: nothing is written."""
    survey = get_object_or_404(Survey.objects.select_related("car"), pk=pk)
    if request.method == "POST":
        page = work_out(survey, request.POST, request.shop.units)
    else:
        begun = begin(survey, request.shop.units)
        page = work_out(survey, begun.typed | {f"{key}_unit": unit for key, unit in begun.units.items()}, request.shop.units)
    rows = [
        (quantity, page.typed.get(key, ""), page.units[key], list(DIMENSIONS[quantity.dimension]), page.faults.get(key, ""))
        for key, quantity in FIELDS.items()
    ]
    context = {
        "survey": survey, "car": survey.car, "page": page, "pads": rows[: len(PADS)], "others": rows[len(PADS) :],
        "height": request.POST.get("height", "keep"), "fault": page.faults.get("", ""),
    }
    template = "garage/_scaled.html" if request.htmx else "garage/scaling.html"
    return render(request, template, context, status=422 if page.faults and not request.htmx else 200)
