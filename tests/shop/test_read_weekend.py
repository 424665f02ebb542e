"""Reading weekends: the list, one weekend, and what a reader is not offered."""

from html import unescape

import pytest
from django.urls import reverse

from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.track_world import enter, make_weekend


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def weekend(world):
    weekend = make_weekend(world)
    enter(world, weekend, make_issued(world), time_60="1.312", clock="14:05", lane="left")
    return weekend


def page(client, member, url):
    response = signed_in(client, member).get(url)
    assert response.status_code == 200
    return unescape(response.content.decode())


def test_the_list_counts_cars_and_passes(client, world, weekend):
    enter(world, weekend, None, time_60="1.32")
    said = page(client, world.owner, reverse("track:weekends"))
    assert "Harrow Bend Dragway" in said and "1 car" in said and "2 passes" in said


def test_another_shops_weekends_are_not_listed(client, world, weekend):
    assert "Harrow Bend" not in page(client, world.stranger, reverse("track:weekends"))


def test_the_newest_pass_comes_first(client, world, weekend):
    enter(world, weekend, None, time_60="1.32", clock="15:00")
    said = page(client, world.owner, reverse("track:weekend", args=[weekend.pk]))
    assert said.index("Pass 2") < said.index("Pass 1")
    assert "Not corrected: no weather noted." in said


def test_a_reader_sees_the_passes_and_no_form(client, world, weekend):
    said = page(client, world.reader, reverse("track:weekend", args=[weekend.pk]))
    assert "1.312 s" in said and "Enter a pass" not in said and "Read passes from a file" not in said
    assert "Enter a weekend" not in page(client, world.reader, reverse("track:weekends"))
    one = page(client, world.reader, reverse("track:weekend-edit", args=[weekend.pk]))
    assert "<fieldset disabled>" in one and "Remove this weekend" not in one


def test_nobody_signed_in(client, world, weekend):
    response = client.get(reverse("track:weekend", args=[weekend.pk]))
    assert response.status_code == 302 and "sign-in" in response.url


def test_as_many_queries_for_many_passes_as_for_few(client, world, weekend, django_assert_max_num_queries):
    for _ in range(12):
        enter(world, weekend, None, time_60="1.32", temperature="84", pressure="28.7", humidity="40")
    client = signed_in(client, world.owner)
    with django_assert_max_num_queries(16):
        client.get(reverse("track:weekend", args=[weekend.pk]))
