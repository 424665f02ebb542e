"""Measuring a car: what is kept, what stands in for a blank, and what the tape and the scales cannot both have said."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.garage.models import Survey
from tests.shop.setups_world import make_world, signed_in
from tests.shop.survey_world import LADDER, survey_form


@pytest.fixture
def world(db):
    return make_world()


def send(client, world, **typed):
    return client.post(reverse("garage:survey-new", args=[world.car.pk]), survey_form(**typed))


def newest(world):
    with scope(shop=world.shop):
        survey = Survey.objects.filter(car=world.car).order_by("-number").first()
        return survey, {row.key: row for row in survey.measurements.all()}, {b.place: b for b in survey.brackets.all()}


def test_it_works(client, world):
    assert send(signed_in(client, world.mate), world, wheelbase="106 3/8", wheelbase_tol="1/16").status_code == 302
    survey, rows, brackets = newest(world)
    assert survey.number == 2
    assert survey.taken_by == world.mate.user
    wheelbase = rows["wheelbase"]
    assert (wheelbase.typed, wheelbase.value, wheelbase.unit) == ("106 3/8", 106.375, "in")
    assert (wheelbase.tolerance, wheelbase.origin) == (0.0625, "measured")
    assert brackets["upper_chassis"].holes[1] == pytest.approx([18.0, 12.5])
    assert brackets["upper_chassis"].row["first_z"] == "11 1/2"


def test_a_blank_with_a_typical_value_is_kept_as_typical(client, world):
    send(signed_in(client, world.owner), world, cg_height="")
    _, rows, _ = newest(world)
    assert rows["cg_height"].origin == "typical"
    assert rows["cg_height"].value == pytest.approx(0.21 * 106, rel=1e-4)
    assert "shock_chassis_x" not in rows


def test_units_may_be_mixed_and_typed_with_the_number(client, world):
    send(signed_in(client, world.owner), world, spring_housing_z="330 mm", rear_spring_rate="29 N/mm")
    _, rows, _ = newest(world)
    assert (rows["spring_housing_z"].unit, rows["spring_housing_z"].value) == ("mm", 330.0)
    assert rows["rear_spring_rate"].si == pytest.approx(29000)


def test_holes_one_by_one(client, world):
    lines = "18, 11 1/2\n18 1/8; 12 1/2\n18 1/4, 13 1/2"
    answer = send(signed_in(client, world.owner), world, upper_chassis_entry="each", upper_chassis_lines=lines)
    assert answer.status_code == 302
    _, _, brackets = newest(world)
    assert brackets["upper_chassis"].holes == [[18.0, 11.5], [18.125, 12.5], [18.25, 13.5]]


def test_ladder_bars_need_their_one_bracket(client, world):
    address = reverse("garage:survey-new", args=[world.car.pk])
    assert signed_in(client, world.owner).post(address, survey_form(LADDER)).status_code == 302
    _, rows, brackets = newest(world)
    assert set(brackets) == {"ladder_chassis"}
    assert "lower_plan_angle" not in rows


def test_looking_keeps_nothing(client, world):
    answer = send(signed_in(client, world.owner), world, do="look", cg_height="")
    assert answer.status_code == 200
    assert "typical, nobody measured it" in answer.content.decode()
    assert newest(world)[0].number == 1


REFUSED = [
    ({"wheelbase": ""}, "must be measured"),
    ({"wheelbase": "NaN"}, "not a finite number"),
    ({"wheelbase": "1e9"}, "outside 60.000 in to 350.000 in"),
    ({"wheelbase": "long"}, "is not a number"),
    ({"wheelbase": "106 lb"}, "does not fit here"),
    ({"rear_spring_rate": "-165"}, "outside 1.0 lb/in"),
    ({"wheelbase_tol": "-1"}, "a tolerance is between 0"),
    ({"total_weight": "2900"}, "add up to 2,850.0 lb, the total reads 2,900.0 lb"),
    ({"empty_lf": "900"}, "driver would weigh"),
    ({"empty_lf": ""}, "all four corners with the driver out, or none"),
    ({"cg_height": "60"}, "above the roof"),
    ({"cg_height": "7"}, "far below the axles"),
    ({"rear_unsprung_weight": "1390"}, "outside|would be unsprung"),
    ({"front_unsprung_weight": "480", "weight_lf": "250", "weight_rf": "250", "total_weight": "", "empty_lf": "",
      "empty_rf": "", "empty_lr": "", "empty_rr": ""}, "would be unsprung"),
    ({"shock_chassis_x": "-6"}, "all four of its mount measurements"),
    ({"spring_chassis_z": "13"}, "upper mount must stand above"),
    ({"wheelie_bar_clearance": ""}, "a wheelie bar needs both"),
    ({"upper_housing_first_z": "9"}, "would cross|same point"),
    ({"upper_chassis_first_x": "21", "upper_chassis_last_x": "21", "upper_chassis_first_z": "10"}, "the same point"),
    ({"lower_chassis_first_x": "0", "lower_chassis_last_x": "0"}, "ahead of its housing holes"),
    ({"lower_chassis_count": "0"}, "1 to 40 holes"),
    ({"lower_chassis_count": "1"}, "one hole, yet the first and the last differ"),
    ({"lower_chassis_last_z": "6"}, "the first and the last are the same point"),
    ({"lower_chassis_first_x": "inf"}, "not a finite number"),
    ({"upper_chassis_entry": "each", "upper_chassis_lines": "18 12"}, "write ahead of axle, comma, above ground"),
    ({"upper_chassis_entry": "each", "upper_chassis_lines": "18, 12\n18, 12"}, "two holes are at the same point"),
    ({"taken_on": "2099-01-01"}, "after today"),
    ({"taken_on": "yesterday"}, "is not a date"),
]


@pytest.mark.parametrize(("typed", "words"), REFUSED, ids=[words[:30] for _, words in REFUSED])
def test_what_cannot_be_is_refused_in_words_with_all_that_was_typed(client, world, typed, words):
    answer = send(signed_in(client, world.owner), world, **typed)
    page = answer.content.decode()
    assert answer.status_code == 422
    assert any(word in page for word in words.split("|")), page[page.find("fault") - 50 :][:600]
    assert newest(world)[0].number == 1
    kept = survey_form(**typed)
    for name in ("front_tyre_radius", "rear_spring_rate", "spring_housing_x"):
        assert f'name="{name}" value="{kept[name]}"' in page


def test_a_reader_may_look_but_not_keep(client, world):
    client = signed_in(client, world.reader)
    assert client.get(reverse("garage:survey-new", args=[world.car.pk])).status_code == 200
    assert send(client, world).status_code == 403


def test_a_stranger_does_not_find_it(client, world):
    client = signed_in(client, world.stranger)
    assert send(client, world).status_code == 404
    assert client.get(reverse("garage:survey", args=[world.survey.pk])).status_code == 404
    assert client.get(reverse("garage:survey-edit", args=[world.survey.pk])).status_code == 404
    assert client.get(reverse("garage:measuring-sheet", args=[world.car.pk])).status_code == 404


def test_an_id_of_nothing_or_malformed(client, world):
    client = signed_in(client, world.owner)
    for address in ("/surveys/987654/", "/surveys/x/", "/cars/987654/surveys/new"):
        assert client.get(address).status_code == 404
    assert client.get(reverse("garage:survey-new", args=[world.car.pk]) + "?from=987654").status_code == 404


def test_signed_out_is_led_to_the_door(client, world):
    answer = send(client, world)
    assert answer.status_code == 302
    assert "/sign-in" in answer["Location"]
