"""Comparing passes: is the difference more than the car's own scatter?"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from solver.checks import between, number
from solver.significance import (
    Interval,
    Permutation,
    Welch,
    bootstrap,
    permutation,
    t_interval,
    welch_from_summaries,
)


@dataclass(frozen=True)
class Summary:
    """One group of passes.

    ``spread`` is highest less lowest, ``deviation`` the sample standard
    deviation (NaN for a single pass); unit as given.
    """

    count: int
    best: float
    median: float
    mean: float
    worst: float
    spread: float
    deviation: float


@dataclass(frozen=True)
class Comparison:
    """Two groups of passes held against each other.

    Attributes
    ----------
    first, second : Summary
    difference : float
        Mean of the first less mean of the second.
    welch : Welch or None
        None when there are too few passes or no scatter at all.
    interval : Interval or None
        By Welch's t.
    bootstrap : Interval or None
        By resampling; None with fewer than eight passes in a group.
    permutation : Permutation or None
    words : tuple of str
        What can honestly be said, plainest first.
    """

    first: Summary
    second: Summary
    difference: float
    welch: Welch | None
    interval: Interval | None
    bootstrap: Interval | None
    permutation: Permutation | None
    words: tuple


def summarise_passes(values: Iterable[float], lower_is_better: bool = True) -> Summary:
    """Best, median, worst and scatter of one group of passes.

    Parameters
    ----------
    values : sequence of float
        At least one.
    lower_is_better : bool
        True for times, False for speeds.

    Returns
    -------
    Summary

    Raises
    ------
    ValueError
        When there is no pass or a value is not a number.
    """
    data = _data("the passes", values)
    low, high = float(data.min()), float(data.max())
    return Summary(
        count=data.size,
        best=low if lower_is_better else high,
        median=float(np.median(data)),
        mean=float(data.mean()),
        worst=high if lower_is_better else low,
        spread=high - low,
        deviation=_deviation(data),
    )


def compare_passes(
    first: Iterable[float], second: Iterable[float], lower_is_better: bool = True, confidence: float = 0.95
) -> Comparison:
    """Compare two groups of passes.

    Welch's t and its interval, an exact permutation test where all
    arrangements can be tried, and a bias-corrected bootstrap interval when there
    are passes enough (scipy.stats).

    Parameters
    ----------
    first, second : sequence of float
        Times or speeds, one unit.
    lower_is_better : bool
        True for times.
    confidence : float
        Of the intervals, 0.5 to 0.999.

    Returns
    -------
    Comparison

    Raises
    ------
    ValueError
        When a group is empty or a value is not a number.
    """
    level = between("the confidence", confidence, 0.5, 0.999)
    a, b = _data("the first group", first), _data("the second group", second)
    left, right = summarise_passes(a, lower_is_better), summarise_passes(b, lower_is_better)
    testable = min(left.count, right.count) >= 2 and (left.deviation > 0.0 or right.deviation > 0.0)
    welch = welch_from_summaries(left, right) if testable else None
    interval = t_interval(left, right, welch, level) if welch else None
    shuffled = permutation(a, b) if min(a.size, b.size) >= 2 else None
    return Comparison(
        first=left,
        second=right,
        difference=left.mean - right.mean,
        welch=welch,
        interval=interval,
        bootstrap=bootstrap(a, b, level),
        permutation=shuffled,
        words=_words(left, right, interval, shuffled),
    )


def _deviation(data: NDArray[np.float64]) -> float:
    if data.size < 2:
        return math.nan
    # Equal values have a mean that may differ from them in the last bit: that is no scatter.
    return 0.0 if data.min() == data.max() else float(data.std(ddof=1))


def _data(name: str, values: Iterable[float]) -> NDArray[np.float64]:
    data = np.array([number(f"a value of {name}", value) for value in values])
    if data.size == 0:
        raise ValueError(f"{name}: at least one pass is needed.")
    return data


def _words(
    first: Summary, second: Summary, interval: Interval | None, permutation: Permutation | None
) -> tuple[str, ...]:
    said = []
    least = min(first.count, second.count)
    if least < 2:
        said.append("One pass tells nothing of the car's own scatter: make more before you judge a change.")
    elif interval is None:
        said.append("No pass differs from another within its group, so there is no scatter to compare with.")
    else:
        clear = not interval.low <= 0.0 <= interval.high
        said.append(
            "The difference is more than the scatter of these passes explains."
            if clear
            else "The scatter of these passes is enough to explain the difference."
        )
    if 2 <= least < 5:
        said.append(
            f"{first.count} and {second.count} passes are few: the interval leans on scatter being normal,"
            " and one odd pass can turn it."
        )
    if permutation and permutation.exact and permutation.smallest_possible > 0.05:
        said.append(
            f"With so few passes even the plainest order has a chance of {permutation.smallest_possible:.2f}:"
            " the permutation test cannot show a difference here."
        )
    said.append("A difference is not a cause: weather, track, fuel and driver change between passes as well.")
    return tuple(said)
