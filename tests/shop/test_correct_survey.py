"""Correcting a survey: until something issued stands on it, and not over somebody else's correction unseen."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.garage.models import Survey
from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.survey_world import survey_form


@pytest.fixture
def world(db):
    return make_world()


def send(client, world, version=1, **typed):
    return client.post(reverse("garage:survey-edit", args=[world.survey.pk]), survey_form(version=str(version), **typed))


def rows(world):
    with scope(shop=world.shop):
        survey = Survey.objects.get(pk=world.survey.pk)
        return survey, {row.key: row for row in survey.measurements.select_related("taken_by")}


def test_it_works_and_keeps_who_took_what_did_not_change(client, world):
    assert send(signed_in(client, world.mate), world, wheelbase="106 1/4").status_code == 302
    survey, found = rows(world)
    assert survey.version == 2
    assert found["wheelbase"].value == 106.25
    assert found["wheelbase"].taken_by == world.mate.user


def test_an_issued_revision_locks_it(client, world):
    make_issued(world)
    client = signed_in(client, world.owner)
    assert send(client, world, wheelbase="107").status_code == 302
    assert rows(world)[1]["wheelbase"].value == 106
    page = client.get(reverse("garage:survey", args=[world.survey.pk])).content.decode()
    assert "stays as it is" in page
    assert "Copy and measure again" in page


def test_the_second_person_is_told_and_loses_nothing(client, world):
    send(signed_in(client, world.mate), world, wheelbase="106 1/4")
    answer = send(signed_in(client, world.owner), world, wheelbase="106 1/2")
    page = answer.content.decode()
    assert answer.status_code == 409
    assert "<td>106 1/4</td><td>106 1/2</td>" in page
    assert rows(world)[1]["wheelbase"].value == 106.25
    # Having seen it, the second person may write over it.
    assert send(client, world, version=2, wheelbase="106 1/2").status_code == 302
    assert rows(world)[1]["wheelbase"].value == 106.5


def test_a_reader_may_not(client, world):
    assert send(signed_in(client, world.reader), world).status_code == 403


def test_a_stranger_does_not_find_it(client, world):
    assert send(signed_in(client, world.stranger), world).status_code == 404


def test_a_copy_begins_with_what_was_measured(client, world):
    page = signed_in(client, world.owner).get(
        reverse("garage:survey-new", args=[world.car.pk]) + f"?from={world.survey.pk}"
    ).content.decode()
    assert 'name="wheelbase" value="106"' in page
    assert 'name="pitch_inertia" value=""' in page
