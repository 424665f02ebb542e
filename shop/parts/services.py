"""Writing the library: a part is named once; what is known of it is added as versions and never changed."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date
from typing import Any

from django.db import IntegrityError, transaction
from django.db.models import Max
from django.utils import timezone

from shop.parts.curve_csv import Curve
from shop.parts.kinds import KINDS, Kind
from shop.parts.models import Part, PartVersion
from shop.people.log import record
from shop.people.models import Membership
from shop.refusals import Refused
from shop.units import Reading, ReadingError


@dataclass(frozen=True)
class Knowledge:
    """What a person enters for one version, read and within range."""

    numbers: dict[str, dict[str, Any]] = field(default_factory=dict)
    curves: list[Curve] = field(default_factory=list)
    origin: str = ""
    dated: date | None = None
    notes: str = ""

    @property
    def data(self) -> dict[str, Any]:
        return {"numbers": self.numbers, "curves": self.curves}


def read_numbers(kind: Kind, typed: Mapping[str, str], units: Mapping[str, str]) -> dict[str, dict[str, Any]]:
    """The kind's numbers as typed; Refused holds every fault at once, by key."""
    numbers: dict[str, dict[str, Any]] = {}
    faults: dict[str, str] = {}
    for quantity in kind.quantities:
        text = typed.get(quantity.key, "").strip()
        if not text:
            if not quantity.optional:
                faults[quantity.key] = f"{quantity.label}: needed"
            continue
        try:
            reading: Reading = quantity.read(text, units.get(quantity.key, ""))
        except ReadingError as error:
            faults[quantity.key] = f"{quantity.label}: {error}"
            continue
        numbers[quantity.key] = {"typed": reading.typed, "value": reading.value, "unit": reading.unit}
    if faults:
        raise Refused(faults)
    return numbers


def _check(kind: Kind, knowledge: Knowledge) -> None:
    faults = {}
    if kind.curve and not kind.curve.optional and not knowledge.curves:
        faults["curve"] = f"{kind.curve.label}: needed"
    if not knowledge.origin.strip():
        faults["origin"] = "say where the numbers come from: dyno sheet, maker's sheet, spring rater"
    if knowledge.dated is None:
        faults["dated"] = "say from which day the numbers are"
    if faults:
        raise Refused(faults)


def _add_version(member: Membership, part: Part, knowledge: Knowledge) -> PartVersion:
    newest = part.versions.aggregate(newest=Max("number"))["newest"] or 0
    return PartVersion.objects.create(
        shop=member.shop, part=part, number=newest + 1, data=knowledge.data, origin=knowledge.origin.strip(),
        dated=knowledge.dated, notes=knowledge.notes, author=member.user,
    )


def add_part(member: Membership, kind: str, name: str, knowledge: Knowledge) -> Part:
    """A new part with its first version."""
    if kind not in KINDS:
        raise Refused({"kind": f"“{kind}” is not a kind of part"})
    name = name.strip()
    if not name:
        raise Refused({"name": "give the part the name it has on the shelf"})
    _check(KINDS[kind], knowledge)
    try:
        with transaction.atomic():
            part = Part.objects.create(shop=member.shop, kind=kind, name=name[:80])
            _add_version(member, part, knowledge)
            record(member, "added", part)
    except IntegrityError as error:
        raise Refused({"name": f"a {KINDS[kind].label} is already called “{name}”"}) from error
    return part


def revise_part(member: Membership, part: Part, knowledge: Knowledge) -> PartVersion:
    """A new version; setups that stand on an old one keep it."""
    _check(KINDS[part.kind], knowledge)
    with transaction.atomic():
        Part.objects.select_for_update().get(pk=part.pk)
        version = _add_version(member, part, knowledge)
        record(member, "revised", part, version=version.number, origin=version.origin)
    return version


def archive_part(member: Membership, part: Part) -> None:
    """Take a part off the shelf. Its versions stay, for the revisions and studies that used them."""
    with transaction.atomic():
        Part.objects.filter(pk=part.pk).update(archived_at=timezone.now())
        record(member, "took off the shelf", part)


def restore_part(member: Membership, part: Part) -> None:
    with transaction.atomic():
        Part.objects.filter(pk=part.pk).update(archived_at=None)
        record(member, "put back on the shelf", part)
