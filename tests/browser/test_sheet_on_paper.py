"""The printed sheet is one page on either paper, whatever is on it, and can be read without colour."""

from __future__ import annotations

import re
import subprocess
from pathlib import Path
from typing import Any

import pytest
from django_scopes import scope

from shop.demo.load import load_demo
from shop.launches.models import Job
from shop.launches.tasks import run, run_job
from shop.setups.models import Revision
from tests.services.programs import needed
from tests.shop.launch_world import make_solved
from tests.shop.setups_world import make_world

PAPERS = {"letter": (612, 792), "a4": (595, 842)}
BETWEEN_MARGINS = {"letter": 740, "a4": 725}  # CSS pixels
EVERY_SETTING = {
    "front_shock_compression": "12", "front_shock_rebound": "14", "rear_shock_compression": "9", "rear_shock_rebound": "6",
    "ballast_weight": "45", "ballast_x": "-22 1/2", "ballast_z": "11", "wheelie_bar_height": "5", "hit_peak": "1.4",
    "front_spring_rate": "120", "rear_spring_rate": "170", "front_shock_rate": "5", "rear_shock_rate": "9",
    "hit_rise": "0.06",
    "front_pressure": "30", "rear_pressure": "12 1/4", "ride_height_front": "4 1/4", "ride_height_rear": "5 1/2",
    "upper_chassis": 2, "upper_housing": 2, "lower_chassis": 2, "lower_housing": 2,
}


@pytest.fixture(autouse=True)
def unsent(monkeypatch):
    """Nothing reaches a worker that an earlier test left running: these launches are solved here."""
    monkeypatch.setattr(run_job, "delay", lambda job_id: None)


def printed(page: Any, address: str, folder: Path) -> tuple[int, tuple[int, int], str]:
    """(pages, size in points, words) of an address as the browser prints it."""
    page.goto(address)
    file = folder / "sheet.pdf"
    page.pdf(path=str(file), prefer_css_page_size=True)
    said, words = told("pdfinfo", file), told("pdftotext", "-layout", file, "-")
    width, height = re.search(r"Page size:\s+([\d.]+) x ([\d.]+)", said).groups()
    return int(re.search(r"Pages:\s+(\d+)", said)[1]), (round(float(width)), round(float(height))), words


def told(program: str, *arguments: Any) -> str:
    command = [needed(program), *map(str, arguments)]
    return subprocess.run(command, capture_output=True, text=True, check=True).stdout


def check_one_page(page: Any, revision: Revision, paper: str, folder: Path) -> str:
    pages, size, words = printed(page, f"/revisions/{revision.pk}/sheet?paper={paper}", folder)
    assert (pages, size) == (1, PAPERS[paper]), revision
    # The last things on the page are there, and the drawing is whole: nothing was cut off.
    cut = "(box) => [...document.querySelectorAll(box)].filter((one) => one.scrollHeight > one.clientHeight + 1).length"
    page.set_viewport_size({"width": BETWEEN_MARGINS[paper], "height": 1000})
    page.emulate_media(media="print")
    assert page.evaluate(cut, ".sheet .drawing, .sheet .title-block") == 0, revision
    page.emulate_media(media="null")
    assert "1/1" in words and "wheelbase" in words and "Checked by" in words and f"/revisions/{revision.pk}/" in words
    assert "Work under a raised car" in words and "Sign out" not in words and "Print, or keep" not in words
    return words


def test_every_demo_revision_is_one_page_on_both_papers(live_server, page, sign_in, tmp_path):
    owner = load_demo()
    sign_in(page, owner.user)
    with scope(shop=owner.shop):
        jobs = list(Job.objects.filter(state="waiting"))
        revisions = list(Revision.objects.filter(number__isnull=False).select_related("car"))
    for job in jobs:
        run(job.pk)
    assert len(revisions) >= 8
    for revision in revisions:
        for paper in PAPERS:
            words = check_one_page(page, revision, paper, tmp_path)
            assert "Peak rear load" in words and revision.reason[:30] in words


@pytest.mark.parametrize("paper", PAPERS)
def test_a_sheet_with_everything_on_it_is_one_page_still(live_server, page, sign_in, tmp_path, paper):
    world = make_world()
    world.car.name = "A car whose name somebody made as long as the field lets them, number and all"
    world.car.save()
    world.car.customer.name = "A customer with a very long name and a company's name behind it, Limited"
    world.car.customer.save()
    job = make_solved(world, reason="Reason " * 28)
    for number in range(2, 8):
        reason = f"Number {number} " + "because of this " * 11
        job = make_solved(world, job.revision, reason=reason, rear_spring_rate=str(150 + number))
    last = make_solved(world, job.revision, reason="All of it " * 19, notes="Check this twice. " * 60, **EVERY_SETTING)
    sign_in(page, world.owner.user)
    words = check_one_page(page, last.revision, paper, tmp_path)
    for expected in ("Rear shock rebound setting", "Ballast, above ground", "the rest is on its page", "2 earlier"):
        assert expected in words


def test_it_needs_no_colour(live_server, page, sign_in, tmp_path):
    """Every pixel of the printed page is a shade of grey."""
    world = make_world()
    first = make_solved(world)
    second = make_solved(world, first.revision, reason="Upper bar up one", upper_chassis=2)
    sign_in(page, world.owner.user)
    printed(page, f"/revisions/{second.revision_id}/sheet", tmp_path)
    draw = [needed("pdftoppm"), "-r", "60", str(tmp_path / "sheet.pdf"), str(tmp_path / "sheet")]
    subprocess.run(draw, check=True)
    pixels = next(tmp_path.glob("*.ppm")).read_bytes()
    size = re.match(rb"P6\s+(\d+)\s+(\d+)\s+255\s", pixels)
    shades = pixels[size.end():]
    assert len(shades) == 3 * int(size[1]) * int(size[2])
    reds, greens, blues = shades[0::3], shades[1::3], shades[2::3]
    assert reds == greens == blues
    assert min(reds) < 40 and max(reds) == 255
