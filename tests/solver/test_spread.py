"""Spread of a launch's figures from the survey's tolerances."""

import math

import numpy as np
import pytest

from solver.car_paths import number_at
from solver.spread import best_purchases, spread_by_draws, spread_of

CAR = {"mass": 1300.0, "cg": {"z": 0.5}, "wheelbase": 2.7, "pull": 12.0}
SPREADS = {"mass": 2.0, "cg.z": 0.012, "wheelbase": 0.002}


def arithmetic(documents):
    """Figures by formula, so that the spread can be worked out on paper."""
    height = np.array([car["cg"]["z"] for car in documents])
    transfer = [car["mass"] * car["pull"] * car["cg"]["z"] / car["wheelbase"] for car in documents]
    return {
        "transfer": transfer,
        "lift_time": np.where(height > 0.49, 1.0 / height, np.nan),
        "steady": np.full(len(documents), 3.0),
    }


def test_first_order_by_hand():
    spread = spread_of(CAR, SPREADS, arithmetic)
    transfer = 1300.0 * 12.0 * 0.5 / 2.7
    assert spread.propagation.value("transfer") == pytest.approx(transfer)
    parts = {"mass": 2.0 / 1300.0, "cg.z": 0.012 / 0.5, "wheelbase": 0.002 / 2.7}
    expected = transfer * math.sqrt(sum(part**2 for part in parts.values()))
    assert spread.propagation.uncertainty("transfer") == pytest.approx(expected, rel=1e-6)
    ranked = [part.name for part in spread.propagation.ranking("transfer")]
    assert ranked == ["cg.z", "mass", "wheelbase"]


def test_figures_some_lane_lacks_are_left_out():
    spread = spread_of(CAR, SPREADS, arithmetic)
    assert spread.figures == ("transfer", "steady")
    assert spread.left_out == ("lift_time",)
    assert spread.propagation.uncertainty("steady") == 0.0


def test_remeasuring_says_what_it_buys():
    spread = spread_of(CAR, SPREADS, arithmetic)
    best = best_purchases(spread, "transfer", part=0.5)[0]
    assert best.path == "cg.z"
    halved = spread_of(CAR, SPREADS | {"cg.z": 0.006}, arithmetic)
    assert best.now == pytest.approx(spread.propagation.uncertainty("transfer"))
    assert best.then == pytest.approx(halved.propagation.uncertainty("transfer"), rel=1e-6)


def test_curved_figures_are_told():
    def bowl(documents):
        heights = np.array([number_at(car, "cg.z") for car in documents])
        return {"bowl": (heights - 0.5) ** 2, "line": [car["mass"] for car in documents]}

    spread = spread_of(CAR, SPREADS, bowl)
    assert spread.curved == ("bowl",)


def test_draws_agree_with_the_first_order():
    spread = spread_of(CAR, SPREADS, arithmetic)
    draws = spread_by_draws(CAR, SPREADS, arithmetic, draws=4000, seed=3)
    index = draws.names.index("transfer")
    assert draws.uncertainties[index] == pytest.approx(spread.propagation.uncertainty("transfer"), rel=0.05)
    again = spread_by_draws(CAR, SPREADS, arithmetic, draws=4000, seed=3)
    assert (again.samples == draws.samples).all()


@pytest.mark.parametrize(
    ("uncertainties", "words"),
    [
        ({"cg.y": 0.1}, "cg.y. is not in this car file"),
        ({"mass": -1.0}, "uncertainty of mass is -1"),
        ({"mass": 0.0}, "no spread to work out"),
    ],
)
def test_bad_input_is_named(uncertainties, words):
    with pytest.raises(ValueError, match=words):
        spread_of(CAR, uncertainties, arithmetic)
