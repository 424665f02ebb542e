"""All work of the shop."""

import pytest
from django.urls import reverse

from tests.shop.launch_world import make_job, set_row, set_running
from tests.shop.setups_world import make_world, signed_in

RUNS = "/launches/"


@pytest.fixture
def world(db):
    return make_world()


def page_of(client, member, query=""):
    response = signed_in(client, member).get(RUNS + query)
    assert response.status_code == 200
    return response.content.decode()


def test_it_works(client, world):
    first = make_job(world)
    second = make_job(world, first.revision, reason="Upper bar up one", upper_chassis=2)
    page = page_of(client, world.owner)
    at = [page.index(reverse("launches:launch", args=[job.pk])) for job in (second, first)]
    assert at == sorted(at)
    assert "Marigold 218, rev 2" in page and "Upper bar up one" in page and world.owner.user.name in page


@pytest.mark.parametrize("state", ["waiting", "running", "done", "failed", "cancelled"])
def test_only_what_stands_so_is_shown(client, world, state):
    for offset, one in enumerate(("waiting", "running", "done", "failed", "cancelled")):
        job = make_job(world, reason=f"Kept as {one}", upper_chassis=1 + offset % 4, lower_chassis=1 + offset // 4)
        set_row(job, state=one, error="why it failed", lease_until=job.created_at)
    page = page_of(client, world.owner, f"?state={state}")
    assert f"Kept as {state}" in page and page.count("Kept as") == 1


def test_a_state_there_is_not_shows_all(client, world):
    make_job(world)
    assert "Marigold 218, rev 1" in page_of(client, world.owner, "?state=asleep&page=x")


def test_it_keeps_itself_up_to_date_only_while_something_is_under_way(client, world):
    job = set_running(make_job(world), progress=0.3)
    assert 'hx-trigger="every 3s"' in page_of(client, world.owner)
    set_row(job, state="cancelled")
    assert "hx-trigger" not in page_of(client, world.owner)


def test_nothing_yet(client, world):
    assert "Nothing has been solved yet" in page_of(client, world.owner)
    assert "No work stands so now" in page_of(client, world.owner, "?state=failed")


def test_a_stranger_sees_none_of_it(client, world):
    make_job(world)
    assert "Marigold" not in page_of(client, world.stranger)


def test_a_reader_may(client, world):
    make_job(world)
    assert "Marigold" in page_of(client, world.reader)


def test_post_is_refused(client, world):
    assert signed_in(client, world.owner).post(RUNS).status_code == 405


def test_more_rows_ask_no_more_of_the_database(client, world, django_assert_max_num_queries):
    job = make_job(world)
    for hole in (1, 2, 4):
        make_job(world, job.revision, reason="Another", upper_chassis=hole)
    signed_in(client, world.owner)
    with django_assert_max_num_queries(8):
        client.get(RUNS)
