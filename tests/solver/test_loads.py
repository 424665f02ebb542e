"""From link forces of a run to bars per side."""

from dataclasses import replace

import numpy as np
import pytest

from solver.bar_check import Bar
from solver.fasteners import RodEnd
from solver.loads import bar_loads, peak_load
from solver.members import Allowances, Material

INCH, LBF = 0.0254, 4.4482216152605
PSI = LBF / INCH**2
STEEL = Material("steel", modulus=29e6 * PSI, yield_strength=75e3 * PSI)
BARE = Allowances(dynamic=1.0, fatigue=1.0, source="none, for the test")
LOWER = Bar("lower bar", 1.25 * INCH, 0.095 * INCH, STEEL, 22 * INCH)
UPPER = Bar("upper bar", 1.0 * INCH, 0.125 * INCH, STEEL, 20 * INCH)


def test_peaks_are_per_bar_with_their_times():
    t = np.array([0.0, 0.1, 0.2, 0.3])
    peak = peak_load(t, [-1000.0, -6000.0, 500.0, 200.0])
    assert (peak.tension, peak.tension_time) == (250.0, 0.2)
    assert (peak.compression, peak.compression_time) == (3000.0, 0.1)
    assert peak.standing == -500.0
    assert peak_load(t, [-1.0, -2.0, -3.0, -1.0], count=1).tension_time is None


def test_bar_forces_of_the_published_statics():
    # Lower -5656.049 lbf, upper +2957.626 for both sides [calc, two ways]; half of it on each bar.
    # Buckling of the lower: 20 970.6 lbf at 22 in [calc].
    report = bar_loads(
        [0.0, 0.1],
        {"lower": [0.0, -5656.049 * LBF], "upper": [0.0, 2957.626 * LBF]},
        {"lower": LOWER, "upper": UPPER},
        BARE,
    )
    by_name = {bar.name: bar for bar in report.bars}
    assert by_name["lower"].peak.compression / LBF == pytest.approx(2828.0245)
    assert by_name["upper"].peak.tension / LBF == pytest.approx(1478.813)
    buckling = next(limit for limit in by_name["lower"].check.limits if "buckles" in limit.what)
    assert buckling.factor == pytest.approx(20970.6 / 2828.0245, rel=1e-5)


def test_the_weakest_bar_comes_first():
    weak = Bar(
        "upper bar", 1.0 * INCH, 0.125 * INCH, STEEL, 20 * INCH, rod_ends=(RodEnd("end", 500.0, "sheet"),)
    )
    forces = {"lower": [-4000.0, 0.0], "upper": [2000.0, 0.0]}
    report = bar_loads([0.0, 0.1], forces, {"lower": LOWER, "upper": weak}, BARE)
    assert report.bars[0].name == "upper"
    assert report.bars[0].check.governs.factor == pytest.approx(0.5)


def test_single_bar_takes_the_whole_force():
    report = bar_loads([0.0], {"upper": [3000.0]}, {"upper": replace(UPPER, count=1)}, BARE)
    assert report.bars[0].peak.tension == 3000.0


def test_cautions_travel_with_the_report():
    words = " ".join(bar_loads([0.0], {"lower": [1.0]}, {"lower": LOWER}).cautions)
    for part in ("rulebook in force", "qualified fabricator", "shared alike"):
        assert part in words


@pytest.mark.parametrize(
    ("call", "words"),
    [
        (lambda: bar_loads([0.0], {"lower": [1.0]}, {"upper": UPPER}), "no link called 'upper'"),
        (lambda: peak_load([0.0, 0.1], [1.0]), "of one length"),
        (lambda: peak_load([0.0], [float("nan")]), "no answer"),
        (lambda: peak_load([0.0], [1.0], count=0), "number of bars is 0"),
    ],
)
def test_bad_input_is_named(call, words):
    with pytest.raises(ValueError, match=words):
        call()
