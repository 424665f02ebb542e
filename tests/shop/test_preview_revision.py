"""Choosing: each change shows its drawing, figures and faults at once, and saves nothing."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.launches import bridge
from shop.setups.models import Revision
from tests.shop.setups_world import make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def send(client, world, query="", **typed):
    return client.post(reverse("setups:preview", args=[world.car.pk]) + query, world.form(**typed))


def beside(response, field):
    return response.content.decode().split(f'id="beside-{field}"')[1].split("</div>")[0]


def test_it_works_and_saves_nothing(client, world):
    response = send(signed_in(client, world.owner), world, upper_chassis=2)
    page = response.content.decode()
    assert response.status_code == 200
    assert "<svg" in page
    assert "Anti-squat, whole car" in page and "Anti-squat, sprung mass" in page
    assert "Upper bars, centre to centre" in page and "Load moved from front to rear" in page
    with scope(shop=world.shop):
        assert not Revision.objects.exists()


def test_another_hole_gives_other_figures(client, world):
    client = signed_in(client, world.owner)
    assert send(client, world, upper_chassis=1).content != send(client, world, upper_chassis=5).content


def test_the_figures_are_the_solver_s(client, world):
    page = send(signed_in(client, world.owner), world).content.decode()
    issued = make_issued(world)
    with scope(shop=world.shop):
        statics = bridge.statics_of(issued)
    assert f"{statics['anti_squat']:.1f} %" in page
    assert f"{statics['anti_squat_dynamic']:.1f} %" in page


def test_bars_show_their_change_against_the_parent(client, world):
    parent = make_issued(world)
    page = send(signed_in(client, world.owner), world, f"?from={parent.pk}", upper_chassis=1).content.decode()
    assert "than on rev 1" in page


def test_what_changed_is_marked_beside_its_field(client, world):
    parent = make_issued(world, rear_pressure="11 1/2")
    response = send(signed_in(client, world.owner), world, f"?from={parent.pk}", rear_pressure="12 1/4")
    assert "rev 1: 11 1/2 psi" in beside(response, "rear_pressure")
    assert "rev 1" not in beside(response, "front_pressure")


def test_a_fault_stands_beside_its_field_and_the_rest_is_drawn(client, world):
    parent = make_issued(world)
    client = signed_in(client, world.owner)
    response = send(client, world, f"?from={parent.pk}", rear_spring_rate="165 psi", upper_chassis=2)
    assert "unit “psi” does not fit here" in beside(response, "rear_spring_rate")
    assert "rev 1: hole 3" in beside(response, "upper_chassis")
    page = response.content.decode()
    assert "still stand on rev 1" in page
    without = send(client, world, f"?from={parent.pk}", upper_chassis=2).content.decode()
    assert "Anti-squat" in page
    assert page.split("<figure")[1].split("</figure>")[0] == without.split("<figure")[1].split("</figure>")[0]


def test_a_linkage_that_cannot_be_is_said_in_words(client, world):
    with scope(shop=world.shop):
        bracket = world.survey.brackets.get(place="upper_chassis")
        bracket.holes = world.survey.brackets.get(place="upper_housing").holes
        bracket.save()
    response = send(signed_in(client, world.owner), world, upper_chassis=1, upper_housing=1)
    assert response.status_code == 200
    assert "from the bar&#x27;s housing pin" in beside(response, "upper_chassis")
    assert response["HX-Reswap"] == "none"


def test_unmeasured_inputs_are_listed(client, world):
    page = send(signed_in(client, world.owner), world).content.decode()
    assert "Rear tyre rate, each" in page and "Housing pitch inertia" in page
    assert "Wheelbase" not in page.split('id="provisional"')[1].split("</section>")[0]


@pytest.mark.django_db
def test_a_typical_setting_is_provisional_until_somebody_sets_it(client):
    world = make_world("Tin Lantern")
    client = signed_in(client, world.owner)
    assert "typical" in beside(send(client, world), "front_shock_rate")
    assert "typical" not in beside(send(client, world, front_shock_rate="7 1/2"), "front_shock_rate")


def test_a_team_mate_and_a_reader_may(client, world):
    """It is looking, not writing."""
    assert send(signed_in(client, world.mate), world).status_code == 200
    assert send(signed_in(client, world.reader), world).status_code == 200


def test_a_stranger_does_not_find_it(client, world):
    assert send(signed_in(client, world.stranger), world).status_code == 404


def test_get_is_refused(client, world):
    url = reverse("setups:preview", args=[world.car.pk])
    assert signed_in(client, world.owner).get(url).status_code == 405


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).post("/cars/987654/revisions/preview").status_code == 404


@pytest.mark.parametrize("query", ["?survey=x", "?from=x", "?from=987654"])
def test_a_malformed_id(client, world, query):
    assert send(signed_in(client, world.owner), world, query).status_code == 404


def test_it_asks_the_database_little(client, world, django_assert_max_num_queries):
    parent = make_issued(world)
    client = signed_in(client, world.owner)
    with django_assert_max_num_queries(14):
        send(client, world, f"?from={parent.pk}", upper_chassis=2)


def test_an_empty_form_is_answered_in_words(client, world):
    response = signed_in(client, world.owner).post(reverse("setups:preview", args=[world.car.pk]), {})
    assert response.status_code == 200
    assert "must be set" in beside(response, "rear_spring_rate")
    assert "choose one of the holes" in beside(response, "upper_chassis")


@pytest.mark.django_db
def test_solved_values_are_in_the_shop_s_units_and_set_ones_as_typed(client):
    world = make_world("Night Heron")
    page = send(signed_in(client, world.owner), world, rear_pressure="12 psi").content.decode()
    assert page.split("Upper bars, centre to centre")[1].split("</dd>")[0].endswith(" mm")
    parent = make_issued(world, rear_pressure="12 psi")
    response = send(client, world, f"?from={parent.pk}", rear_pressure="80 kPa")
    assert "rev 1: 12 psi" in beside(response, "rear_pressure")
