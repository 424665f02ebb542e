"""The library: parts put on the shelf, known better, taken off; a dyno sheet in and out."""

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.urls import reverse
from django_scopes import scope

from shop.parts.models import Part
from tests.shop.setups_world import make_world, signed_in

HEAD = "side,click,velocity (in/s),force (lbf)"
SHEET = "\r\n".join([HEAD, "compression,2,1,40", "compression,2,5,90", "rebound,0,1,60", "rebound,0,5,150", ""])
SPRING = {"name": "165 on the shelf", "rate": "165", "rate_unit": "lb/in", "origin": "spring rater", "dated": "2026-03-02"}
SHOCK = {"name": "Rear, green body", "stroke": "6 1/2", "stroke_unit": "in", "origin": "own dyno", "dated": "2026-03-02"}


@pytest.fixture
def world(db):
    return make_world()


def add(client, kind, **typed):
    return client.post(reverse("parts:new", args=[kind]), typed)


def only(world):
    with scope(shop=world.shop):
        part = Part.objects.get()
        return part, list(part.versions.all())


def test_a_spring_is_kept_as_typed(client, world):
    assert add(signed_in(client, world.mate), "spring", **SPRING).status_code == 302
    part, versions = only(world)
    assert (part.name, part.kind, versions[0].number) == ("165 on the shelf", "spring", 1)
    assert versions[0].data["numbers"]["rate"] == {"typed": "165", "value": 165.0, "unit": "lb/in"}
    assert "Rate 165 lb/in" in client.get(reverse("parts:shelf")).content.decode()


@pytest.mark.parametrize("as_file", [True, False])
def test_a_dyno_sheet_goes_in_and_comes_out_the_same(client, world, as_file):
    sheet = {"file": SimpleUploadedFile("dyno.csv", SHEET.encode())} if as_file else {"curve": SHEET}
    assert add(signed_in(client, world.owner), "shock", **SHOCK, **sheet).status_code == 302
    part, versions = only(world)
    assert len(versions[0].data["curves"]) == 2
    out = client.get(reverse("parts:curves", args=[part.pk, 1]))
    assert out.content.decode() == SHEET


def test_a_version_never_changes_and_a_new_one_is_added(client, world):
    client = signed_in(client, world.owner)
    add(client, "spring", **SPRING)
    part, (first,) = only(world)
    better = {**SPRING, "rate": "158"}
    assert client.post(reverse("parts:revise", args=[part.pk]), better).status_code == 302
    _, versions = only(world)
    assert [version.number for version in versions] == [2, 1]
    assert versions[1].data == first.data


REFUSED = [
    ("spring", {"rate": "-5"}, "outside"),
    ("spring", {"rate": ""}, "Rate: needed"),
    ("spring", {"rate": "NaN"}, "finite"),
    ("spring", {"origin": ""}, "say where the numbers come from"),
    ("spring", {"name": " "}, "give the part the name"),
    ("spring", {"dated": "soon"}, "is not a date"),
    ("shock", {}, "Dyno curve: needed"),
    ("shock", {"curve": SHEET.replace("40", "stiff")}, "line 2"),
    ("shock", {"file": SimpleUploadedFile("x.bin", b"\xff\xfe\x00")}, "not text"),
]


@pytest.mark.parametrize(("kind", "typed", "words"), REFUSED, ids=[words for *_, words in REFUSED])
def test_what_cannot_be_used_is_said_beside_the_field_and_all_is_kept(client, world, kind, typed, words):
    base = SPRING if kind == "spring" else SHOCK
    answer = add(signed_in(client, world.owner), kind, **{**base, **typed})
    page = answer.content.decode()
    assert answer.status_code == 422
    assert words in page
    assert f'value="{typed.get("origin", base["origin"])}"' in page
    with scope(shop=world.shop):
        assert not Part.objects.exists()


def test_one_name_once(client, world):
    client = signed_in(client, world.owner)
    add(client, "spring", **SPRING)
    assert "is already called" in add(client, "spring", **SPRING).content.decode()


def test_taking_off_the_shelf_loses_nothing(client, world):
    client = signed_in(client, world.owner)
    add(client, "spring", **SPRING)
    part, _ = only(world)
    client.post(reverse("parts:take-off", args=[part.pk]))
    assert f'href="/parts/{part.pk}/"' not in client.get(reverse("parts:shelf")).content.decode()
    assert f'href="/parts/{part.pk}/"' in client.get(reverse("parts:shelf") + "?away").content.decode()
    assert len(only(world)[1]) == 1


def test_others(client, world):
    add(signed_in(client, world.owner), "spring", **SPRING)
    part, _ = only(world)
    pages = [reverse("parts:part", args=[part.pk]), reverse("parts:revise", args=[part.pk])]
    assert add(signed_in(client, world.reader), "spring", **SPRING).status_code == 403
    assert all(client.get(page).status_code == 200 for page in pages)
    assert client.post(reverse("parts:take-off", args=[part.pk])).status_code == 403
    client = signed_in(client, world.stranger)
    assert all(client.get(page).status_code == 404 for page in pages)
    assert client.post(reverse("parts:take-off", args=[part.pk])).status_code == 404
    assert client.get(reverse("parts:take-off", args=[part.pk])).status_code == 405
    for address in ("/parts/new/spaceship", "/parts/999999/", "/parts/x/", f"/parts/{part.pk}/versions/9/curves.csv"):
        assert client.get(address).status_code == 404
