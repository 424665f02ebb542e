"""Opening a choice of a study, making it the next revision, and taking the rows away."""

import csv
import io

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.launches import bridge
from shop.setups.models import Revision
from shop.setups.services import issue
from shop.studies.services import columns_so_far
from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.study_world import make_solved_study, make_study


@pytest.fixture
def world(db):
    return make_world()


def opened(client, member, study, number=0):
    return signed_in(client, member).get(reverse("studies:choice", args=[study.pk, number]))


def taken(client, member, study, number=0):
    return signed_in(client, member).post(reverse("studies:make-revision", args=[study.pk, number]))


def test_it_shows_the_choice_and_its_figures(client, world):
    study = make_solved_study(world)
    with scope(shop=world.shop):
        peak = columns_so_far(study)[0]["peak_rear_load"][7]
    page = opened(client, world.reader, study, 7).content.decode()
    assert "upper chassis hole 2" in page and "<svg" in page and f"{peak / 4.4482216152605:,.0f} lbf" in page
    assert "Make it the next revision" not in page


@pytest.mark.parametrize("axes", [
    None,
    [{"key": "rear_spring_rate", "values": [25e3, 30e3, 35e3]}, {"key": "ballast_weight", "values": [0, 5]}],
    [{"key": "ride_height_rear", "values": [0.12, 0.13]}, {"key": "rear_pressure", "values": [75e3, 85e3]}],
])
def test_the_next_revision_launches_exactly_as_the_study_said(client, world, axes):
    study = make_solved_study(world, axes=axes)
    number = study.choices - 1
    response = taken(client, world.owner, study, number)
    with scope(shop=world.shop):
        draft = Revision.objects.select_related("survey", "car", "parent").get(number=None)
        assert response.url == reverse("setups:edit", args=[draft.pk])
        columns, refused = columns_so_far(study)
        assert refused == {}
        solved = bridge.solve(issue(world.owner, draft, draft.version).car_file)["figures"]
    for name in ("peak_rear_load", "mean_rear_load_250ms", "rear_load_dip", "lower_link_compression"):
        assert columns[name][number] == pytest.approx(solved[name], rel=1e-6, abs=1e-6), name


def test_a_hit_given_as_a_force_is_the_studys_hit_too(world):
    revision = make_issued(world, hit_peak="4000", hit_peak_unit="lbf")
    study = make_solved_study(world, revision)
    with scope(shop=world.shop):
        own = next(n for n, choice in enumerate(
            (upper, lower) for upper in (1, 2) for lower in range(1, 6)
        ) if choice == (2, revision.holes["lower_chassis"]))
        columns, _ = columns_so_far(study)
        file = make_issued(world, revision, upper_chassis=2).car_file
    assert columns["peak_rear_load"][own] == pytest.approx(bridge.solve(file)["figures"]["peak_rear_load"], rel=1e-6)


def test_a_choice_not_solved_yet_is_drawn_all_the_same(client, world):
    page = opened(client, world.owner, make_study(world)).content.decode()
    assert "Not solved yet" in page and "<svg" in page


def test_a_team_mate_may_make_it_a_revision(client, world):
    taken(client, world.mate, make_study(world))
    with scope(shop=world.shop):
        assert Revision.objects.get(number=None).author_id == world.mate.user_id


def test_a_reader_may_not(client, world):
    assert taken(client, world.reader, make_study(world)).status_code == 403


def test_a_stranger_finds_nothing(client, world):
    study = make_study(world)
    assert opened(client, world.stranger, study).status_code == taken(client, world.stranger, study).status_code == 404


def test_get_is_refused(client, world):
    path = reverse("studies:make-revision", args=[make_study(world).pk, 0])
    assert signed_in(client, world.owner).get(path).status_code == 405


@pytest.mark.parametrize("number", [10, 99999999999])
def test_a_choice_the_study_does_not_have(client, world, number):
    study = make_study(world)
    assert opened(client, world.owner, study, number).status_code == 404
    assert taken(client, world.owner, study, number).status_code == 404


@pytest.mark.parametrize("path", ["/studies/987654/choices/0", "/studies/x/choices/0", "/studies/1/choices/minus"])
def test_an_id_of_nothing_or_malformed(client, world, path):
    assert signed_in(client, world.owner).get(path).status_code == 404


def test_every_row_is_taken_away_as_csv(client, world):
    study = make_solved_study(world)
    text = signed_in(client, world.reader).get(reverse("studies:csv", args=[study.pk])).content.decode()
    rows = list(csv.DictReader(io.StringIO(text)))
    with scope(shop=world.shop):
        columns, _ = columns_so_far(study)
    assert [float(row["peak_rear_load"]) for row in rows] == columns["peak_rear_load"].tolist()
    assert (rows[7]["upper_chassis"], rows[7]["lower_chassis"]) == ("2", "3")


def test_the_stored_input_solves_to_the_same_rows(client, world):
    from shop.studies.work import solve_choices

    study = make_solved_study(world)
    stored = signed_in(client, world.owner).get(reverse("studies:input", args=[study.pk])).json()
    again, _ = solve_choices(stored, 0, study.choices)
    with scope(shop=world.shop):
        assert again["peak_rear_load"].tolist() == columns_so_far(study)[0]["peak_rear_load"].tolist()


def test_the_points_of_the_plot_are_the_figures_in_the_shops_unit(client, world):
    study = make_solved_study(world)
    path = reverse("studies:columns", args=[study.pk])
    answer = signed_in(client, world.owner).get(path, {"figures": "peak_rear_load,anti_squat"}).json()
    with scope(shop=world.shop):
        columns, _ = columns_so_far(study)
    pounds = (columns["peak_rear_load"] / 4.4482216152605).tolist()
    assert answer["columns"]["peak_rear_load"]["values"] == pytest.approx(pounds, rel=1e-5)
    assert answer["columns"]["anti_squat"]["values"] == pytest.approx(columns["anti_squat"].tolist(), rel=1e-5)
    assert answer["front"]
