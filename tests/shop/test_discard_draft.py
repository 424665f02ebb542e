"""Throwing a draft away; what was issued stays."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.setups.models import Revision
from tests.shop.setups_world import make_draft, make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def send(client, revision, version=1):
    return client.post(reverse("setups:discard", args=[revision.pk]), {"version": version})


def exists(world, revision):
    with scope(shop=world.shop):
        return Revision.objects.filter(pk=revision.pk).exists()


def test_it_works(client, world):
    draft = make_draft(world)
    response = send(signed_in(client, world.owner), draft)
    assert response.url == reverse("garage:car", args=[world.car.pk])
    assert not exists(world, draft)


def test_a_team_mate_may(client, world):
    draft = make_draft(world)
    send(signed_in(client, world.mate), draft)
    assert not exists(world, draft)


def test_a_reader_may_not(client, world):
    draft = make_draft(world)
    assert send(signed_in(client, world.reader), draft).status_code == 403
    assert exists(world, draft)


def test_a_stranger_does_not_find_it(client, world):
    draft = make_draft(world)
    assert send(signed_in(client, world.stranger), draft).status_code == 404
    assert exists(world, draft)


def test_get_is_refused(client, world):
    draft = make_draft(world)
    assert signed_in(client, world.owner).get(reverse("setups:discard", args=[draft.pk])).status_code == 405
    assert exists(world, draft)


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).post("/revisions/987654/discard").status_code == 404


def test_a_malformed_id(client, world):
    assert signed_in(client, world.owner).post("/revisions/seven/discard").status_code == 404


@pytest.mark.parametrize("version", ["", "x", "7"])
def test_a_version_one_did_not_see_is_not_thrown_away(client, world, version):
    draft = make_draft(world)
    assert send(signed_in(client, world.owner), draft, version).url == reverse("setups:edit", args=[draft.pk])
    assert exists(world, draft)


def test_an_issued_revision_stays(client, world):
    issued = make_issued(world)
    send(signed_in(client, world.owner), issued, issued.version)
    assert exists(world, issued)
