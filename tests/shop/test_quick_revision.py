"""A revision made between rounds from the one on the car."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.setups.models import Revision
from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.track_world import enter, make_weekend


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def weekend(world):
    weekend = make_weekend(world)
    enter(world, weekend, make_issued(world), time_60="1.31")
    return weekend


def url(world, weekend):
    return reverse("track:quick-revision", args=[weekend.pk, world.car.pk])


def send(client, world, weekend, **typed):
    return client.post(url(world, weekend), {"reason": "Spun at 20 ft", "newest": 1, "upper_chassis": 4, **typed})


def revisions(world):
    with scope(shop=world.shop):
        return list(Revision.objects.filter(car=world.car).order_by("pk"))


def test_it_works(client, world, weekend):
    client = signed_in(client, world.owner)
    assert send(client, world, weekend, rear_pressure="10 3/4", rear_pressure_unit="psi").status_code == 302
    first, second = revisions(world)
    assert (second.number, second.parent_id, second.holes["upper_chassis"]) == (2, first.pk, 4)
    assert second.settings["rear_pressure"] == {"typed": "10 3/4", "value": 10.75, "unit": "psi"}
    # Everything the page does not show is as it was.
    rest = {key: value for key, value in second.settings.items() if key != "rear_pressure"}
    assert rest == {key: value for key, value in first.settings.items() if key != "rear_pressure"}
    with scope(shop=world.shop):
        assert second.jobs.count() == 1
    page = client.get(reverse("track:weekend", args=[weekend.pk])).content.decode()
    assert f'<option value="{second.pk}" selected>' in page and "issued since the last pass" in page


def test_a_team_mate_may(client, world, weekend):
    assert send(signed_in(client, world.mate), world, weekend).status_code == 302


def test_a_reader_may_look_and_not_issue(client, world, weekend):
    client = signed_in(client, world.reader)
    assert client.get(url(world, weekend)).status_code == 200
    assert send(client, world, weekend).status_code == 403
    assert len(revisions(world)) == 1


def test_a_stranger_does_not_find_it(client, world, weekend):
    assert send(signed_in(client, world.stranger), world, weekend).status_code == 404


def test_an_id_of_nothing(client, world, weekend):
    client = signed_in(client, world.owner)
    assert client.get(f"/weekends/{weekend.pk}/revision/987654").status_code == 404
    assert client.get(f"/weekends/987654/revision/{world.car.pk}").status_code == 404


@pytest.mark.parametrize(("typed", "said"), [
    ({"reason": ""}, "say what this revision changes"),
    ({"upper_chassis": 3}, "nothing differs from rev 1"),
    ({"upper_chassis": 40}, "is not one of them"),
    ({"rear_pressure": "10,5"}, "write the decimal mark as a point"),
])
def test_what_cannot_be_issued_is_said_and_kept(client, world, weekend, typed, said):
    response = send(signed_in(client, world.owner), world, weekend, **typed)
    assert response.status_code == 422 and said in response.content.decode()
    assert len(revisions(world)) == 1


def test_somebody_else_issued_meanwhile(client, world, weekend):
    make_issued(world, revisions(world)[0], "Softer", rear_spring_rate="150")
    with scope(shop=world.shop):
        enter(world, weekend, revisions(world)[0], time_60="1.32")
    response = signed_in(client, world.owner).post(
        url(world, weekend), {"reason": "Spun", "newest": 1, "upper_chassis": 4}, follow=True
    )
    assert "is kept as draft" in response.content.decode()


def test_a_car_without_a_revision_begins_with_the_whole_form(client, world):
    response = signed_in(client, world.owner).get(url(world, make_weekend(world)))
    assert response.url == reverse("setups:new", args=[world.car.pk])
