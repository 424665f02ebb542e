"""Studies: many choices for one car, solved in chunks, ranked by what their launches did."""

from __future__ import annotations

from django.conf import settings
from django.db import models
from django.db.models import F, Q
from django_scopes import ScopedManager

from shop.launches.models import Job
from shop.people.models import Shop
from shop.setups.models import Revision


class Study(models.Model):
    """One question asked of one revision. `plan` says which choices (studies/plan.py)."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    revision = models.ForeignKey(Revision, on_delete=models.PROTECT, related_name="studies")
    job = models.OneToOneField(Job, on_delete=models.PROTECT, related_name="study")
    name = models.CharField(max_length=120)
    plan = models.JSONField()
    choices = models.PositiveIntegerField()
    limits = models.JSONField(default=dict)
    weights = models.JSONField(default=dict)
    version = models.PositiveIntegerField(default=1)
    author = models.ForeignKey(settings.AUTH_USER_MODEL, on_delete=models.SET_NULL, null=True)
    created_at = models.DateTimeField(auto_now_add=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["-id"]
        verbose_name_plural = "studies"
        constraints = [models.CheckConstraint(condition=Q(choices__gte=1), name="study_has_choices")]

    def __str__(self) -> str:
        return f"{self.name} on {self.revision}"


class Chunk(models.Model):
    """A run of choices [start, stop): the piece of a study that a dead worker can cost.

    `figures` is the bytes of a NumPy .npz with one float64 column per figure, NaN where a choice
    was refused; `refused` maps a choice's number to the words why.
    """

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    study = models.ForeignKey(Study, on_delete=models.CASCADE, related_name="chunks")
    start = models.PositiveIntegerField()
    stop = models.PositiveIntegerField()
    attempt = models.PositiveIntegerField(default=0)
    lease_until = models.DateTimeField(null=True, blank=True)
    done_at = models.DateTimeField(null=True, blank=True)
    figures = models.BinaryField(null=True)
    refused = models.JSONField(default=dict)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["start"]
        constraints = [
            models.UniqueConstraint(fields=["study", "start"], name="chunk_once_per_study"),
            models.CheckConstraint(condition=Q(stop__gt=F("start")), name="chunk_not_empty"),
        ]

    def __str__(self) -> str:
        return f"choices {self.start} to {self.stop - 1} of {self.study}"


class Yardstick(models.Model):
    """Limits and weights a shop keeps for the next study."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    name = models.CharField(max_length=80)
    limits = models.JSONField(default=dict)
    weights = models.JSONField(default=dict)
    author = models.ForeignKey(settings.AUTH_USER_MODEL, on_delete=models.SET_NULL, null=True)
    created_at = models.DateTimeField(auto_now_add=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["name"]
        constraints = [models.UniqueConstraint(fields=["shop", "name"], name="yardstick_named_once")]

    def __str__(self) -> str:
        return self.name
