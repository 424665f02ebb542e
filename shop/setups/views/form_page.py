"""How the revision form is put on a page, and how its preview is answered."""

from __future__ import annotations

from typing import Any
from urllib.parse import urlencode

from django.http import HttpRequest, HttpResponse
from django.shortcuts import render
from django.urls import reverse

from shop.drawing.side_view import side_view
from shop.launches import bridge
from shop.people.models import LogEntry
from shop.people.permissions import ISSUE, WRITE
from shop.refusals import Refused
from shop.setups import services
from shop.setups.choices import Choices
from shop.setups.differences import Change, hole_changes, setting_changes
from shop.setups.figures import Figures, beside, figures_at_rest, headline
from shop.setups.form_rows import rows_of, sections_of
from shop.setups.forms import RevisionForm
from shop.setups.models import Revision
from shop.setups.trying import try_channels


def form_page(
    request: HttpRequest, draft: Revision, form: RevisionForm, *, theirs: Revision | None = None, status: int = 200
) -> HttpResponse:
    """The whole page; `theirs` is the row somebody else saved meanwhile."""
    context = {"car": draft.car, "draft": draft, "form": form, **_meaning(request, draft, form)}
    context["query"] = _query(draft)
    context["preview_url"] = f"{reverse('setups:preview', args=[draft.car_id])}?{_query(draft)}"
    context["try_channels"] = try_channels(request.shop.units, draft.survey.linkage)
    context["may_write"] = request.member.may(WRITE)
    context["may_issue"] = request.member.may(ISSUE)
    context["next_number"] = services.newest_number(draft.car) + 1
    context["surveys"] = list(draft.car.surveys.all()) if draft.pk is None else []
    if theirs is not None:
        context["saved"] = LogEntry.objects.filter(object_type="revision", object_id=draft.pk).select_related("user").first()
        context["theirs"] = theirs
        context["against_theirs"] = _against(theirs, draft, form)
        # Sent once more, the form then replaces what the other person saved, knowingly.
        context["version"] = theirs.version
    else:
        context["version"] = form["version"].value() or ""
    return render(request, "setups/revision_form.html", context, status=status)


def preview_parts(request: HttpRequest, draft: Revision, form: RevisionForm) -> HttpResponse:
    context = {"draft": draft, "form": form, **_meaning(request, draft, form), "swapping": True}
    response = render(request, "setups/preview.html", context)
    if context["figures"] is None:
        # The last drawing that could be made stays; the notes beside the fields are swapped all the same.
        response["HX-Reswap"] = "none"
    return response


def _meaning(request: HttpRequest, draft: Revision, form: RevisionForm) -> dict[str, Any]:
    """What the present choices mean, or why that cannot be said; then the rows with every fault on them."""
    units = request.shop.units
    figures, drawing, fault = None, "", ""
    if form.is_bound:
        form.is_valid()
        form.readable.standing_in(Choices.of(draft), set(form.errors)).put_on(draft)
    if form.can_be_drawn:
        try:
            figures = figures_at_rest(draft, units)
            drawing = side_view(bridge.scene_of(draft, draft.holes), mode="choose")
        except Refused as refused:
            fault = str(refused)
            if form.is_bound:
                fault = ""
                form.add_refusal(refused)
    rows = rows_of(form, draft)
    groups = beside(_at_rest(draft.parent, units), figures, units) if figures else []
    return {"figures": figures, "groups": groups, "headline": headline(groups), "drawing": drawing, "fault": fault,
            "rows": rows, "hole_rows": [rows[place] for place in form.surveyed.hole_counts], "sections": sections_of(rows)}


def _at_rest(parent: Revision | None, units: str) -> Figures | None:
    try:
        return figures_at_rest(parent, units) if parent else None
    except Refused:
        return None


def _against(theirs: Revision, draft: Revision, form: RevisionForm) -> list[Change]:
    """What the other person's draft says where this one says something else."""
    mine = form.readable.put_on(draft)
    found = [*hole_changes(theirs, mine), *setting_changes(theirs, mine)]
    for name, label in (("reason", "What this changes, and why"), ("notes", "Notes")):
        if getattr(theirs, name) != getattr(mine, name):
            found.append(Change(name, label, getattr(theirs, name) or "empty", getattr(mine, name) or "empty"))
    return found


def _query(draft: Revision) -> str:
    return urlencode({"survey": draft.survey_id, "from": draft.parent_id or "survey"})
