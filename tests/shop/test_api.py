"""The API: a shop's rows and nobody else's, by token or session, refused in the words of the pages."""

from __future__ import annotations

import pytest
from django.utils import timezone
from django_scopes import scope
from rest_framework.test import APIClient

from shop.launches.models import Job
from shop.parts.services import Knowledge, add_part
from shop.people.models import AccessToken
from shop.studies.services import request_study
from tests.shop.setups_world import World, make_issued, make_world, signed_in
from tests.shop.track_world import enter, make_weekend

pytestmark = pytest.mark.django_db


@pytest.fixture
def world() -> World:
    return make_world()


def client_of(member) -> APIClient:
    with scope(shop=member.shop):
        _, key = AccessToken.issue(member, "test")
    client = APIClient()
    client.credentials(HTTP_AUTHORIZATION=f"Token {key}")
    return client


LISTS = ("customers", "cars", "surveys", "revisions", "launches", "weekends", "passes", "studies", "parts")


def fill(world: World) -> None:
    """One row of every kind in the shop."""
    revision = make_issued(world)
    weekend = make_weekend(world)
    enter(world, weekend, time_60="1.31")
    with scope(shop=world.shop):
        plan = {"axes": [{"key": "upper_chassis", "values": [1, 2]}]}
        Job.objects.filter(kind="launch").delete()
        request_study(world.owner, revision, plan, "Upper holes")
        Job.objects.filter(kind="study").update(state="done", finished_at=timezone.now())
        numbers = {"rate": {"typed": "150", "value": 150.0, "unit": "lb/in"}}
        known = Knowledge(numbers, [], "spring rater", timezone.localdate())
        add_part(world.owner, "spring", "150 on the shelf", known)


@pytest.mark.parametrize("name", LISTS)
def test_lists_need_a_member(name):
    assert APIClient().get(f"/api/v1/{name}/").status_code == 401


@pytest.mark.parametrize("name", LISTS)
def test_every_role_reads(world, name):
    fill(world)
    for member in (world.owner, world.mate, world.reader):
        answer = client_of(member).get(f"/api/v1/{name}/")
        assert answer.status_code == 200
        assert answer.json()["count"] == 1


@pytest.mark.parametrize("name", LISTS)
def test_a_stranger_sees_nothing_and_finds_nothing(world, name):
    fill(world)
    own = client_of(world.owner).get(f"/api/v1/{name}/").json()["results"][0]["id"]
    stranger = client_of(world.stranger)
    assert stranger.get(f"/api/v1/{name}/").json()["count"] == 0
    assert stranger.get(f"/api/v1/{name}/{own}/").status_code == 404


@pytest.mark.parametrize("address", ["cars/999999/", "cars/none/", "revisions/0/", "launches/999/result/"])
def test_an_id_of_nothing_is_not_found(world, address):
    assert client_of(world.owner).get(f"/api/v1/{address}").status_code == 404


def test_a_session_serves_as_well(world, client):
    assert signed_in(client, world.reader).get("/api/v1/cars/").status_code == 200


def test_a_revoked_or_unknown_token_is_refused(world):
    client = client_of(world.owner)
    with scope(shop=world.shop):
        AccessToken.objects.all().delete()
    assert client.get("/api/v1/cars/").status_code == 401


def test_a_token_of_somebody_who_left_opens_nothing(world):
    client = client_of(world.mate)
    world.mate.user.is_active = False
    world.mate.user.save()
    assert client.get("/api/v1/cars/").status_code == 401


def test_a_survey_shows_values_as_typed_and_in_si(world):
    survey = client_of(world.reader).get(f"/api/v1/surveys/{world.survey.pk}/").json()
    wheelbase = next(row for row in survey["measurements"] if row["key"] == "wheelbase")
    assert wheelbase["typed"] == "106"
    assert wheelbase["unit"] == "in"
    assert wheelbase["si"] == pytest.approx(2.6924)
    assert {bracket["place"] for bracket in survey["brackets"]} >= {"lower_chassis", "upper_housing"}


def new(client: APIClient, world: World, **body):
    body = {"reason": "From the API"} | body
    return client.post(f"/api/v1/cars/{world.car.pk}/revisions/", body, format="json")


def test_a_revision_is_made_and_issued(world):
    client = client_of(world.mate)
    answer = new(client, world, issue=True, holes={"upper_chassis": 2}, settings={"rear_spring_rate": "180 lb/in"})
    assert answer.status_code == 201, answer.json()
    made = answer.json()
    assert made["number"] == 1
    assert made["holes"]["upper_chassis"] == 2
    assert made["si"]["rear_spring_rate"] == pytest.approx(180 * 4.4482216152605 / 0.0254)
    job = client.get(f"/api/v1/launches/?revision={made['id']}").json()["results"][0]
    assert job["state"] == "waiting"
    assert client.get(f"/api/v1/launches/{job['id']}/result/").status_code == 409


def test_a_draft_is_kept_without_issuing(world):
    answer = new(client_of(world.mate), world)
    assert answer.status_code == 201
    assert answer.json()["number"] is None


@pytest.mark.parametrize(
    ("body", "field", "words"),
    [
        ({"holes": {"upper_chassis": 9}}, "upper_chassis", "holes 1 to 5"),
        ({"settings": {"rear_spring_rate": "-20 lb/in"}}, "rear_spring_rate", "outside"),
        ({"settings": {"rear_spring_rate": "NaN"}}, "rear_spring_rate", "finite"),
        ({"settings": {"rear_spring_rate": "1e9"}}, "rear_spring_rate", "outside"),
        ({"settings": {"rear_spring_rate": "stiff"}}, "rear_spring_rate", "not a number"),
        ({"settings": {"moon_phase": "2"}}, "moon_phase", "not something"),
        ({"settings": {"rear_spring_rate": True}}, "settings", "write a value"),
        ({"reason": ""}, "reason", "blank"),
    ],
)
def test_bad_input_names_the_field_and_leaves_nothing_behind(world, body, field, words):
    client = client_of(world.mate)
    answer = new(client, world, issue=True, **body)
    assert answer.status_code == 400
    assert words in str(answer.json()[field])
    assert client.get("/api/v1/revisions/").json()["count"] == 0


def test_a_reader_may_not_write(world):
    assert new(client_of(world.reader), world).status_code == 403


def test_another_shops_car_is_not_found(world):
    assert new(client_of(world.stranger), world).status_code == 404


def test_the_car_file_is_the_frozen_one(world):
    revision = make_issued(world)
    answer = client_of(world.reader).get(f"/api/v1/revisions/{revision.pk}/car-file/")
    assert answer.status_code == 200
    assert answer.json() == revision.car_file


def test_the_schema_describes_every_address(world, client):
    answer = signed_in(client, world.reader).get("/api/v1/schema", HTTP_ACCEPT="application/vnd.oai.openapi+json")
    assert answer.status_code == 200
    paths = answer.json()["paths"]
    assert {"/api/v1/cars/", "/api/v1/cars/{car_id}/revisions/", "/api/v1/launches/{id}/result/"} <= set(paths)
