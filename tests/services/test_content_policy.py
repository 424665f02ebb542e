"""The strict content security policy, in a real browser: charts draw under it, and what it forbids does not run."""

from __future__ import annotations

from typing import Any

import pytest
from django.contrib.staticfiles import finders
from django.core.exceptions import ImproperlyConfigured

from shop.config import packaged
from tests.services.chromium import Complaints, Pages

pytestmark = pytest.mark.urls("tests.services.chart_urls")


@pytest.mark.django_db(transaction=True)
def test_a_chart_draws_without_a_complaint(live_server: Any, pages: Pages, complaints: Complaints) -> None:
    page = pages.open()
    page.goto("/chart")
    page.wait_for_selector("body[data-drawn=yes]")
    assert page.locator("#chart .trace").count() >= 2
    # These two come from the stylesheet taken out of the package: without it the drawing falls apart.
    assert page.locator("#chart .main-svg").first.evaluate("node => getComputedStyle(node).position") == "absolute"
    page.mouse.move(400, 300)
    assert page.locator("#chart .modebar-btn").first.evaluate("node => getComputedStyle(node).cursor") == "pointer"
    assert complaints.found == []


@pytest.mark.django_db(transaction=True)
def test_inline_script_and_style_are_refused_and_the_refusal_is_noticed(
    live_server: Any, pages: Pages, complaints: Complaints
) -> None:
    complaints.expect("Content Security Policy")
    page = pages.open()
    page.goto("/forbidden")
    assert page.title() == "no"
    assert page.locator("p").evaluate("node => getComputedStyle(node).color") == "rgb(0, 0, 0)"
    assert sum("Content Security Policy" in words for words in complaints.found) == 2


def test_every_rule_that_plotly_would_inject_is_in_the_stylesheet() -> None:
    script = open(finders.find("vendor/plotly.min.js"), encoding="utf-8").read()
    sheet = packaged.stylesheet(script)
    assert sheet.count("{") == sheet.count("}") > 50  # and stylesheet() refuses to leave a rule out
    assert ".js-plotly-plot .plotly .main-svg{position:absolute;" in sheet
    assert ".plotly-notifier{" in sheet


@pytest.mark.parametrize("script", ["var nothing = {};", 'a={"X,X div":"margin:0;",...other};for(b in a)'])
def test_a_plotly_whose_rules_cannot_all_be_read_is_refused_and_not_served_bare(script: str) -> None:
    with pytest.raises(ImproperlyConfigured, match="style rules"):
        packaged.stylesheet(script)


def test_only_what_is_listed_is_served_from_packages() -> None:
    assert finders.find("vendor/htmx.min.js")
    for path in ("vendor/plotly.js", "vendor/../settings.py", "django_htmx/htmx.js", "rest_framework/css/default.css"):
        assert not finders.find(path)
