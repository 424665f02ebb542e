"""Comparing passes against published and library values."""

import math
from itertools import combinations

import numpy as np
import pytest

from solver.comparing import Summary, compare_passes, summarise_passes
from solver.significance import welch_from_summaries

A = [7.512, 7.498, 7.521, 7.505]
B = [7.489, 7.476, 7.493, 7.481, 7.485]


def summary(count, mean, deviation):
    return Summary(count, mean, mean, mean, mean, 0.0, deviation)


def test_nist_car_mileage():
    # NIST/SEMATECH e-Handbook, car mileage: n 249/79, means 20.14458/30.48101,
    # s 6.41470/6.10771: Welch t -12.94627, df 136.87499 [pub, lib].
    welch = welch_from_summaries(summary(249, 20.14458, 6.41470), summary(79, 30.48101, 6.10771))
    assert welch.t == pytest.approx(-12.94627, abs=5e-5)
    assert welch.freedom == pytest.approx(136.87499, abs=5e-4)
    assert welch.p < 1e-20


def test_invented_runs():
    # t 4.212254, df 5.085796, p 0.00808323, 95 % 0.009506 to 0.038894, exact permutation
    # p 0.0158730 [lib scipy.stats].
    result = compare_passes(A, B)
    assert result.welch.t == pytest.approx(4.212254, abs=5e-7)
    assert result.welch.freedom == pytest.approx(5.085796, abs=1e-6)
    assert result.welch.p == pytest.approx(0.00808323, abs=5e-9)
    assert result.interval.low == pytest.approx(0.009506, abs=5e-7)
    assert result.interval.high == pytest.approx(0.038894, abs=5e-7)
    assert result.permutation.p == pytest.approx(0.0158730, abs=5e-8)
    assert result.permutation.exact
    assert result.permutation.arrangements == 126


def test_permutation_by_counting():
    # Independent: try every choice of four out of the nine and count the sums as far out on either
    # side; doubled smaller tail, as scipy's two-sided p is.
    pool = np.array(A + B)
    seen = pool[:4].mean() - pool[4:].mean()
    found = []
    for chosen in combinations(range(9), 4):
        mask = np.zeros(9, dtype=bool)
        mask[list(chosen)] = True
        found.append(pool[mask].mean() - pool[~mask].mean())
    found = np.array(found)
    tail = min((found >= seen - 1e-12).mean(), (found <= seen + 1e-12).mean())
    assert compare_passes(A, B).permutation.p == pytest.approx(2 * tail)


def test_summary():
    times = summarise_passes(A)
    assert (times.count, times.best, times.worst) == (4, 7.498, 7.521)
    assert times.median == pytest.approx(7.5085)
    assert times.spread == pytest.approx(0.023)
    assert times.deviation == pytest.approx(np.std(A, ddof=1))
    speeds = summarise_passes([180.1, 181.4], lower_is_better=False)
    assert (speeds.best, speeds.worst) == (181.4, 180.1)


def test_small_samples_are_said():
    one = compare_passes([7.5], [7.4, 7.45])
    assert one.welch is None and one.interval is None
    assert "One pass tells nothing" in one.words[0]
    assert math.isnan(one.first.deviation)
    three = compare_passes([7.50, 7.51, 7.52], [7.40, 7.41, 7.42])
    assert three.permutation.smallest_possible == pytest.approx(0.1)
    assert three.permutation.p == pytest.approx(0.1)
    assert any("cannot show a difference" in sentence for sentence in three.words)
    assert any("are few" in sentence for sentence in three.words)
    assert three.bootstrap is None


def test_a_clear_and_an_unclear_difference_in_words():
    assert "more than the scatter" in compare_passes(A, B).words[0]
    assert "enough to explain" in compare_passes(A, [7.50, 7.52, 7.505, 7.515]).words[0]
    assert "not a cause" in compare_passes(A, B).words[-1]


def test_no_scatter():
    same = compare_passes([7.5, 7.5], [7.5, 7.5])
    assert same.welch is None
    assert "no scatter" in same.words[0]
    with pytest.raises(ValueError, match="no scatter"):
        welch_from_summaries(summary(3, 7.5, 0.0), summary(3, 7.6, 0.0))


def test_bootstrap_agrees_with_the_t_interval_on_many_passes():
    random = np.random.default_rng(1)
    first, second = random.normal(7.5, 0.02, 40), random.normal(7.49, 0.02, 40)
    result = compare_passes(first, second)
    width = result.interval.high - result.interval.low
    assert result.bootstrap.low == pytest.approx(result.interval.low, abs=0.1 * width)
    assert result.bootstrap.high == pytest.approx(result.interval.high, abs=0.1 * width)
    assert not result.permutation.exact
    assert result == compare_passes(first, second)


def test_bad_input_is_named():
    with pytest.raises(ValueError, match="first group: at least one pass"):
        compare_passes([], B)
    with pytest.raises(ValueError, match="value of the second group is nan"):
        compare_passes(A, [float("nan")])
    with pytest.raises(ValueError, match="confidence is 2"):
        compare_passes(A, B, confidence=2)


def test_equal_values_have_no_scatter():
    # 1.3 three times over has a mean one bit off 1.3.
    assert summarise_passes([1.3] * 3).deviation == 0.0
    assert compare_passes([1.3] * 3, [1.4] * 3).welch is None
