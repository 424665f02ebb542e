"""Asking for a study of a revision."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.launches import bridge
from shop.people.access import form_view, shop_view
from shop.people.permissions import ISSUE
from shop.refusals import Refused
from shop.setups.models import Revision
from shop.studies import services
from shop.studies.asking import axis_fields, read_asking
from shop.studies.models import Yardstick
from shop.studies.plan import MODES, MOST_CHOICES, read_plan
from shop.studies.yardsticks import FIGURES, read_limits, yards

REFUSED = 422


def _revision(pk: int) -> Revision:
    return get_object_or_404(
        Revision.objects.select_related("car__customer", "survey__car", "parent", "author", "shop"),
        pk=pk,
        number__isnull=False,
    )


@form_view(ISSUE)
def new(request: HttpRequest, pk: int) -> HttpResponse:
    revision = _revision(pk)
    if request.method != "POST":
        return _page(request, revision, None, {})
    typed = request.POST.dict()
    try:
        plan = read_asking(typed, revision, request.shop.units)
        limits = read_limits(typed, request.shop.units, revision.survey.linkage)
        kept = (
            Yardstick.objects.filter(pk=typed["yardstick"]).first() if typed.get("yardstick", "").isdecimal() else None
        )
        if plan["mode"] == "few" and not limits and kept is None:
            raise Refused("say which figures to reach: fewest changes to what?")
        study = services.request_study(
            request.member,
            revision,
            plan,
            typed.get("name", ""),
            limits or (kept.limits if kept else None),
            kept.weights if kept else None,
        )
    except Refused as refused:
        return _page(request, revision, typed, refused.faults, status=REFUSED)
    messages.success(request, f"{study.choices:,} launches are queued. You may leave this page; the work goes on.")
    return redirect("studies:study", study.pk)


@shop_view(methods=("POST",))
def count(request: HttpRequest, pk: int) -> HttpResponse:
    """How many launches the form asks for as it stands, or why it cannot be asked."""
    revision = _revision(pk)
    try:
        plan = read_plan(read_asking(request.POST.dict(), revision, request.shop.units))
    except Refused as refused:
        return render(request, "studies/_count.html", {"faults": list(refused.faults.values())})
    return render(request, "studies/_count.html", {"count": len(plan), "combinations": plan.combinations})


def _page(request: HttpRequest, revision: Revision, typed, faults, status: int = 200) -> HttpResponse:
    fields = axis_fields(revision, request.shop.units, typed, faults)
    own = {field.key for field in fields} | set(FIGURES)
    shown = typed or _start(request)
    context = {
        "revision": revision,
        "car": revision.car,
        "typed": shown,
        "holes": [field for field in fields if field.is_hole],
        "settings": [field for field in fields if not field.is_hole],
        "modes": MODES.items(),
        "yards": yards({}, {}, request.shop.units, revision.survey.linkage, typed, faults),
        "aiming": shown.get("mode") == "few",
        "most": MOST_CHOICES,
        "yardsticks": Yardstick.objects.all(),
        "faults": [words for name, words in faults.items() if name not in own],
        "provisional": bridge.provisional(revision),
        "may_issue": request.member.may(ISSUE),
    }
    return render(request, "studies/new.html", context, status=status)


def _start(request: HttpRequest) -> dict[str, str]:
    """What the form begins with; `aim` begins with the search for few changes."""
    aiming = "aim" in request.GET
    return {"mode": "few" if aiming else "every", "seed": "1", "size": "2" if aiming else "1000"}
