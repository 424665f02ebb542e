"""Links to one revision's sheet: making one, seeing what is out, taking one back."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse
from django.utils import timezone

from shop.people.access import action_view, form_view
from shop.people.permissions import WRITE
from shop.refusals import Refused
from shop.sheets import services
from shop.sheets.models import SharedSheet
from shop.sheets.views.sheet_page import issued_revision


@form_view(WRITE)
def links(request: HttpRequest, pk: int) -> HttpResponse:
    revision = issued_revision(pk)
    if not revision.issued:
        return redirect("setups:edit", pk)
    now = timezone.now()
    context = {"revision": revision, "car": revision.car, "days": services.DAYS, "may_write": request.member.may(WRITE)}
    if request.method == "POST":
        asked = request.POST.get("days", "")
        try:
            _, token = services.share(request.member, revision, int(asked) if asked.isdecimal() and len(asked) < 6 else 0)
            context["address"] = request.build_absolute_uri(reverse("sheets:shared", args=[token]))
        except Refused as refused:
            context["fault"] = str(refused)
    given = revision.shared_sheets.select_related("created_by")
    context["links"] = [(link, link.opens(now)) for link in given]
    return render(request, "sheets/links.html", context, status=422 if "fault" in context else 200)


@action_view(WRITE)
def revoke(request: HttpRequest, pk: int) -> HttpResponse:
    link = get_object_or_404(SharedSheet.objects.select_related("revision__car"), pk=pk)
    services.revoke(request.member, link)
    messages.success(request, "That link opens nothing any more.")
    return redirect("sheets:links", link.revision_id)
