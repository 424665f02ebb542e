"""The page of one launch: how it stands, and what the car does."""

from datetime import timedelta

import pytest
from django.urls import reverse
from django.utils import timezone
from django_scopes import scope

from shop.launches import tasks
from tests.shop.launch_world import fresh, make_hopeless, make_job, make_solved, set_row, set_running
from tests.shop.setups_world import make_world, signed_in

HARD = {"hit_peak": "1.4", "reason": "Harder hit"}


@pytest.fixture
def world(db):
    return make_world()


def url(job, name="launch"):
    return reverse(f"launches:{name}", args=[job.pk])


def page_of(client, member, job):
    response = signed_in(client, member).get(url(job))
    assert response.status_code == 200
    return response.content.decode()


def test_it_works(client, world):
    first = make_solved(world)
    job = make_solved(world, first.revision, reason="Upper bar up one", upper_chassis=2)
    page = page_of(client, world.owner, job)
    assert "Upper bar up one" in page and "<svg" in page
    assert f"{url(job, 'histories')}?compare={first.pk}" in page
    for words in ("Tyre loads", "Bar forces", "Pitch and pinion angle", "Grip needed", "Rear axle on its tyres"):
        assert words in page
    assert f"{job.result.figures['peak_rear_load'] / 4.4482216152605:,.0f} lbf" in page
    assert f"{job.result.modes[0]['frequency_hz']:.2f} Hz" in page
    assert "Bar and rod-end loads come from a model" in page
    assert "Provisional" in page and page.count("Advice from a planar model") == 1
    for event in job.result.events:
        assert event["words"] in page and f"{event['time']:.3f} s" in page


def test_the_first_launch_of_a_car_is_compared_with_none(client, world):
    page = page_of(client, world.owner, make_solved(world))
    assert "compare=" not in page and "data-compare" not in page


def test_it_warns_where_the_front_tyres_lift_and_only_there(client, world):
    flat = make_solved(world)
    assert flat.result.figures["front_lift_time"] is None
    assert "can turn over" not in page_of(client, world.owner, flat)
    assert "stay on the ground" in page_of(client, world.owner, flat)
    lifted = make_solved(world, flat.revision, **HARD)
    assert lifted.result.figures["front_lift_time"] > 0
    assert "can turn over" in page_of(client, world.owner, lifted)


def test_a_metric_shop_reads_newtons(client, world):
    job = make_solved(world)
    world.shop.units = "metric"
    world.shop.save()
    page = page_of(client, world.owner, job)
    assert f"{job.result.figures['peak_rear_load']:,.0f} N" in page and " lbf" not in page


def test_a_ladder_bar_car_has_no_upper_bars(client, db):
    world = make_world("Tin Lantern")
    page = page_of(client, world.owner, make_solved(world))
    assert "Ladder bars, along" in page and "Upper bars" not in page


def test_what_failed_says_why_and_when_and_shows_no_curve(client, world):
    job = make_hopeless(world)
    tasks.run(job.pk)
    page = page_of(client, world.owner, job)
    assert f"This could not be solved: {fresh(job).error}" in page and "degrees" in page
    assert 'class="chart"' not in page and "plotly" not in page
    assert url(job, "retry") in page


def test_waiting_and_running_it_asks_again_each_second(client, world):
    job = make_job(world)
    page = page_of(client, world.owner, job)
    assert f'hx-get="{url(job, "standing")}"' in page and "every 1s" in page and "Next in the queue" in page
    set_running(job, progress=0.4)
    page = page_of(client, world.owner, job)
    assert "40 % done" in page and url(job, "cancel") in page


def test_once_settled_the_page_is_loaded_anew_and_asked_no_more(client, world):
    job = make_job(world)
    signed_in(client, world.owner)
    answer = client.get(url(job, "standing"))
    assert "HX-Refresh" not in answer and "every 1s" in answer.content.decode()
    set_row(job, state="cancelled")
    answer = client.get(url(job, "standing"))
    assert answer["HX-Refresh"] == "true" and "every 1s" not in answer.content.decode()


def test_it_counts_who_is_ahead(client, world):
    first = make_job(world)
    second = make_job(world, first.revision, reason="Next", upper_chassis=2)
    assert "1 ahead in the queue" in page_of(client, world.owner, second)


def test_it_says_when_nobody_seems_to_be_at_work(client, world):
    job = make_job(world)
    assert "No worker seems" not in page_of(client, world.owner, job)
    set_row(job, created_at=timezone.now() - timedelta(minutes=1))
    assert "No worker seems to be at work" in page_of(client, world.owner, job)
    other = make_job(world, job.revision, reason="Next", upper_chassis=2)
    set_running(other)
    assert "No worker seems" not in page_of(client, world.owner, job)


def test_a_worker_not_heard_of_is_said(client, world):
    job = set_running(make_job(world), lease=timezone.now() - timedelta(seconds=1))
    assert "not been heard of" in page_of(client, world.owner, job)


@pytest.mark.parametrize("kind", ["study", "aim"])
def test_work_of_another_kind_shows_how_it_stands(client, world, kind):
    job = make_job(world)
    set_row(job, kind=kind, state="failed", error="no answer was found")
    page = page_of(client, world.owner, job)
    assert "no answer was found" in page
    assert (url(job, "retry") in page) == (kind != "study")


@pytest.mark.parametrize("name", ["launch", "standing"])
def test_a_team_mate_and_a_reader_may(client, world, name):
    job = make_job(world)
    assert signed_in(client, world.mate).get(url(job, name)).status_code == 200
    page = signed_in(client, world.reader).get(url(job, name))
    assert page.status_code == 200 and url(job, "cancel") not in page.content.decode()


@pytest.mark.parametrize("name", ["launch", "standing"])
def test_a_stranger_does_not_find_it(client, world, name):
    assert signed_in(client, world.stranger).get(url(make_job(world), name)).status_code == 404


@pytest.mark.parametrize("name", ["launch", "standing"])
def test_nobody_signed_in_is_asked_to(client, world, name):
    assert reverse("people:sign-in") in client.get(url(make_job(world), name)).url


@pytest.mark.parametrize("path", ["/launches/987654/", "/launches/seven/", "/launches/99999999999999999999/"])
def test_an_id_of_nothing_or_malformed(client, world, path):
    assert signed_in(client, world.owner).get(path).status_code == 404


@pytest.mark.parametrize("name", ["launch", "standing"])
def test_post_is_refused(client, world, name):
    assert signed_in(client, world.owner).post(url(make_job(world), name)).status_code == 405


def test_what_the_page_asks_of_the_database_does_not_grow_with_the_car(client, world, django_assert_max_num_queries):
    job = make_solved(world)
    job = make_solved(world, job.revision, reason="Next", upper_chassis=2)
    signed_in(client, world.owner)
    with django_assert_max_num_queries(26):
        client.get(url(job))
    with scope(shop=world.shop):
        assert fresh(job).state == "done"
