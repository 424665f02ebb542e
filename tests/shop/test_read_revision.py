"""The page of one issued revision."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.launches.models import Job
from tests.shop.setups_world import make_draft, make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def url(revision):
    return reverse("setups:revision", args=[revision.pk])


def test_it_works(client, world):
    first = make_issued(world, reason="As it came in")
    typed = {"upper_chassis": 2, "rear_pressure": "12 1/4", "notes": "Checked cold."}
    second = make_issued(world, first, "Upper bar up one: it spun", **typed)
    page = signed_in(client, world.owner).get(url(second)).content.decode()
    assert "rev 2" in page and "Upper bar up one: it spun" in page and world.owner.user.name in page
    assert "12 1/4 psi" in page and "11 1/2 psi" in page and "Checked cold." in page
    assert "<svg" in page and "Anti-squat, whole car" in page
    assert reverse("setups:car-file", args=[second.pk]) in page
    assert f"{reverse('setups:new', args=[world.car.pk])}?from={second.pk}" in page
    assert reverse("setups:edit", args=[second.pk]) not in page


@pytest.mark.parametrize(
    ("state", "words"), [("waiting", "waiting"), ("failed", "the linkage locks at 0.120 s"), ("cancelled", "cancelled")]
)
def test_it_says_how_its_launch_stands(client, world, state, words):
    issued = make_issued(world)
    with scope(shop=world.shop):
        Job.objects.filter(revision=issued).update(state=state, error="the linkage locks at 0.120 s")
    assert words in signed_in(client, world.owner).get(url(issued)).content.decode()


def test_a_team_mate_and_a_reader_may(client, world):
    issued = make_issued(world)
    assert signed_in(client, world.mate).get(url(issued)).status_code == 200
    page = signed_in(client, world.reader).get(url(issued))
    assert page.status_code == 200
    assert reverse("setups:new", args=[world.car.pk]) not in page.content.decode()


def test_a_stranger_does_not_find_it(client, world):
    assert signed_in(client, world.stranger).get(url(make_issued(world))).status_code == 404


def test_post_is_refused(client, world):
    assert signed_in(client, world.owner).post(url(make_issued(world))).status_code == 405


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).get("/revisions/987654/").status_code == 404


def test_a_malformed_id(client, world):
    assert signed_in(client, world.owner).get("/revisions/seven/").status_code == 404


def test_a_draft_opens_its_form(client, world):
    draft = make_draft(world)
    assert signed_in(client, world.owner).get(url(draft)).url == reverse("setups:edit", args=[draft.pk])


def test_nobody_signed_in_is_asked_to(client, world):
    assert "sign" in client.get(url(make_issued(world))).url
