"""Writing customers, cars and surveys, each step with its line in the log."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date
from typing import Any

from django.db import models, transaction
from django.db.models import Max
from django.utils import timezone

from shop.garage.models import Bracket, Car, Customer, Measurement, Survey
from shop.garage.readings import SurveyReading
from shop.people.log import record
from shop.people.models import Membership
from shop.refusals import Refused, Stale


def add(member: Membership, row: Customer | Car) -> Customer | Car:
    """Save a new customer or car of the member's shop."""
    with transaction.atomic():
        row.shop = member.shop
        row.save()
        record(member, "added", row)
    return row


def change(member: Membership, row: Customer | Car, version: int, fields: Mapping[str, Any]) -> None:
    """Write `fields` over the row as it was at `version`; Stale when somebody else has saved it since."""
    with transaction.atomic():
        before = type(row).objects.get(pk=row.pk)
        changed = type(row).objects.filter(pk=row.pk, version=version).update(**fields, version=version + 1)
        if not changed:
            raise Stale(before)
        differs = {name: [_plain(getattr(before, name)), _plain(value)] for name, value in fields.items()
                   if getattr(before, name) != value}
        record(member, "changed", row, changes=differs)


def _plain(value: Any) -> Any:
    return str(value) if isinstance(value, models.Model) else value


def archive(member: Membership, row: Customer | Car, *, away: bool) -> None:
    """Put a customer or a car away, or fetch it back. Nothing is deleted: revisions stand on it."""
    with transaction.atomic():
        type(row).objects.filter(pk=row.pk).update(archived_at=timezone.now() if away else None)
        record(member, "put away" if away else "fetched back", row)


def add_survey(
    member: Membership, car: Car, reading: SurveyReading, taken_on: date, notes: str, parent: Survey | None = None
) -> Survey:
    """Keep a new survey of a car under its next number."""
    _must_be_sound(reading)
    with transaction.atomic():
        # Numbers are handed out one person at a time for each car.
        Car.objects.select_for_update().get(pk=car.pk)
        newest = Survey.objects.filter(car=car).aggregate(newest=Max("number"))["newest"] or 0
        survey = Survey.objects.create(
            shop=member.shop, car=car, number=newest + 1, linkage=reading.linkage, taken_on=taken_on,
            taken_by=member.user, notes=notes, parent=parent,
        )
        _write(member, survey, reading, parent)
        record(member, "measured", survey)
    return survey


def change_survey(
    member: Membership, survey: Survey, version: int, reading: SurveyReading, taken_on: date, notes: str
) -> Survey:
    """Correct a survey that no issued revision stands on yet."""
    _must_be_sound(reading)
    with transaction.atomic():
        Survey.objects.select_for_update().get(pk=survey.pk)
        if survey.locked:
            raise Refused(f"an issued revision stands on {survey}; copy it as a new survey and correct that")
        changed = Survey.objects.filter(pk=survey.pk, version=version).update(
            linkage=reading.linkage, taken_on=taken_on, notes=notes, version=version + 1
        )
        if not changed:
            raise Stale(Survey.objects.get(pk=survey.pk))
        _write(member, survey, reading)
        record(member, "corrected", survey)
    return Survey.objects.get(pk=survey.pk)


def _must_be_sound(reading: SurveyReading) -> None:
    if reading.faults:
        raise Refused(reading.faults)


def _write(member: Membership, survey: Survey, reading: SurveyReading, copied: Survey | None = None) -> None:
    """Replace what the survey holds. A value that did not change, here or on the survey this one is a
    copy of, keeps its origin, who took it and when."""
    before = {row.key: row for row in (copied or survey).measurements.all()}
    survey.measurements.all().delete()
    for key, taken in reading.taken.items():
        values = {"typed": taken.typed, "value": taken.value, "unit": taken.unit, "tolerance": taken.tolerance}
        row = before.get(key)
        # How well it is known may be judged anew without anybody measuring again.
        same = row is not None and all(getattr(row, name) == values[name] for name in ("typed", "value", "unit"))
        # A typical value that is typed in as read has been measured; a fitted one that is left alone has not.
        if row is None or not same or (row.origin == "typical") != (taken.origin == "typical"):
            Measurement.objects.create(
                shop=member.shop, survey=survey, key=key, taken_by=member.user, origin=taken.origin, **values
            )
            continue
        again = Measurement.objects.create(
            shop=member.shop, survey=survey, key=key, taken_by_id=row.taken_by_id, origin=row.origin, **values
        )
        # The day it was taken is filled in by itself on creation, so it is put back after.
        Measurement.objects.filter(pk=again.pk).update(taken_at=row.taken_at)
    survey.brackets.all().delete()
    for place, drilled in reading.brackets.items():
        Bracket.objects.create(
            shop=member.shop, survey=survey, place=place, entry=drilled.entry, unit=drilled.unit,
            tolerance=drilled.tolerance, row=drilled.row, holes=drilled.holes,
        )
