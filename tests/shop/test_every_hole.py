"""Every hole at once: each figure of the field equals that of the revision with those holes on it."""

import math

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.launches import bridge
from shop.setups.models import Revision
from shop.studies.field import field_answer
from shop.studies.models import Study
from tests.shop.setups_world import make_issued, make_world, signed_in

INCH = 0.0254


@pytest.fixture
def world(db):
    return make_world()


def path(name, revision, *more):
    return reverse(f"studies:{name}", args=[revision.pk, *more])


def data(client, world, revision):
    return signed_in(client, world.reader).get(path("holes-json", revision)).json()


@pytest.mark.parametrize("car,typed", [("Marigold", {}), ("Marigold", {"ride_height_rear": "6"}), ("Tin Lantern", {})])
def test_the_field_equals_the_revision_with_those_holes(db, client, car, typed):
    world = make_world(car)
    base = make_issued(world)
    holes = dict.fromkeys(base.holes, 1)
    revision = make_issued(world, base, **typed) if typed else base
    answer = data(client, world, revision)
    number = next(n for n in range(answer["count"]) if all(answer["holes"][place][n] == 1 for place in holes))
    with scope(shop=world.shop):
        other = make_issued(world, revision, **holes)
        statics, bars = bridge.statics_of(other), bridge.bar_lengths(other)
    unit = INCH if answer["figures"]["ic_x"]["unit"] == "in" else 0.001
    figure = {key: column["values"][number] for key, column in answer["figures"].items()}
    assert figure["anti_squat"] == pytest.approx(statics["anti_squat"], abs=0.006)
    assert figure["anti_squat_dynamic"] == pytest.approx(statics["anti_squat_dynamic"], abs=0.006)
    assert figure["ic_x"] * unit == pytest.approx(statics["instant_centre"]["x"], abs=0.006 * INCH)
    assert figure["ic_z"] * unit == pytest.approx(statics["instant_centre"]["z"], abs=0.006 * INCH)
    for name, length in bars.items():
        key = "lower_length" if name == "ladder" else f"{name}_length"
        assert figure[key] * unit == pytest.approx(length, abs=0.003 * INCH)


def test_the_current_choice_is_the_revisions_own(client, world):
    revision = make_issued(world, upper_chassis=2)
    answer = data(client, world, revision)
    assert {place: numbers[answer["current"]] for place, numbers in answer["holes"].items()} == revision.holes
    assert answer["count"] == math.prod(len(holes) for holes in answer["scene"]["brackets"].values())


def test_more_combinations_than_can_be_drawn_are_refused_with_the_count(world, monkeypatch):
    monkeypatch.setattr("shop.studies.field.MOST_CHOICES", 100)
    with scope(shop=world.shop):
        assert "400 combinations" in field_answer(make_issued(world), world.shop.units)["why_empty"]


def test_a_choice_is_opened_and_made_the_next_revision(client, world):
    revision = make_issued(world)
    number = 0
    shown = signed_in(client, world.mate).get(path("hole-choice", revision, number)).content.decode()
    assert "<svg" in shown and "upper chassis hole 1" in shown
    response = client.post(path("hole-revision", revision, number))
    with scope(shop=world.shop):
        draft = Revision.objects.get(number=None)
    assert response.url == reverse("setups:edit", args=[draft.pk])
    assert set(draft.holes.values()) == {1} and draft.settings == revision.settings


def test_those_left_are_launched_as_a_study(client, world):
    revision = make_issued(world)
    signed_in(client, world.owner).post(path("holes-launch", revision), {"left": "3,1,399", "name": "Left"})
    with scope(shop=world.shop):
        study = Study.objects.get()
    assert (study.choices, study.plan["mode"], study.plan["numbers"]) == (3, "listed", [3, 1, 399])
    assert client.get(reverse("studies:study", args=[study.pk])).status_code == 200


@pytest.mark.parametrize("left,words", [("", "no choice is left"), ("1,x", "could not be read"), ("400", "from 0 to 399")])
def test_a_list_that_cannot_be_launched_is_refused_in_words(client, world, left, words):
    revision = make_issued(world)
    response = signed_in(client, world.owner).post(path("holes-launch", revision), {"left": left}, follow=True)
    assert words in response.content.decode()
    with scope(shop=world.shop):
        assert not Study.objects.exists()


@pytest.mark.parametrize("name,more", [("holes-launch", ()), ("hole-revision", (0,)), ("steps", ())])
def test_who_may(client, world, name, more):
    revision = make_issued(world)
    assert signed_in(client, world.reader).post(path(name, revision, *more), {"left": "1"}).status_code == 403
    assert signed_in(client, world.stranger).post(path(name, revision, *more), {"left": "1"}).status_code == 404
    assert signed_in(client, world.owner).get(path(name, revision, *more)).status_code == 405
    with scope(shop=world.shop):
        assert not Study.objects.exists()


@pytest.mark.parametrize("address", ["/revisions/987654/holes", "/revisions/x/holes", "/revisions/987654/holes.json"])
def test_an_id_of_nothing_or_malformed(client, world, address):
    assert signed_in(client, world.owner).get(address).status_code == 404


def test_a_combination_there_is_not(client, world):
    assert signed_in(client, world.owner).get(path("hole-choice", make_issued(world), 400)).status_code == 404


def test_a_cars_studies_are_listed(client, world):
    revision = make_issued(world)
    signed_in(client, world.owner).post(path("holes-launch", revision), {"left": "3,1", "name": "Short instant centres"})
    page = reverse("studies:list", args=[world.car.pk])
    assert "Short instant centres" in client.get(page).content.decode()
    assert signed_in(client, world.stranger).get(page).status_code == 404
