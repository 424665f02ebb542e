"""Scaling day: what the pads say, and turns that the solver's own weights command would give."""

import re

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.launches import bridge
from solver.corner_springs import Axle
from solver.turns import seat_turns, target_from_cross
from solver.weights import Corners
from tests.shop.setups_world import make_world, signed_in

LB, IN, LB_IN = 0.45359237, 0.0254, 175.12683524647636


@pytest.fixture
def world(db):
    return make_world()


def form(**typed):
    pads = {"weight_lf": "738", "weight_rf": "716", "weight_lr": "689", "weight_rr": "707"}
    more = {"cross": "50", "front_track": "58", "rear_track": "56", "spring_base": "40", "thread_pitch": "1/12"}
    return pads | more | {"height": "keep"} | typed


def send(client, world, **typed):
    return client.post(reverse("garage:scaling", args=[world.survey.pk]), form(**typed), headers={"HX-Request": "true"})


def test_it_begins_with_the_surveys_pads(client, world):
    page = signed_in(client, world.reader).get(reverse("garage:scaling", args=[world.survey.pk])).content.decode()
    assert 'name="weight_lf" value="738"' in page
    assert "1,405.0 lb, 49.3 %" in page


@pytest.mark.parametrize("keep", [True, False])
def test_the_turns_are_the_solvers_own(client, world, keep):
    with scope(shop=world.shop):
        known = {row.key: row.si for row in world.survey.measurements.all()}
    measured = Corners(*(pounds * LB for pounds in (738, 716, 689, 707)))
    ends = [
        Axle(58 * IN, (115 * LB_IN,) * 2, 1.0, IN / 12, known["front_tyre_rate"]),
        Axle(56 * IN, (165 * LB_IN,) * 2, 1.0, IN / 12, known["rear_tyre_rate"], spring_base=40 * IN),
    ]
    expected = seat_turns(measured, target_from_cross(measured, 50.0), 106 * IN, *ends, keep_height=keep)
    page = send(signed_in(client, world.owner), world, height="keep" if keep else "least").content.decode()
    shown = [float(turns) * (1 if way == "up" else -1) for turns, way in re.findall(r"([\d.]+) turns (up|down)", page)]
    wanted = [turn for turn in expected.turns.as_array() if abs(turn) >= 0.05]
    assert shown == pytest.approx(wanted, abs=0.051)
    assert "for 50.0 % cross weight" in page


def test_the_expected_pads_keep_the_total(world):
    values = {"weight_lf": 330.0, "weight_rf": 320.0, "weight_lr": 310.0, "weight_rr": 325.0, "cross": 0.51}
    values |= {"front_track": 1.45, "rear_track": 1.45, "spring_base": 1.0, "thread_pitch": 0.002}
    with scope(shop=world.shop):
        found = bridge.turns_to(world.survey, values, keep_height=True)
    assert sum(weight for _, _, weight in found.corners) == pytest.approx(1285.0)
    assert found.cross == pytest.approx(0.51)


@pytest.mark.parametrize(
    ("typed", "words"),
    [
        ({"weight_lf": "NaN"}, "finite"),
        ({"weight_rr": ""}, "not a number"),
        ({"cross": "90"}, "outside 30.0 % to 70.0 %"),
        ({"thread_pitch": "0"}, "outside"),
    ],
)
def test_a_slip_is_said_and_nothing_is_lost(client, world, typed, words):
    client = signed_in(client, world.owner)
    assert words in send(client, world, **typed).content.decode()
    page = client.post(reverse("garage:scaling", args=[world.survey.pk]), form(**typed))
    assert page.status_code == 422
    assert 'value="716"' in page.content.decode()


def test_a_stranger_does_not_find_it(client, world):
    assert send(signed_in(client, world.stranger), world).status_code == 404
    assert client.get("/surveys/999999/scaling").status_code == 404
