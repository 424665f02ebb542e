"""Passes: three fields between rounds, everything later, and one taken out again."""

from __future__ import annotations

import uuid
from datetime import date, timedelta
from typing import Any

from django.contrib import messages
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse

from shop.garage.models import Car
from shop.people.access import action_view, form_view, shop_view
from shop.people.permissions import ISSUE, WRITE
from shop.refusals import Refused, Stale
from shop.track import services
from shop.track.form_rows import Field, pass_sections, revision_choices
from shop.track.forms import PassForm, doubts_of, initial_of
from shop.track.models import Pass, Weekend
from shop.track.on_the_car import on_the_car
from shop.track.slip import COLUMNS, TIMES
from shop.track.slip_rows import slip_row
from shop.track.views.weekends import CONFLICT, REFUSED, revision_field, weekend_page
from shop.track.weather import CORRECTION

QUICK = ("car", "mark", "time", "revision", "entry_key", "day", "clock")


@action_view(WRITE)
def quick(request: HttpRequest, weekend_id: int) -> HttpResponse:
    """Car, one time, revision: a pass."""
    weekend = get_object_or_404(Weekend, pk=weekend_id)
    typed = {name: request.POST.get(name, "")[:60] for name in QUICK}
    if typed["mark"] not in {column.field for column in TIMES}:
        typed["mark"] = "time_60"
    data = {name: typed[name] for name in ("car", "revision", "entry_key")}
    form = PassForm({**data, typed["mark"]: typed["time"], **_now(typed, weekend)}, weekend=weekend, shop=request.shop)
    if not form.is_valid():
        faults = {name: " ".join(map(str, words)) for name, words in form.errors.items()}
        faults["time"] = faults.pop(typed["mark"], "") or faults.pop("time_60", "")
        return weekend_page(request, weekend, typed, faults)
    run = services.add_pass(request.member, weekend, form.values)
    messages.success(request, f"Pass {run.number} of {run.car} is entered: {run.figures_text()}. The rest can follow.")
    for doubt in form.doubts:
        messages.warning(request, doubt)
    return redirect("track:weekend", weekend_id)


def _now(typed: dict[str, Any], weekend: Weekend) -> dict[str, str]:
    """Day and time from the phone's own clock, when the pass is entered during the event."""
    try:
        day = date.fromisoformat(typed["day"])
    except ValueError:
        return {}
    during = weekend.starts_on <= day <= weekend.ends_on + timedelta(days=1)
    return {"day": typed["day"], "clock": typed["clock"]} if during else {}


@shop_view()
def revision_options(request: HttpRequest, weekend_id: int) -> HttpResponse:
    """The revision field of the quick entry, for the car just chosen."""
    weekend = get_object_or_404(Weekend, pk=weekend_id)
    car = get_object_or_404(Car, pk=_id(request.GET.get("car", "")))
    return render(request, "track/_revision.html", {"weekend": weekend, **revision_field(car, {})})


@form_view(WRITE)
def new(request: HttpRequest, weekend_id: int) -> HttpResponse:
    """A pass with everything at once."""
    weekend = get_object_or_404(Weekend, pk=weekend_id)
    if request.method != "POST":
        car = Car.objects.filter(pk=_id(request.GET["car"])).first() if request.GET.get("car") else _last_car(weekend)
        standing = on_the_car(car).revision if car else None
        initial = {"car": car.pk if car else "", "revision": standing.pk if standing else "none", "entry_key": uuid.uuid4()}
        return _page(request, PassForm(weekend=weekend, shop=request.shop, initial=initial), weekend, None, car)
    form = PassForm(request.POST, weekend=weekend, shop=request.shop)
    if form.is_valid():
        try:
            run = services.add_pass(request.member, weekend, form.values)
        except Refused as refused:
            _refuse(form, refused)
        else:
            messages.success(request, f"Pass {run.number} of {run.car} is entered.")
            return redirect("track:weekend", weekend_id)
    return _page(request, form, weekend, None, form.values.get("car"))


@form_view(WRITE)
def run(request: HttpRequest, pk: int) -> HttpResponse:
    """One pass: the slip raw and corrected, then everything of it to change."""
    saved = get_object_or_404(Pass.objects.select_related("car", "revision", "weekend"), pk=pk)
    weekend = saved.weekend
    if request.method != "POST":
        form = PassForm(weekend=weekend, shop=request.shop, saved=saved, initial=initial_of(saved))
        return _page(request, form, weekend, saved, saved.car)
    form = PassForm(request.POST, weekend=weekend, shop=request.shop, saved=saved)
    if form.is_valid():
        try:
            services.save_pass(request.member, saved, form.cleaned_data["version"] or 0, form.values)
        except Refused as refused:
            _refuse(form, refused)
        except Stale as stale:
            return _page(request, form, weekend, saved, saved.car, theirs=stale.row)
        else:
            messages.success(request, f"Pass {saved.number} of {saved.car} is saved.")
            return redirect("track:weekend", weekend.pk)
    return _page(request, form, weekend, saved, saved.car)


@action_view(WRITE)
def remove(request: HttpRequest, pk: int) -> HttpResponse:
    saved = get_object_or_404(Pass.objects.select_related("car", "weekend"), pk=pk)
    version = request.POST.get("version", "")
    try:
        services.remove_pass(request.member, saved, int(version) if version.isdecimal() and len(version) < 10 else 0)
    except Stale:
        messages.error(request, f"{saved} was changed by somebody else since; look at it before removing it.")
        return redirect("track:pass", pk)
    messages.success(request, f"Pass {saved.number} of {saved.car} was removed; the log keeps what its slip said.")
    return redirect("track:weekend", saved.weekend_id)


def _id(text: str) -> int:
    # A malformed id is an id of nothing.
    if not text.isdecimal() or len(text) > 18:
        raise Http404("no such thing")
    return int(text)


def _last_car(weekend: Weekend) -> Car | None:
    last = weekend.passes.select_related("car").order_by("-created_at", "-id").first()
    return last.car if last else Car.objects.filter(archived_at__isnull=True).first()


def _refuse(form: PassForm, refused: Refused) -> None:
    for field, words in refused.faults.items():
        form.add_error(field if field in form.fields else None, words)


def _page(
    request: HttpRequest, form: PassForm, weekend: Weekend, saved: Pass | None, car: Car | None, theirs: Pass | None = None
) -> HttpResponse:
    cars = [(each.pk, str(each)) for each in ([saved.car] if saved else Car.objects.filter(archived_at__isnull=True))]
    sections = pass_sections(form, cars, _revisions(car, saved))
    context = {
        "weekend": weekend, "run": saved, "car": car, "form": form, "sections": sections, "theirs": theirs,
        "differences": _differences(sections, theirs, form) if theirs else [],
        # Sent once more, the form then replaces what the other person saved, knowingly.
        "version": theirs.version if theirs else form["version"].value() or "",
        "entry_key": form["entry_key"].value() or "", "correction": CORRECTION,
        "may_write": request.member.may(WRITE), "may_issue": request.member.may(ISSUE),
    }
    if saved:
        context["remove_url"] = reverse("track:pass-remove", args=[saved.pk])
        context["row"] = slip_row(saved, list(weekend.weather.all()), request.shop.units)
        values = {column.field: getattr(saved, column.field) for column in COLUMNS}
        context["doubts"] = doubts_of({**values, "speed_unit": saved.speed_unit})
    status = CONFLICT if theirs else REFUSED if form.is_bound else 200
    return render(request, "track/pass.html", context, status=status)


def _revisions(car: Car | None, saved: Pass | None) -> list[tuple[str, str]]:
    whose = saved.car if saved else car
    return revision_choices(whose) if whose else [("none", "choose the car first")]


def _differences(sections: list[tuple[str, str, list[Field]]], theirs: Pass, form: PassForm) -> list[tuple[str, str, str]]:
    """Label, what the other person saved, and what stands in the form."""
    initial = initial_of(theirs)
    found = []
    for _, _, fields in sections:
        for field in fields:
            saved = initial.get(field.name, "")
            saved = "" if saved in (None, False) else str(saved)
            if saved != field.value:
                words = {str(value): text for value, text in field.choices}
                theirs_text, mine_text = (words.get(value, value) or "empty" for value in (saved, field.value))
                found.append((field.label, theirs_text, mine_text))
    return found
