"""Two issued revisions beside each other."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.demo.data import CARS
from shop.launches.models import Job
from shop.launches.services import claim
from shop.launches.tasks import work_on
from shop.setups.differences import hole_changes, setting_changes, survey_changes
from shop.units import POUND_FORCE
from tests.shop.setups_world import make_draft, make_issued, make_survey, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def pair(world):
    first = make_issued(world)
    changed = {"upper_chassis": 2, "rear_spring_rate": "30 N/mm", "front_pressure": ""}
    return first, make_issued(world, first, "Upper bar up one", **changed)


def url(world, a="", b=""):
    return f"{reverse('setups:compare', args=[world.car.pk])}?a={a}&b={b}"


def test_it_works(client, world, pair):
    page = signed_in(client, world.owner).get(url(world, pair[0].pk, pair[1].pk)).content.decode()
    assert "hole 3" in page and "hole 2" in page
    assert "165 lb/in" in page and "30 N/mm" in page
    assert "28 psi" in page and "not set" in page
    assert "Upper bars, centre to centre" in page and "<svg" in page


def test_differences_are_in_the_later_one_s_unit(world, pair):
    with scope(shop=world.shop):
        changes = {change.key: change for change in setting_changes(*pair)}
        assert set(changes) == {"rear_spring_rate", "front_pressure"}
        # 165 lb/in is 28.896 N/mm.
        assert changes["rear_spring_rate"].difference == "+1.10 N/mm"
        assert [change.key for change in hole_changes(*pair)] == ["upper_chassis"]
        assert setting_changes(pair[0], pair[0]) == []


def test_the_same_length_typed_otherwise_is_no_change(world):
    first = make_issued(world, rear_pressure="11 1/2")
    second = make_issued(world, first, "Typed anew", rear_pressure="11.5", ride_height_rear="133.35 mm")
    with scope(shop=world.shop):
        assert setting_changes(first, second) == []


def test_surveys_that_differ_are_shown(client, world, pair):
    with scope(shop=world.shop):
        demo = next(car for car in CARS if car.name == "Marigold")
        world.survey = make_survey(world.owner, world.car, demo, number=2, cg_height="21 1/4")
        third = make_issued(world, pair[1], "Measured the CG again")
        found = survey_changes(pair[0].survey, third.survey)
    height = next(change for change in found if change.key == "cg_height")
    assert (height.before, height.after, height.difference) == ("20 1/2 in", "21 1/4 in", "+0.750 in")
    assert "21 1/4 in" in signed_in(client, world.owner).get(url(world, pair[0].pk, third.pk)).content.decode()


def test_without_a_choice_the_newest_against_its_parent(client, world, pair):
    response = signed_in(client, world.owner).get(url(world))
    assert (response.context["a"], response.context["b"]) == pair


def test_solved_launches_stand_beside_each_other(client, world, pair):
    with scope(shop=world.shop):
        results = []
        for revision in pair:
            job = revision.jobs.get()
            work_on(claim(job.pk, "bench"))
            results.append(Job.objects.get(pk=job.pk).result.figures)
    response = signed_in(client, world.owner).get(url(world))
    page = response.content.decode()
    shown = {pair.key: pair for _, pairs in response.context["figure_pairs"] for pair in pairs}
    peaks = [figures["peak_rear_load"] / POUND_FORCE for figures in results]
    assert shown["peak_rear_load"].a.startswith(f"{peaks[0]:,.0f} lbf at ")
    assert shown["peak_rear_load"].difference == f"{peaks[1] - peaks[0]:+,.0f} lbf".replace("-", "−")
    assert "front_lift_time" not in shown, "neither car lifts its front tyres"
    jobs = response.context["jobs"]
    assert f"/launches/{jobs[1].pk}/histories.json?compare={jobs[0].pk}" in page
    assert "A qualified fabricator" in page


@pytest.mark.parametrize(("state", "words"), [("waiting", "waiting"), ("failed", "the linkage locks")])
def test_launches_that_are_not_there_are_said_in_words(client, world, pair, state, words):
    with scope(shop=world.shop):
        Job.objects.filter(revision=pair[1]).update(state=state, error="the linkage locks")
    assert words in signed_in(client, world.owner).get(url(world)).content.decode()


def test_a_revision_against_itself(client, world, pair):
    page = signed_in(client, world.owner).get(url(world, pair[0].pk, pair[0].pk)).content.decode()
    assert "same revision" in page


def test_a_car_with_one_revision(client, world):
    make_issued(world)
    response = signed_in(client, world.owner).get(url(world))
    assert response.status_code == 200
    assert "two issued revisions" in response.content.decode()


def test_a_team_mate_and_a_reader_may(client, world, pair):
    assert signed_in(client, world.mate).get(url(world)).status_code == 200
    assert signed_in(client, world.reader).get(url(world)).status_code == 200


def test_a_stranger_does_not_find_it(client, world, pair):
    assert signed_in(client, world.stranger).get(url(world)).status_code == 404


def test_another_car_s_revision_or_a_draft_is_not_found(client, world, pair):
    draft = make_draft(world, pair[1])
    other = make_issued(make_world("Needle"))
    client = signed_in(client, world.owner)
    assert client.get(url(world, draft.pk, pair[0].pk)).status_code == 404
    assert client.get(url(world, other.pk, pair[0].pk)).status_code == 404


@pytest.mark.parametrize("text", ["x", "987654", "²", "1;2"])
def test_a_malformed_id_or_an_id_of_nothing(client, world, pair, text):
    assert signed_in(client, world.owner).get(url(world, text, pair[0].pk)).status_code == 404
