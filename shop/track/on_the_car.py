"""Which revision is on a car just now, as far as the records tell."""

from __future__ import annotations

from dataclasses import dataclass

from shop.garage.models import Car
from shop.setups.models import Revision
from shop.track.models import Pass

LAST, NONE = "last", "none"


@dataclass(frozen=True)
class OnTheCar:
    """The revision, and how that is known."""

    revision: Revision | None
    words: str


def on_the_car(car: Car) -> OnTheCar:
    """The revision of the last pass that names one, unless a newer one was issued since; else the newest issued."""
    issued = Revision.objects.filter(car=car, number__isnull=False).order_by("-number").first()
    named = Pass.objects.filter(car=car, revision__isnull=False)
    last = named.select_related("revision").order_by("-created_at", "-id").first()
    if issued is None:
        return OnTheCar(None, f"{car} has no issued revision yet")
    if last is None:
        return OnTheCar(issued, f"{issued.label}, the newest; no pass names one yet")
    if issued.issued_at and issued.issued_at > last.created_at:
        return OnTheCar(issued, f"{issued.label}, issued since the last pass")
    standing = last.revision or issued
    return OnTheCar(standing, f"{standing.label}, as on the last pass")
