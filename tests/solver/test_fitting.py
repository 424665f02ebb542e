"""Fitting a car to a log: the truth is found within the interval that the fit itself states."""

import json
from pathlib import Path

import numpy as np
import pytest

import solver
from solver.fitting import DELAY, HIT_SCALE, Channel, Doubtful, fit, with_numbers

CASES = Path(__file__).parent / "reference"
TRUTH = {"cg.z": 0.545, "rear.tyre.rate": 372_000.0}
DOUBTFUL = [Doubtful("cg.z", 0.06), Doubtful("rear.tyre.rate", 120_000.0)]
NOISE = {"rear_shock_travel": 0.0008, "front_travel": 0.001, "acceleration": 0.15}


@pytest.fixture(scope="module")
def base():
    car = json.loads(next(CASES.glob("01-*.json")).read_text())["car"]
    car["run"] = {"duration": 0.6, "output_step": 0.005}
    return car


@pytest.fixture(scope="module")
def true_run(base):
    return solver.launch(solver.car_from_dict(with_numbers(base, TRUTH))).histories


def logged(run, seed, noise=NOISE, delay=0.0):
    random = np.random.default_rng(seed)
    time = np.arange(0.0, 0.58, 0.005)
    return [
        Channel(name, time + delay, np.interp(time, run["t"], run[name]) + random.normal(0, sigma, len(time)), sigma)
        for name, sigma in noise.items()
    ]


def test_the_truth_lies_in_the_stated_interval_in_at_least_ninety_of_a_hundred_logs(base, true_run):
    car = solver.car_from_dict(base)
    inside = dict.fromkeys(TRUTH, 0)
    for seed in range(100):
        found = fit(car, logged(true_run, seed), DOUBTFUL)
        assert found.converged, found.message
        for estimate in found.estimates:
            inside[estimate.path] += estimate.low <= TRUTH[estimate.path] <= estimate.high
            assert estimate.identified
    assert min(inside.values()) >= 90, inside


def test_the_residual_comes_down_to_the_noise(base, true_run):
    found = fit(solver.car_from_dict(base), logged(true_run, 1), DOUBTFUL)
    for name, sigma in NOISE.items():
        assert found.residual_after[name] == pytest.approx(sigma, rel=0.25)
        assert found.residual_after[name] <= found.residual_before[name] * 1.001
    assert found.car["cg"]["z"] == pytest.approx(TRUTH["cg.z"], abs=0.01)


def test_what_the_log_does_not_show_is_said_not_to_be_identified(base, true_run):
    # The damping of the rear tyres hardly shows in the front wheels' travel under this noise.
    only = [channel for channel in logged(true_run, 2) if channel.name == "front_travel"]
    noisy = [Channel(c.name, c.time, c.values, c.sigma) for c in only]
    found = fit(solver.car_from_dict(base), noisy, [Doubtful("rear.tyre.damping", 100.0)])
    assert not found.estimates[0].identified


def test_two_numbers_that_do_the_same_are_correlated(base, true_run):
    pair = [Doubtful("mass", 60.0), Doubtful(HIT_SCALE, 0.05)]
    only = [channel for channel in logged(true_run, 3) if channel.name == "acceleration"]
    found = fit(solver.car_from_dict(base), only, pair)
    assert abs(found.correlation[0, 1]) > 0.9


def test_a_clock_that_runs_late_is_found(base, true_run):
    found = fit(solver.car_from_dict(base), logged(true_run, 4, delay=0.012), [*DOUBTFUL, Doubtful(DELAY, 0.05)])
    delay = found.estimates[2]
    assert delay.low <= 0.012 <= delay.high
    assert delay.uncertainty < 0.001


def test_a_bound_that_is_hit_is_said(base, true_run):
    found = fit(solver.car_from_dict(base), logged(true_run, 5), [Doubtful("cg.z", 0.005), DOUBTFUL[1]])
    assert found.estimates[0].at_bound


@pytest.mark.parametrize(
    ("channels", "doubtful", "words"),
    [
        ([], DOUBTFUL, "too little"),
        (None, [], "nothing to fit"),
        (None, [Doubtful("cg.z", 0.0)], "no room"),
        (None, [DOUBTFUL[0], DOUBTFUL[0]], "twice"),
    ],
)
def test_a_fit_with_nothing_to_fit_is_refused_in_words(base, true_run, channels, doubtful, words):
    with pytest.raises(ValueError, match=words):
        fit(solver.car_from_dict(base), logged(true_run, 6) if channels is None else channels, doubtful)


def test_missing_samples_are_left_out(base, true_run):
    log = logged(true_run, 7)
    holed = [Channel(c.name, c.time, np.where(np.arange(len(c.time)) % 7 == 0, np.nan, c.values), c.sigma) for c in log]
    found = fit(solver.car_from_dict(base), holed, DOUBTFUL)
    assert found.estimates[0].low <= TRUTH["cg.z"] <= found.estimates[0].high
