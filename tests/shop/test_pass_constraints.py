"""What the database itself refuses, whatever code writes."""

import pytest
from django.db import IntegrityError, transaction
from django_scopes import scope

from shop.track.models import Pass, Weekend
from tests.shop.setups_world import make_world
from tests.shop.track_world import make_weekend


@pytest.fixture
def world(db):
    return make_world()


@pytest.mark.parametrize("fields", [
    {"time_60": "1.3", "time_330": "1.3"},
    {"time_60": "1.3", "time_1320": "1.2"},
    {"time_1000": "7.2", "time_1320": "7.1"},
    {"time_60": "0"},
    {"time_60": "-1.3"},
    {"time_1320": "61"},
    {"speed_660": "0"},
    {"reaction": "31"},
    {"number": 0},
    {"lane": "mid"},
    {"abort_reason": "shut off"},
    {"good_to": "time_60"},
    {"aborted": True, "good_to": "time_1320"},
    {"speed_unit": "m/s"},
    {"pressure_kind": "guess"},
])
def test_a_row_that_cannot_be(world, fields):
    weekend = make_weekend(world)
    with scope(shop=world.shop), pytest.raises(IntegrityError), transaction.atomic():
        row = {"shop": world.shop, "weekend": weekend, "car": world.car, "number": 1, "day": weekend.starts_on, **fields}
        Pass.objects.create(**row)


def test_one_number_once(world):
    weekend = make_weekend(world)
    row = {"shop": world.shop, "weekend": weekend, "car": world.car, "number": 1, "day": weekend.starts_on}
    with scope(shop=world.shop):
        Pass.objects.create(**row)
        with pytest.raises(IntegrityError), transaction.atomic():
            Pass.objects.create(**row)


def test_a_weekend_that_ends_before_it_starts(world):
    with scope(shop=world.shop), pytest.raises(IntegrityError), transaction.atomic():
        Weekend.objects.create(shop=world.shop, place="Harrow Bend", starts_on="2026-05-10", ends_on="2026-05-09")
