"""The launch of every reference car, channel by channel, within 0.1 % of its range."""

import numpy as np
import pytest

from solver.carfile import car_from_dict
from solver.launching import launch
from solver.modes import modes
from solver.statics import statics
from tests.solver.cars import REFERENCE, reference

CASES = pytest.mark.parametrize("number", range(1, len(REFERENCE) + 1), ids=[path.stem for path in REFERENCE])


def test_there_are_eight():
    assert len(REFERENCE) == 8


@CASES
def test_every_channel(number):
    case = reference(number)
    histories = launch(car_from_dict(case["car"])).histories
    for name, expected in case["expected"]["histories"].items():
        expected = np.array(expected)
        off = np.abs(histories[name] - expected).max() / np.ptp(expected)
        # 0.1 % is what is promised; a hundredth of a percent is what lift-off costs.
        assert off < 2e-4, f"{name}: {100 * off:.4f} % of range"


@CASES
def test_ride_height(number):
    case = reference(number)
    expected = dict(case["expected"]["statics"])
    centre = expected.pop("instant_centre")
    found = statics(car_from_dict(case["car"]))
    for name, value in expected.items():
        assert getattr(found, name) == pytest.approx(value, rel=1e-9), name
    for name, value in centre.items():
        here = getattr(found.instant_centre, name)
        assert here == (None if value is None else pytest.approx(value, rel=1e-9)), name


@CASES
def test_modes(number):
    case = reference(number)
    found = modes(car_from_dict(case["car"]))
    for mode, expected in zip(found, case["expected"]["modes"], strict=True):
        assert mode.frequency_hz == pytest.approx(expected["frequency_hz"], rel=1e-7)
        assert mode.damping_ratio == pytest.approx(expected["damping_ratio"], rel=1e-7)


def test_a_lift_off_is_dated():
    # Where the reference's front load reaches and leaves nil, to the report either side.
    case = reference(6)
    result = launch(car_from_dict(case["car"]))
    load, t = case["expected"]["histories"]["front_load"], case["expected"]["histories"]["t"]
    off = [time for time, value in zip(t, load, strict=True) if value == 0.0]
    assert off[0] - 0.005 < result.figures["front_lift_time"] <= off[0]
    assert off[-1] <= result.figures["front_landing_time"] < off[-1] + 0.005
