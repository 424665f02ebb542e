"""The frame's own scripts in a real browser: charts, the field of hole choices, light and dark, nothing typed lost."""

from __future__ import annotations

import csv
from collections.abc import Iterator
from typing import Any

import pytest
from playwright.sync_api import Page, expect

from tests.browser import frame_urls

pytestmark = [pytest.mark.urls("tests.browser.frame_urls"), pytest.mark.django_db(transaction=True)]


@pytest.fixture(autouse=True)
def stored_again(live_server: Any) -> Iterator[None]:
    yield
    frame_urls.stored["wheelbase"] = "108"


@pytest.fixture
def charts(page: Page) -> Page:
    page.goto("/charts-page")
    expect(page.locator(".chart .main-svg").first).to_be_visible()
    expect(page.locator(".chart").nth(1).locator(".main-svg").first).to_be_visible()
    return page


def spans(page: Page) -> list[list[float]]:
    return page.evaluate("[...document.querySelectorAll('.plot')].map(plot => [...plot._fullLayout.xaxis.range])")


def test_a_span_chosen_for_one_chart_is_shown_by_all(charts: Page) -> None:
    charts.get_by_role("button", name="first 0.25 s").click()
    charts.wait_for_function("document.querySelectorAll('.plot')[1]._fullLayout.xaxis.range[1] === 0.25")
    assert spans(charts) == [[0, 0.25], [0, 0.25]]


def test_zooming_one_chart_zooms_the_others(charts: Page) -> None:
    box = charts.locator(".plot").nth(1).locator(".nsewdrag").bounding_box()
    assert box is not None
    charts.mouse.move(box["x"] + 60, box["y"] + 40)
    charts.mouse.down()
    charts.mouse.move(box["x"] + 200, box["y"] + 45, steps=4)
    charts.mouse.up()
    charts.wait_for_function("document.querySelector('.plot')._fullLayout.xaxis.range[1] < 0.9")
    first, second = spans(charts)
    assert first == second
    assert 0 < first[0] < first[1] < 0.9


def test_the_cursor_of_one_chart_is_shown_by_all(charts: Page) -> None:
    box = charts.locator(".plot").nth(1).locator(".nsewdrag").bounding_box()
    assert box is not None
    charts.mouse.move(box["x"] + 100, box["y"] + 40)
    charts.mouse.move(box["x"] + 104, box["y"] + 42)
    for number in (0, 1):
        expect(charts.locator(".plot").nth(number).locator(".hoverlayer .legend")).to_have_count(1)
    said = charts.locator(".plot .hoverlayer .legendtitletext").all_text_contents()
    assert len(set(said)) == 1 and said[0].startswith("at 0.")


def test_a_chart_says_in_words_what_it_shows(charts: Page) -> None:
    said = charts.locator(".plot").first.get_attribute("aria-label") or ""
    assert "Rear tyres: greatest 2,400 lbf at 1.000 s, least 1,500 lbf at 0.000 s" in said
    expect(charts.locator(".marks").first).to_contain_text("1 front tyres lift, 0.250 s")


def test_a_chart_that_cannot_be_drawn_says_why(charts: Page) -> None:
    expect(charts.locator(".chart").nth(2)).to_contain_text("different units")
    expect(charts.locator(".chart").nth(3)).to_contain_text("The launch is still waiting for a worker.")


def test_a_chart_is_taken_away_as_a_table_with_the_difference(charts: Page) -> None:
    with charts.expect_download() as waiting:
        charts.get_by_role("button", name="Tyre loads: take away as a table").click()
    assert waiting.value.suggested_filename == "tyre-loads.csv"
    with open(waiting.value.path(), encoding="utf-8", newline="") as file:
        rows = list(csv.reader(file))
    assert rows[0] == [
        "Time, s", "Rear tyres, rev 3, lbf", "Rear tyres, =rev 2, lbf", "Rear tyres, difference, lbf",
        "Front tyres, rev 3, lbf",
    ]
    assert len(rows) == 1 + len(frame_urls.TIMES)
    assert [float(one) for one in rows[11][:4]] == pytest.approx([0.1, 1590, 1490, 100])
    assert rows[-1][4] == ""


def test_a_chart_is_taken_away_as_a_picture(charts: Page) -> None:
    with charts.expect_download() as waiting:
        charts.get_by_role("button", name="Body pitch: take away as a picture").click()
    picture = waiting.value.path().read_bytes()
    assert picture.startswith(b"\x89PNG") and len(picture) > 10_000


@pytest.fixture
def field(page: Page) -> Page:
    page.goto("/field-page")
    expect(page.locator(".tally")).to_contain_text("10,000 of 10,000 choices")
    return page


def window(field: Page, name: str, end: str):
    return field.get_by_role("textbox", name=f"{name} {end}")


def test_windows_leave_the_choices_within_them(field: Page) -> None:
    expect(field.locator(".tally")).to_contain_text("1 of them beyond the drawing")
    window(field, "Instant centre ahead", "from").fill("40")
    window(field, "Instant centre ahead", "to").fill("59")
    window(field, "Instant centre up", "to").fill("3")
    field.keyboard.press("Tab")
    left = sum(1 for lower, upper in frame_urls.FIELD if 40 <= 30 + lower <= 59 and upper / 5 <= 3)
    expect(field.locator(".tally")).to_have_text(f"{left} of 10,000 choices")


def test_windows_that_nothing_meets_say_so(field: Page) -> None:
    window(field, "Instant centre up", "from").fill("500")
    field.keyboard.press("Tab")
    expect(field.locator(".tally")).to_contain_text("No choice is left")


def test_text_in_a_window_is_marked_and_changes_nothing(field: Page) -> None:
    window(field, "Instant centre up", "from").fill("high")
    field.keyboard.press("Tab")
    expect(window(field, "Instant centre up", "from")).to_have_attribute("aria-invalid", "true")
    expect(field.locator(".tally")).to_contain_text("10,000 of 10,000")


def test_a_slider_goes_through_the_choices_in_order(field: Page) -> None:
    field.get_by_role("slider", name="Instant centre up from").fill("500")
    expect(window(field, "Instant centre up", "from")).to_have_value("10")
    expect(field.locator(".tally")).to_contain_text("5,000 of 10,000")


def test_touching_a_choice_takes_it(field: Page) -> None:
    field.evaluate("addEventListener('choice', event => (window.taken = event.detail))")
    box = field.locator(".field-canvas").bounding_box()
    assert box is not None
    # The drawing shows 1.7 wheelbases, from 0.45 behind the axle: 80 in ahead and 10 in up.
    scale = box["width"] / (1.7 * 108)
    x, y = (0.45 * 108 + 80) * scale, (0.52 * 108 - 10) * scale
    field.mouse.click(box["x"] + x, box["y"] + y)
    lower, upper = field.evaluate("[window.taken.holes.lower_chassis, window.taken.holes.upper_chassis]")
    assert abs(30 + lower - 1 - 80) <= 1 and abs((upper - 1) / 5 - 10) <= 0.5
    assert field.locator("[name=lower_chassis]").input_value() == str(lower)
    expect(field.locator(".told")).to_contain_text(f"chassis bracket {lower}, Upper link, chassis bracket {upper}")


def test_choices_are_walked_by_keyboard(field: Page) -> None:
    field.locator(".field-canvas").focus()
    field.keyboard.press("ArrowRight")
    walked = field.locator(".told").inner_text()
    field.keyboard.press("Enter")
    number = field.locator("[name=lower_chassis]").input_value()
    assert f"Lower link, chassis bracket {number}," in walked


def test_what_was_typed_comes_back_and_can_be_dropped(page: Page) -> None:
    page.on("dialog", lambda dialog: dialog.accept())
    page.goto("/form-page")
    page.fill("[name=wheelbase]", "109 3/8")
    page.check("[value=left]")
    page.uncheck("[value=right]")
    page.select_option("[name=unit]", "mm")
    page.goto("/charts-page")
    page.goto("/form-page")
    assert page.input_value("[name=wheelbase]") == "109 3/8"
    assert [page.is_checked("[value=left]"), page.is_checked("[value=right]")] == [True, False]
    assert page.input_value("[name=unit]") == "mm"
    page.get_by_role("button", name="Use what is stored instead").click()
    expect(page.locator("[name=wheelbase]")).to_have_value("108")
    expect(page.locator(".restored")).to_have_count(0)


def test_what_was_taken_is_not_put_back(page: Page) -> None:
    page.goto("/form-page")
    page.fill("[name=wheelbase]", "110")
    page.get_by_role("button", name="Keep").click()
    expect(page.locator(".messages")).to_contain_text("Kept.")
    frame_urls.stored["wheelbase"] = "111"  # and then somebody else changes it
    page.goto("/form-page")
    assert page.input_value("[name=wheelbase]") == "111"
    expect(page.locator(".restored")).to_have_count(0)


def test_leaving_with_unsaved_typing_asks_first(page: Page) -> None:
    asked: list[str] = []
    page.on("dialog", lambda dialog: (asked.append(dialog.type), dialog.accept()))
    page.goto("/form-page")
    page.locator("[name=wheelbase]").press_sequentially("1")
    page.goto("/charts-page")
    assert asked == ["beforeunload"]


def test_light_or_dark_is_remembered(page: Page) -> None:
    page.goto("/form-page")
    light = page.evaluate("getComputedStyle(document.body).backgroundColor")
    page.locator("#theme").click()
    dark = page.evaluate("getComputedStyle(document.body).backgroundColor")
    page.goto("/form-page")
    assert page.evaluate("getComputedStyle(document.body).backgroundColor") == dark != light
