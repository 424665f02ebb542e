"""Saving a draft: over the version one saw, and never silently over somebody else's."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.refusals import Stale
from shop.setups import services
from shop.setups.choices import Choices
from shop.setups.models import Revision
from tests.shop.setups_world import make_draft, make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def send(client, world, draft, version=1, **typed):
    form = world.form(reason="Baseline", do="keep", version=version, **typed)
    return client.post(reverse("setups:edit", args=[draft.pk]), form)


def fresh(world, draft):
    with scope(shop=world.shop):
        return Revision.objects.get(pk=draft.pk)


def test_it_works(client, world):
    draft = make_draft(world)
    response = send(signed_in(client, world.owner), world, draft, upper_chassis=1)
    assert response.url == reverse("setups:edit", args=[draft.pk])
    assert (fresh(world, draft).holes["upper_chassis"], fresh(world, draft).version) == (1, 2)


def test_a_team_mate_may(client, world):
    draft = make_draft(world)
    assert send(signed_in(client, world.mate), world, draft).status_code == 302


def test_a_reader_may_not(client, world):
    draft = make_draft(world)
    assert send(signed_in(client, world.reader), world, draft, upper_chassis=1).status_code == 403
    assert fresh(world, draft).holes["upper_chassis"] == 3


def test_a_stranger_does_not_find_it(client, world):
    draft = make_draft(world)
    client = signed_in(client, world.stranger)
    assert client.get(reverse("setups:edit", args=[draft.pk])).status_code == 404
    assert send(client, world, draft).status_code == 404


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).get("/revisions/987654/edit").status_code == 404


def test_a_malformed_id(client, world):
    assert signed_in(client, world.owner).get("/revisions/seven/edit").status_code == 404


def test_the_second_person_is_told_and_shown_the_difference(client, world):
    draft = make_draft(world)
    with scope(shop=world.shop):
        theirs = Choices.of(draft)
        theirs.settings["rear_pressure"] = {"typed": "10 3/4", "value": 10.75, "unit": "psi"}
        services.save_draft(world.mate, draft, 1, theirs)
    client = signed_in(client, world.owner)
    response = send(client, world, draft, rear_pressure="12 1/4", upper_chassis=1)
    page = response.content.decode()
    assert response.status_code == 409
    assert "10 3/4 psi" in page and "12 1/4 psi" in page and "hole 3" in page and "hole 1" in page
    assert fresh(world, draft).settings["rear_pressure"]["typed"] == "10 3/4"
    # Sent again, now knowingly, it goes through.
    assert 'name="version" value="2"' in page
    assert send(client, world, draft, version=2, rear_pressure="12 1/4").status_code == 302
    assert fresh(world, draft).settings["rear_pressure"]["typed"] == "12 1/4"


def test_saving_twice_from_one_version_loses_nothing(world):
    draft = make_draft(world)
    with scope(shop=world.shop):
        services.save_draft(world.owner, draft, 1, Choices.of(draft))
        with pytest.raises(Stale) as told:
            services.save_draft(world.mate, draft, 1, Choices.of(draft))
    assert told.value.row.version == 2


def test_an_issued_revision_has_no_edit(client, world):
    issued = make_issued(world)
    client = signed_in(client, world.owner)
    page = reverse("setups:revision", args=[issued.pk])
    assert client.get(reverse("setups:edit", args=[issued.pk])).url == page
    assert send(client, world, issued, version=2, upper_chassis=1).url == page
    assert fresh(world, issued).holes["upper_chassis"] == 3


def test_a_draft_thrown_away_meanwhile(client, world):
    draft = make_draft(world)
    with scope(shop=world.shop):
        services.discard_draft(world.mate, draft, 1)
    assert send(signed_in(client, world.owner), world, draft).status_code == 404
