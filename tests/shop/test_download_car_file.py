"""Taking the car file of an issued revision along."""

import json

import pytest
from django.urls import reverse

import solver
from tests.shop.setups_world import make_draft, make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def url(revision):
    return reverse("setups:car-file", args=[revision.pk])


def test_it_works_and_the_solver_reads_it(client, world):
    issued = make_issued(world)
    response = signed_in(client, world.owner).get(url(issued))
    assert response["Content-Disposition"] == 'attachment; filename="marigold-218-rev-1.json"'
    content = json.loads(response.content)
    assert content == issued.car_file
    assert solver.car_to_dict(solver.car_from_dict(content)) == content


def test_a_team_mate_and_a_reader_may(client, world):
    issued = make_issued(world)
    assert signed_in(client, world.mate).get(url(issued)).status_code == 200
    assert signed_in(client, world.reader).get(url(issued)).status_code == 200


def test_a_stranger_does_not_find_it(client, world):
    assert signed_in(client, world.stranger).get(url(make_issued(world))).status_code == 404


def test_a_draft_has_none_yet(client, world):
    assert signed_in(client, world.owner).get(url(make_draft(world))).status_code == 404


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).get("/revisions/987654/car-file.json").status_code == 404


def test_a_malformed_id(client, world):
    assert signed_in(client, world.owner).get("/revisions/seven/car-file.json").status_code == 404
