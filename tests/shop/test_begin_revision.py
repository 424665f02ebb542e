"""Beginning a revision: the form starts from the parent or the survey, and is kept as a draft."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.demo.data import CARS
from shop.setups.choices import beginning
from shop.setups.models import Revision
from tests.shop.setups_world import make_issued, make_survey, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def url(world, query=""):
    return reverse("setups:new", args=[world.car.pk]) + query


def send(client, world, **typed):
    return client.post(url(world), world.form(reason="Baseline", do="keep", **typed))


def test_it_works(client, world):
    typed = {"upper_chassis": 4, "rear_pressure": "12 1/4", "front_spring_rate": "20 N/mm"}
    response = send(signed_in(client, world.owner), world, **typed)
    with scope(shop=world.shop):
        draft = Revision.objects.get()
    assert response.url == reverse("setups:edit", args=[draft.pk])
    assert (draft.number, draft.author, draft.reason) == (None, world.owner.user, "Baseline")
    assert draft.holes["upper_chassis"] == 4
    assert draft.settings["rear_pressure"] == {"typed": "12 1/4", "value": 12.25, "unit": "psi"}
    assert draft.settings["front_spring_rate"] == {"typed": "20 N/mm", "value": 20.0, "unit": "N/mm"}


def test_a_team_mate_may(client, world):
    assert send(signed_in(client, world.mate), world).status_code == 302


def test_a_reader_may_look_but_not_send(client, world):
    client = signed_in(client, world.reader)
    assert client.get(url(world)).status_code == 200
    assert send(client, world).status_code == 403


def test_a_stranger_does_not_find_it(client, world):
    client = signed_in(client, world.stranger)
    assert client.get(url(world)).status_code == 404
    assert send(client, world).status_code == 404


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).get("/cars/987654/revisions/new").status_code == 404


@pytest.mark.parametrize("query", ["?from=seven", "?from=987654", "?survey=x", "?survey=987654", "?survey=²"])
def test_a_malformed_id(client, world, query):
    assert signed_in(client, world.owner).get(url(world, query)).status_code == 404


def test_the_first_one_begins_from_the_survey(world):
    with scope(shop=world.shop):
        begun = beginning(world.survey, None)
    assert begun.settings["rear_spring_rate"] == {"typed": "165", "value": 165.0, "unit": "lb/in"}
    assert begun.settings["front_limiter"]["typed"] == "4 1/2"
    assert begun.holes == {"lower_chassis": 3, "lower_housing": 2, "upper_chassis": 3, "upper_housing": 2}
    assert begun.settings["hit_peak"]["unit"] == "g"


def test_the_next_one_begins_from_its_parent(client, world):
    parent = make_issued(world, upper_chassis=2, rear_pressure="12 1/4", notes="of the parent alone")
    page = signed_in(client, world.owner).get(url(world)).content.decode()
    assert "12 1/4" in page
    assert "of the parent alone" not in page
    with scope(shop=world.shop):
        begun = beginning(world.survey, parent)
    assert begun.holes["upper_chassis"] == 2
    assert begun.settings["rear_pressure"]["typed"] == "12 1/4"


def test_a_hole_the_new_survey_lacks_goes_to_the_middle(world):
    parent = make_issued(world, upper_chassis=5)
    with scope(shop=world.shop):
        newer = make_survey(world.owner, world.car, next(car for car in CARS if car.name == "Marigold"), number=2)
        bracket = newer.brackets.get(place="upper_chassis")
        bracket.holes = bracket.holes[:3]
        bracket.save()
        assert beginning(newer, parent).holes["upper_chassis"] == 2


def test_a_typical_setting_gives_way_to_a_measured_one(world):
    """The ladder-bar car's front shock was never measured: what stood in for it is not carried on."""
    world = make_world("Tin Lantern")
    parent = make_issued(world)
    assert parent.settings["front_shock_rate"]["origin"] == "typical"
    with scope(shop=world.shop):
        demo = next(car for car in CARS if car.name == "Tin Lantern")
        newer = make_survey(world.owner, world.car, demo, number=2, front_shock_rate="7 1/2")
        setting = beginning(newer, parent).settings["front_shock_rate"]
    assert setting == {"typed": "7 1/2", "value": 7.5, "unit": "lb·s/in"}


def test_a_car_nobody_measured_says_so(client, world):
    with scope(shop=world.shop):
        world.survey.brackets.all().delete()
        world.survey.measurements.all().delete()
        world.survey.delete()
    page = signed_in(client, world.owner).get(url(world))
    assert page.status_code == 200
    assert "measure" in page.content.decode().lower()


@pytest.mark.parametrize(
    ("field", "typed", "words"),
    [
        ("upper_chassis", "9", "the bracket has holes 1 to 5; “9” is not one of them"),
        ("upper_chassis", "", "choose one of the holes 1 to 5"),
        ("rear_spring_rate", "-40", "-40 is outside 1.0 lb/in to 2,500.0 lb/in"),
        ("rear_spring_rate", "", "Rear springs, each must be set"),
        ("rear_pressure", "80 kPa!", "“kPa!” does not fit here"),
        ("rear_pressure", "nan", "not a finite number"),
        ("hit_peak", "inf", "not a finite number"),
        ("ride_height_rear", "1e9", "1e9 is outside"),
        ("ride_height_rear", "five", "“five” is not a number"),
    ],
)
def test_a_fault_stands_beside_its_field_with_everything_typed(client, world, field, typed, words):
    kept = {"notes": "Pads levelled.", "front_pressure": "28 3/8"}
    response = send(signed_in(client, world.owner), world, **{**kept, field: typed})
    page = response.content.decode()
    assert response.status_code == 422
    assert words in page.split(f'id="beside-{field}"')[1].split("</div>")[0]
    assert "Pads levelled." in page and "28 3/8" in page and (not typed or f"{typed}" in page)
    with scope(shop=world.shop):
        assert not Revision.objects.exists()


def test_the_hit_as_a_table(client, world):
    lines = "0 0\n0.04 3,200\n0.3 2,900"
    send(signed_in(client, world.owner), world, hit_kind="table", hit_lines=lines, hit_lines_unit="lbf", hit_peak="")
    with scope(shop=world.shop):
        draft = Revision.objects.get()
    assert [time for time, _ in draft.hit_table] == [0.0, 0.04, 0.3]
    assert draft.hit_table[1][1] == pytest.approx(3200 * 4.4482216152605)
    assert (draft.hit_lines, draft.hit_lines_unit) == (lines, "lbf")
