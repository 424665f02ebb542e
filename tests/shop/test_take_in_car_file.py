"""A car file taken in becomes a car that solves to the same numbers; one that cannot is refused whole."""

import json
from pathlib import Path

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.urls import reverse
from django_scopes import scope

from shop.garage.models import Car, Customer
from shop.launches import bridge
from shop.setups import car_file
from shop.setups.models import Revision
from tests.shop.setups_world import make_issued, make_world, signed_in

CASES = sorted((Path(__file__).parents[1] / "solver" / "reference").glob("*.json"))


@pytest.fixture
def world(db):
    return make_world()


def send(client, world, content, **typed):
    with scope(shop=world.shop):
        customer = Customer.objects.first()
    text = content if isinstance(content, (str, bytes)) else json.dumps(content)
    data = text.encode() if isinstance(text, str) else text
    fields = {"customer": customer.pk, "name": "", "file": SimpleUploadedFile("car.json", data)} | typed
    return client.post(reverse("garage:from-file"), fields)


def taken_in(world):
    with scope(shop=world.shop):
        revision = Revision.objects.select_related("survey", "car", "parent").order_by("-id").first()
        return revision, car_file.build(revision)


def numbers(value, path=""):
    if isinstance(value, dict):
        return {k: v for key, part in value.items() for k, v in numbers(part, f"{path}.{key}").items()}
    if isinstance(value, list):
        return {k: v for at, part in enumerate(value) for k, v in numbers(part, f"{path}.{at}").items()}
    return {path: value} if isinstance(value, (int, float)) and not isinstance(value, bool) else {}


def assert_same_car(one, two):
    first, second = numbers(one), numbers(two)
    shared = set(first) & set(second)
    assert len(shared) > 25
    # A stop's stiffness is the shop's own, and so is how long it solves; a stop's clearance is what was measured.
    ours = {path for path in shared if ("_stop." in path and not path.endswith("clearance")) or path.startswith(".run.")}
    for path in shared - ours:
        assert second[path] == pytest.approx(first[path], rel=1e-8, abs=1e-8), path


@pytest.mark.parametrize("name", ["Marigold", "Night Heron", "Tin Lantern", "Needle"])
def test_a_revision_s_own_car_file_comes_back_as_the_same_car(client, db, name):
    world = make_world(name)
    issued = make_issued(world)
    assert send(signed_in(client, world.mate), world, issued.car_file).status_code == 302
    revision, built = taken_in(world)
    assert revision.car_id != world.car.pk
    assert_same_car(issued.car_file, built)


@pytest.mark.parametrize("file", CASES, ids=lambda file: file.stem)
def test_every_reference_car_is_taken_in(client, world, file):
    car = json.loads(file.read_text())["car"]
    answer = send(signed_in(client, world.owner), world, car, name="Reference")
    assert answer.status_code == 302, answer.content.decode()
    revision, built = taken_in(world)
    assert revision.car.name == "Reference"
    assert_same_car(bridge.solver.car_to_dict(bridge.solver.car_from_dict(car)), built)


def changed(car, **parts):
    return {**car, **parts}


def test_what_cannot_be_taken_in_is_refused_in_words_and_leaves_nothing(client, world):
    car = json.loads(CASES[0].read_text())["car"]
    spring = {**car["front"], "spring": {"table": [[-0.1, -5000], [0, 0], [0.1, 9000]]}}
    cases = [
        ("{", "not valid JSON"),
        (b"\xff\xfe\x00", "not a text file"),
        (changed(car, moon=3), "moon"),
        (changed(car, mass=-4), "mass"),
        ("NaN", "must be a finite number"),
        (changed(car, front=spring), "the front spring is a table"),
        (changed(car, wheelbase=9.5), "Wheelbase"),
    ]
    client = signed_in(client, world.owner)
    for content, words in cases:
        answer = send(client, world, content)
        page = answer.content.decode()
        assert answer.status_code == 422
        assert words in page, page[page.find("fault") - 30 :][:500]
    with scope(shop=world.shop):
        assert Car.objects.count() == 1


def test_a_reader_may_not_and_another_shop_s_customer_is_no_choice(client, world):
    car = json.loads(CASES[0].read_text())["car"]
    assert send(signed_in(client, world.reader), world, car).status_code == 403
    assert send(signed_in(client, world.stranger), world, car).status_code == 422
