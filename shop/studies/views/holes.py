"""Every hole at once: the field of all combinations, one of them opened, and those left in it launched."""

from __future__ import annotations

from django.contrib import messages
from django.http import Http404, HttpRequest, HttpResponse, JsonResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.drawing.side_view import side_view
from shop.launches import bridge
from shop.people.access import action_view, shop_view
from shop.people.permissions import ISSUE, WRITE
from shop.refusals import Refused
from shop.setups.choices import Choices
from shop.setups.figures import beside, figures_at_rest
from shop.setups.models import Revision
from shop.setups.services import start_draft
from shop.studies import services
from shop.studies.field import field_answer, hole_plan
from shop.studies.plan import LISTED, MOST_CHOICES, Choice
from shop.studies.rows import changes_of, choice_of
from shop.studies.trying import choices_with, revision_with


def _revision(pk: int) -> Revision:
    related = ("car__customer", "survey__car", "parent", "author", "shop")
    return get_object_or_404(Revision.objects.select_related(*related), pk=pk, number__isnull=False)


@shop_view()
def field(request: HttpRequest, pk: int) -> HttpResponse:
    revision = _revision(pk)
    context = {
        "revision": revision,
        "car": revision.car,
        "count": hole_plan(revision).combinations,
        "provisional": bridge.provisional(revision),
        "may_issue": request.member.may(ISSUE),
    }
    return render(request, "studies/holes.html", context)


@shop_view()
def data(request: HttpRequest, pk: int) -> JsonResponse:
    return JsonResponse(field_answer(_revision(pk), request.shop.units))


def _choice(revision: Revision, number: int) -> Choice:
    plan = hole_plan(revision)
    if number >= plan.combinations:
        raise Http404("there is no such combination of holes")
    return choice_of(plan, number)


def _choices(revision: Revision, chosen: Choice, units: str) -> Choices:
    words = ", ".join(changes_of(chosen, hole_plan(revision).base, units))
    return choices_with(revision, chosen, units, f"From every hole of {revision.label}: {words}")


@shop_view()
def choice(request: HttpRequest, pk: int, number: int) -> HttpResponse:
    """One combination as a part of the page: the drawing, what it changes, its figures at rest, its bars."""
    revision = _revision(pk)
    chosen = _choice(revision, number)
    units = request.shop.units
    context = {
        "revision": revision,
        "number": number,
        "changes": changes_of(chosen, hole_plan(revision).base, units),
        "may_write": request.member.may(WRITE),
    }
    draft = revision_with(revision, _choices(revision, chosen, units))
    try:
        context["drawing"] = side_view(bridge.scene_of(draft, ghost=revision))
        context["groups"] = beside(figures_at_rest(revision, units), figures_at_rest(draft, units), units)
    except Refused as refused:
        context["fault"] = str(refused)
    return render(request, "studies/_hole_choice.html", context)


@action_view(WRITE)
def make_revision(request: HttpRequest, pk: int, number: int) -> HttpResponse:
    """Begin the next revision with these holes."""
    revision = _revision(pk)
    choices = _choices(revision, _choice(revision, number), request.shop.units)
    draft = start_draft(request.member, revision.car, revision.survey, revision, choices)
    messages.success(request, "Kept as a draft with these holes. Look at it once more, then issue it.")
    return redirect("setups:edit", draft.pk)


@action_view(ISSUE)
def launch(request: HttpRequest, pk: int) -> HttpResponse:
    """Launch the combinations that are left in the field, as a study of their own."""
    revision = _revision(pk)
    plan = hole_plan(revision).to_dict()
    try:
        plan |= {"mode": LISTED, "numbers": _numbers(request.POST.get("left", ""))}
        name = request.POST.get("name", "") or "Holes left in the field"
        study = services.request_study(request.member, revision, plan, name)
    except Refused as refused:
        messages.error(request, str(refused))
        return redirect("studies:holes", pk)
    messages.success(request, f"{study.choices:,} launches are queued. You may leave this page; the work goes on.")
    return redirect("studies:study", study.pk)


def _numbers(text: str) -> list[int]:
    parts = text.split(",") if text else []
    if len(parts) > MOST_CHOICES:
        raise Refused(f"{len(parts):,} choices are left; a study takes {MOST_CHOICES:,} at most: narrow the windows")
    if not all(part.isdecimal() and len(part) < 10 for part in parts):
        raise Refused("the list of choices that are left could not be read; load the page again")
    return [int(part) for part in parts]
