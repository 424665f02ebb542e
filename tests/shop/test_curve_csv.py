"""A dyno sheet in and out: what it means, and what is said of one that means nothing."""

import pytest

from shop.parts.curve_csv import read_curves, write_curves
from shop.parts.kinds import KINDS
from shop.refusals import Refused

SHOCK = KINDS["shock"].curve
SHEET = """side,click,velocity (in/s),force (lbf)
compression,2,1,40
compression,2,5,90
rebound,0,1,60
rebound,0,5,"1,150"
"""


def test_a_dyno_sheet_is_read_per_click_in_si():
    curves = read_curves(SHEET, SHOCK)
    assert [curve["setting"] for curve in curves] == [
        {"side": "compression", "click": 2}, {"side": "rebound", "click": 0},
    ]
    assert curves[0]["points"][0] == pytest.approx([0.0254, 40 * 4.4482216152605])
    assert curves[1]["points"][1][1] == pytest.approx(1150 * 4.4482216152605)


@pytest.mark.parametrize("system", ["us", "metric"])
def test_written_curves_read_back(system):
    curves = read_curves(SHEET, SHOCK)
    again = read_curves(write_curves(curves, SHOCK, system), SHOCK)
    for before, after in zip(curves, again, strict=True):
        assert after["setting"] == before["setting"]
        for one, two in zip(before["points"], after["points"], strict=True):
            assert two == pytest.approx(one, rel=1e-9)


def test_semicolons_and_a_byte_order_mark_are_understood():
    text = "\ufeff" + SHEET.replace('"1,150"', "1150").replace(",", ";")
    assert len(read_curves(text, SHOCK)) == 2


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("side,click,velocity,force\n", "no rows"),
        ("side,click,force\ncompression,0,1", "lacks a column for shaft speed"),
        ("side,click,velocity (furlong),force\ncompression,0,1,2", "furlong"),
        ("side,click,velocity,force\ncompression,0,1", "line 2 has 3 fields"),
        ("side,click,velocity,force\nsideways,0,1,2", "line 2: side is"),
        ("side,click,velocity,force\nrebound,minus,1,2", "click is"),
        ("side,click,velocity,force\nrebound,0,1,NaN", "not a finite number"),
        ("side,click,velocity,force\nrebound,0,1,2", "1 points"),
        ("side,click,velocity,force\nrebound,0,1,2\nrebound,0,1,3", "same shaft speed"),
        ("side,click,velocity,force\nrebound,0,1,9\nrebound,0,2,3", "falls as"),
        ("side,click,velocity,force\nrebound,0,-1,1\nrebound,0,2,3", "below zero"),
    ],
)
def test_a_sheet_that_means_nothing_is_refused_with_its_line(text, words):
    with pytest.raises(Refused, match=words):
        read_curves(text, SHOCK)
