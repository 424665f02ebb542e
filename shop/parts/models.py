"""The shop's library: springs, shocks with their curves, tyres, tubes, rod ends, engines, clutches, converters.

A part is a name on the shelf; what is known of it is a version. Versions never change, so a
revision keeps the part it was solved with after somebody dynos the shock again.
"""

from __future__ import annotations

from django.conf import settings
from django.db import models
from django.db.models import Q
from django_scopes import ScopedManager

from shop.people.models import Shop

KINDS = {
    "spring": "spring",
    "shock": "shock",
    "tyre": "tyre",
    "tube": "tube",
    "rod_end": "rod end",
    "engine": "engine",
    "clutch": "clutch",
    "converter": "converter",
}


class Part(models.Model):
    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    kind = models.CharField(max_length=10, choices=list(KINDS.items()))
    name = models.CharField(max_length=80)
    created_at = models.DateTimeField(auto_now_add=True)
    archived_at = models.DateTimeField(null=True, blank=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["kind", "name", "id"]
        constraints = [
            models.UniqueConstraint(fields=["shop", "kind", "name"], name="part_named_once"),
            models.CheckConstraint(condition=Q(kind__in=list(KINDS)), name="part_kind_known"),
        ]

    def __str__(self) -> str:
        return self.name


class PartVersion(models.Model):
    """What was known of a part on one day. `data` is SI; its keys depend on the kind (parts/kinds.py)."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    part = models.ForeignKey(Part, on_delete=models.PROTECT, related_name="versions")
    number = models.PositiveIntegerField()
    data = models.JSONField()
    origin = models.CharField(max_length=120, help_text="Dyno sheet, maker's sheet, spring rater, catalogue.")
    dated = models.DateField()
    notes = models.TextField(max_length=2000, blank=True)
    author = models.ForeignKey(settings.AUTH_USER_MODEL, on_delete=models.SET_NULL, null=True)
    created_at = models.DateTimeField(auto_now_add=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["-number"]
        constraints = [
            models.UniqueConstraint(fields=["part", "number"], name="part_version_once"),
            models.CheckConstraint(condition=Q(number__gte=1), name="part_version_from_one"),
        ]

    def __str__(self) -> str:
        return f"{self.part} v{self.number}"
