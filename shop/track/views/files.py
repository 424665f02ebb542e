"""Passes and weather as CSV: out, and in by way of a preview that shows each row's fate before anything is written."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.garage.models import Car
from shop.people.access import action_view, form_view, shop_view
from shop.people.models import Membership
from shop.people.permissions import WRITE
from shop.refusals import Refused
from shop.track import services
from shop.track.csv_table import MOST_BYTES, MOST_ROWS, decoded, refuse_too_large
from shop.track.import_passes import Plan, plan_passes
from shop.track.models import Weekend
from shop.track.pass_csv import header_of, write_passes
from shop.track.quantities import ALTIMETER, PRESSURE_KINDS, STATION
from shop.track.views.weekends import REFUSED
from shop.track.weather_csv import default_units, plan_weather


@dataclass(frozen=True)
class Kind:
    """What differs between a file of passes and one of weather."""

    what: str
    write: Callable[[Membership, Weekend, Plan, str], int]


def _write_passes(member: Membership, weekend: Weekend, plan: Plan, name: str) -> int:
    fills = [(row.run, row.values) for row in plan.fills if row.run]
    return services.import_passes(member, weekend, [row.values for row in plan.new], fills, name)


def _write_weather(member: Membership, weekend: Weekend, plan: Plan, name: str) -> int:
    return services.import_weather(member, weekend, [row.values for row in plan.new], name)


PASSES = Kind("passes", _write_passes)
WEATHER = Kind("readings", _write_weather)


@shop_view()
def download(request: HttpRequest, weekend_id: int) -> HttpResponse:
    weekend = get_object_or_404(Weekend, pk=weekend_id)
    passes = weekend.passes.select_related("car", "revision")
    return _csv(write_passes(passes, request.shop.units), f"passes {weekend}")


@shop_view()
def blank(request: HttpRequest, weekend_id: int) -> HttpResponse:
    """A file with nothing but the headers, to fill in."""
    weekend = get_object_or_404(Weekend, pk=weekend_id)
    return _csv(",".join(header_of(request.shop.units)) + "\r\n", f"empty {weekend}")


@form_view(WRITE)
def import_passes(request: HttpRequest, weekend_id: int) -> HttpResponse:
    weekend = get_object_or_404(Weekend, pk=weekend_id)
    car_id = request.POST.get("car", "")
    car = get_object_or_404(Car, pk=int(car_id)) if car_id.isdecimal() and len(car_id) < 19 else None
    context = {
        "header": header_of(request.shop.units), "cars": Car.objects.filter(archived_at__isnull=True), "car_id": car_id,
        "kept": [("car", car_id)],
    }
    return _import(request, weekend, PASSES, context, lambda text: plan_passes(text, weekend, request.shop, car))


@form_view(WRITE)
def import_weather(request: HttpRequest, weekend_id: int) -> HttpResponse:
    weekend = get_object_or_404(Weekend, pk=weekend_id)
    kind = ALTIMETER if request.POST.get("kind") == ALTIMETER else STATION
    context = {
        "units": default_units(request.shop), "kinds": PRESSURE_KINDS, "kind": kind, "kept": [("kind", kind)],
        "readings": weekend.weather.count(),
    }
    return _import(request, weekend, WEATHER, context, lambda text: plan_weather(text, weekend, request.shop, kind))


@action_view(WRITE)
def clear_weather(request: HttpRequest, weekend_id: int) -> HttpResponse:
    weekend = get_object_or_404(Weekend, pk=weekend_id)
    gone = services.clear_weather(request.member, weekend)
    messages.success(request, f"{gone} station readings were removed.")
    return redirect("track:weather", weekend_id)


def _import(
    request: HttpRequest, weekend: Weekend, kind: Kind, context: dict[str, Any], plan_of: Callable[[str], Plan]
) -> HttpResponse:
    context |= {
        "weekend": weekend, "kind_of_file": kind, "may_write": request.member.may(WRITE),
        "most_mb": MOST_BYTES // (1024 * 1024), "most_rows": MOST_ROWS,
    }
    if request.method != "POST":
        return render(request, "track/import.html", context)
    try:
        text, notes, name = _sent(request)
        plan = plan_of(text)
    except Refused as refused:
        return render(request, "track/import.html", {**context, "fault": str(refused)}, status=REFUSED)
    plan.notes[:0] = notes
    if request.POST.get("do") == "left-over":
        return _csv(plan.left_over(), f"left over {weekend}")
    context |= {"plan": plan, "text": text, "file_name": name}
    if request.POST.get("do") != "write":
        return render(request, "track/import.html", context)
    if request.POST.get("seal") != plan.seal:
        return render(request, "track/import.html", {**context, "changed": True}, status=409)
    try:
        count = kind.write(request.member, weekend, plan, name)
    except Refused as refused:
        return render(request, "track/import.html", {**context, "fault": str(refused)}, status=REFUSED)
    messages.success(request, f"{count} {kind.what} from {name or 'the file'} are entered.")
    if plan.refused:
        # The rows that stayed out are shown once more, to be taken along and mended.
        return render(request, "track/import.html", {**context, "written": count})
    return redirect("track:weekend", weekend.pk)


def _sent(request: HttpRequest) -> tuple[str, list[str], str]:
    """Text, notes and name: from the file, else as the preview carries it."""
    file = request.FILES.get("file")
    if file is not None:
        refuse_too_large(file.size or 0)
        text, notes = decoded(file.read())
        return text, notes, file.name or ""
    text = request.POST.get("text", "")
    if not text:
        raise Refused({"file": "choose a file first"})
    return text, [], request.POST.get("file_name", "")[:120]


def _csv(text: str, title: str) -> HttpResponse:
    name = re.sub(r"[^a-z0-9]+", "-", title.lower()).strip("-")
    # The mark at the start lets spreadsheets read accents right.
    response = HttpResponse("\ufeff" + text, content_type="text/csv; charset=utf-8")
    response["Content-Disposition"] = f'attachment; filename="{name}.csv"'
    return response
