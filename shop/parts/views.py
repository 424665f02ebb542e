"""The library on pages: what is on the shelf, what is known of a part, and adding to it."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date
from typing import Any

from django.contrib import messages
from django.db.models import QuerySet
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.utils import timezone

from shop.parts import services
from shop.parts.curve_csv import read_curves, write_curves
from shop.parts.kinds import KINDS, Kind
from shop.parts.models import Part
from shop.people.access import action_view, form_view, shop_view
from shop.people.permissions import WRITE
from shop.refusals import Refused
from shop.units import DIMENSIONS, default_unit, unit_of

REFUSED = 422
MOST_BYTES = 1024 * 1024


@shop_view()
def shelf(request: HttpRequest) -> HttpResponse:
    """Every part by kind, with what its newest version says."""
    words, away = request.GET.get("q", "").strip()[:80], "away" in request.GET
    parts: QuerySet[Part] = Part.objects.filter(archived_at__isnull=not away).prefetch_related("versions")
    for word in words.split():
        parts = parts.filter(name__icontains=word)
    by_kind = [(kind, [(part, *_newest(part)) for part in parts if part.kind == kind.key]) for kind in KINDS.values()]
    context = {"by_kind": by_kind, "words": words, "away": away, "may_write": request.member.may(WRITE)}
    return render(request, "parts/shelf.html", context)


def _newest(part: Part) -> tuple[Any, str]:
    version = next(iter(part.versions.all()), None)
    return version, "; ".join(f"{label} {text}" for label, text in _numbers(part, version)[:3]) if version else ""


def _numbers(part: Part, version: Any) -> list[tuple[str, str]]:
    known = version.data.get("numbers", {})
    return [
        (quantity.label, f"{known[quantity.key]['typed']} {known[quantity.key]['unit']}".strip())
        for quantity in KINDS[part.kind].quantities
        if quantity.key in known
    ]


@shop_view()
def part(request: HttpRequest, pk: int) -> HttpResponse:
    part = get_object_or_404(Part, pk=pk)
    kind = KINDS[part.kind]
    versions = [
        (version, _numbers(part, version), _curve_tables(kind, version, request.shop.units))
        for version in part.versions.select_related("author")
    ]
    context = {"part": part, "kind": kind, "versions": versions, "may_write": request.member.may(WRITE)}
    return render(request, "parts/part.html", context)


def _curve_tables(kind: Kind, version: Any, units: str) -> list[dict[str, Any]]:
    if kind.curve is None:
        return []
    x_unit, y_unit = (default_unit(dimension, units) for dimension in (kind.curve.x_dimension, kind.curve.y_dimension))
    x, y = unit_of(kind.curve.x_dimension, x_unit), unit_of(kind.curve.y_dimension, y_unit)
    tables = []
    for curve in version.data.get("curves", []):
        setting = curve["setting"]
        name = f"{setting['side']}, click {setting['click']}" if setting else kind.curve.label
        rows = [(f"{x.from_si(a):.4g}", f"{y.from_si(b):.4g}") for a, b in curve["points"]]
        heads = (f"{kind.curve.x_label} ({x_unit})", f"{kind.curve.y_label} ({y_unit})")
        tables.append({"name": name, "heads": heads, "rows": rows})
    return tables


def _kind(key: str) -> Kind:
    if key not in KINDS:
        raise Http404("no such kind of part")
    return KINDS[key]


def _page(
    request: HttpRequest, kind: Kind, typed: Mapping[str, str], faults: Mapping[str, str], part: Part | None, status: int
) -> HttpResponse:
    units = request.shop.units
    rows = [
        {
            "quantity": quantity,
            "typed": typed.get(quantity.key, ""),
            "unit": typed.get(f"{quantity.key}_unit") or quantity.unit(units),
            "units": list(DIMENSIONS[quantity.dimension]),
            "fault": faults.get(quantity.key, ""),
        }
        for quantity in kind.quantities
    ]
    own = {quantity.key for quantity in kind.quantities} | {"name", "curve", "origin", "dated"}
    context = {
        "kind": kind, "part": part, "rows": rows, "typed": typed, "faults": faults,
        "today": timezone.localdate().isoformat(),
        "others": [words for name, words in faults.items() if name not in own],
        "may_write": request.member.may(WRITE),
    }
    return render(request, "parts/form.html", context, status=status)


def _knowledge(request: HttpRequest, kind: Kind, typed: Mapping[str, str]) -> services.Knowledge:
    """What the form holds; Refused has every fault at once."""
    faults: dict[str, str] = {}
    numbers, curves = {}, []
    try:
        units = {quantity.key: typed.get(f"{quantity.key}_unit", "") for quantity in kind.quantities}
        numbers = services.read_numbers(kind, typed, units)
    except Refused as refused:
        faults |= refused.faults
    try:
        text = _curve_text(request, typed)
        if kind.curve and text.strip():
            curves = read_curves(text, kind.curve, request.shop.units)
    except Refused as refused:
        faults |= refused.faults
    dated = None
    try:
        dated = date.fromisoformat(typed.get("dated", ""))
    except ValueError:
        faults["dated"] = f"“{typed.get('dated', '')}” is not a date"
    if faults:
        raise Refused(faults)
    return services.Knowledge(numbers, curves, typed.get("origin", "")[:120], dated, typed.get("notes", "")[:2000])


def _curve_text(request: HttpRequest, typed: Mapping[str, str]) -> str:
    file = request.FILES.get("file")
    if file is None:
        return typed.get("curve", "")
    if file.size > MOST_BYTES:
        raise Refused({"curve": f"a curve is some kilobytes of text; this file has {file.size:,} bytes"})
    try:
        return file.read().decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise Refused({"curve": "the file is not text; save the sheet as CSV in UTF-8"}) from error


@form_view(WRITE)
def add(request: HttpRequest, key: str) -> HttpResponse:
    kind = _kind(key)
    if request.method != "POST":
        return _page(request, kind, {}, {}, None, 200)
    typed = request.POST.dict()
    try:
        made = services.add_part(request.member, key, typed.get("name", ""), _knowledge(request, kind, typed))
    except Refused as refused:
        return _page(request, kind, typed, refused.faults, None, REFUSED)
    messages.success(request, f"{made} is on the shelf.")
    return redirect("parts:part", made.pk)


@form_view(WRITE)
def revise(request: HttpRequest, pk: int) -> HttpResponse:
    """What is known now, as a new version; whatever stands on an old one keeps it."""
    part = get_object_or_404(Part, pk=pk)
    kind = KINDS[part.kind]
    if request.method != "POST":
        return _page(request, kind, _typed_of(part, request.shop.units), {}, part, 200)
    typed = request.POST.dict()
    try:
        version = services.revise_part(request.member, part, _knowledge(request, kind, typed))
    except Refused as refused:
        return _page(request, kind, typed, refused.faults, part, REFUSED)
    messages.success(request, f"{part} has version {version.number} now.")
    return redirect("parts:part", pk)


def _typed_of(part: Part, units: str) -> dict[str, str]:
    version = part.versions.first()
    if version is None:
        return {}
    typed = {key: str(row["typed"]) for key, row in version.data.get("numbers", {}).items()}
    typed |= {f"{key}_unit": row["unit"] for key, row in version.data.get("numbers", {}).items()}
    curve = KINDS[part.kind].curve
    if curve and version.data.get("curves"):
        typed["curve"] = write_curves(version.data["curves"], curve, units)
    return typed


@shop_view()
def curves(request: HttpRequest, pk: int, number: int) -> HttpResponse:
    """The curves of a version as CSV, as `add` and `revise` read them back."""
    part = get_object_or_404(Part, pk=pk)
    version = get_object_or_404(part.versions, number=number)
    curve = KINDS[part.kind].curve
    if curve is None or not version.data.get("curves"):
        raise Http404("this version has no curve")
    text = write_curves(version.data["curves"], curve, request.shop.units)
    answer = HttpResponse(text, content_type="text/csv; charset=utf-8")
    answer["Content-Disposition"] = f'attachment; filename="part-{pk}-version-{number}.csv"'
    return answer


@action_view(WRITE)
def take_off(request: HttpRequest, pk: int) -> HttpResponse:
    part = get_object_or_404(Part, pk=pk)
    if part.archived_at is None:
        services.archive_part(request.member, part)
    else:
        services.restore_part(request.member, part)
    messages.success(request, f"{part} is {'off the shelf' if part.archived_at is None else 'back on the shelf'}.")
    return redirect("parts:part", pk)
