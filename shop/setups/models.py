"""Setup revisions: what is on the car, numbered, with its parent and its why."""

from __future__ import annotations

from django.conf import settings
from django.db import models
from django.db.models import Q
from django_scopes import ScopedManager

from shop.garage.models import Car, Survey
from shop.people.models import Shop


class Revision(models.Model):
    """One setup of one car. A draft has no number; once issued it never changes.

    `holes` maps bracket places to hole numbers from 1; `settings` maps the keys of
    setups/quantities.py to {"typed", "value", "unit"}; `hit_table` is null or a list of
    [seconds, newtons], read from `hit_lines`, the table as it was typed; `car_file` is
    the solver's input, frozen when issued. The database itself refuses to change an
    issued row (a trigger in the migrations) and, through the launch that hangs on it,
    to delete one, so no code path can.
    """

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    car = models.ForeignKey(Car, on_delete=models.PROTECT, related_name="revisions")
    survey = models.ForeignKey(Survey, on_delete=models.PROTECT, related_name="revisions")
    parent = models.ForeignKey("self", on_delete=models.PROTECT, null=True, blank=True, related_name="children")
    number = models.PositiveIntegerField(null=True, blank=True)
    author = models.ForeignKey(settings.AUTH_USER_MODEL, on_delete=models.PROTECT)
    reason = models.CharField(max_length=200, help_text="What this changes, and why.")
    notes = models.TextField(max_length=4000, blank=True)
    holes = models.JSONField()
    settings = models.JSONField()
    hit_table = models.JSONField(null=True, blank=True)
    parts = models.JSONField(default=dict, blank=True)
    hit_lines = models.TextField(max_length=4000, blank=True)
    hit_lines_unit = models.CharField(max_length=12, blank=True)
    car_file = models.JSONField(null=True, blank=True)
    version = models.PositiveIntegerField(default=1)
    created_at = models.DateTimeField(auto_now_add=True)
    issued_at = models.DateTimeField(null=True, blank=True)

    objects = ScopedManager(shop="shop")
    # What reading a revision's figures needs; each row comes once however often it is asked for.
    WITH_SURVEY = ("survey__measurements", "survey__brackets", "parent__survey__measurements", "parent__survey__brackets")

    class Meta:
        ordering = [models.F("number").desc(nulls_first=True), "-id"]
        constraints = [
            models.UniqueConstraint(fields=["car", "number"], name="revision_number_once"),
            models.CheckConstraint(
                condition=Q(number__isnull=True, issued_at__isnull=True, car_file__isnull=True)
                | Q(number__gte=1, issued_at__isnull=False, car_file__isnull=False),
                name="revision_issued_whole",
            ),
            models.CheckConstraint(condition=Q(number__isnull=True) | ~Q(reason=""), name="revision_says_why"),
        ]

    def __str__(self) -> str:
        return f"{self.label} of {self.car}"

    @property
    def issued(self) -> bool:
        return self.number is not None

    @property
    def label(self) -> str:
        return f"rev {self.number}" if self.issued else f"draft {self.pk}"

    def delete(self, *args: object, **kwargs: object) -> tuple[int, dict[str, int]]:
        if self.issued:
            raise models.ProtectedError(f"{self} has been issued and stays on record", {self})
        return super().delete(*args, **kwargs)
