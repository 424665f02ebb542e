"""Changing a weekend, and removing an empty one."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.track.models import Weekend
from tests.shop.setups_world import make_world, signed_in
from tests.shop.track_world import enter, make_weekend


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def weekend(world):
    return make_weekend(world)


def send(client, weekend, **typed):
    fields = {"place": weekend.place, "starts_on": "2026-05-09", "ends_on": "2026-05-10", "version": 1, **typed}
    return client.post(reverse("track:weekend-edit", args=[weekend.pk]), fields)


def fresh(world, weekend):
    with scope(shop=world.shop):
        return Weekend.objects.get(pk=weekend.pk)


def test_it_works(client, world, weekend):
    assert send(signed_in(client, world.owner), weekend, surface="Bald at 330 ft").status_code == 302
    assert (fresh(world, weekend).surface, fresh(world, weekend).version) == ("Bald at 330 ft", 2)


def test_a_team_mate_may(client, world, weekend):
    assert send(signed_in(client, world.mate), weekend).status_code == 302


def test_a_reader_may_not(client, world, weekend):
    assert send(signed_in(client, world.reader), weekend, place="Elsewhere").status_code == 403


def test_a_stranger_does_not_find_it(client, world, weekend):
    client = signed_in(client, world.stranger)
    assert send(client, weekend).status_code == 404
    assert client.get(reverse("track:weekend", args=[weekend.pk])).status_code == 404
    assert client.post(reverse("track:weekend-remove", args=[weekend.pk])).status_code == 404


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).get("/weekends/987654/").status_code == 404


def test_a_malformed_id(client, world):
    assert signed_in(client, world.owner).get("/weekends/first/").status_code == 404


def test_days_that_would_leave_a_pass_outside_are_refused(client, world, weekend):
    enter(world, weekend, time_60="1.3", day="2026-05-09")
    response = send(signed_in(client, world.owner), weekend, starts_on="2026-05-10")
    assert response.status_code == 422 and "ran on 2026-05-09, before this day" in response.content.decode()


def test_the_second_person_is_told(client, world, weekend):
    send(signed_in(client, world.mate), weekend, surface="Cold")
    response = send(signed_in(client, world.owner), weekend, surface="Hot")
    page = response.content.decode()
    assert response.status_code == 409 and "<td>Cold</td><td>Hot</td>" in page
    assert fresh(world, weekend).surface == "Cold"


def test_an_empty_one_can_be_removed(client, world, weekend):
    url = reverse("track:weekend-remove", args=[weekend.pk])
    client = signed_in(client, world.owner)
    assert client.get(url).status_code == 405
    assert client.post(url).url == reverse("track:weekends")
    with scope(shop=world.shop):
        assert not Weekend.objects.exists()


def test_one_with_passes_stays(client, world, weekend):
    enter(world, weekend, time_60="1.3")
    response = signed_in(client, world.owner).post(reverse("track:weekend-remove", args=[weekend.pk]), follow=True)
    assert "holds passes and stays" in response.content.decode()
    assert fresh(world, weekend)
