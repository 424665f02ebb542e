"""Tests of whether two groups of passes differ, by SciPy's statistics.

SciPy's statistics are imported when first used: they take longer to load than a
launch takes to run.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from solver.checks import not_negative

if TYPE_CHECKING:
    from solver.comparing import Summary

EXACT_LIMIT = 200_000
RESAMPLES = 9_999
SEED = 20_000
BOOTSTRAP_LEAST = 8


@dataclass(frozen=True)
class Welch:
    """Welch's t test of two means: t, degrees of freedom, two-sided p."""

    t: float
    freedom: float
    p: float


@dataclass(frozen=True)
class Interval:
    """Interval of the difference of means (first less second) and how it was made."""

    low: float
    high: float
    confidence: float
    method: str


@dataclass(frozen=True)
class Permutation:
    """Two-sided permutation p of the difference of means.

    ``exact`` when all ``arrangements`` were tried, else a fixed random sample.
    """

    p: float
    arrangements: int
    exact: bool
    smallest_possible: float


def welch_from_summaries(first: Summary, second: Summary) -> Welch:
    """Welch's t from two summaries (Welch 1947, with Satterthwaite's degrees of freedom).

    Parameters
    ----------
    first, second : Summary
        Each of two passes or more.

    Returns
    -------
    Welch

    Raises
    ------
    ValueError
        When a group has fewer than two passes or neither scatters at all.
    """
    from scipy import stats

    for name, group in (("first", first), ("second", second)):
        if group.count < 2:
            raise ValueError(f"the {name} group has {group.count} pass: two or more are needed for a t test.")
        not_negative(f"the deviation of the {name} group", group.deviation)
    if first.deviation == 0.0 and second.deviation == 0.0:
        raise ValueError(
            "no pass differs from another within its group: there is no scatter to compare with."
        )
    result = stats.ttest_ind_from_stats(
        first.mean, first.deviation, first.count, second.mean, second.deviation, second.count, equal_var=False
    )
    return Welch(t=float(result.statistic), freedom=_freedom(first, second), p=float(result.pvalue))


def _freedom(first: Summary, second: Summary) -> float:
    a, b = first.deviation**2 / first.count, second.deviation**2 / second.count
    return (a + b) ** 2 / (a**2 / (first.count - 1) + b**2 / (second.count - 1))


def t_interval(first: Summary, second: Summary, welch: Welch, level: float) -> Interval:
    """Interval of the difference of means by Welch's t, at a confidence `level`."""
    from scipy import stats

    error = math.sqrt(first.deviation**2 / first.count + second.deviation**2 / second.count)
    half = float(stats.t.ppf((1.0 + level) / 2.0, welch.freedom)) * error
    middle = first.mean - second.mean
    return Interval(low=middle - half, high=middle + half, confidence=level, method="Welch's t")


def permutation(a: NDArray[np.float64], b: NDArray[np.float64]) -> Permutation:
    """Permutation test of the difference of means of two arrays, two passes or more each.

    Exact up to `EXACT_LIMIT` arrangements, else a random sample that is the
    same every time (scipy.stats.permutation_test).
    """
    from scipy import stats

    ways = math.comb(a.size + b.size, a.size)
    exact = ways <= EXACT_LIMIT
    result = stats.permutation_test(
        (a, b),
        lambda x, y, axis: np.mean(x, axis=axis) - np.mean(y, axis=axis),
        permutation_type="independent",
        vectorized=True,
        n_resamples=np.inf if exact else RESAMPLES,
        random_state=np.random.default_rng(SEED),
        batch=2_000,
    )
    tried = ways if exact else RESAMPLES
    smallest = (2.0 if a.size == b.size else 1.0) / ways if exact else 2.0 / (RESAMPLES + 1)
    return Permutation(p=float(result.pvalue), arrangements=tried, exact=exact, smallest_possible=smallest)


def bootstrap(a: NDArray[np.float64], b: NDArray[np.float64], level: float) -> Interval | None:
    """Bias-corrected bootstrap interval of the difference of means (scipy.stats.bootstrap).

    None when a group has fewer than `BOOTSTRAP_LEAST` passes or no scatter:
    resampling a handful of passes promises more than they hold.
    """
    from scipy import stats

    if min(a.size, b.size) < BOOTSTRAP_LEAST or np.ptp(a) == 0.0 or np.ptp(b) == 0.0:
        return None
    result = stats.bootstrap(
        (a, b),
        lambda x, y, axis: np.mean(x, axis=axis) - np.mean(y, axis=axis),
        confidence_level=level,
        method="BCa",
        n_resamples=RESAMPLES,
        random_state=np.random.default_rng(SEED),
    )
    found = result.confidence_interval
    return Interval(low=float(found.low), high=float(found.high), confidence=level, method="bootstrap, BCa")
