"""Race weekends: what the car really did, tied to the revision that was on it."""

from __future__ import annotations

from datetime import datetime
from decimal import Decimal
from itertools import combinations

from django.conf import settings
from django.db import models
from django.db.models import F, Q
from django_scopes import ScopedManager

from shop.garage.models import FINITE, Car
from shop.people.models import Shop
from shop.setups.models import Revision
from shop.track.quantities import PRESSURE_KINDS, STATION
from shop.track.slip import COLUMNS, LONGEST_TIME, REACTION_RANGE, SPEED_UNITS, SPEEDS, TIMES, figure_text


class Weekend(models.Model):
    """One event at one place. Days and clock times are the track's own, as its slips print them."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    place = models.CharField(max_length=80)
    starts_on = models.DateField()
    ends_on = models.DateField()
    elevation = models.JSONField(null=True, blank=True, help_text="As typed: {typed, value, unit}.")
    surface = models.TextField(max_length=4000, blank=True)
    notes = models.TextField(max_length=4000, blank=True)
    version = models.PositiveIntegerField(default=1)
    created_at = models.DateTimeField(auto_now_add=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["-starts_on", "-id"]
        constraints = [
            models.CheckConstraint(condition=~Q(place=""), name="weekend_has_a_place"),
            models.CheckConstraint(condition=Q(ends_on__gte=F("starts_on")), name="weekend_ends_after_it_starts"),
        ]

    def __str__(self) -> str:
        return f"{self.place}, {self.days_text}"

    @property
    def days_text(self) -> str:
        first, last = self.starts_on, self.ends_on
        if first == last:
            return f"{first.day} {first:%b %Y}"
        start = f"{first.day}" if (first.year, first.month) == (last.year, last.month) else f"{first.day} {first:%b}"
        return f"{start} to {last.day} {last:%b %Y}"


def _slip_time(label: str) -> models.DecimalField:
    return models.DecimalField(label, max_digits=6, decimal_places=4, null=True, blank=True)


def _slip_speed(label: str) -> models.DecimalField:
    return models.DecimalField(label, max_digits=6, decimal_places=2, null=True, blank=True)


def _after(earlier: str, later: str) -> models.CheckConstraint:
    return models.CheckConstraint(
        condition=Q(**{f"{earlier}__isnull": True}) | Q(**{f"{later}__isnull": True}) | Q(**{f"{later}__gt": F(earlier)}),
        name=f"pass_{later}_after_{earlier}",
    )


def _within(field: str, least: Decimal, most: Decimal) -> models.CheckConstraint:
    return models.CheckConstraint(
        condition=Q(**{f"{field}__isnull": True}) | Q(**{f"{field}__gte": least, f"{field}__lte": most}),
        name=f"pass_{field}_in_range",
    )


class Pass(models.Model):
    """One run down the track. Only what the slip shows is filled in.

    `readings` maps the keys of track/quantities.py to {"typed", "value", "unit"}.
    `good_to` is the last mark to which an aborted pass still counts; empty for none.
    `entry_key` comes with the form, so that a form sent twice makes one pass.
    """

    LANES = [("left", "left"), ("right", "right")]
    GOOD_TO = [(column.field, column.mark) for column in TIMES[:-1]]

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    weekend = models.ForeignKey(Weekend, on_delete=models.PROTECT, related_name="passes")
    car = models.ForeignKey(Car, on_delete=models.PROTECT, related_name="passes")
    revision = models.ForeignKey(Revision, on_delete=models.PROTECT, null=True, blank=True, related_name="passes")
    number = models.PositiveIntegerField(help_text="Of this car on this weekend, from 1.")
    day = models.DateField()
    clock = models.TimeField(null=True, blank=True)
    lane = models.CharField(max_length=5, choices=LANES, blank=True)
    reaction = _slip_time("reaction")
    time_60 = _slip_time("60 ft")
    time_330 = _slip_time("330 ft")
    time_660 = _slip_time("660 ft")
    speed_660 = _slip_speed("speed at 660 ft")
    time_1000 = _slip_time("1000 ft")
    speed_1000 = _slip_speed("speed at 1000 ft")
    time_1320 = _slip_time("1320 ft")
    speed_1320 = _slip_speed("speed at 1320 ft")
    speed_unit = models.CharField(max_length=4, choices=[(unit, unit) for unit in SPEED_UNITS], default="mph")
    readings = models.JSONField(default=dict, blank=True)
    pressure_kind = models.CharField(max_length=9, choices=PRESSURE_KINDS, default=STATION)
    drive_notes = models.CharField("clutch or converter", max_length=400, blank=True)
    staging_notes = models.CharField("staging", max_length=400, blank=True)
    driver_saw = models.TextField(max_length=4000, blank=True)
    crew_saw = models.TextField(max_length=4000, blank=True)
    aborted = models.BooleanField(default=False)
    abort_reason = models.CharField(max_length=200, blank=True)
    good_to = models.CharField(max_length=9, choices=GOOD_TO, blank=True)
    entered_by = models.ForeignKey(settings.AUTH_USER_MODEL, on_delete=models.SET_NULL, null=True)
    entry_key = models.UUIDField(null=True, blank=True)
    version = models.PositiveIntegerField(default=1)
    created_at = models.DateTimeField(auto_now_add=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        verbose_name_plural = "passes"
        ordering = ["day", F("clock").asc(nulls_last=True), "id"]
        indexes = [models.Index(fields=["car", "day"]), models.Index(fields=["revision"])]
        constraints = [
            models.UniqueConstraint(fields=["weekend", "car", "number"], name="pass_number_once"),
            models.UniqueConstraint(fields=["shop", "entry_key"], name="pass_entered_once"),
            models.CheckConstraint(condition=Q(number__gte=1), name="pass_number_from_one"),
            models.CheckConstraint(condition=Q(lane__in=["", "left", "right"]), name="pass_lane_known"),
            models.CheckConstraint(condition=Q(speed_unit__in=list(SPEED_UNITS)), name="pass_speed_unit_known"),
            models.CheckConstraint(condition=Q(pressure_kind__in=["station", "altimeter"]), name="pass_pressure_kind_known"),
            models.CheckConstraint(condition=Q(aborted=True) | Q(abort_reason="", good_to=""), name="pass_aborted_or_whole"),
            models.CheckConstraint(
                condition=Q(good_to__in=["", *(column.field for column in TIMES[:-1])]), name="pass_good_to_known"
            ),
            _within("reaction", *REACTION_RANGE),
            *(_within(column.field, Decimal("0.0001"), LONGEST_TIME) for column in TIMES),
            *(_within(column.field, Decimal("0.01"), Decimal(999)) for column in SPEEDS),
            *(_after(earlier.field, later.field) for earlier, later in combinations(TIMES, 2)),
        ]

    def __str__(self) -> str:
        return f"pass {self.number} of {self.car}"

    @property
    def at(self) -> datetime | None:
        """Day and clock of the track, without a zone; None when nobody noted the time."""
        return datetime.combine(self.day, self.clock) if self.clock else None

    def figures_text(self) -> str:
        """The slip in one line, only what it shows."""
        shown = [
            f"{column.label} {figure_text(column, value, self.speed_unit)}"
            for column in COLUMNS if (value := getattr(self, column.field)) is not None
        ]
        return ", ".join(shown) or "no figures"

    def counts_to(self, field: str) -> bool:
        """Whether a figure of the slip may be compared with other passes."""
        if not self.aborted:
            return True
        marks = [column.field for column in TIMES]
        mark = field.replace("speed_", "time_")
        return bool(self.good_to) and mark in marks and marks.index(mark) <= marks.index(self.good_to)


class WeatherReading(models.Model):
    """One line of a weather station's file, in the file's units."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    weekend = models.ForeignKey(Weekend, on_delete=models.CASCADE, related_name="weather")
    day = models.DateField()
    clock = models.TimeField()
    temperature = models.FloatField()
    temperature_unit = models.CharField(max_length=4)
    pressure = models.FloatField()
    pressure_unit = models.CharField(max_length=4)
    pressure_kind = models.CharField(max_length=9, choices=PRESSURE_KINDS, default=STATION)
    humidity = models.FloatField(help_text="Percent.")

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["day", "clock"]
        constraints = [
            models.UniqueConstraint(fields=["weekend", "day", "clock"], name="weather_once_a_time"),
            models.CheckConstraint(condition=Q(humidity__gte=0) & Q(humidity__lte=100), name="weather_humidity_percent"),
            models.CheckConstraint(
                condition=Q(temperature__gt=-FINITE) & Q(temperature__lt=FINITE), name="weather_temperature_finite"
            ),
            models.CheckConstraint(condition=Q(pressure__gt=0) & Q(pressure__lt=FINITE), name="weather_pressure_positive"),
            models.CheckConstraint(
                condition=Q(pressure_kind__in=["station", "altimeter"]), name="weather_pressure_kind_known"
            ),
        ]

    def __str__(self) -> str:
        return f"weather {self.day} {self.clock:%H:%M}"

    @property
    def at(self) -> datetime:
        return datetime.combine(self.day, self.clock)
