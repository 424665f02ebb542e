"""Rows for the tests of revisions: one shop with three roles, a stranger's shop, and a surveyed car."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from django_scopes import scope

from shop.demo.data import CARS, DemoCar
from shop.garage.models import Bracket, Car, Customer, Measurement, Survey
from shop.garage.quantities import BY_KEY, QUANTITIES
from shop.people.models import Membership, Shop, User
from shop.setups import services
from shop.setups.choices import beginning
from shop.setups.forms import form_of, initial_of
from shop.setups.models import Revision
from shop.units import parse_reading, unit_of


@dataclass
class World:
    shop: Shop
    owner: Membership
    mate: Membership
    reader: Membership
    stranger: Membership
    car: Car
    survey: Survey

    def form(self, parent: Revision | None = None, **typed: object) -> dict[str, str]:
        """What a browser sends for the form as it comes up, with `typed` over it."""
        with scope(shop=self.shop):
            initial = initial_of(beginning(self.survey, parent), self.shop)
        return {key: str(value) for key, value in {**initial, **typed}.items()}


def make_world(name: str = "Marigold") -> World:
    demo = next(car for car in CARS if car.name == name)
    shop = Shop.objects.create(name="Test Row Chassis", units=demo.units)
    elsewhere = Shop.objects.create(name="Other Street Chassis")
    members = {role: _member(shop, role) for role in ("owner", "technician", "reader")}
    with scope(shop=shop):
        customer = Customer.objects.create(shop=shop, name=demo.customer)
        car = Car.objects.create(shop=shop, customer=customer, name=demo.name, racing_number=demo.racing_number)
        survey = make_survey(members["owner"], car, demo)
    return World(shop, members["owner"], members["technician"], members["reader"], _member(elsewhere, "owner"), car, survey)


def _member(shop: Shop, role: str) -> Membership:
    user = User(email=f"{role}-{shop.pk}@example.test", name=f"{role.title()} {shop.pk}")
    user.set_unusable_password()
    user.save()
    return Membership.objects.create(shop=shop, user=user, role=role)


def make_survey(member: Membership, car: Car, demo: DemoCar, number: int = 1, **measured: str) -> Survey:
    survey = Survey.objects.create(
        shop=car.shop, car=car, number=number, linkage=demo.linkage, taken_on=date(2026, 3, 2), taken_by=member.user
    )
    known: dict[str, float] = {}
    for quantity in QUANTITIES:
        typed = {**demo.measured, **measured}.get(quantity.key)
        unit = quantity.unit(demo.units)
        if typed is not None:
            reading = quantity.read(typed, unit)
            _measure(survey, member, quantity.key, reading.typed, reading.value, reading.unit, "measured")
            known[quantity.key] = reading.si
    for quantity in QUANTITIES:
        if quantity.key in known or quantity.typical is None or demo.linkage not in quantity.linkages:
            continue
        value = quantity.typical(known)
        if value is not None:
            known[quantity.key] = value
            unit = quantity.unit(demo.units)
            shown = _in_unit(quantity.key, value, unit)
            _measure(survey, member, quantity.key, f"{shown:.6g}", shown, unit, "typical")
    for place, (x1, z1, x2, z2, count) in demo.brackets.items():
        _bracket(survey, place, [BY_KEY["wheelbase"].unit(demo.units), x1, z1, x2, z2], count)
    return survey


def _in_unit(key: str, si: float, unit: str) -> float:
    return unit_of(BY_KEY[key].dimension, unit).from_si(si)


def _measure(survey: Survey, member: Membership, key: str, typed: str, value: float, unit: str, origin: str) -> None:
    Measurement.objects.create(
        shop=survey.shop, survey=survey, key=key, typed=typed, value=value, unit=unit, tolerance=0.0, origin=origin,
        taken_by=member.user,
    )


def _bracket(survey: Survey, place: str, row: list[str], count: int) -> None:
    unit = row[0]
    x1, z1, x2, z2 = (parse_reading(text, unit, "length").value for text in row[1:])
    holes = [[x1 + (x2 - x1) * i / (count - 1), z1 + (z2 - z1) * i / (count - 1)] for i in range(count)]
    Bracket.objects.create(
        shop=survey.shop, survey=survey, place=place, entry="each", unit=unit, tolerance=0.06,
        holes=holes,
    )


def signed_in(client, member: Membership):
    """The client, as that member."""
    client.force_login(member.user, backend="django.contrib.auth.backends.ModelBackend")
    return client


def make_draft(world: World, parent: Revision | None = None, reason: str = "Baseline", **typed: object) -> Revision:
    """A draft as a form would make it, with `typed` over what it begins from."""
    with scope(shop=world.shop):
        begun = services.new_revision(world.owner, world.car, world.survey, parent)
        form = form_of(begun, world.shop, world.form(parent, reason=reason, **typed))
        assert form.is_valid(), form.errors
        return services.start_draft(world.owner, world.car, world.survey, parent, form.choices)


def make_issued(world: World, parent: Revision | None = None, reason: str = "Baseline", **typed: object) -> Revision:
    draft = make_draft(world, parent, reason, **typed)
    with scope(shop=world.shop):
        return services.issue(world.owner, draft, draft.version)
