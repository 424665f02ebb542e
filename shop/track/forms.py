"""What a person types for a weekend and for a pass; a row of a CSV file is read by the same forms."""

from __future__ import annotations

from datetime import date, timedelta
from typing import Any

from django import forms
from django.utils import timezone

from shop.garage.models import Car
from shop.launches import bridge
from shop.people.models import Shop
from shop.quantities import Quantity
from shop.setups.models import Revision
from shop.track.models import Pass, Weekend
from shop.track.on_the_car import LAST, NONE, on_the_car
from shop.track.quantities import ELEVATION, PRESSURE_KINDS, QUANTITIES, STATION, stored
from shop.track.slip import COLUMNS, SPEED_UNITS, TIMES, Column, figure_text, order_faults, read_figure
from shop.units import DIMENSIONS, ReadingError

NOTHING_ON_THE_SLIP = "give the 60 ft or another time, or say that the pass was aborted"
TEXTS = {"drive_notes": 400, "staging_notes": 400, "driver_saw": 4000, "crew_saw": 4000, "abort_reason": 200}
_DAY_FAULT = "write the day like 2026-05-09"
_CLOCKS = ["%H:%M:%S", "%H:%M", "%I:%M %p", "%I:%M:%S %p", "%H.%M"]


def _text(length: int) -> forms.CharField:
    return forms.CharField(required=False, max_length=length)


class WeekendForm(forms.Form):
    version = forms.IntegerField(required=False, min_value=1)
    place = forms.CharField(max_length=80, error_messages={"required": "name the place"})
    starts_on = forms.DateField(error_messages={"required": "give the first day", "invalid": _DAY_FAULT})
    ends_on = forms.DateField(required=False, error_messages={"invalid": _DAY_FAULT})
    elevation = _text(60)
    elevation_unit = forms.ChoiceField(choices=[(unit, unit) for unit in DIMENSIONS["distance"]], required=False)
    surface = _text(4000)
    notes = _text(4000)

    def clean(self) -> dict[str, Any]:
        cleaned = super().clean() or {}
        first = cleaned.get("starts_on")
        if "ends_on" not in self.errors:
            cleaned["ends_on"] = cleaned.get("ends_on") or first
        last = cleaned.get("ends_on")
        if first and not 1950 <= first.year <= 2100:
            self.add_error("starts_on", f"{first} is not a day anybody raced on; check the year")
        if first and last and last < first:
            self.add_error("ends_on", f"the last day is before the first, {first}")
        elif first and last and (last - first).days > 30:
            self.add_error("ends_on", f"{(last - first).days + 1} days are no weekend; at most 31")
        cleaned["elevation"] = self._elevation(cleaned)
        return cleaned

    def _elevation(self, cleaned: dict[str, Any]) -> dict[str, Any] | None:
        typed = cleaned.get("elevation", "")
        if not typed:
            return None
        try:
            return stored(ELEVATION.read(typed, cleaned.get("elevation_unit") or "ft"))
        except ReadingError as error:
            self.add_error("elevation", str(error))
            return None


class PassForm(forms.Form):
    """Fields are named after the slip's columns and the readings' keys, `<key>_unit` for units.

    After `is_valid`, `values` holds what goes into the row.
    """

    version = forms.IntegerField(required=False, min_value=1)
    entry_key = forms.UUIDField(required=False)
    car = forms.CharField(max_length=20, required=False)
    revision = forms.CharField(max_length=20, required=False)
    number = forms.IntegerField(required=False, min_value=1, max_value=999, error_messages={
        "invalid": "number the passes of a car 1, 2, 3", "min_value": "passes are numbered from 1"})
    day = forms.DateField(required=False, error_messages={"invalid": _DAY_FAULT})
    clock = forms.TimeField(required=False, input_formats=_CLOCKS, error_messages={"invalid": "write the time like 14:05"})
    lane = forms.ChoiceField(required=False, choices=[("", "not noted"), *Pass.LANES])
    speed_unit = forms.ChoiceField(required=False, choices=[(unit, unit) for unit in SPEED_UNITS])
    pressure_kind = forms.ChoiceField(required=False, choices=PRESSURE_KINDS)
    aborted = forms.BooleanField(required=False)
    good_to = forms.ChoiceField(required=False, choices=[("", "to no mark"), *Pass.GOOD_TO])

    def __init__(self, data: Any = None, *, weekend: Weekend, shop: Shop, saved: Pass | None = None, **more: Any) -> None:
        super().__init__(data, **more)
        self.weekend, self.shop, self.saved = weekend, shop, saved
        self.values: dict[str, Any] = {}
        self.doubts: tuple[str, ...] = ()
        for column in COLUMNS:
            self.fields[column.field] = _text(30)
        for quantity in QUANTITIES:
            self.fields[quantity.key] = _text(60)
            self.fields[f"{quantity.key}_unit"] = _text(12)
        for name, length in TEXTS.items():
            self.fields[name] = _text(length)

    def clean(self) -> dict[str, Any]:
        cleaned = super().clean() or {}
        car = self._car(cleaned.get("car", ""))
        values = {name: cleaned.get(name, "") for name in (*TEXTS, "lane", "good_to")}
        values |= {"car": car, "revision": self._revision(car, cleaned.get("revision", ""))}
        values |= {name: cleaned.get(name) for name in ("number", "clock", "entry_key")}
        values["aborted"] = bool(cleaned.get("aborted"))
        values["day"] = self._day(cleaned.get("day"))
        values["speed_unit"] = cleaned.get("speed_unit") or ("km/h" if self.shop.units == "metric" else "mph")
        values["pressure_kind"] = cleaned.get("pressure_kind") or STATION
        values |= {column.field: self._figure(column, values["speed_unit"]) for column in COLUMNS}
        values["readings"] = {q.key: entry for q in QUANTITIES if (entry := self._reading(q))}
        self._slip_must_hold(values)
        self._aborted_must_hold(values)
        self.values = values
        return cleaned

    def _car(self, typed: str) -> Car | None:
        car = Car.objects.filter(pk=int(typed)).first() if typed.isdecimal() and len(typed) < 19 else None
        if car is None:
            self.add_error("car", "choose the car")
        elif self.saved and self.saved.car_id != car.pk:
            self.add_error("car", f"this pass is of {self.saved.car}; enter another car's pass as its own")
        return car

    def _revision(self, car: Car | None, typed: str) -> Revision | None:
        if car is None or typed == NONE:
            return None
        if typed in ("", LAST):
            return on_the_car(car).revision
        found = None
        if typed.isdecimal() and len(typed) < 19:
            found = Revision.objects.filter(pk=int(typed), car=car, number__isnull=False).first()
        if found is None:
            self.add_error("revision", f"{car} has no such issued revision; choose one of its own")
        return found

    def _day(self, day: date | None) -> date:
        weekend = self.weekend
        if day is None:
            # Between rounds nobody types the date: today if that is a day of the weekend.
            return min(max(timezone.localdate(), weekend.starts_on), weekend.ends_on)
        # The last rounds may run past midnight.
        if not weekend.starts_on <= day <= weekend.ends_on + timedelta(days=1):
            self.add_error("day", f"{day} is outside this weekend, {weekend.days_text}")
        return day

    def _figure(self, column: Column, speed_unit: str) -> Any:
        typed = self.cleaned_data.get(column.field, "")
        if not typed:
            return None
        try:
            return read_figure(column, typed, speed_unit)
        except ReadingError as error:
            self.add_error(column.field, str(error))
            return None

    def _reading(self, quantity: Quantity) -> dict[str, Any] | None:
        typed = self.cleaned_data.get(quantity.key, "")
        if not typed:
            return None
        try:
            return stored(quantity.read(typed, self.unit_of(quantity)))
        except ReadingError as error:
            self.add_error(quantity.key, str(error))
            return None

    def unit_of(self, quantity: Quantity) -> str:
        """The unit that stands beside a field: as sent, as stored, else the shop's own."""
        sent = self[f"{quantity.key}_unit"].value()
        return sent if sent in DIMENSIONS[quantity.dimension] else quantity.unit(self.shop.units)

    def _slip_must_hold(self, values: dict[str, Any]) -> None:
        faults = order_faults(values)
        for column in TIMES:
            if column.field not in faults and values[column.field] is not None:
                alone = bridge.check_slip({column.mark: values[column.field]}, {}, values["speed_unit"])
                if alone.faults:
                    faults[column.field] = alone.faults[0]
        for field, words in faults.items():
            self.add_error(field, words)
        if not self.errors:
            self.doubts = doubts_of(values)

    def _aborted_must_hold(self, values: dict[str, Any]) -> None:
        if values["aborted"]:
            if values["good_to"] and values[values["good_to"]] is None:
                mark = dict(Pass.GOOD_TO)[values["good_to"]]
                self.add_error("good_to", f"there is no time at {mark} that could count")
            return
        for name in ("abort_reason", "good_to"):
            if values[name]:
                self.add_error(name, "tick “aborted”, or clear this")
        if not any(values[column.field] is not None for column in COLUMNS) and not self.errors:
            self.add_error("time_60", NOTHING_ON_THE_SLIP)


def doubts_of(values: Any) -> tuple[str, ...]:
    """What is rare but possible on a slip, in words: a mistyped figure, a lift, a missed clock."""
    times = {column.mark: values[column.field] for column in TIMES if values[column.field] is not None}
    speeds = {
        column.mark: values[column.field]
        for column in COLUMNS if column.kind == "speed" and values[column.field] is not None
    }
    return bridge.check_slip(times, speeds, values["speed_unit"]).doubts


def clock_text(run: Pass) -> str:
    if run.clock is None:
        return ""
    return f"{run.clock:%H:%M:%S}" if run.clock.second else f"{run.clock:%H:%M}"


def initial_of(run: Pass) -> dict[str, Any]:
    """What the form shows for a pass already entered."""
    initial: dict[str, Any] = {name: getattr(run, name) for name in (*TEXTS, "lane", "good_to", "aborted", "number")}
    initial |= {"speed_unit": run.speed_unit, "pressure_kind": run.pressure_kind, "version": run.version}
    initial |= {"day": run.day.isoformat(), "clock": clock_text(run)}
    initial |= {"car": run.car_id, "revision": run.revision_id or NONE}
    for column in COLUMNS:
        value = getattr(run, column.field)
        initial[column.field] = "" if value is None else figure_text(column, value, unit=False).replace("−", "-")
    for key, entry in run.readings.items():
        initial[key], initial[f"{key}_unit"] = entry["typed"], entry["unit"]
    return initial
