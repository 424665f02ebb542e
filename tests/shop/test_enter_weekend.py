"""Entering a weekend: place, days, elevation."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.track.models import Weekend
from tests.shop.setups_world import make_world, signed_in

TYPED = {"place": "Harrow Bend Dragway", "starts_on": "2026-05-09", "ends_on": "2026-05-10", "elevation": "1,250",
         "elevation_unit": "ft", "surface": "Sprayed to 330 ft"}
URL = "/weekends/new"


@pytest.fixture
def world(db):
    return make_world()


def entered(world):
    with scope(shop=world.shop):
        return list(Weekend.objects.all())


def test_it_works(client, world):
    response = signed_in(client, world.owner).post(URL, TYPED)
    weekend, = entered(world)
    assert response.url == reverse("track:weekend", args=[weekend.pk])
    assert weekend.elevation == {"typed": "1,250", "value": 1250.0, "unit": "ft"}
    page = client.get(response.url).content.decode()
    assert "9 to 10 May 2026" in page and "1,250 ft above sea level" in page


def test_a_team_mate_may(client, world):
    assert signed_in(client, world.mate).post(URL, TYPED).status_code == 302


def test_a_reader_may_not(client, world):
    assert signed_in(client, world.reader).post(URL, TYPED).status_code == 403
    assert entered(world) == []


def test_a_stranger_enters_it_in_their_own_shop(client, world):
    signed_in(client, world.stranger).post(URL, TYPED)
    assert entered(world) == []


def test_a_day_before_the_first_is_refused_and_nothing_typed_is_lost(client, world):
    response = signed_in(client, world.owner).post(URL, {**TYPED, "ends_on": "2026-05-08"})
    page = response.content.decode()
    assert response.status_code == 422
    assert "the last day is before the first" in page and "Sprayed to 330 ft" in page and 'value="1,250"' in page


@pytest.mark.parametrize("typed", [
    {"starts_on": "9999-12-31", "ends_on": ""},
    {"starts_on": "0026-05-09", "ends_on": "0026-05-10"},
    {"starts_on": "9 May"},
    {"starts_on": "2026-05-09", "ends_on": "2026-06-20"},
    {"place": ""},
    {"place": "x" * 81},
    {"place": "Harrow\x00Bend"},
    {"elevation": "99,000"},
])
def test_what_makes_no_sense_is_refused(client, world, typed):
    assert signed_in(client, world.owner).post(URL, {**TYPED, **typed}).status_code == 422
    assert entered(world) == []


def test_an_elevation_in_a_wrong_unit_is_refused(client, world):
    page = signed_in(client, world.owner).post(URL, {**TYPED, "elevation": "1250 lb"}).content.decode()
    assert "does not fit here; use ft, m" in page


def test_one_day_needs_no_last(client, world):
    signed_in(client, world.owner).post(URL, {**TYPED, "ends_on": ""})
    assert entered(world)[0].days_text == "9 May 2026"
