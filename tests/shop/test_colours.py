"""The stylesheets' colours: contrast after WCAG 2.2 (1.4.3 text 4.5, 1.4.11 graphics 3), light, dark and on paper.

Relative luminance and contrast ratio are those of WCAG 2.2, "relative luminance" and "contrast ratio".
"""

from __future__ import annotations

import re
from pathlib import Path

import pytest

CSS = Path(__file__).parents[2] / "static" / "css"
VARIABLE = re.compile(r"--([\w-]+):\s*(#[0-9a-f]{3,6})\b")

GROUNDS = ("paper", "sheet")
TEXT = [(ink, ground) for ink in ("ink", "faint", "accent", "warn", "bad", "good") for ground in GROUNDS]
TEXT += [(name, f"{name}-wash") for name in ("accent", "warn", "bad", "good")]
TEXT += [("ink", f"{name}-wash") for name in ("accent", "warn", "bad", "good")] + [("on-accent", "accent")]
GRAPHICS = [(f"series-{n}", "sheet") for n in range(1, 7)]


def _block(sheet: str, head: str) -> dict[str, str]:
    """The colours set by the rule that begins with `head`."""
    start = sheet.index(head)
    return dict(VARIABLE.findall(sheet[start : sheet.index("}", start)]))


def themes() -> dict[str, dict[str, str]]:
    ledger, paper = ((CSS / name).read_text(encoding="utf-8") for name in ("ledger.css", "print.css"))
    light = _block(ledger, ":root {")
    return {
        "light": light,
        "dark by the system": light | _block(ledger, ':root:not([data-theme="light"])'),
        "dark by choice": light | _block(ledger, ':root[data-theme="dark"]'),
        "paper": light | _block(paper, ":root"),
    }


def luminance(colour: str) -> float:
    digits = colour[1:] if len(colour) == 7 else "".join(2 * digit for digit in colour[1:])
    shares = [int(digits[at : at + 2], 16) / 255 for at in (0, 2, 4)]
    linear = [share / 12.92 if share <= 0.04045 else ((share + 0.055) / 1.055) ** 2.4 for share in shares]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


def contrast(one: str, other: str) -> float:
    light, dark = sorted((luminance(one), luminance(other)), reverse=True)
    return (light + 0.05) / (dark + 0.05)


def test_the_ratio_is_that_of_the_standard() -> None:
    assert contrast("#ffffff", "#000000") == pytest.approx(21.0)
    assert contrast("#777777", "#ffffff") == pytest.approx(4.48, abs=0.005)  # just below what text needs


@pytest.mark.parametrize("theme", themes())
def test_text_can_be_read(theme: str) -> None:
    colours = themes()[theme]
    found = {f"{ink} on {ground}": contrast(colours[ink], colours[ground]) for ink, ground in TEXT}
    assert {pair: round(ratio, 2) for pair, ratio in found.items() if ratio < 4.5} == {}


@pytest.mark.parametrize("theme", themes())
def test_curves_and_lines_can_be_seen(theme: str) -> None:
    colours = themes()[theme]
    found = {f"{ink} on {ground}": contrast(colours[ink], colours[ground]) for ink, ground in GRAPHICS}
    assert {pair: round(ratio, 2) for pair, ratio in found.items() if ratio < 3.0} == {}


def test_both_ways_into_the_dark_are_the_same() -> None:
    found = themes()
    assert found["dark by the system"] == found["dark by choice"]


def test_no_stylesheet_names_a_colour_of_its_own() -> None:
    for sheet in sorted(CSS.glob("*.css")):
        if sheet.name in ("ledger.css", "print.css", "sheet.css"):  # the frame, paper, and the sheet that is always paper
            continue
        rules = re.sub(r"/\*.*?\*/", "", sheet.read_text(encoding="utf-8"), flags=re.DOTALL)
        assert re.findall(r":[^;{}]*(#[0-9a-f]{3,8})\b", rules) == [], sheet.name
