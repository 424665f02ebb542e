"""Loads the demo shop through the same reading and services as a person's typing goes through."""

from __future__ import annotations

from dataclasses import replace
from datetime import timedelta

from django.db import transaction
from django.utils import timezone
from django_scopes import scope

from shop.demo.data import CARS, CUSTOMERS, MEMBERS, PARTS, PASSWORD, SHOP, DemoCar
from shop.demo.weekends import load_weekends
from shop.garage.models import Bracket, Car, Customer, Measurement, Survey
from shop.garage.quantities import BY_KEY, QUANTITIES
from shop.parts.curve_csv import read_curves
from shop.parts.kinds import KINDS
from shop.parts.services import Knowledge, add_part, read_numbers
from shop.people.models import Membership, Shop, User
from shop.setups.choices import Choices, Surveyed, beginning
from shop.setups.models import Revision
from shop.setups.quantities import BY_KEY as SETTINGS
from shop.setups.services import issue, start_draft
from shop.units import default_unit, parse_reading, unit_of


def load_demo() -> Membership:
    """Make the demo shop with its members, cars, surveys and issued revisions; the owner's membership."""
    with transaction.atomic():
        shop = Shop.objects.create(**SHOP)
        members = [_member(shop, *person) for person in MEMBERS]
    owner, technician = members[0], members[1]
    with scope(shop=shop):
        for name, (phone, notes) in CUSTOMERS.items():
            Customer.objects.create(shop=shop, name=name, phone=phone, notes=notes)
        for offset, data in enumerate(CARS):
            _car(owner if offset % 2 else technician, data, days_ago=60 - 9 * offset)
        for kind, name, typed, curve, origin in PARTS:
            _part(technician, kind, name, typed, curve, origin)
        load_weekends(technician, Car.objects.get(name=CARS[0].name))
    return owner


def _part(member: Membership, kind: str, name: str, typed: dict[str, str], curve: str, origin: str) -> None:
    known = KINDS[kind]
    units = {quantity.key: quantity.unit("us") for quantity in known.quantities}
    curves = read_curves(curve, known.curve) if known.curve and curve else []
    knowledge = Knowledge(read_numbers(known, typed, units), curves, origin, timezone.localdate())
    add_part(member, kind, name, knowledge)


def _member(shop: Shop, email: str, name: str, role: str) -> Membership:
    user = User.objects.create_user(email, name, PASSWORD)
    return Membership.objects.create(shop=shop, user=user, role=role)


def _car(member: Membership, data: DemoCar, days_ago: int) -> None:
    with transaction.atomic():
        car = Car.objects.create(
            shop=member.shop,
            customer=Customer.objects.get(name=data.customer),
            name=data.name,
            racing_number=data.racing_number,
            race_class=data.race_class,
            chassis=data.chassis,
        )
        survey = _survey(member, car, data, days_ago)
    parent: Revision | None = None
    for place, planned in enumerate(data.revisions):
        choices = _choices(survey, parent, data, planned.holes, planned.settings, planned.reason)
        draft = start_draft(member, car, survey, parent, choices)
        # The first on the day after the survey, the others a fortnight and more apart, the weekends between them.
        issued_at = timezone.now() - timedelta(days=max(days_ago - 1 - 26 * place, place % 2))
        parent = issue(member, draft, draft.version, at=issued_at)


def _survey(member: Membership, car: Car, data: DemoCar, days_ago: int) -> Survey:
    survey = Survey.objects.create(
        shop=member.shop,
        car=car,
        number=1,
        linkage=data.linkage,
        taken_by=member.user,
        taken_on=(timezone.now() - timedelta(days=days_ago)).date(),
        notes=data.survey_notes,
    )
    known: dict[str, float] = {}
    for quantity in QUANTITIES:
        if data.linkage not in quantity.linkages:
            continue
        unit = quantity.unit(data.units)
        typed = data.measured.get(quantity.key)
        if typed is not None:
            reading = quantity.read(typed, unit)
            si, tolerance, origin, text, unit = (
                reading.si,
                quantity.tolerance,
                "measured",
                reading.typed,
                reading.unit,
            )
        else:
            si = quantity.typical(known) if quantity.typical else None
            if si is None or (quantity.section == "wheelie" and "wheelie_bar_x" not in known):
                continue
            tolerance = quantity.typical_tolerance(known) if quantity.typical_tolerance else quantity.tolerance
            origin = "typical"
            text = f"{unit_of(quantity.dimension, unit).from_si(si):.6g}"
        known[quantity.key] = si
        _measurement(member, survey, quantity.key, text, si, tolerance, unit, origin)
    for place, (first_x, first_z, last_x, last_z, count) in data.brackets.items():
        _bracket(member, survey, data, place, (first_x, first_z), (last_x, last_z), count)
    return survey


def _measurement(member, survey, key, text, si, tolerance, unit, origin) -> None:
    chosen = unit_of(BY_KEY[key].dimension, unit)
    Measurement.objects.create(
        shop=member.shop,
        survey=survey,
        key=key,
        typed=text,
        value=chosen.from_si(si),
        unit=unit,
        tolerance=float(f"{tolerance / chosen.factor:.3g}"),
        origin=origin,
        taken_by=member.user,
    )


def _bracket(member, survey, data: DemoCar, place, first, last, count) -> None:
    unit = default_unit("length", data.units)
    ends = [[parse_reading(text, unit, "length").value for text in end] for end in (first, last)]
    step = [(ends[1][axis] - ends[0][axis]) / (count - 1) for axis in (0, 1)]
    holes = [[ends[0][axis] + number * step[axis] for axis in (0, 1)] for number in range(count)]
    row = {"first_x": first[0], "first_z": first[1], "last_x": last[0], "last_z": last[1], "count": count}
    Bracket.objects.create(
        shop=member.shop,
        survey=survey,
        place=place,
        entry="row",
        unit=unit,
        tolerance=0.06 if unit == "in" else 1.5,
        row=row,
        holes=holes,
    )


def _choices(survey: Survey, parent: Revision | None, data: DemoCar, holes, settings, reason: str) -> Choices:
    start = beginning(survey, parent)
    surveyed = Surveyed.of(survey)
    changed = {}
    for key, typed in settings.items():
        quantity = SETTINGS[key]
        changed[key] = surveyed.as_setting(key, quantity.read(typed, quantity.unit(data.units)))
    placed = {**start.holes, **(data.holes if parent is None else {}), **holes}
    return replace(start, holes=placed, settings={**start.settings, **changed}, reason=reason)
