"""A launch watched in a browser: it waits, is solved by a real worker, and the curves come without a hand laid on."""

from __future__ import annotations

import json

import pytest
from django_scopes import scope

from shop.launches.services import send
from shop.launches.tasks import run_job
from tests.shop.launch_world import fresh, make_job, make_solved, set_row, set_running
from tests.shop.setups_world import make_world


@pytest.fixture(autouse=True)
def unsent(monkeypatch):
    """Nothing reaches a worker that an earlier test left running, until a test undoes this."""
    monkeypatch.setattr(run_job, "delay", lambda job_id: None)
    return monkeypatch


def test_it_comes_by_itself(live_server, worker, page, sign_in, unsent):
    world = make_world()
    first = make_solved(world)
    job = make_job(world, first.revision, reason="Upper bar up one", upper_chassis=2)
    held = set_running(job)  # in other hands, so that the page is seen while it waits
    sign_in(page, world.owner.user)
    page.goto(f"/launches/{job.pk}/")
    page.get_by_text("0 % done").wait_for()
    set_row(held, state="waiting", attempt=0, lease_until=None)
    unsent.undo()
    with scope(shop=world.shop):
        send(fresh(job))
    page.locator(".chart .plot").first.wait_for(timeout=20_000)
    page.wait_for_function("document.querySelectorAll('.chart .plot.pair .main-svg').length >= 8")
    assert fresh(job).state == "done"
    assert page.get_by_role("heading", name="What Marigold does on the hit, rev 2").is_visible()
    assert page.evaluate("document.documentElement.scrollWidth <= innerWidth")


def test_cancelled_from_the_page(live_server, page, sign_in):
    world = make_world()
    job = make_job(world)
    sign_in(page, world.owner.user)
    page.goto(f"/launches/{job.pk}/")
    page.get_by_role("button", name="Cancel it").click()
    page.get_by_role("button", name="Try it again").wait_for()
    assert fresh(job).state == "cancelled"


def test_on_a_phone_nothing_is_wider_than_the_page(live_server, pages, sign_in):
    world = make_world()
    job = make_solved(world)
    page = pages.open(width=390)
    sign_in(page, world.owner.user)
    revision = f"/revisions/{job.revision_id}"
    for path in (f"/launches/{job.pk}/", "/launches/", f"{revision}/sheet", f"{revision}/links"):
        page.goto(path)
        page.wait_for_load_state("networkidle")
        assert page.evaluate("document.documentElement.scrollWidth") <= 390, path


def test_the_whole_run_is_taken_away_by_its_button(live_server, page, sign_in):
    world = make_world()
    job = make_solved(world)
    sign_in(page, world.owner.user)
    page.goto(f"/launches/{job.pk}/")
    with page.expect_download() as coming:
        page.get_by_role("link", name="Everything, JSON, SI").click()
    with open(coming.value.path()) as file:
        assert json.load(file)["histories"] == job.result.histories
