"""Writing a revision: begin one, look at what each choice means, keep it as a draft, issue it, throw it away."""

from __future__ import annotations

from django.contrib import messages
from django.core.exceptions import PermissionDenied
from django.db.models import QuerySet
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.garage.models import Car, Survey
from shop.launches import bridge
from shop.people.access import action_view, form_view, shop_view
from shop.people.permissions import ISSUE, READ, WRITE
from shop.refusals import Refused, Stale
from shop.setups import services
from shop.setups.forms import RevisionForm, form_of
from shop.setups.models import Revision
from shop.setups.views.form_page import form_page, preview_parts

REFUSED = 422


@form_view(WRITE)
def new(request: HttpRequest, car_id: int) -> HttpResponse:
    """A revision that is not saved yet; sending it saves a draft, and issues it where that was asked."""
    car = get_object_or_404(Car, pk=car_id)
    survey = survey_asked(request, car)
    if survey is None:
        return render(request, "setups/measure_first.html", {"car": car})
    draft = services.new_revision(request.member, car, survey, parent_asked(request, car))
    newest = services.newest_number(car)
    if request.method != "POST":
        return form_page(request, draft, form_of(draft, request.shop, newest=newest))
    form = form_of(draft, request.shop, request.POST)
    if not _may_go_on(request, form, draft):
        return form_page(request, draft, form, status=REFUSED)
    saved = services.start_draft(request.member, car, survey, draft.parent, form.readable)
    return _after_saving(request, saved, form)


@form_view(WRITE)
def edit(request: HttpRequest, pk: int) -> HttpResponse:
    """A draft; an issued revision has no such page."""
    draft = get_object_or_404(_revisions(), pk=pk)
    if draft.issued:
        if request.method == "POST":
            messages.error(request, f"{draft.label} has been issued and never changes. Start the next revision from it.")
        return redirect("setups:revision", draft.pk)
    newest = services.newest_number(draft.car)
    if request.method != "POST":
        return form_page(request, draft, form_of(draft, request.shop, version=draft.version, newest=newest))
    form = form_of(draft, request.shop, request.POST)
    if not _may_go_on(request, form, draft):
        return form_page(request, draft, form, status=REFUSED)
    try:
        saved = services.save_draft(request.member, draft, form.cleaned_data["version"] or 0, form.readable)
    except Stale as stale:
        return form_page(request, draft, form, theirs=stale.row, status=409)
    except Refused as refused:
        form.add_refusal(refused)
        return form_page(request, draft, form, status=REFUSED)
    return _after_saving(request, saved, form)


@shop_view(READ, methods=("POST",))
def preview(request: HttpRequest, car_id: int) -> HttpResponse:
    """The drawing, the figures and the notes beside the fields for what is typed now. Saves nothing."""
    car = get_object_or_404(Car, pk=car_id)
    survey = survey_asked(request, car)
    if survey is None:
        raise Http404("this car has no survey")
    draft = services.new_revision(request.member, car, survey, parent_asked(request, car))
    form = form_of(draft, request.shop, request.POST)
    return preview_parts(request, draft, form)


@action_view(WRITE)
def discard(request: HttpRequest, pk: int) -> HttpResponse:
    draft = get_object_or_404(_revisions(), pk=pk)
    version = request.POST.get("version", "")
    try:
        services.discard_draft(request.member, draft, int(version) if version.isdecimal() else 0)
    except Stale:
        messages.error(request, f"{draft.label} was changed by somebody else since; look at it before throwing it away.")
        return redirect("setups:edit", pk)
    except Refused as refused:
        messages.error(request, str(refused))
        return redirect("setups:revision", pk)
    messages.success(request, f"{draft.label} was thrown away.")
    return redirect("garage:car", draft.car_id)


def _revisions() -> QuerySet[Revision]:
    related = Revision.objects.select_related("car__customer", "survey", "parent__survey", "author")
    return related.prefetch_related(*Revision.WITH_SURVEY)


def survey_asked(request: HttpRequest, car: Car) -> Survey | None:
    """The survey asked for, else the car's newest."""
    asked = request.GET.get("survey", "")
    surveys = car.surveys.prefetch_related("measurements", "brackets")
    if asked:
        return get_object_or_404(surveys, pk=_id(asked))
    return surveys.order_by("-number").first()


def parent_asked(request: HttpRequest, car: Car) -> Revision | None:
    """The issued revision asked for, else the car's newest; `from=survey` asks for none."""
    asked = request.GET.get("from", "")
    issued = _revisions().filter(car=car, number__isnull=False)
    if asked == "survey":
        return None
    if asked:
        return get_object_or_404(issued, pk=_id(asked))
    return issued.order_by("-number").first()


def _id(text: str) -> int:
    # A malformed id is an id of nothing.
    if not text.isdecimal() or len(text) > 18:
        raise Http404("no such thing")
    return int(text)


def _wants_to_issue(request: HttpRequest) -> bool:
    return request.POST.get("do") == "issue"


def _may_go_on(request: HttpRequest, form: RevisionForm, draft: Revision) -> bool:
    """Whether the form can be saved; for issuing, whether its launch can be solved as well."""
    issuing = _wants_to_issue(request)
    if issuing and not request.member.may(ISSUE):
        raise PermissionDenied(f"A {request.member.role} may not issue a revision; ask the owner of the shop.")
    if form.is_valid() and issuing:
        form.need_reason()
        try:
            bridge.check(form.readable.put_on(draft))
        except Refused as refused:
            form.add_refusal(refused)
    return form.is_valid()


def _after_saving(request: HttpRequest, saved: Revision, form: RevisionForm) -> HttpResponse:
    if not _wants_to_issue(request):
        messages.success(request, f"Kept as {saved.label}. Nothing is issued yet.")
        return redirect("setups:edit", saved.pk)
    try:
        issued = services.issue(request.member, saved, saved.version, form.cleaned_data["newest"])
    except Refused as refused:
        messages.error(request, str(refused))
        return redirect("setups:edit", saved.pk)
    except Stale:
        messages.error(request, f"{saved.label} was changed by somebody else just now; look at it before issuing it.")
        return redirect("setups:edit", saved.pk)
    messages.success(request, f"{issued.label} of {issued.car} is issued; its launch is queued.")
    return redirect("setups:revision", issued.pk)
