"""Tube sections, buckling, threads and safety factors against published values."""

import math

import numpy as np
import pytest
from scipy.integrate import solve_bvp

from solver.bar_check import Bar, check_bar
from solver.fasteners import RodEnd, Thread, axial_warning, stress_area, thread_strength
from solver.members import (
    END_FIXITY,
    NORMALISED_4130,
    Allowances,
    Material,
    column,
    per_side,
    tube_section,
)

INCH, LBF = 0.0254, 4.4482216152605
PSI = LBF / INCH**2
STEEL = Material("steel of the example", modulus=29e6 * PSI, yield_strength=75e3 * PSI)
TUBE = tube_section(1.25 * INCH, 0.095 * INCH)


def test_hibbelers_tube():
    # Hibbeler, Mechanics of Materials, Ex. 13.1: A-36 tube, radii 75/70 mm, 7.2 m, E 200 GPa:
    # 228.2 kN [pub], 228.1995 [calc].
    strut = column(tube_section(0.150, 0.005), 7.2, Material("A-36", 200e9, 250e6))
    assert strut.formula == "Euler"
    assert strut.critical / 1e3 == pytest.approx(228.1995, abs=5e-5)


@pytest.mark.parametrize(("length", "formula", "load"), [(22.0, "Johnson", 20970.6), (60.0, "Euler", 4601.0)])
def test_link_tube(length, formula, load):
    # Tube 1.25 x 0.095 in, E 29e6, Sy 75 ksi, pin-pin [calc].
    strut = column(TUBE, length * INCH, STEEL)
    assert strut.formula == formula
    assert strut.critical / LBF == pytest.approx(load, abs=0.1)
    assert strut.changeover == pytest.approx(87.364, abs=5e-4)


def test_euler_and_johnson_meet_at_half_yield():
    # Both 12 926.67 lbf at 35.796 in [calc]. Web copies with 2 in place of 4 pi^2 E do not meet.
    strut = column(TUBE, 35.796 * INCH, STEEL)
    assert strut.euler / LBF == pytest.approx(12926.67, abs=0.5)
    assert strut.johnson / LBF == pytest.approx(12926.67, abs=0.5)
    at = column(TUBE, strut.changeover * TUBE.radius_of_gyration, STEEL)
    assert at.euler == pytest.approx(at.johnson)
    assert at.euler == pytest.approx(TUBE.area * STEEL.yield_strength / 2)


def test_end_fixities():
    # pin-pin 1, fixed-pin 2, fixed-fixed 4, fixed-free 1/4 [pub].
    assert END_FIXITY == {"pin-pin": 1, "fixed-pin": 2, "fixed-fixed": 4, "fixed-free": 0.25}
    base = column(TUBE, 2.5, STEEL).euler
    assert column(TUBE, 2.5, STEEL, fixity=4.0).euler == pytest.approx(4 * base)


@pytest.mark.parametrize(
    ("diameter", "wall", "area", "second", "gyration", "accuracy"),
    [
        # [pub] tube tables, three decimals.
        (1.0, 0.125, 0.344, 0.034, 0.313, 6e-4),
        (1.5, 0.125, 0.540, 0.129, 0.488, 6e-4),
        (2.0, 0.125, 0.736, 0.325, 0.664, 6e-4),
        # [calc], mesh check with a section-properties library.
        (1.25, 0.095, 0.34471, 0.05787, 0.40973, 6e-6),
        (1.5, 0.120, 0.52025, 0.12478, 0.48974, 6e-6),
    ],
)
def test_tube_sections(diameter, wall, area, second, gyration, accuracy):
    section = tube_section(diameter * INCH, wall * INCH)
    assert section.area / INCH**2 == pytest.approx(area, abs=accuracy)
    assert section.second_moment / INCH**4 == pytest.approx(second, abs=accuracy)
    assert section.radius_of_gyration / INCH == pytest.approx(gyration, abs=accuracy)


def test_solid_bar_is_the_thickest_wall():
    assert tube_section(0.02, 0.01).area == pytest.approx(math.pi * 1e-4)
    with pytest.raises(ValueError, match=r"at most 0\.01 m"):
        tube_section(0.02, 0.011)


@pytest.mark.parametrize(("length", "bow"), [(0.6, 0.001), (0.6, 0.006), (1.5, 0.004)])
def test_crooked_bar_first_yields_at_the_perry_robertson_load(length, bow):
    # Independent: solve the bent bar's differential equation EI y'' = -P (y + bow sin(pi x/l))
    # with scipy's boundary-value solver and take the stress at mid-length.
    load = column(TUBE, length, STEEL, bow=bow).crooked
    rigidity = STEEL.modulus * TUBE.second_moment

    def bent(x, y):
        return np.vstack([y[1], -load / rigidity * (y[0] + bow * np.sin(math.pi * x / length))])

    grid = np.linspace(0, length, 41)
    found = solve_bvp(bent, lambda a, b: [a[0], b[0]], grid, np.zeros((2, 41)), tol=1e-8)
    moment = load * (found.sol(length / 2)[0] + bow)
    stress = load / TUBE.area + moment * TUBE.outside_diameter / 2 / TUBE.second_moment
    assert stress == pytest.approx(STEEL.yield_strength, rel=1e-5)


def test_straight_bar_is_the_limit_of_a_crooked_one():
    for length in (0.3, 3.0):
        strut = column(TUBE, length, STEEL)
        assert strut.crooked == pytest.approx(min(strut.euler, TUBE.area * STEEL.yield_strength))
        assert strut.critical == strut.ideal
        assert column(TUBE, length, STEEL, bow=0.003).critical < strut.critical


@pytest.mark.parametrize(
    ("diameter", "per_inch", "area"),
    # [pub] thread tables; formula of ASME B1.1.
    [(3 / 8, 24, 0.0878), (7 / 16, 20, 0.1187), (1 / 2, 20, 0.1599), (5 / 8, 18, 0.256), (3 / 4, 16, 0.373)],
)
def test_stress_areas(diameter, per_inch, area):
    result = stress_area(diameter * INCH, INCH / per_inch) / INCH**2
    assert result == pytest.approx(area, abs=6e-4 if area > 0.2 else 6e-5)


def test_metric_stress_area():
    # M12 x 1.75: 84.3 mm^2, ISO 898-1 table [mem].
    assert stress_area(0.012, 0.00175, "metric") * 1e6 == pytest.approx(84.3, abs=0.05)


def test_handbook_4130():
    # Ftu 95, Fty 75 ksi, E 29e6 psi [mem, handbook class].
    assert NORMALISED_4130.yield_strength / PSI == pytest.approx(75e3, rel=1e-3)
    assert NORMALISED_4130.ultimate_strength / PSI == pytest.approx(95e3, rel=1e-3)
    assert NORMALISED_4130.modulus / PSI == pytest.approx(29e6, rel=1e-3)
    assert "from memory" in NORMALISED_4130.source


THREAD = Thread(0.75 * INCH, INCH / 16, 100e3 * PSI)
ROD_END = RodEnd("chassis rod end", 20000 * LBF, "maker's sheet", shank=THREAD)
LOWER = Bar("lower bar", 1.25 * INCH, 0.095 * INCH, STEEL, 22 * INCH, threads=(THREAD,), rod_ends=(ROD_END,))
BARE = Allowances(dynamic=1.0, fatigue=1.0, source="none, for the test")


def test_factors_by_hand():
    check = check_bar(LOWER, tension=1000 * LBF, compression=5000 * LBF, allowances=BARE)
    factors = {limit.what: limit.factor for limit in check.limits}
    assert factors["tube buckles (Johnson)"] == pytest.approx(20970.6 / 5000, rel=1e-5)
    assert factors["tube yields"] == pytest.approx(0.34471 * 75000 / 5000, rel=1e-4)
    assert factors["thread 1 yields"] == pytest.approx(0.373 * 100e3 / 5000, rel=1e-3)
    assert factors["chassis rod end, radial rating"] == pytest.approx(4.0)
    assert check.governs.what == "chassis rod end, radial rating"
    assert [limit.factor for limit in check.limits] == sorted(factors.values())


def test_buckling_counts_compression_only():
    check = check_bar(LOWER, tension=9000 * LBF, compression=0.0, allowances=BARE)
    buckling = next(limit for limit in check.limits if "buckles" in limit.what)
    assert buckling.factor == math.inf
    assert check.governs.load == pytest.approx(9000 * LBF)


def test_allowances_are_stated_and_applied():
    plain = check_bar(LOWER, 0.0, 5000 * LBF, BARE)
    stated = check_bar(LOWER, 0.0, 5000 * LBF, Allowances(dynamic=2.0, fatigue=0.5))

    def factor(check, word):
        return next(limit.factor for limit in check.limits if word in limit.what)

    assert factor(stated, "buckles") == pytest.approx(factor(plain, "buckles") / 2)
    assert factor(stated, "radial") == pytest.approx(factor(plain, "radial") / 4)
    assert check_bar(LOWER, 0.0, 1.0).allowances.source == "common practice, no source"


def test_crooked_bar_is_named():
    bent = Bar("upper bar", 1.25 * INCH, 0.095 * INCH, STEEL, 22 * INCH, bow=0.004)
    check = check_bar(bent, 0.0, 5000 * LBF, BARE)
    assert check.governs.what == "tube buckles (Perry-Robertson, crooked bar)"


def test_cautions_defer():
    words = " ".join(check_bar(LOWER, 0.0, 1.0).cautions)
    for part in ("rulebook in force", "local codes", "qualified fabricator", "planar model"):
        assert part in words
    assert "10 to 20 percent" in axial_warning()


def test_per_side():
    assert per_side(-8000.0) == -4000.0
    assert per_side(-8000.0, bars=1) == -8000.0


@pytest.mark.parametrize(
    ("call", "words"),
    [
        (
            lambda: check_bar(Bar("upper bar", 0.03, 0.002, STEEL, 0.0), 0, 1),
            "upper bar: the length of the bar is 0 m",
        ),
        (lambda: check_bar(LOWER, -1.0, 0.0), "lower bar: the tension is -1 N"),
        (lambda: column(TUBE, 1.0, STEEL, fixity=9.0), "end fixity is 9"),
        (lambda: Allowances(dynamic=0.5), "dynamic allowance is 0.5"),
        (lambda: stress_area(0.01, 0.01), "pitch over its diameter"),
        (lambda: thread_strength(Thread(0.01, 0.001, -1.0)), "proof strength is -1 Pa"),
        (lambda: per_side(1.0, 0), "number of bars is 0"),
    ],
)
def test_bad_input_is_named(call, words):
    with pytest.raises(ValueError, match=words):
        call()
