"""A link by which somebody outside reads one sheet, and nothing else."""

from datetime import timedelta

import pytest
from django.urls import reverse
from django.utils import timezone
from django_scopes import scope

from shop.people.models import LogEntry
from shop.sheets.models import SharedSheet
from tests.shop.setups_world import make_draft, make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def links(revision):
    return reverse("sheets:links", args=[revision.pk])


def make_link(client, member, revision, days="30"):
    response = signed_in(client, member).post(links(revision), {"days": days})
    return response, response.context.get("address", "")


def path_of(address):
    return address.removeprefix("http://testserver")


def row_of(world):
    with scope(shop=world.shop):
        return SharedSheet.objects.select_related("revision").get()


def test_it_works(client, world):
    issued = make_issued(world, reason="As it came in")
    response, address = make_link(client, world.owner, issued)
    assert response.status_code == 200 and address in response.content.decode()
    client.logout()
    outside = client.get(path_of(address))
    page = outside.content.decode()
    assert outside.status_code == 200 and "As it came in" in page and "Set on the car by" in page
    assert "to read, until" in page and links(issued) not in page and reverse("garage:car", args=[world.car.pk]) not in page
    assert outside["Referrer-Policy"] == "no-referrer" and "no-store" in outside["Cache-Control"]
    assert "noindex" in outside["X-Robots-Tag"]


def test_the_code_on_a_shared_sheet_leads_to_itself(client, world):
    _, address = make_link(client, world.owner, make_issued(world))
    client.logout()
    assert address in client.get(path_of(address)).content.decode()


def test_what_is_stored_does_not_open_it(client, world):
    _, address = make_link(client, world.owner, make_issued(world))
    token, stored = path_of(address).rpartition("/")[2], row_of(world)
    assert token not in (stored.digest, str(stored.pk)) and len(token) >= 32
    assert client.get(f"/s/{stored.digest}").status_code == 404
    with scope(shop=world.shop):
        assert all(token not in str(entry.detail) for entry in LogEntry.objects.all())


def test_it_opens_nothing_after_its_end(client, world):
    _, address = make_link(client, world.owner, make_issued(world))
    with scope(shop=world.shop):
        SharedSheet.objects.update(created_at=timezone.now() - timedelta(days=40), expires_at=timezone.now())
    assert client.get(path_of(address)).status_code == 404


def test_taken_back_it_opens_nothing(client, world):
    _, address = make_link(client, world.owner, make_issued(world))
    revoke = reverse("sheets:revoke", args=[row_of(world).pk])
    assert client.post(revoke).url == links(row_of(world).revision)
    first = row_of(world).revoked_at
    client.post(revoke)
    assert row_of(world).revoked_at == first
    assert client.get(path_of(address)).status_code == 404
    assert "taken back" in client.get(links(row_of(world).revision)).content.decode()


def test_a_stranger_who_is_signed_in_reads_it_as_anybody(client, world):
    _, address = make_link(client, world.owner, make_issued(world))
    page = signed_in(client, world.stranger).get(path_of(address))
    assert page.status_code == 200 and "Test Row Chassis" in page.content.decode()


@pytest.mark.parametrize("days", ["", "1", "-7", "3650", "seven", "9" * 40, "²"])
def test_a_time_there_is_not(client, world, days):
    response, address = make_link(client, world.owner, make_issued(world), days)
    assert response.status_code == 422 and not address
    assert "a link opens for 7, 30, 120 days" in response.content.decode()
    with scope(shop=world.shop):
        assert not SharedSheet.objects.exists()


def test_a_draft_is_not_shared(client, world):
    draft = make_draft(world)
    assert signed_in(client, world.owner).post(links(draft), {"days": "7"}).status_code == 302
    with scope(shop=world.shop):
        assert not SharedSheet.objects.exists()


def test_a_team_mate_may(client, world):
    assert make_link(client, world.mate, make_issued(world))[1]


def test_a_reader_sees_the_links_and_may_neither_make_nor_take_back(client, world):
    issued = make_issued(world)
    make_link(client, world.owner, issued)
    signed_in(client, world.reader)
    page = client.get(links(issued))
    assert page.status_code == 200 and "Take it back" not in page.content.decode()
    assert client.post(links(issued), {"days": "7"}).status_code == 403
    assert client.post(reverse("sheets:revoke", args=[row_of(world).pk])).status_code == 403
    assert row_of(world).revoked_at is None


def test_a_stranger_does_not_find_them(client, world):
    issued = make_issued(world)
    make_link(client, world.owner, issued)
    signed_in(client, world.stranger)
    assert client.get(links(issued)).status_code == 404
    assert client.post(reverse("sheets:revoke", args=[row_of(world).pk])).status_code == 404
    assert row_of(world).revoked_at is None


def test_get_is_refused_where_something_would_change(client, world):
    make_link(client, world.owner, make_issued(world))
    assert client.get(reverse("sheets:revoke", args=[row_of(world).pk])).status_code == 405


def test_only_reading_is_possible_by_a_link(client, world):
    _, address = make_link(client, world.owner, make_issued(world))
    assert client.post(path_of(address)).status_code == 405


@pytest.mark.parametrize(
    "path", ["/s/nothing", "/s/" + "x" * 3000, "/sheets/links/987654/revoke", "/revisions/987654/links"]
)
def test_an_address_of_nothing(client, world, path):
    signed_in(client, world.owner)
    respond = client.post if "revoke" in path else client.get
    assert respond(path).status_code == 404
