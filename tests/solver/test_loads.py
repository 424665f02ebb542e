"""From link forces of a run to bars per side."""

from dataclasses import replace

import pytest

from solver.bar_check import Bar
from solver.car import FourLink, Link
from solver.fasteners import RodEnd
from solver.loads import BarPlan, bar_loads, peak_load
from solver.members import Allowances, Material

INCH, LBF = 0.0254, 4.4482216152605
PSI = LBF / INCH**2
STEEL = Material("steel", modulus=29e6 * PSI, yield_strength=75e3 * PSI)
BARE = Allowances(dynamic=1.0, fatigue=1.0, source="none, for the test")
LOWER = Bar("lower bar", 1.25 * INCH, 0.095 * INCH, STEEL, 22 * INCH)
UPPER = Bar("upper bar", 1.0 * INCH, 0.125 * INCH, STEEL, 20 * INCH)


LINKAGE = FourLink(Link((0.6, 0.2), (0.0, 0.25)), Link((0.5, 0.4), (0.0, 0.5)))


def run(lower=(0.0, 0.0), upper=(0.0, 0.0)):
    """Figures of a run whose links saw these greatest and least forces (N, both bars)."""
    figures = {}
    for name, (most, least) in (("lower", lower), ("upper", upper)):
        figures |= {f"{name}_link_tension": most, f"{name}_link_tension_time": 0.2}
        figures |= {f"{name}_link_compression": least, f"{name}_link_compression_time": 0.1}
    return figures


STANDING = {"lower": -1000.0, "upper": 800.0}


def loads(figures, allowances=BARE, **bars):
    return bar_loads(BarPlan(allowances=allowances, **bars), LINKAGE, figures, STANDING)


def test_peaks_are_per_bar_with_their_times():
    peak = peak_load(run(lower=(500.0, -6000.0)), -1000.0, "lower")
    assert (peak.tension, peak.tension_time) == (250.0, 0.2)
    assert (peak.compression, peak.compression_time) == (3000.0, 0.1)
    assert peak.standing == -500.0


def test_a_bar_that_only_ever_pushes_has_no_tension():
    # The greatest force of a run may be a small compression.
    peak = peak_load(run(lower=(-100.0, -6000.0)), -1000.0, "lower", count=1)
    assert (peak.tension, peak.tension_time) == (0.0, None)
    assert peak.compression == 6000.0


def test_bar_forces_of_the_published_statics():
    # Lower -5656.049 lbf, upper +2957.626 for both sides [calc, two ways]; half of it on each bar.
    # Buckling of the lower: 20 970.6 lbf at 22 in [calc].
    figures = run(lower=(0.0, -5656.049 * LBF), upper=(2957.626 * LBF, 0.0))
    by_name = {load.name: load for load in loads(figures, lower=LOWER, upper=UPPER).bars}
    assert by_name["lower"].peak.compression / LBF == pytest.approx(2828.0245)
    assert by_name["upper"].peak.tension / LBF == pytest.approx(1478.813)
    buckling = next(limit for limit in by_name["lower"].check.limits if "buckles" in limit.what)
    assert buckling.factor == pytest.approx(20970.6 / 2828.0245, rel=1e-5)


def test_the_weakest_bar_comes_first():
    weak = replace(UPPER, rod_ends=(RodEnd("end", 500.0, "sheet"),))
    report = loads(run(lower=(0.0, -4000.0), upper=(2000.0, 0.0)), lower=LOWER, upper=weak)
    assert report.bars[0].name == "upper"
    assert report.bars[0].check.governs.factor == pytest.approx(0.5)


def test_single_bar_takes_the_whole_force():
    report = loads(run(upper=(3000.0, 0.0)), upper=replace(UPPER, count=1))
    assert report.bars[0].peak.tension == 3000.0


def test_missing_length_follows_from_the_pins():
    short = loads(run(lower=(0.0, -4000.0)), lower=replace(LOWER, length=None))
    slender = (0.6**2 + 0.05**2) ** 0.5 / (0.40973 * INCH)
    assert short.bars[0].check.column.slenderness == pytest.approx(slender, rel=1e-4)


def test_cautions_travel_with_the_report():
    words = " ".join(loads(run(lower=(1.0, 0.0)), lower=LOWER).cautions)
    for part in ("rulebook in force", "qualified fabricator", "shared alike"):
        assert part in words
    assert "10 to 20 percent" not in words
    ended = loads(run(lower=(1.0, 0.0)), lower=replace(LOWER, rod_ends=(RodEnd("end", 5e4, "sheet"),)))
    assert "10 to 20 percent" in ended.cautions[-1]


@pytest.mark.parametrize(
    ("call", "words"),
    [
        (lambda: loads({}, upper=UPPER), "no greatest loads of the upper bars"),
        (lambda: loads(run(), lower=replace(LOWER, count=0)), "number of bars is 0"),
        (lambda: loads(run(lower=(float("nan"), 0.0)), lower=LOWER), "tension is nan"),
    ],
)
def test_bad_input_is_named(call, words):
    with pytest.raises(ValueError, match=words):
        call()
