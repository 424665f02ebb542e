"""Time-slip arithmetic against constant-acceleration values."""

import math

import numpy as np
import pytest

from solver.slip_check import check_slip
from solver.timing import (
    FOOT,
    MARKS,
    TRAP_LENGTH,
    Slip,
    corrected_slip,
    increments,
    mean_acceleration,
    slip_from_run,
    steady_run,
)

ONE_G = 32.174 * FOOT
MPH = 0.44704


@pytest.mark.parametrize(
    ("feet", "seconds", "mph"),
    # Constant 1 g (32.174 ft/s^2), no rollout [calc].
    [
        (60, 1.93125, None),
        (330, 4.52918, None),
        (660, 6.40523, 140.5103),
        (1000, 7.88429, None),
        (1320, 9.05836, 198.7115),
    ],
)
def test_constant_one_g(feet, seconds, mph):
    run = steady_run(ONE_G, feet * FOOT)
    assert run.seconds == pytest.approx(seconds, abs=5e-6)
    if mph:
        assert run.speed / MPH == pytest.approx(mph, abs=5e-5)
    assert mean_acceleration(feet * FOOT, seconds, rollout=0.0) == pytest.approx(ONE_G, rel=1e-5)


def steady_history(step=0.05, seconds=10.0, acceleration=ONE_G):
    t = np.arange(0.0, seconds + step / 2, step)
    return t, acceleration * t**2 / 2, acceleration * t


def test_slip_of_a_steady_run_without_rollout():
    slip = slip_from_run(*steady_history(), rollout=0.0)
    assert list(slip.times) == list(MARKS)
    for name, seconds in zip(MARKS, (1.93125, 4.52918, 6.40523, 7.88429, 9.05836), strict=True):
        assert slip.times[name] == pytest.approx(seconds, abs=5e-6)
    # Mean over the last 66 ft, which is below the speed at the mark.
    entered = math.sqrt(2 * (MARKS["1320 ft"] - TRAP_LENGTH) / ONE_G)
    assert slip.speeds["1320 ft"] == pytest.approx(TRAP_LENGTH / (slip.times["1320 ft"] - entered), rel=1e-9)
    assert slip.speeds["1320 ft"] / MPH < 198.7115


def test_rollout_makes_the_clock_start_late():
    plain = slip_from_run(*steady_history(), rollout=0.0)
    rolled = slip_from_run(*steady_history())
    assert rolled.rollout == pytest.approx(0.3048)
    lost = math.sqrt(2 * 0.3048 / ONE_G)
    expected = math.sqrt(2 * (MARKS["60 ft"] + 0.3048) / ONE_G) - lost
    assert rolled.times["60 ft"] == pytest.approx(expected, abs=1e-9)
    assert plain.times["60 ft"] - rolled.times["60 ft"] > 0.2
    assert mean_acceleration(MARKS["60 ft"], expected) == pytest.approx(ONE_G)


def test_a_body_that_rocks_back_first_still_has_a_slip():
    t, x, v = steady_history(step=0.01, seconds=3.0)
    rocked = x - np.where(t < 0.05, 0.008 * np.sin(np.pi * t / 0.05), 0.0)
    assert rocked.min() < -0.005
    slip = slip_from_run(t, rocked, v)
    assert slip.times["60 ft"] == pytest.approx(slip_from_run(t, x, v).times["60 ft"], abs=1e-6)


def test_marks_are_found_between_samples():
    fine = slip_from_run(*steady_history(step=0.001, seconds=3.0))
    coarse = slip_from_run(*steady_history(step=0.2, seconds=3.0))
    assert coarse.times["60 ft"] == pytest.approx(fine.times["60 ft"], abs=1e-9)
    assert list(fine.times) == ["60 ft"]
    assert fine.speeds == {}


@pytest.mark.parametrize(
    ("t", "x", "v", "words"),
    [
        ([0.0, 1.0], [0.0, 0.1], [0.0, 0.2], "ends after 0.100 m, before the rollout"),
        ([0.0, 1.0], [0.0, -1.0], [0.0, 0.2], "backwards"),
        ([0.0, 1.0], [0.0], [0.0], "of one length"),
    ],
)
def test_runs_without_a_slip_are_refused(t, x, v, words):
    with pytest.raises(ValueError, match=words):
        slip_from_run(t, x, v)


GOOD = Slip(
    times={"60 ft": 1.25, "330 ft": 3.55, "660 ft": 5.48, "1000 ft": 7.15, "1320 ft": 8.56},
    speeds={"660 ft": 126.0 * MPH, "1320 ft": 158.0 * MPH},
)


def test_a_good_slip_holds():
    check = check_slip(GOOD)
    assert check.holds
    assert check.doubts == ()


def test_a_steady_runs_slip_holds():
    assert check_slip(slip_from_run(*steady_history())).doubts == ()


def altered(times=None, speeds=None):
    return Slip(times=GOOD.times | (times or {}), speeds=GOOD.speeds | (speeds or {}))


@pytest.mark.parametrize(
    ("slip", "words"),
    [
        (altered({"330 ft": 5.6}), "at 660 ft is 5.480 s: it must be above that at 330 ft"),
        (altered({"60 ft": -1.25}), "time at 60 ft is -1.25"),
        (altered({"60 ft": 0.125}), "no car does that"),
        (altered({"600 ft": 5.0}), "no time at '600 ft'"),
        (altered(speeds={"60 ft": 40.0}), "no speed at '60 ft'"),
        (altered({"60 ft": float("nan")}), "time at 60 ft is nan"),
    ],
)
def test_impossible_slips_are_faults(slip, words):
    check = check_slip(slip)
    assert not check.holds
    assert any(words in fault for fault in check.faults)


@pytest.mark.parametrize(
    ("slip", "words"),
    [
        (altered({"1320 ft": 9.56}, {"1320 ft": 100.0 * MPH}), "slower on average"),
        (altered(speeds={"660 ft": 126.0}), "at 660 ft is more than the times allow"),
        (altered(speeds={"1320 ft": 158.0 * MPH / 3.6}), "at 1320 ft is below the mean"),
    ],
)
def test_rare_slips_are_doubts(slip, words):
    check = check_slip(slip)
    assert check.holds
    assert any(words in doubt for doubt in check.doubts)


def test_increments():
    found = increments(GOOD)
    assert list(found) == ["60 ft to 330 ft", "330 ft to 660 ft", "660 ft to 1000 ft", "1000 ft to 1320 ft"]
    assert found["330 ft to 660 ft"] == pytest.approx(1.93)
    with pytest.raises(ValueError, match="'half way' has no known distance"):
        increments(Slip({"half way": 3.0}, {}))


def test_corrected_slip():
    better = corrected_slip(GOOD, 1.06)
    assert better.times["1320 ft"] == pytest.approx(8.56 / 1.06 ** (1 / 3))
    assert better.speeds["1320 ft"] == pytest.approx(158 * MPH * 1.06 ** (1 / 3))
    assert corrected_slip(GOOD, 1.0) == GOOD
