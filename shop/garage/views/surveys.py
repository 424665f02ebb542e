"""Surveys: measure, look at, correct, copy, and the sheet one takes along to the car."""

from __future__ import annotations

from datetime import date

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.utils import timezone

from shop.garage import services
from shop.garage.models import Car, Survey
from shop.garage.quantities import BRACKETS, BRACKETS_OF, BY_KEY, QUANTITIES, SECTIONS
from shop.garage.readings import SurveyReading, read_survey
from shop.garage.survey_form import brackets, sections, typed_of
from shop.people.access import form_view, shop_view
from shop.people.permissions import WRITE
from shop.refusals import Refused, Stale

REFUSED = 422
LINKAGES = dict(Survey._meta.get_field("linkage").choices)


def _linkage(typed) -> str:
    asked = typed.get("linkage", "four-link")
    return asked if asked in LINKAGES else "four-link"


def _taken_on(typed, reading: SurveyReading) -> date:
    text = typed.get("taken_on", "")
    try:
        day = date.fromisoformat(text)
    except ValueError:
        reading.fault("taken_on", f"“{text}” is not a date; write it like 2026-05-31")
        return timezone.localdate()
    if day > timezone.localdate():
        reading.fault("taken_on", "the car cannot have been measured after today")
    return day


def _page(request: HttpRequest, car: Car, typed, reading, *, survey=None, stale=None, status: int = 200) -> HttpResponse:
    linkage, units = _linkage(typed), request.shop.units
    context = {
        "car": car, "survey": survey, "typed": typed, "reading": reading, "stale": stale, "linkage": linkage,
        "linkages": LINKAGES.items(), "sections": sections(typed, reading, linkage, units),
        "brackets": brackets(typed, reading, linkage, units), "today": timezone.localdate().isoformat(),
        "faults": reading.faults if reading else {}, "may_write": request.member.may(WRITE),
        "version": typed.get("version") or (survey.version if survey else 0),
    }
    return render(request, "garage/survey_form.html", context, status=status)


@form_view(WRITE)
def new(request: HttpRequest, car_id: int) -> HttpResponse:
    """A new survey, blank or a copy of `from`, to measure again what has changed."""
    car = get_object_or_404(Car, pk=car_id)
    asked = request.GET.get("from", "")
    parent = get_object_or_404(Survey, pk=int(asked), car=car) if asked.isdecimal() and len(asked) < 18 else None
    if request.method != "POST":
        typed = typed_of(parent) | {"taken_on": timezone.localdate().isoformat(), "notes": ""} if parent else {}
        typed |= {"linkage": request.GET["linkage"]} if "linkage" in request.GET else {}
        return _page(request, car, typed, None)
    typed = request.POST.dict()
    reading = read_survey(typed, _linkage(typed), request.shop.units)
    day = _taken_on(typed, reading)
    if reading.faults or typed.get("do") == "look":
        return _page(request, car, typed, reading, status=REFUSED if reading.faults else 200)
    survey = services.add_survey(request.member, car, reading, day, typed.get("notes", "")[:4000], parent)
    messages.success(request, f"Survey {survey.number} of {car} is kept.")
    return redirect("garage:survey", survey.pk)


@form_view(WRITE)
def edit(request: HttpRequest, pk: int) -> HttpResponse:
    """Correct a survey that nothing issued stands on."""
    survey = get_object_or_404(Survey.objects.select_related("car"), pk=pk)
    if survey.locked:
        words = f"An issued revision stands on survey {survey.number}, so it stays as it is. Copy it instead."
        messages.error(request, words)
        return redirect("garage:survey", pk)
    if request.method != "POST":
        return _page(request, survey.car, typed_of(survey), None, survey=survey)
    typed = request.POST.dict()
    reading = read_survey(typed, _linkage(typed), request.shop.units)
    day = _taken_on(typed, reading)
    if reading.faults or typed.get("do") == "look":
        return _page(request, survey.car, typed, reading, survey=survey, status=REFUSED if reading.faults else 200)
    version = typed.get("version", "")
    try:
        services.change_survey(
            request.member, survey, int(version) if version.isdecimal() and len(version) < 10 else 0, reading, day,
            typed.get("notes", "")[:4000],
        )
    except Stale:
        stale = _differences(typed, typed_of(Survey.objects.get(pk=pk)))
        typed["version"] = str(Survey.objects.get(pk=pk).version)
        return _page(request, survey.car, typed, reading, survey=survey, stale=stale, status=409)
    except Refused as refused:
        messages.error(request, str(refused))
        return redirect("garage:survey", pk)
    messages.success(request, f"Survey {survey.number} is corrected.")
    return redirect("garage:survey", pk)


def _differences(mine: dict[str, str], theirs: dict[str, str]) -> list[tuple[str, str, str]]:
    """(what, theirs, yours) wherever the other person's survey differs from what was typed here."""
    found = []
    for name in dict.fromkeys([*theirs, *(name for name in mine if name not in _NOT_MEASURED)]):
        own, value = mine.get(name, ""), theirs.get(name, "")
        # A unit says nothing where no number stands before it.
        if own.strip() != value.strip() and not (name.endswith("_unit") and name.removesuffix("_unit") not in theirs):
            found.append((_words(name), value, own))
    return found


_NOT_MEASURED = ("csrfmiddlewaretoken", "version", "do")
_ENDINGS = {"_tol": "tolerance", "_unit": "unit", "_entry": "way of entry", "_lines": "holes", "_count": "number of holes",
            "_first_x": "hole 1, ahead of axle", "_first_z": "hole 1, above ground", "_last_x": "last hole, ahead of axle",
            "_last_z": "last hole, above ground"}


def _words(name: str) -> str:
    """What a field of the form is called on its page."""
    for ending, words in _ENDINGS.items():
        start = name.removesuffix(ending)
        if name.endswith(ending) and (start in BY_KEY or start in BRACKETS):
            return f"{BY_KEY[start].label if start in BY_KEY else BRACKETS[start]}: {words}"
    if name in BY_KEY:
        return BY_KEY[name].label
    return {"taken_on": "Measured on", "notes": "Notes", "linkage": "Rear linkage"}.get(name, name)


@shop_view()
def survey(request: HttpRequest, pk: int) -> HttpResponse:
    survey = get_object_or_404(Survey.objects.select_related("car__customer", "taken_by", "parent"), pk=pk)
    rows = {row.key: row for row in survey.measurements.select_related("taken_by")}
    listed = [
        (title, [(q, rows[q.key]) for q in QUANTITIES if q.section == key and q.key in rows])
        for key, title in SECTIONS.items()
    ]
    holes = [
        (BRACKETS[bracket.place], bracket, [(n, f"{x:g}", f"{z:g}") for n, (x, z) in enumerate(bracket.holes, 1)])
        for bracket in sorted(survey.brackets.all(), key=lambda b: list(BRACKETS).index(b.place))
    ]
    context = {
        "survey": survey, "car": survey.car, "listed": [(title, found) for title, found in listed if found],
        "holes": holes, "may_write": request.member.may(WRITE), "weights": _weights(survey, request.shop.units),
        "revisions": survey.revisions.select_related("car"),
        "typical_count": sum(row.origin == "typical" for row in rows.values()),
    }
    return render(request, "garage/survey.html", context)


def _weights(survey: Survey, units: str):
    from shop.launches import bridge

    return bridge.survey_figures(survey, units)


@shop_view()
def measuring_sheet(request: HttpRequest, car_id: int) -> HttpResponse:
    """Blank, in walking order, to take along under the car."""
    car = get_object_or_404(Car.objects.select_related("customer"), pk=car_id)
    linkage, units = _linkage(request.GET), request.shop.units
    listed = [
        (title, [(q, q.unit(units)) for q in QUANTITIES if q.section == key and linkage in q.linkages])
        for key, title in SECTIONS.items()
    ]
    context = {
        "car": car, "listed": [(title, rows) for title, rows in listed if rows], "linkage": LINKAGES[linkage],
        "brackets": [BRACKETS[place] for place in BRACKETS_OF[linkage]], "hole_numbers": range(1, 9),
        "length": BY_KEY["wheelbase"].unit(units),
    }
    return render(request, "garage/measuring_sheet.html", context)
