"""Asking for a study from its form."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.studies.models import Study
from tests.shop.setups_world import make_draft, make_issued, make_world, signed_in
from tests.shop.study_world import asking


@pytest.fixture
def world(db):
    return make_world()


def send(client, member, revision, **typed):
    return signed_in(client, member).post(reverse("studies:new", args=[revision.pk]), asking(**typed))


def only_study(world):
    with scope(shop=world.shop):
        return Study.objects.select_related("job").get()


def none_asked(world):
    with scope(shop=world.shop):
        return not Study.objects.exists()


def test_it_works(client, world):
    response = send(client, world.owner, make_issued(world))
    study = only_study(world)
    assert response.url == reverse("studies:study", args=[study.pk])
    assert (study.choices, study.job.state, study.name) == (6, "waiting", "Some holes")


def test_a_team_mate_may(client, world):
    send(client, world.mate, make_issued(world))
    assert only_study(world).author_id == world.mate.user_id


def test_a_reader_sees_the_form_and_may_not_send_it(client, world):
    revision = make_issued(world)
    assert send(client, world.reader, revision).status_code == 403
    page = client.get(reverse("studies:new", args=[revision.pk]))
    assert page.status_code == 200 and "Launch all of them" not in page.content.decode()
    assert none_asked(world)


@pytest.mark.parametrize("name", ["new", "count", "holes", "holes-json", "spread"])
def test_a_stranger_does_not_find_the_revision(client, world, name):
    path = reverse(f"studies:{name}", args=[make_issued(world).pk])
    signed_in(client, world.stranger)
    assert (client.post(path) if name == "count" else client.get(path)).status_code == 404


def test_a_stranger_cannot_ask(client, world):
    assert send(client, world.stranger, make_issued(world)).status_code == 404
    assert none_asked(world)


def test_a_draft_is_not_studied(client, world):
    assert send(client, world.owner, make_draft(world)).status_code == 404


@pytest.mark.parametrize("path", ["/revisions/987654/studies/new", "/revisions/seven/studies/new"])
def test_an_id_of_nothing_or_malformed(client, world, path):
    assert signed_in(client, world.owner).post(path).status_code == 404


def test_counting_is_not_asked_for_by_get(client, world):
    path = reverse("studies:count", args=[make_issued(world).pk])
    assert signed_in(client, world.owner).get(path).status_code == 405


def test_an_empty_study_is_refused_with_all_that_was_typed(client, world):
    response = send(client, world.owner, make_issued(world), values_upper_chassis="1", values_lower_chassis="2", name="Kept")
    page = response.content.decode()
    assert response.status_code == 422 and "nothing is varied" in page and 'value="Kept"' in page
    assert none_asked(world)


def test_a_billion_combinations_are_refused_with_the_count_and_a_way_out(client, world):
    many = {"values_upper_chassis": "1 to 5", "values_lower_chassis": "1 to 5"}
    for key, values in (("rear_spring_rate", "100 to 299 step 1"), ("front_spring_rate", "100 to 299 step 1"),
                        ("rear_pressure", "5 to 15 step 0.01"), ("front_pressure", "10 to 29.9 step 0.1")):
        many |= {f"vary_{key}": "on", f"values_{key}": values}
    refused = send(client, world.owner, make_issued(world), **many)
    assert "1,001 values; at most 200 fit on one axis" in refused.content.decode()
    with scope(shop=world.shop):
        revision = world.car.revisions.get()
    page = send(client, world.owner, revision, **many | {"values_rear_pressure": "5 to 14.95 step 0.05"}).content.decode()
    assert "40,000,000,000 combinations; at most 50,000" in page and "a sample of up to 50,000" in page
    assert none_asked(world)


@pytest.mark.parametrize("typed,words", [
    ({"values_upper_chassis": "1, 9"}, "hole"),
    ({"values_upper_chassis": "one"}, "one"),
    ({"mode": "sample", "size": "many"}, "not how many samples"),
    ({"mode": "few", "size": "2"}, "fewest changes to what"),
    ({"mode": "few", "size": "9", "anti_squat_least": "100"}, "at most 1 to 3 changes"),
    ({"mode": "few", "size": "2", "anti_squat_least": "140", "anti_squat_most": "100"}, "the least is more than the most"),
])
def test_what_cannot_be_read_is_refused_in_words(client, world, typed, words):
    response = send(client, world.owner, make_issued(world), **typed)
    assert response.status_code == 422 and words in response.content.decode()
    assert none_asked(world)


def test_two_studies_at_once_do_not_mix(client, world):
    from shop.launches.tasks import run
    from shop.studies.services import columns_so_far

    revision = make_issued(world)
    send(client, world.owner, revision)
    send(client, world.mate, revision, values_lower_chassis="4, 5", name="Others")
    with scope(shop=world.shop):
        others, some = Study.objects.select_related("job")
        run(others.job_id)
        assert columns_so_far(some) == ({}, {})
        run(some.job_id)
        assert len(columns_so_far(some)[0]["peak_rear_load"]) == 6
        assert len(columns_so_far(others)[0]["peak_rear_load"]) == 4


def test_typical_values_are_said(client, world):
    page = signed_in(client, world.owner).get(reverse("studies:new", args=[make_issued(world).pk])).content.decode()
    assert "Provisional" in page
