"""Counting beside a list must not lose its order: the newest survey first, customers by name."""

from __future__ import annotations

import re

import pytest
from django.test import Client
from django_scopes import scope

from shop.garage.models import Customer, Survey
from tests.shop.setups_world import make_world, signed_in


@pytest.mark.django_db
def test_measuring_again_begins_from_the_newest_survey(client: Client) -> None:
    world = make_world()
    with scope(shop=world.shop):
        newest = Survey.objects.create(
            shop=world.shop,
            car=world.car,
            number=2,
            linkage=world.survey.linkage,
            taken_on="2026-04-01",
            taken_by=world.owner.user,
        )
    page = signed_in(client, world.owner).get(f"/cars/{world.car.pk}/").content.decode()
    assert f"surveys/new?from={newest.pk}" in page


@pytest.mark.django_db
def test_customers_stand_by_name(client: Client) -> None:
    world = make_world()
    with scope(shop=world.shop):
        for name in ("Zed Yard", "Abel Yard", "Moss Yard"):
            Customer.objects.create(shop=world.shop, name=name)
    page = signed_in(client, world.owner).get("/customers/?q=Yard").content.decode()
    assert re.findall(r"(\w+) Yard</a>", page) == ["Abel", "Moss", "Zed"]
