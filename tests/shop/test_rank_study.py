"""Ranking a study: limits, weights, what is kept for the next one, and what to say when nothing meets the limits."""

import numpy as np
import pytest
from django.urls import reverse
from django_scopes import scope

from shop.studies.models import Yardstick
from shop.studies.services import columns_so_far
from tests.shop.setups_world import make_world, signed_in
from tests.shop.study_world import fresh, make_solved_study, make_study


@pytest.fixture
def world(db):
    return make_world()


def send(client, member, study, **typed):
    version = {"version": str(study.version), "do": "rank"}
    return signed_in(client, member).post(reverse("studies:rank", args=[study.pk]), version | typed)


def page_of(client, member, study):
    return signed_in(client, member).get(reverse("studies:study", args=[study.pk])).content.decode()


def test_it_works(client, world):
    study = make_solved_study(world)
    response = send(client, world.owner, study, anti_squat_weight="1", anti_squat_most="140")
    assert response.url == reverse("studies:study", args=[study.pk])
    after = fresh(study)
    assert after.weights == {"anti_squat": 1.0} and after.limits == {"anti_squat": {"least": None, "most": 140.0}}
    with scope(shop=world.shop):
        columns, _ = columns_so_far(after)
    best = int(np.nanargmax(np.where(columns["anti_squat"] <= 140, columns["anti_squat"], np.nan)))
    first_link = page_of(client, world.owner, after).partition("<tbody>")[2].partition('href="')[2].partition('"')[0]
    assert first_link == reverse("studies:choice", args=[study.pk, best])


def test_limits_that_nothing_meets_name_the_nearest_miss(client, world):
    study = make_solved_study(world)
    send(client, world.owner, study, anti_squat_least="900", anti_squat_weight="1")
    page = page_of(client, world.owner, study)
    with scope(shop=world.shop):
        columns, _ = columns_so_far(study)
    nearest = int(np.nanargmax(columns["anti_squat"]))
    assert "No choice meets the limits" in page
    assert f"the nearest is choice {nearest + 1} with {columns['anti_squat'][nearest]:.1f} %" in page
    assert f"missed by {900 - columns['anti_squat'][nearest]:.1f} %" in page


def test_kept_for_the_next_study(client, world):
    study = make_solved_study(world)
    send(client, world.owner, study, anti_squat_weight="2", do="keep", name="Bite")
    with scope(shop=world.shop):
        assert Yardstick.objects.get().weights == {"anti_squat": 2.0}


def test_without_a_name_it_is_not_kept_and_nothing_typed_is_lost(client, world):
    response = send(client, world.owner, make_solved_study(world), do="keep", anti_squat_least="90")
    assert response.status_code == 422 and 'value="90"' in response.content.decode()


@pytest.mark.parametrize("typed,words", [
    ({"anti_squat_least": "a lot"}, "a lot"),
    ({"anti_squat_least": "9", "anti_squat_most": "8"}, "the least is more than the most"),
    ({"anti_squat_weight": "17"}, "not a weight"),
])
def test_what_cannot_be_read_is_refused(client, world, typed, words):
    study = make_solved_study(world)
    response = send(client, world.owner, study, **typed)
    assert response.status_code == 422 and words in response.content.decode()
    assert fresh(study).version == study.version


def test_the_second_of_two_people_is_told(client, world):
    study = make_solved_study(world)
    send(client, world.owner, study, anti_squat_weight="1")
    response = send(client, world.mate, study, anti_squat_weight="-1")
    assert response.status_code == 409 and "Somebody else has set these" in response.content.decode()
    assert fresh(study).weights == {"anti_squat": 1.0}


def test_a_team_mate_may(client, world):
    study = make_solved_study(world)
    send(client, world.mate, study, peak_rear_load_weight="1")
    assert fresh(study).weights == {"peak_rear_load": 1.0}


def test_a_reader_may_not(client, world):
    assert send(client, world.reader, make_study(world)).status_code == 403


@pytest.mark.parametrize("name", ["study", "table", "columns", "csv", "input"])
def test_a_stranger_does_not_find_it(client, world, name):
    study = make_study(world)
    assert signed_in(client, world.stranger).get(reverse(f"studies:{name}", args=[study.pk])).status_code == 404


def test_a_stranger_cannot_rank_it(client, world):
    study = make_study(world)
    assert send(client, world.stranger, study, anti_squat_weight="1").status_code == 404
    assert fresh(study).weights == {}


def test_get_is_refused(client, world):
    assert signed_in(client, world.owner).get(reverse("studies:rank", args=[make_study(world).pk])).status_code == 405


@pytest.mark.parametrize("path", ["/studies/987654/rank", "/studies/seven/rank"])
def test_an_id_of_nothing_or_malformed(client, world, path):
    assert signed_in(client, world.owner).post(path).status_code == 404
