"""Customers, their cars, and surveys: what was measured on a car, by whom, how well."""

from __future__ import annotations

from django.conf import settings
from django.core.exceptions import ValidationError
from django.db import models
from django.db.models import Q
from django_scopes import ScopedManager

from shop.garage.quantities import BRACKETS, BY_KEY
from shop.people.models import Shop
from shop.units import unit_of

FINITE = 1e12


class Customer(models.Model):
    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    name = models.CharField(max_length=80)
    phone = models.CharField(max_length=40, blank=True)
    email = models.EmailField(blank=True)
    notes = models.TextField(max_length=4000, blank=True)
    version = models.PositiveIntegerField(default=1)
    created_at = models.DateTimeField(auto_now_add=True)
    archived_at = models.DateTimeField(null=True, blank=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["name", "id"]
        constraints = [models.CheckConstraint(condition=~Q(name=""), name="customer_named")]

    def __str__(self) -> str:
        return self.name


class Car(models.Model):
    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    customer = models.ForeignKey(Customer, on_delete=models.PROTECT, related_name="cars")
    name = models.CharField(max_length=80, help_text="What the shop calls it.")
    racing_number = models.CharField(max_length=12, blank=True)
    race_class = models.CharField("class", max_length=60, blank=True)
    chassis = models.CharField(max_length=120, blank=True, help_text="Chassis, body and engine in a line.")
    notes = models.TextField(max_length=4000, blank=True)
    version = models.PositiveIntegerField(default=1)
    created_at = models.DateTimeField(auto_now_add=True)
    archived_at = models.DateTimeField(null=True, blank=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["name", "id"]
        constraints = [models.CheckConstraint(condition=~Q(name=""), name="car_named")]

    def __str__(self) -> str:
        return f"{self.name} {self.racing_number}".strip()


class Survey(models.Model):
    """What was measured on one car on one day. Locked once an issued revision stands on it."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    car = models.ForeignKey(Car, on_delete=models.PROTECT, related_name="surveys")
    number = models.PositiveIntegerField()
    linkage = models.CharField(
        max_length=12, choices=[("four-link", "four-link"), ("ladder-bar", "ladder bars")], default="four-link"
    )
    taken_on = models.DateField()
    taken_by = models.ForeignKey(settings.AUTH_USER_MODEL, on_delete=models.SET_NULL, null=True)
    notes = models.TextField(max_length=4000, blank=True)
    parent = models.ForeignKey("self", on_delete=models.SET_NULL, null=True, blank=True)
    fitted = models.JSONField(null=True, blank=True, help_text="For a survey fitted to a log: how, and how well.")
    version = models.PositiveIntegerField(default=1)
    created_at = models.DateTimeField(auto_now_add=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["-number"]
        constraints = [
            models.UniqueConstraint(fields=["car", "number"], name="survey_number_once"),
            models.CheckConstraint(condition=Q(linkage__in=["four-link", "ladder-bar"]), name="survey_linkage_known"),
            models.CheckConstraint(condition=Q(number__gte=1), name="survey_number_from_one"),
        ]

    def __str__(self) -> str:
        return f"survey {self.number} of {self.car}"

    @property
    def locked(self) -> bool:
        return self.revisions.filter(number__isnull=False).exists()


class Measurement(models.Model):
    """One value as it was measured: typed text, number, unit, tolerance, origin, who and when."""

    ORIGINS = [("measured", "measured"), ("typical", "typical"), ("fitted", "fitted to a log")]

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    survey = models.ForeignKey(Survey, on_delete=models.CASCADE, related_name="measurements")
    key = models.CharField(max_length=40)
    typed = models.CharField(max_length=60)
    value = models.FloatField()
    unit = models.CharField(max_length=12)
    tolerance = models.FloatField(help_text="Half-width, in the same unit.")
    origin = models.CharField(max_length=8, choices=ORIGINS)
    taken_by = models.ForeignKey(settings.AUTH_USER_MODEL, on_delete=models.SET_NULL, null=True)
    taken_at = models.DateTimeField(auto_now_add=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        constraints = [
            models.UniqueConstraint(fields=["survey", "key"], name="measured_once_per_survey"),
            models.CheckConstraint(
                condition=Q(tolerance__gte=0) & Q(tolerance__lt=FINITE), name="tolerance_sensible"
            ),
            models.CheckConstraint(condition=Q(value__gt=-FINITE) & Q(value__lt=FINITE), name="measurement_finite"),
            models.CheckConstraint(condition=Q(origin__in=["measured", "typical", "fitted"]), name="origin_known"),
        ]

    def __str__(self) -> str:
        return f"{self.key} {self.typed} {self.unit}"

    def clean(self) -> None:
        if self.key not in BY_KEY:
            raise ValidationError({"key": f"no quantity is called {self.key}"})

    @property
    def si(self) -> float:
        return unit_of(BY_KEY[self.key].dimension, self.unit).to_si(self.value)

    @property
    def si_tolerance(self) -> float:
        # A tolerance is a difference: a unit's offset must not enter it.
        return self.tolerance * unit_of(BY_KEY[self.key].dimension, self.unit).factor


class Bracket(models.Model):
    """The holes of one bracket, numbered from 1 at the bottom (or as the shop numbers them).

    `entry` is "row" (first hole, last hole and count as typed in `row`) or "each";
    `holes` are [x ahead of the axle, z above ground] in `unit`, at ride height.
    """

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    survey = models.ForeignKey(Survey, on_delete=models.CASCADE, related_name="brackets")
    place = models.CharField(max_length=16, choices=list(BRACKETS.items()))
    entry = models.CharField(max_length=4, choices=[("row", "first, last and count"), ("each", "hole by hole")])
    unit = models.CharField(max_length=12)
    tolerance = models.FloatField()
    origin = models.CharField(max_length=8, choices=Measurement.ORIGINS, default="measured")
    row = models.JSONField(null=True, blank=True)
    holes = models.JSONField()

    objects = ScopedManager(shop="shop")

    class Meta:
        constraints = [
            models.UniqueConstraint(fields=["survey", "place"], name="bracket_once_per_survey"),
            models.CheckConstraint(condition=Q(place__in=list(BRACKETS)), name="bracket_place_known"),
            models.CheckConstraint(
                condition=Q(tolerance__gte=0) & Q(tolerance__lt=FINITE), name="bracket_tolerance_sensible"
            ),
        ]

    def __str__(self) -> str:
        return BRACKETS[self.place]

    def si_holes(self) -> list[tuple[float, float]]:
        unit = unit_of("length", self.unit)
        return [(unit.to_si(x), unit.to_si(z)) for x, z in self.holes]
