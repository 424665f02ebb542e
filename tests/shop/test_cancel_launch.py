"""Cancelling work, and having failed work tried again."""

import pytest
from django.urls import reverse

from shop.launches import tasks
from tests.shop.launch_world import fresh, make_hopeless, make_job, make_solved, set_row, set_running
from tests.shop.setups_world import make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def send(client, member, job, name="cancel"):
    return signed_in(client, member).post(reverse(f"launches:{name}", args=[job.pk]))


def test_it_works(client, world):
    job = make_job(world)
    response = send(client, world.owner, job)
    assert response.url == reverse("launches:launch", args=[job.pk])
    assert fresh(job).state == "cancelled"


def test_running_work_is_told_to_stop(client, world):
    job = set_running(make_job(world))
    send(client, world.owner, job)
    assert fresh(job).state == "running" and fresh(job).cancel_requested
    page = client.get(reverse("launches:launch", args=[job.pk])).content.decode()
    assert "It stops at its next step" in page and "Cancel it" not in page


def test_what_is_done_stays_done_and_it_says_so(client, world):
    job = make_solved(world)
    response = send(client, world.owner, job)
    assert fresh(job).state == "done"
    assert "already done" in client.get(response.url).content.decode()


def test_failed_work_is_tried_again(client, world):
    job = make_hopeless(world)
    tasks.run(job.pk)
    response = send(client, world.owner, job, "retry")
    again = int(response.url.strip("/").rpartition("/")[2])
    assert again != job.pk
    assert send(client, world.owner, job, "retry").url == response.url


def test_work_under_way_is_not_tried_again(client, world):
    job = make_job(world)
    response = send(client, world.owner, job, "retry")
    assert response.url == reverse("launches:launch", args=[job.pk])
    assert "Nothing was queued" in client.get(response.url).content.decode()


def test_a_team_mate_may(client, world):
    job = make_job(world)
    send(client, world.mate, job)
    assert fresh(job).state == "cancelled"


@pytest.mark.parametrize("name", ["cancel", "retry"])
def test_a_reader_may_not(client, world, name):
    job = make_job(world)
    set_row(job, state="failed" if name == "retry" else "waiting", error="why")
    before = fresh(job).state
    assert send(client, world.reader, job, name).status_code == 403
    assert fresh(job).state == before and not fresh(job).cancel_requested


@pytest.mark.parametrize("name", ["cancel", "retry"])
def test_a_stranger_does_not_find_it(client, world, name):
    job = make_job(world)
    assert send(client, world.stranger, job, name).status_code == 404
    assert fresh(job).state == "waiting"


@pytest.mark.parametrize("name", ["cancel", "retry"])
def test_get_is_refused(client, world, name):
    job = make_job(world)
    assert signed_in(client, world.owner).get(reverse(f"launches:{name}", args=[job.pk])).status_code == 405


@pytest.mark.parametrize("path", ["/launches/987654/cancel", "/launches/seven/cancel", "/launches/987654/retry"])
def test_an_id_of_nothing_or_malformed(client, world, path):
    assert signed_in(client, world.owner).post(path).status_code == 404
