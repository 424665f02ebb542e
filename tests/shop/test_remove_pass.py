"""Taking a pass out that was entered by mistake."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.people.models import LogEntry
from tests.shop.setups_world import make_world, signed_in
from tests.shop.track_world import enter, make_weekend, passes_of


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def run(world):
    return enter(world, make_weekend(world), time_60="1.312")


def send(client, run, version=1):
    return client.post(reverse("track:pass-remove", args=[run.pk]), {"version": version})


def test_it_works_and_the_log_keeps_the_slip(client, world, run):
    send(signed_in(client, world.owner), run)
    assert passes_of(run.weekend) == []
    with scope(shop=world.shop):
        entry = LogEntry.objects.get(action="removed")
    assert entry.detail["reason"] == "60 ft 1.312 s, Harrow Bend Dragway, 9 to 10 May 2026"


def test_a_team_mate_may(client, world, run):
    send(signed_in(client, world.mate), run)
    assert passes_of(run.weekend) == []


def test_a_reader_may_not(client, world, run):
    assert send(signed_in(client, world.reader), run).status_code == 403


def test_a_stranger_does_not_find_it(client, world, run):
    assert send(signed_in(client, world.stranger), run).status_code == 404


def test_get_is_refused(client, world, run):
    assert signed_in(client, world.owner).get(reverse("track:pass-remove", args=[run.pk])).status_code == 405


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).post("/passes/987654/remove").status_code == 404


@pytest.mark.parametrize("version", [2, "", "x"])
def test_one_that_somebody_changed_since_stays(client, world, run, version):
    send(signed_in(client, world.owner), run, version)
    assert len(passes_of(run.weekend)) == 1
    with scope(shop=world.shop):
        assert not LogEntry.objects.filter(action="removed").exists()
