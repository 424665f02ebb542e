"""The launch of what is chosen now, before anything is saved or queued."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.launches import bridge
from shop.launches.models import Job
from shop.setups.models import Revision
from shop.setups.trying import tried
from tests.shop.setups_world import make_draft, make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def send(client, world, member, parent, **typed):
    path = f"{reverse('setups:try', args=[world.car.pk])}?survey={world.survey.pk}"
    return signed_in(client, member).post(path, world.form(parent, **typed))


def test_it_draws_both_launches_and_saves_nothing(client, world):
    parent = make_issued(world)
    with scope(shop=world.shop):
        before = Revision.objects.count(), Job.objects.count()
    page = send(client, world, world.owner, parent, upper_chassis=2).content.decode()
    assert page.count('class="curve curve-') == 2 and "as chosen now" in page and "rev 1" in page
    with scope(shop=world.shop):
        assert (Revision.objects.count(), Job.objects.count()) == before


def test_its_figures_are_the_solvers(world):
    parent = make_issued(world)
    draft = make_draft(world, parent, upper_chassis=2)
    with scope(shop=world.shop):
        shown = tried(draft, "rear_load", world.shop.units).figures
        now = bridge.solve(bridge.check(draft))["figures"]["mean_rear_load_250ms"] / 4.4482216152605
        before = bridge.solve(parent.car_file)["figures"]["mean_rear_load_250ms"] / 4.4482216152605
    found = next(row for row in shown if row.label == "Mean rear load, 0.25 s")
    assert found.text == f"{now:,.0f} lbf"
    assert found.difference == f"{now - before:+,.0f} lbf".replace("-", "−")


def test_another_curve_can_be_looked_at(client, world):
    page = send(client, world, world.owner, make_issued(world), try_channel="front_load").content.decode()
    assert "Front tyres" in page


def test_an_unknown_curve_is_the_usual_one(client, world):
    assert "Rear tyres" in send(client, world, world.owner, make_issued(world), try_channel="nonsense").content.decode()


def test_a_launch_that_cannot_be_solved_says_why(client, world):
    page = send(client, world, world.owner, make_issued(world), hit_peak="6", hit_rise="0.005").content.decode()
    assert "These choices have no launch" in page and "<svg" not in page


def test_a_faulty_field_stands_in_with_what_was_there(client, world):
    page = send(client, world, world.owner, make_issued(world), rear_spring_rate="stiff").content.decode()
    assert "<svg" in page and "still stands on what was there before" in page


def test_the_first_revision_has_nothing_beside_it(client, world):
    page = send(client, world, world.mate, None).content.decode()
    assert page.count('class="curve curve-') == 1


def test_a_reader_may_look(client, world):
    assert send(client, world, world.reader, make_issued(world)).status_code == 200


def test_a_stranger_does_not_find_the_car(client, world):
    assert send(client, world, world.stranger, make_issued(world)).status_code == 404


def test_get_is_refused(client, world):
    assert signed_in(client, world.owner).get(reverse("setups:try", args=[world.car.pk])).status_code == 405


@pytest.mark.parametrize("path", ["/cars/987654/revisions/try", "/cars/x/revisions/try", "/cars/1/revisions/try?survey=x"])
def test_an_id_of_nothing_or_malformed(client, world, path):
    assert signed_in(client, world.owner).post(path).status_code == 404
