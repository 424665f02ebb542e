"""Weekends: the list, one weekend with its passes, entering and changing one."""

from __future__ import annotations

import uuid
from typing import Any

from django.contrib import messages
from django.core.paginator import Paginator
from django.db.models import Count
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse

from shop.garage.models import Car
from shop.people.access import action_view, form_view, shop_view
from shop.people.permissions import WRITE
from shop.refusals import Refused, Stale
from shop.track import services
from shop.track.form_rows import revision_choices, weekend_fields
from shop.track.forms import WeekendForm
from shop.track.models import Weekend
from shop.track.on_the_car import on_the_car
from shop.track.quantities import text_of
from shop.track.slip import TIMES
from shop.track.slip_rows import slip_rows
from shop.track.weather import CORRECTION

REFUSED, CONFLICT = 422, 409


@shop_view()
def weekends(request: HttpRequest) -> HttpResponse:
    counted = Weekend.objects.annotate(pass_count=Count("passes"), car_count=Count("passes__car", distinct=True))
    every = counted.order_by("-starts_on", "-id")
    page = Paginator(every, 40).get_page(request.GET.get("page"))
    return render(request, "track/weekends.html", {"page": page, "may_write": request.member.may(WRITE)})


@form_view(WRITE)
def new(request: HttpRequest) -> HttpResponse:
    form = WeekendForm(request.POST or None)
    if request.method == "POST" and form.is_valid():
        weekend = services.add_weekend(request.member, _values(form))
        messages.success(request, f"{weekend} is entered. The first pass can follow.")
        return redirect("track:weekend", weekend.pk)
    return _form_page(request, form, None)


@form_view(WRITE)
def edit(request: HttpRequest, pk: int) -> HttpResponse:
    weekend = get_object_or_404(Weekend, pk=pk)
    if request.method != "POST":
        return _form_page(request, WeekendForm(initial=_initial(weekend)), weekend)
    form = WeekendForm(request.POST)
    if not form.is_valid():
        return _form_page(request, form, weekend)
    try:
        services.save_weekend(request.member, weekend, form.cleaned_data["version"] or 0, _values(form))
    except Refused as refused:
        for field, words in refused.faults.items():
            form.add_error(field or None, words)
        return _form_page(request, form, weekend)
    except Stale as stale:
        return _form_page(request, form, weekend, theirs=stale.row)
    return redirect("track:weekend", pk)


@action_view(WRITE)
def remove(request: HttpRequest, pk: int) -> HttpResponse:
    weekend = get_object_or_404(Weekend, pk=pk)
    try:
        services.remove_weekend(request.member, weekend)
    except Refused as refused:
        messages.error(request, str(refused))
        return redirect("track:weekend", pk)
    messages.success(request, f"{weekend} was removed.")
    return redirect("track:weekends")


@shop_view()
def weekend(request: HttpRequest, pk: int) -> HttpResponse:
    """Three fields to enter the next pass, and what ran so far, newest first."""
    return weekend_page(request, get_object_or_404(Weekend, pk=pk))


def weekend_page(
    request: HttpRequest, weekend: Weekend, quick: dict[str, Any] | None = None, faults: dict[str, str] | None = None
) -> HttpResponse:
    """The weekend's page; `quick` and `faults` are a refused quick entry, as it was typed."""
    passes = list(weekend.passes.select_related("car", "revision", "weekend"))
    run_here = {run.car_id: run.car for run in passes}
    others = Car.objects.filter(archived_at__isnull=True).exclude(pk__in=run_here).select_related("customer")
    cars = [*sorted(run_here.values(), key=str), *others]
    quick = quick or {"car": str(passes[-1].car_id if passes else cars[0].pk if cars else ""), "mark": "time_60"}
    quick.setdefault("entry_key", str(uuid.uuid4()))
    chosen = next((car for car in cars if str(car.pk) == quick["car"]), None)
    context = {
        "weekend": weekend, "elevation": text_of(weekend.elevation),
        "rows": slip_rows(passes, weekend, request.shop.units)[::-1],
        "cars": cars, "run_here": sorted(run_here.values(), key=str), "quick": quick, "faults": faults or {},
        "marks": [(column.field, column.label) for column in TIMES], "correction": CORRECTION,
        "readings": weekend.weather.count(), "may_write": request.member.may(WRITE), **revision_field(chosen, quick),
    }
    return render(request, "track/weekend.html", context, status=REFUSED if faults else 200)


def revision_field(car: Car | None, quick: dict[str, Any]) -> dict[str, Any]:
    """The revisions to choose from for a car, the one on it chosen unless another was."""
    if car is None:
        return {"revisions": [], "on_the_car": None, "revision_chosen": ""}
    standing = on_the_car(car)
    usual = str(standing.revision.pk) if standing.revision else "none"
    chosen = quick.get("revision") or usual
    return {"revisions": revision_choices(car), "on_the_car": standing, "revision_chosen": chosen, "car": car}


def _values(form: WeekendForm) -> dict[str, Any]:
    return {name: form.cleaned_data[name] for name in ("place", "starts_on", "ends_on", "elevation", "surface", "notes")}


def _initial(weekend: Weekend) -> dict[str, Any]:
    initial = {name: getattr(weekend, name) for name in ("place", "surface", "notes", "version")}
    initial |= {"starts_on": weekend.starts_on.isoformat(), "ends_on": weekend.ends_on.isoformat()}
    if weekend.elevation:
        initial |= {"elevation": weekend.elevation["typed"], "elevation_unit": weekend.elevation["unit"]}
    return initial


def _form_page(
    request: HttpRequest, form: WeekendForm, weekend: Weekend | None, theirs: Weekend | None = None
) -> HttpResponse:
    fields = weekend_fields(form, request.shop.units)
    context = {
        "weekend": weekend, "form": form, "fields": fields, "may_write": request.member.may(WRITE),
        # Sent once more, the form then replaces what the other person saved, knowingly.
        "version": theirs.version if theirs else form["version"].value(), "theirs": theirs,
        "differences": _differences(fields, WeekendForm(initial=_initial(theirs)), request.shop.units) if theirs else [],
    }
    if weekend:
        context["remove_url"] = reverse("track:weekend-remove", args=[weekend.pk])
    status = CONFLICT if theirs else REFUSED if form.is_bound else 200
    return render(request, "track/weekend_form.html", context, status=status)


def _differences(mine: list[Any], theirs: WeekendForm, units: str) -> list[tuple[str, str, str]]:
    saved = {field.name: field.value for field in weekend_fields(theirs, units)}
    return [(f.label, saved[f.name] or "empty", f.value or "empty") for f in mine if saved[f.name] != f.value]
