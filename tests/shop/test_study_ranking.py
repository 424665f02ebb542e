"""Limits, weights, Pareto front and nearest miss, each against the plain definition."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from hypothesis.extra.numpy import arrays

from shop.studies.ranking import Limit, nearest_misses, order, pareto_front, scores, within

FINITE = st.floats(-1e6, 1e6, allow_nan=False)


def test_limits_leave_out_what_is_outside_or_unknown():
    columns = {"load": np.array([1.0, 2.0, 3.0, np.nan])}
    assert within(columns, [Limit("load", 1.5, 2.5)], 4).tolist() == [False, True, False, False]


def test_scores_run_from_worst_to_best_and_follow_the_sign_of_the_weight():
    columns = {"load": np.array([0.0, 5.0, 10.0]), "lift": np.array([0.0, 1.0, 0.0])}
    everything = np.ones(3, dtype=bool)
    assert scores(columns, {"load": 1.0}, everything).tolist() == [0.0, 0.5, 1.0]
    assert scores(columns, {"load": -2.0}, everything).tolist() == [1.0, 0.5, 0.0]
    both = scores(columns, {"load": 1.0, "lift": -1.0}, everything)
    assert both.tolist() == [0.5, 0.25, 1.0]


def test_unknown_figures_are_not_ranked():
    score = scores({"load": np.array([1.0, np.nan, 2.0])}, {"load": 1.0}, np.ones(3, dtype=bool))
    assert order(score).tolist() == [2, 0]


def test_nearest_miss_names_the_limit_the_choice_and_the_distance():
    columns = {"load": np.array([10.0, 20.0, 30.0]), "lift": np.array([0.0, 1.0, 2.0])}
    limits = [Limit("load", least=35.0), Limit("lift", most=2.0)]
    misses = nearest_misses(columns, limits, 3)
    assert misses[0].limit.figure == "load"
    assert misses[0].choice == 2
    assert misses[0].by == pytest.approx(5.0)


@given(arrays(float, 40, elements=FINITE), arrays(float, 40, elements=FINITE), st.booleans(), st.booleans())
def test_the_front_is_exactly_what_nothing_beats(first, second, more_first, more_second):
    front = set(pareto_front(first, second, more_first=more_first, more_second=more_second).tolist())
    a = first if more_first else -first
    b = second if more_second else -second
    for i in range(40):
        beaten = ((a >= a[i]) & (b >= b[i]) & ((a > a[i]) | (b > b[i]))).any()
        if i in front:
            assert not beaten
        elif not beaten:
            # Left out only as the twin of one that stands on the front.
            assert any(a[j] == a[i] and b[j] == b[i] for j in front)
