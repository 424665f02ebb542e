"""What to try next, in a real browser with a real worker: every hole, a study that loses its worker, a point, an aim."""

from __future__ import annotations

import json
import re
import subprocess
import sys
from pathlib import Path

import pytest
from django_scopes import scope
from playwright.sync_api import Page, expect

from shop.setups.models import Revision
from shop.setups.services import issue
from shop.studies.models import Chunk, Study
from tests.services.stack import ROOT, until
from tests.shop.setups_world import World, make_issued, make_world

LBF = 4.4482216152605


@pytest.fixture
def world(live_server, worker) -> World:
    return make_world()


@pytest.fixture
def signed(world: World, page: Page, sign_in) -> Page:
    sign_in(page, world.owner.user)
    return page


def newest(world: World) -> Study:
    with scope(shop=world.shop):
        return Study.objects.select_related("job").order_by("-id").first()


def by_command_line(car_file: dict, folder: Path) -> dict:
    """What `python -m solver launch` answers for the same car file."""
    (folder / "car.json").write_text(json.dumps(car_file), encoding="utf-8")
    command = [sys.executable, "-m", "solver", "launch", str(folder / "car.json"), "--json", str(folder / "out.json")]
    subprocess.run(command, cwd=ROOT, check=True, capture_output=True)
    return json.loads((folder / "out.json").read_text(encoding="utf-8"))["figures"]


def test_the_field_is_filtered_one_is_opened_and_those_left_are_launched(signed: Page, world: World):
    revision = make_issued(world)
    signed.goto(f"/revisions/{revision.pk}/")
    signed.get_by_role("link", name="Every hole at once").click()
    tally = signed.locator(".tally")
    expect(tally).to_contain_text("400 of 400 choices")
    signed.get_by_label("Anti-squat, whole car from").first.fill("100")
    signed.get_by_label("Anti-squat, whole car from").first.press("Tab")
    expect(tally).not_to_contain_text("400 of 400")
    left = int(re.match(r"[\d,]+", tally.inner_text())[0].replace(",", ""))
    assert 0 < left < 400
    signed.locator(".field-canvas").focus()
    signed.keyboard.press("ArrowRight")
    signed.keyboard.press("Enter")
    expect(signed.locator("#chosen svg.side-view").first).to_be_visible()
    expect(signed.locator("#chosen").get_by_role("button", name="Make it the next revision")).to_be_visible()
    signed.get_by_role("button", name=f"Launch these {left}").click()
    expect(signed.locator("#ranked .state.done")).to_be_visible(timeout=30_000)
    expect(signed.locator("#ranked")).to_contain_text(f"{left} of {left} solved")


def test_a_study_outlives_its_worker_and_a_point_of_it_becomes_the_next_revision(
    signed: Page, world: World, worker, tmp_path: Path
):
    revision = make_issued(world)
    signed.goto(f"/revisions/{revision.pk}/studies/new")
    signed.locator("[name=vary_rear_spring_rate]").check()
    signed.locator("[name=values_rear_spring_rate]").fill("100 to 295 step 5")
    signed.locator("[name=values_rear_spring_rate]").press("Tab")
    expect(signed.locator("#count")).to_contain_text("16,000 launches")
    signed.locator("[name=name]").fill("Holes and springs")
    signed.get_by_role("button", name="Launch all of them").click()
    expect(signed.locator("table.ranked")).to_be_visible(timeout=30_000)
    worker.kill()
    study = newest(world)
    with scope(shop=world.shop):
        undone = Chunk.objects.filter(study=study, done_at=None)
        assert undone.exists(), "the worker was done before it could be killed"
        # Leases run out by themselves in half a minute; the test does not wait for that.
        undone.exclude(lease_until=None).update(lease_until=study.created_at)
        type(study.job).objects.filter(pk=study.job_id, state="running").update(lease_until=study.created_at)
    worker.ensure()
    expect(signed.locator("#ranked .state.done")).to_be_visible(timeout=60_000)
    expect(signed.locator("#ranked")).to_contain_text("16,000 of 16,000 solved")

    until(lambda: signed.locator("#tradeoff .scatterlayer .trace").count() >= 2, "the plot", 20)
    signed.reload()
    front = signed.locator("#tradeoff .scatterlayer .trace").last.locator(".point")
    expect(front.first).to_be_visible(timeout=20_000)
    front.first.scroll_into_view_if_needed()
    # Plotly takes the click on its own layer above the marks, once it has seen the pointer there.
    box = front.first.bounding_box()
    at = box["x"] + box["width"] / 2, box["y"] + box["height"] / 2
    signed.mouse.move(at[0] + 3, at[1])
    signed.mouse.move(*at, steps=4)
    expect(signed.locator("#tradeoff .hovertext").first).to_be_visible()
    signed.mouse.click(*at)
    signed.wait_for_url(re.compile(r"/studies/\d+/choices/\d+$"))
    shown = signed.get_by_role("row", name=re.compile("^Mean rear load, 0.25 s")).locator("td").first.inner_text()
    signed.get_by_role("button", name="Make it the next revision").click()
    expect(signed.get_by_role("status").first).to_contain_text("Kept as a draft with this choice")
    with scope(shop=world.shop):
        draft = Revision.objects.select_related("car", "survey").get(number=None)
        file = issue(world.owner, draft, draft.version).car_file
    figures = by_command_line(file, tmp_path)
    assert shown == f"{figures['mean_rear_load_250ms'] / LBF:,.0f} lbf"


def test_an_aim_lists_the_fewest_changes_with_how_sure_they_are(signed: Page, world: World):
    revision = make_issued(world)
    signed.goto(f"/revisions/{revision.pk}/")
    signed.get_by_role("link", name="Reach figures with few changes").click()
    signed.locator("[name=anti_squat_least]").fill("130")
    signed.locator("[name=anti_squat_most]").fill("150")
    signed.get_by_role("button", name="Launch all of them").click()
    expect(signed.locator("#ranked .state.done")).to_be_visible(timeout=30_000)
    first = signed.locator("table.ranked tbody tr").first
    expect(first).to_contain_text("%")
    changes = [row.count(",") for row in signed.locator("table.ranked tbody th").all_inner_texts()]
    assert changes == sorted(changes)


def test_the_launch_is_drawn_while_one_chooses(signed: Page, world: World):
    make_issued(world)
    signed.goto(f"/cars/{world.car.pk}/revisions/new")
    curve = signed.locator("#try-curve .curve-1:not(.key)")
    expect(curve).to_be_attached(timeout=60_000)
    before = curve.get_attribute("d")
    signed.locator('.pick[data-bracket="upper_chassis"][data-hole="2"]').click()
    expect(signed.locator("#try-curve .difference").first).to_be_visible()
    assert signed.locator("#try-curve .curve-1:not(.key)").get_attribute("d") != before
    with scope(shop=world.shop):
        assert Revision.objects.count() == 1
