"""Customers and cars: taken in, found again, changed by two people at once, put away and fetched back."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.garage.models import Car, Customer
from shop.people.models import LogEntry
from tests.shop.setups_world import make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def customers(world):
    with scope(shop=world.shop):
        return list(Customer.objects.order_by("id"))


def test_a_customer_is_taken_in_and_logged(client, world):
    client = signed_in(client, world.mate)
    assert client.post(reverse("garage:customer-new"), {"name": "Wilhelmina Aldous"}).status_code == 302
    assert customers(world)[-1].name == "Wilhelmina Aldous"
    with scope(shop=world.shop):
        entry = LogEntry.objects.first()
        assert (entry.action, entry.object_name, entry.user) == ("added", "Wilhelmina Aldous", world.mate.user)


def test_a_customer_needs_a_name(client, world):
    answer = signed_in(client, world.owner).post(reverse("garage:customer-new"), {"name": "", "phone": "555-0199"})
    assert answer.status_code == 422
    assert 'value="555-0199"' in answer.content.decode()


def test_a_car_belongs_to_a_customer_of_this_shop(client, world):
    with scope(shop=world.stranger.shop):
        theirs = Customer.objects.create(shop=world.stranger.shop, name="Elsewhere")
    client = signed_in(client, world.owner)
    assert client.post(reverse("garage:car-new"), {"customer": theirs.pk, "name": "Lark"}).status_code == 422
    own = customers(world)[0]
    assert client.post(reverse("garage:car-new"), {"customer": own.pk, "name": "Lark"}).status_code == 302


@pytest.mark.parametrize(("words", "found"), [("marigold", True), ("218", True), ("ketteridge", True), ("lark", False)])
def test_cars_are_found_by_name_number_and_customer(client, world, words, found):
    page = signed_in(client, world.reader).get(reverse("garage:cars"), {"q": words}).content.decode()
    assert ("Marigold 218" in page) == found


def test_the_list_says_what_is_on_each_car_in_few_queries(client, world, django_assert_max_num_queries):
    make_issued(world)
    client = signed_in(client, world.reader)
    client.get(reverse("garage:cars"))
    with django_assert_max_num_queries(12):
        page = client.get(reverse("garage:cars")).content.decode()
    assert "rev 1" in page
    assert "typical value" in page


def test_two_people_change_a_car_and_the_second_is_told(client, world):
    fields = {"customer": world.car.customer_id, "name": "Marigold", "racing_number": "218", "version": 1}
    address = reverse("garage:car-edit", args=[world.car.pk])
    assert signed_in(client, world.mate).post(address, fields | {"race_class": "quick eight"}).status_code == 302
    answer = signed_in(client, world.owner).post(address, fields | {"race_class": "index"})
    page = answer.content.decode()
    assert answer.status_code == 409
    assert "quick eight" in page
    assert 'value="index"' in page
    with scope(shop=world.shop):
        assert Car.objects.get(pk=world.car.pk).race_class == "quick eight"


def test_putting_away_hides_and_loses_nothing(client, world):
    client = signed_in(client, world.owner)
    link = reverse("garage:car", args=[world.car.pk])
    client.post(reverse("garage:car-put-away", args=[world.car.pk]))
    assert f'href="{link}"' not in client.get(reverse("garage:cars")).content.decode()
    assert f'href="{link}"' in client.get(reverse("garage:cars") + "?away").content.decode()
    client.post(reverse("garage:car-put-away", args=[world.car.pk]))
    assert f'href="{link}"' in client.get(reverse("garage:cars")).content.decode()


ACTIONS = ["garage:car-put-away", "garage:customer-put-away"]


@pytest.mark.parametrize("name", ACTIONS)
def test_putting_away_is_a_button_for_writers_of_this_shop(client, world, name):
    pk = world.car.pk if "car" in name else world.car.customer_id
    address = reverse(name, args=[pk])
    assert signed_in(client, world.owner).get(address).status_code == 405
    assert signed_in(client, world.reader).post(address).status_code == 403
    assert signed_in(client, world.stranger).post(address).status_code == 404


def test_a_reader_may_look_only(client, world):
    client = signed_in(client, world.reader)
    for name in ("garage:customer-new", "garage:car-new"):
        assert client.get(reverse(name)).status_code == 200
        assert client.post(reverse(name), {"name": "x"}).status_code == 403
    assert client.post(reverse("garage:car-edit", args=[world.car.pk]), {}).status_code == 403


PAGES = ["/cars/{car}/", "/cars/{car}/edit", "/customers/{customer}/", "/customers/{customer}/edit"]


@pytest.mark.parametrize("address", PAGES)
def test_a_stranger_finds_nothing(client, world, address):
    where = address.format(car=world.car.pk, customer=world.car.customer_id)
    assert signed_in(client, world.owner).get(where).status_code == 200
    assert signed_in(client, world.stranger).get(where).status_code == 404


@pytest.mark.parametrize("address", ["/cars/999999/", "/cars/x/", "/customers/999999/", "/customers/-1/"])
def test_ids_of_nothing(client, world, address):
    assert signed_in(client, world.owner).get(address).status_code == 404
