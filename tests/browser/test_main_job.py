"""The main job by hand, in a real browser on a real worker, on both sizes of installation:
sign in, take in a customer and a car, measure it, issue a revision, see what it does on the hit,
print the sheet, change one thing, and compare."""

from __future__ import annotations

import re
import subprocess
from pathlib import Path

import pytest
from playwright.sync_api import Page, expect

from tests.services.programs import needed
from tests.services.stack import Stack

MEASURED = {
    "wheelbase": "106 1/2", "front_tyre_radius": "13", "rear_tyre_radius": "16 1/4",
    "weight_lf": "740", "weight_rf": "722", "weight_lr": "690", "weight_rr": "708", "total_weight": "2,860",
    "cg_height": "20 3/8", "front_spring_rate": "120", "rear_spring_rate": "160",
    "spring_chassis_x": "-4 1/2", "spring_chassis_z": "33", "spring_housing_x": "-5", "spring_housing_z": "330 mm",
    "ride_height_front": "4", "ride_height_rear": "5 1/4",
}
BRACKETS = {
    "lower_chassis": ("21", "6", "21", "10", "5"), "lower_housing": ("0 1/2", "8 1/2", "0 1/2", "11 1/2", "4"),
    "upper_chassis": ("18", "11 1/2", "18", "15 1/2", "5"), "upper_housing": ("1", "17 1/2", "1", "20 1/2", "4"),
}


@pytest.fixture(scope="module")
def owner(stack: Stack) -> tuple[str, str]:
    """The owner of an empty shop: their address and password."""
    stack.python(
        "from shop.people.models import Membership, Shop, User\n"
        "shop = Shop.objects.create(name='Test Row Chassis')\n"
        "user = User.objects.create_user('owner@example.test', 'Ada Owner', 'level-pads-21')\n"
        "Membership.objects.create(shop=shop, user=user, role='owner')"
    )
    return "owner@example.test", "level-pads-21"


def fill(page: Page, values: dict[str, str]) -> None:
    for name, value in values.items():
        page.locator(f"[name={name}]").first.fill(value)


def take_in(page: Page) -> None:
    page.goto("/customers/")
    page.get_by_role("link", name="New customer").click()
    page.get_by_label("Name").fill("Wilhelmina Aldous")
    page.get_by_role("button", name="Keep").click()
    page.get_by_role("link", name="New car").click()
    page.get_by_label("Name").fill("Lark")
    page.get_by_role("button", name="Keep").click()
    expect(page.get_by_role("heading", level=1)).to_have_text("Lark")


def measure(page: Page) -> None:
    page.get_by_role("link", name="Measure the car").click()
    fill(page, MEASURED | {"rear_spring_rate": "-160"})
    for place, row in BRACKETS.items():
        fill(page, {f"{place}_{name}": text for name, text in
                    zip(("first_x", "first_z", "last_x", "last_z", "count"), row, strict=True)})
    page.get_by_role("button", name="Keep the survey").click()
    # A slip is refused beside its field, in the unit typed, and nothing else is lost.
    expect(page.locator("#rear_spring_rate_beside .fault")).to_contain_text("-160 is outside 1.0 lb/in to 2,500.0 lb/in")
    expect(page.locator("[name=wheelbase]")).to_have_value("106 1/2")
    expect(page.locator("[name=upper_housing_count]")).to_have_value("4")
    page.locator("[name=rear_spring_rate]").fill("160")
    page.get_by_role("button", name="Keep the survey").click()
    expect(page.get_by_role("heading", level=1)).to_have_text("What was measured: survey 1")
    expect(page.locator("main")).to_contain_text("106 1/2 in")
    expect(page.locator("main")).to_contain_text("Total with driver")


def issue(page: Page, reason: str) -> None:
    page.get_by_label("What this changes, and why").fill(reason)
    page.get_by_role("button", name=re.compile("^Issue as rev")).click()


def see_the_launch(page: Page) -> None:
    page.get_by_role("link", name=re.compile("on the hit|Watch it")).first.click()
    expect(page.locator(".chart svg.main-svg").first).to_be_visible(timeout=60_000)
    expect(page.locator("main")).to_contain_text("Peak rear load")
    expect(page.locator("main")).to_contain_text("Rear axle on its tyres")


def print_sheet(page: Page, folder: Path) -> str:
    file = folder / "sheet.pdf"
    page.pdf(path=str(file), prefer_css_page_size=True)
    said = subprocess.run([needed("pdfinfo"), file], capture_output=True, text=True, check=True).stdout
    assert re.search(r"Pages:\s+1\b", said), said
    return subprocess.run([needed("pdftotext"), "-layout", file, "-"], capture_output=True, text=True, check=True).stdout


def test_the_main_job(stack: Stack, pages, complaints, owner, tmp_path) -> None:
    complaints.expect("status of 422")
    # A page left while the drawing is being redrawn gives up that request, and htmx says so.
    complaints.expect("htmx:(sendAbort|afterRequest|sendError)")
    page = pages.open()
    page.goto("/")
    page.get_by_label("E-mail address").fill(owner[0])
    page.get_by_label("Password").fill(owner[1])
    page.get_by_role("button", name="Sign in").click()
    expect(page.get_by_role("heading", level=1)).to_have_text("Which cars are in the shop?")

    take_in(page)
    measure(page)
    page.get_by_role("link", name="Revision on this survey").click()
    # A hole chosen on the drawing is chosen in the form, and the figures follow without a save.
    before = page.locator(".figure-groups").inner_text()
    page.locator(".pick[data-bracket=upper_chassis][data-hole='2']").click()
    expect(page.locator("[name=upper_chassis][value='2']")).to_be_checked()
    expect(page.locator(".figure-groups")).not_to_have_text(before, use_inner_text=True)
    issue(page, "As it came in")
    expect(page.get_by_role("heading", level=1)).to_have_text("Lark, rev 1")
    first = page.url
    see_the_launch(page)

    page.goto(first)
    page.get_by_role("link", name="Setup sheet").click()
    # Printing waits for nobody: the sheet must have come first.
    expect(page.locator(".sheet .title-block")).to_be_visible()
    words = print_sheet(page, tmp_path)
    assert "Lark" in words and "As it came in" in words and "Wilhelmina Aldous" in words

    page.goto(first)
    page.get_by_role("link", name="Next revision from this").click()
    page.locator("[name=rear_spring_rate]").fill("180")
    issue(page, "Stiffer rear springs")
    expect(page.get_by_role("heading", level=1)).to_have_text("Lark, rev 2")
    second = page.url
    see_the_launch(page)
    page.goto(second)
    page.get_by_role("link", name="Compare with rev 1").click()
    expect(page.locator("main")).to_contain_text("160 lb/in")
    expect(page.locator("main")).to_contain_text("180 lb/in")
    expect(page.locator(".chart svg.main-svg").first).to_be_visible(timeout=30_000)
    expect(page.locator("main")).to_contain_text("Peak rear load")
