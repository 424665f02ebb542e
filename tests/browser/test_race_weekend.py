"""A race weekend in a real browser: entered on a phone between rounds, read from a file, printed on Monday."""

import re

import pytest
from django.urls import reverse
from django.utils import timezone
from django_scopes import scope
from playwright.sync_api import Page, expect

from shop.garage.models import Car
from shop.track.models import Weekend
from tests.shop.setups_world import World, make_issued, make_world
from tests.shop.track_world import enter, make_weekend, passes_of

PHONE = 390


@pytest.fixture
def world(transactional_db):
    return make_world()


@pytest.fixture
def phone(pages, sign_in, world) -> Page:
    page = pages.open(width=PHONE, height=800, has_touch=True, is_mobile=True)
    sign_in(page, world.owner.user)
    return page


def fits(page: Page) -> None:
    """Nothing sticks out sideways, and what one touches is big enough for a thumb."""
    assert page.evaluate("document.documentElement.scrollWidth") <= PHONE
    for control in page.locator("main button:visible, main select:visible, main input[type=text]:visible").all():
        assert control.bounding_box()["height"] >= 43.9, control.inner_html()


def type_pass(page: Page, time: str) -> None:
    page.get_by_label("Time", exact=True).fill(time)
    page.get_by_role("button", name="Enter", exact=True).tap()


def test_a_weekend_entered_on_a_phone(phone: Page, world: World, complaints):
    complaints.expect("status of 422")
    first = make_issued(world)
    today = timezone.localdate()
    phone.goto(reverse("track:weekends"))
    phone.get_by_role("link", name="Enter a weekend").tap()
    expect(phone.get_by_role("heading", level=1)).to_have_text("Where and when?")
    phone.get_by_label("Place").fill("Harrow Bend Dragway")
    phone.get_by_label("First day").fill(today.isoformat())
    phone.get_by_label("Elevation of the track", exact=True).fill("1,250")
    fits(phone)
    phone.get_by_role("button", name="Enter the weekend").tap()

    # Three fields, two of which already say the right thing.
    expect(phone.get_by_label("On the car")).to_have_value(str(first.pk))
    fits(phone)
    type_pass(phone, "1.312")
    expect(phone.locator(".messages")).to_contain_text("Pass 1 of Marigold 218 is entered: 60 ft 1.312 s.")
    expect(phone.get_by_label("Time", exact=True)).to_have_value("")

    # A slip of the thumb stays in its field with the words beside it.
    type_pass(phone, "13,05")
    expect(phone.locator("#beside-quick-time")).to_contain_text("write the decimal mark as a point")
    expect(phone.get_by_label("Time", exact=True)).to_have_value("13,05")
    type_pass(phone, "1.305")
    expect(phone.locator(".pass")).to_have_count(2)

    # Something was changed: a quick revision, which then counts as on the car.
    phone.get_by_role("link", name="Quick revision from rev 1").tap()
    expect(phone.get_by_role("heading", level=1)).to_have_text("What was changed on Marigold?")
    fits(phone)
    phone.get_by_label("What this changes, and why").fill("Spun at 20 ft: upper bar up one")
    phone.get_by_label("Upper link, chassis bracket").select_option("4")
    phone.get_by_role("button", name="Issue it").tap()
    expect(phone.locator(".messages")).to_contain_text("rev 2 of Marigold 218 is issued")
    type_pass(phone, "1.298")
    expect(phone.locator(".pass")).to_have_count(3)

    # The rest follows.
    phone.locator(".pass").first.get_by_role("link", name="Pass 3").tap()
    phone.get_by_label("330 ft", exact=True).fill("1.100")
    phone.get_by_label("Lane").select_option("left")
    phone.get_by_role("button", name="Save").tap()
    expect(phone.locator("#beside-time_330")).to_contain_text("the car was already at 60 ft after 1.298 s")
    phone.get_by_label("330 ft", exact=True).fill("3.601")
    fits(phone)
    phone.get_by_role("button", name="Save").tap()
    expect(phone.locator(".pass").first).to_contain_text("3.601 s")

    runs = passes_of(the_weekend(world))
    assert [(str(run.time_60), run.revision.number, run.lane) for run in runs] == [
        ("1.3120", 1, ""), ("1.3050", 1, ""), ("1.2980", 2, "left"),
    ]
    # The time of day came from the phone's own clock.
    assert all(run.clock is not None and run.day == today for run in runs)


def the_weekend(world: World):
    with scope(shop=world.shop):
        return Weekend.objects.select_related("shop").get()


def test_another_car_offers_its_own_revisions(phone: Page, world: World):
    make_issued(world)
    with scope(shop=world.shop):
        Car.objects.create(shop=world.shop, customer=world.car.customer, name="Juniper")
    weekend = make_weekend(world)
    phone.goto(reverse("track:weekend", args=[weekend.pk]))
    phone.get_by_label("Car", exact=True).select_option(label="Marigold 218")
    expect(phone.locator("#quick-revision-field")).to_contain_text("rev 1, the newest")
    phone.get_by_label("Car", exact=True).select_option(label="Juniper")
    expect(phone.locator("#quick-revision-field")).to_contain_text("Juniper has no issued revision yet")


def test_a_file_with_a_bad_row(page: Page, world: World, sign_in, tmp_path):
    weekend = make_weekend(world)
    file = tmp_path / "passes.csv"
    file.write_text(
        "car,time,60 ft,330 ft\r\n218,10:05,1.312,3.610\r\n218,11:05,1.305,0.598\r\n218;12:05;1.3;3.6\r\n", encoding="utf-8"
    )
    sign_in(page, world.owner.user)
    page.goto(reverse("track:import", args=[weekend.pk]))
    page.get_by_label("CSV file").set_input_files(file)
    page.get_by_role("button", name="Show what would become of it").click()
    expect(page.locator("tbody tr")).to_have_count(3)
    expect(page.locator("main")).to_contain_text("Nothing is written yet. 1 new, 0 already here, 2 refused")
    expect(page.locator("main")).to_contain_text("separated by semicolons, the header by commas")
    assert passes_of(weekend) == []
    # A Sunday and a Saturday: the file names no day, so that the weekend's last is taken.
    page.get_by_role("button", name="Write 1 passes").click()
    expect(page.locator("main")).to_contain_text("2 rows could not be read and stayed out")
    run, = passes_of(weekend)
    assert str(run.time_330) == "3.6100"
    with page.expect_download() as download:
        page.get_by_role("button", name="Take the refused rows along").click()
    left = download.value.path().read_text(encoding="utf-8-sig")
    assert left.count("\n") == 3 and "218,11:05,1.305,0.598,330 ft: 0.598 s to 330 ft cannot be" in left


@pytest.mark.parametrize(("paper", "box"), [("letter", (612, 792)), ("a4", (595, 842))])
def test_the_monday_page_prints_on_one_sheet(page: Page, world: World, sign_in, paper, box):
    world.shop.paper = paper
    world.shop.save()
    first = make_issued(world)
    second = make_issued(world, first, "Upper bar up one hole: front came up late", upper_chassis=4, rear_pressure="10 3/4")
    early, late = make_weekend(world, "Cedar Flats Raceway"), make_weekend(world, "Harrow Bend Dragway")
    air = {"temperature": "84", "pressure": "28.72", "humidity": "45"}
    for i in range(6):
        slip = {"time_60": f"1.31{i}", "time_330": f"3.61{i}", "time_1320": f"8.67{i}", "speed_1320": "157.2", **air}
        enter(world, early, first, clock=f"1{i}:05", lane="left", **slip)
        enter(world, late, second if i % 2 else first, clock=f"1{i}:05", lane="right", crew_saw="Clean", **slip)
    sign_in(page, world.owner.user)
    page.goto(reverse("track:monday", args=[world.car.pk]) + f"?weekend={late.pk}&with={early.pk}")
    for words in ("What was changed, foreseen and done", "hole 3 → hole 4", "Is it real?", "Harrow Bend Dragway"):
        expect(page.locator(".monday")).to_contain_text(words)
    pdf = page.pdf(prefer_css_page_size=True)
    assert len(re.findall(rb"/Type\s*/Page\b(?!s)", pdf)) == 1
    width, height = (float(side) for side in re.search(rb"/MediaBox\s*\[0 0 ([\d.]+) ([\d.]+)\]", pdf).groups())
    assert (round(width), round(height)) == pytest.approx(box, abs=1)
    # Nothing is cut off at the right-hand edge of the sheet.
    page.set_viewport_size({"width": round((box[0] / 72 - 20 / 25.4) * 96), "height": 900})
    page.emulate_media(media="print")
    assert page.evaluate("document.documentElement.scrollWidth") <= page.viewport_size["width"]


@pytest.mark.parametrize("width", [1280, 820, PHONE])
def test_no_page_sticks_out_sideways(pages, sign_in, world: World, width):
    first = make_issued(world)
    second = make_issued(world, first, "Upper bar up one hole", upper_chassis=4)
    weekend = make_weekend(world)
    for i in range(6):
        enter(world, weekend, (first, second)[i % 2], clock=f"1{i}:05", time_60=f"1.31{i}", time_1320=f"8.67{i}",
              temperature="84", pressure="28.72", humidity="45", driver_saw="Carried the front tyres to forty feet.")
    page = pages.open(width=width)
    sign_in(page, world.owner.user)
    car, one = [world.car.pk], [weekend.pk]
    for url in (reverse("track:weekends"), reverse("track:weekend", args=one), reverse("track:import", args=one),
                reverse("track:weather", args=one), reverse("track:compare", args=car), reverse("track:monday", args=car),
                reverse("track:quick-revision", args=[*one, *car]), reverse("track:pass", args=[passes_of(weekend)[0].pk])):
        page.goto(url)
        assert page.evaluate("document.documentElement.scrollWidth") <= width, url
