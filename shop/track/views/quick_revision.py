"""A revision made between rounds: the one on the car with a few changes, issued at once under its own number."""

from __future__ import annotations

from typing import Any

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.garage.models import Car
from shop.launches import bridge
from shop.people.access import form_view
from shop.people.permissions import ISSUE
from shop.refusals import Refused
from shop.setups import services as setups
from shop.setups.choices import Choices
from shop.setups.differences import hole_changes, setting_changes
from shop.setups.form_rows import rows_of
from shop.setups.forms import RevisionForm, form_of, initial_of
from shop.setups.models import Revision
from shop.track.models import Weekend
from shop.track.on_the_car import on_the_car
from shop.track.views.weekends import REFUSED

# What one changes between rounds with the tools in the trailer; the whole form has the rest.
TRAILER = (
    "rear_shock_compression", "rear_shock_rebound", "front_shock_compression", "front_shock_rebound", "rear_pressure",
    "front_pressure", "rear_spring_rate", "front_limiter", "wheelie_bar_height", "ballast_weight",
)


@form_view(ISSUE)
def quick_revision(request: HttpRequest, weekend_id: int, car_id: int) -> HttpResponse:
    weekend = get_object_or_404(Weekend, pk=weekend_id)
    car = get_object_or_404(Car, pk=car_id)
    parent = on_the_car(car).revision
    if parent is None:
        return redirect("setups:new", car_id)
    draft = setups.new_revision(request.member, car, parent.survey, parent)
    shown = [*form_of(draft, request.shop).surveyed.hole_counts, *TRAILER]
    if request.method != "POST":
        form = form_of(draft, request.shop, newest=setups.newest_number(car))
        return _page(request, weekend, draft, form, shown)
    form = form_of(draft, request.shop, _data(request, draft, shown))
    if not _issuable(form, draft):
        return _page(request, weekend, draft, form, shown)
    saved = setups.start_draft(request.member, car, parent.survey, parent, form.choices)
    try:
        issued = setups.issue(request.member, saved, saved.version, form.cleaned_data["newest"])
    except Refused as refused:
        messages.error(request, f"{refused} What you chose is kept as {saved.label}.")
        return redirect("setups:edit", saved.pk)
    messages.success(request, f"{issued.label} of {car} is issued and counts as on the car from now on.")
    return redirect("track:weekend", weekend_id)


def _data(request: HttpRequest, draft: Revision, shown: list[str]) -> dict[str, Any]:
    """The whole revision form's data: what the parent has, with what this page shows over it."""
    data = dict(initial_of(Choices.of(draft), request.shop))
    names = [*shown, *(f"{name}_unit" for name in shown), "reason", "newest"]
    return data | {name: request.POST[name] for name in names if name in request.POST}


def _issuable(form: RevisionForm, draft: Revision) -> bool:
    if not form.is_valid():
        return False
    form.need_reason()
    changed = form.readable.put_on(draft)
    if not form.errors and draft.parent and _same(changed, draft.parent):
        label = draft.parent.label
        form.add_error(None, f"nothing differs from {label}; change something, or enter the pass with {label}")
    if not form.errors:
        try:
            bridge.check(changed)
        except Refused as refused:
            form.add_refusal(refused)
    return form.is_valid()


def _same(changed: Revision, parent: Revision) -> bool:
    return not hole_changes(parent, changed) and not setting_changes(parent, changed)


def _page(request: HttpRequest, weekend: Weekend, draft: Revision, form: RevisionForm, shown: list[str]) -> HttpResponse:
    rows = rows_of(form, draft)
    hidden = [name for name in form.errors if name not in (*shown, "reason", "__all__")]
    context = {
        "weekend": weekend, "car": draft.car, "draft": draft, "form": form, "reason": rows["reason"],
        "holes": [rows[name] for name in shown if rows[name].holes],
        "settings": [rows[name] for name in shown if not rows[name].holes],
        # A fault in a field this page does not show still has to be read somewhere.
        "elsewhere": [(rows[name].label, rows[name].fault) for name in hidden if name in rows],
        "may_issue": request.member.may(ISSUE),
    }
    return render(request, "track/quick_revision.html", context, status=REFUSED if form.is_bound else 200)
