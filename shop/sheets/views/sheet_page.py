"""The setup sheet, inside the shop and by a link given to somebody outside."""

from __future__ import annotations

from typing import Any

import segno
from django.http import Http404, HttpRequest, HttpResponse, HttpResponseNotAllowed
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse
from django.utils import timezone
from django.utils.safestring import SafeString, mark_safe
from django_scopes import scope, scopes_disabled

from shop.people.access import shop_view
from shop.people.permissions import WRITE
from shop.setups.models import Revision
from shop.sheets.models import SharedSheet
from shop.sheets.sheet import PAPERS, sheet_of


def issued_revision(pk: int) -> Revision:
    related = Revision.objects.select_related("shop", "car__customer", "survey", "parent__survey", "parent__car", "author")
    return get_object_or_404(related.prefetch_related(*Revision.WITH_SURVEY), pk=pk)


@shop_view()
def sheet(request: HttpRequest, pk: int) -> HttpResponse:
    revision = issued_revision(pk)
    if not revision.issued:
        return redirect("setups:edit", pk)
    address = request.build_absolute_uri(reverse("setups:revision", args=[pk]))
    context = {"may_share": request.member.may(WRITE)}
    return render(request, "sheets/sheet.html", context | _page(request, revision, address))


def shared(request: HttpRequest, token: str) -> HttpResponse:
    """For whoever holds the link: this one sheet, to read. Whatever is wrong with a link, it is not found."""
    if request.method not in ("GET", "HEAD"):
        return HttpResponseNotAllowed(("GET", "HEAD"))
    # The token itself says which shop, so this one look-up precedes any scope.
    with scopes_disabled():
        found = SharedSheet.objects.select_related("shop").filter(digest=SharedSheet.digest_of(token)).first()
    if found is None or not found.opens(timezone.now()):
        raise Http404("no sheet is shared under this address")
    with scope(shop=found.shop):
        context = _page(request, issued_revision(found.revision_id), request.build_absolute_uri(request.path))
        response = render(request, "sheets/sheet.html", context | {"outside": True, "expires_at": found.expires_at})
    response["Cache-Control"] = "private, no-store"
    response["Referrer-Policy"] = "no-referrer"
    response["X-Robots-Tag"] = "noindex, nofollow"
    return response


def _page(request: HttpRequest, revision: Revision, address: str) -> dict[str, Any]:
    paper = request.GET.get("paper", "")
    paper = paper if paper in PAPERS else revision.shop.paper
    return {
        "sheet": sheet_of(revision),
        "revision": revision,
        "car": revision.car,
        "shop": revision.shop,
        "paper": paper,
        "papers": PAPERS.items(),
        "address": address,
        "code": _code(address),
    }


def _code(address: str) -> SafeString:
    """The address as a QR code (ISO/IEC 18004), inline SVG without any style of its own."""
    drawn = segno.make(address, error="m", micro=False).svg_inline(
        scale=1, border=2, svgclass="code", lineclass=None, omitsize=True, dark="#000", light="#fff"
    )
    return mark_safe(drawn)  # noqa: S308  segno draws modules only; no text of the address is in it
