"""Spread of a launch's figures from the survey's tolerances."""

import math

import numpy as np
import pytest

from solver.carfile import car_from_dict
from solver.launching import LONGEST_STEP, launch
from solver.spread import best_purchases, spread_by_draws, spread_of
from solver.spread_lanes import LaneFigures
from solver.sweeping import changed
from solver.warming import EXAMPLE

DOCUMENT = {**EXAMPLE, "run": {"duration": 0.5, "output_step": 0.005}}
CAR = car_from_dict(DOCUMENT)
# Standard uncertainties of a careful survey: a millimetre at the pins, 3 mm of CG height,
# 2 percent of springs and shocks.
SURVEY = {
    "mass": 1.0,
    "cg.x": 0.002,
    "cg.z": 0.003,
    "wheelbase": 0.001,
    "chassis.pitch_inertia": 40.0,
    "rear.springs.0.spring.rate": 1000.0,
    "rear.springs.0.damper.rate": 40.0,
    "rear.linkage.upper.chassis.z": 0.001,
    "rear.linkage.upper.housing.z": 0.001,
    "rear.linkage.lower.chassis.z": 0.001,
    "rear.linkage.lower.housing.z": 0.001,
    "hit.scale": 0.01,
}
THREE = {"mass": 2.0, "cg.z": 0.012, "wheelbase": 0.002}


def arithmetic(lanes):
    """Figures by formula, so that the spread can be worked out on paper."""
    mass, height, length = lanes["mass"], lanes["cg.z"], lanes["wheelbase"]
    return LaneFigures(
        figures={
            "transfer": mass * 12.0 * height / length,
            "lift_time": np.where(height > 0.515, 1.0 / height, np.nan),
            "wheelie_bar": np.full(len(mass), np.nan),
            "bowl": (height - 0.52) ** 2,
            "steady": np.full(len(mass), 3.0),
        },
        refused={},
    )


def test_first_order_by_hand():
    spread = spread_of(CAR, THREE, figures_of=arithmetic)
    transfer = 1200.0 * 12.0 * 0.52 / 2.7
    assert spread.propagation.value("transfer") == pytest.approx(transfer)
    parts = {"mass": 2.0 / 1200.0, "cg.z": 0.012 / 0.52, "wheelbase": 0.002 / 2.7}
    expected = transfer * math.sqrt(sum(part**2 for part in parts.values()))
    assert spread.propagation.uncertainty("transfer") == pytest.approx(expected, rel=1e-6)
    ranked = [part.name for part in spread.propagation.ranking("transfer")]
    assert ranked == ["cg.z", "mass", "wheelbase"]


def test_figures_some_lane_lacks_are_left_out():
    spread = spread_of(CAR, THREE, figures_of=arithmetic)
    assert spread.figures == ("transfer", "bowl", "steady")
    assert spread.left_out == ("lift_time",)
    assert spread.propagation.uncertainty("steady") == 0.0


def test_curved_figures_are_told():
    assert spread_of(CAR, THREE, figures_of=arithmetic).curved == ("bowl",)


def test_remeasuring_says_what_it_buys():
    spread = spread_of(CAR, THREE, figures_of=arithmetic)
    best = best_purchases(spread, "transfer", part=0.5)[0]
    assert best.path == "cg.z"
    halved = spread_of(CAR, THREE | {"cg.z": 0.006}, figures_of=arithmetic)
    assert best.now == pytest.approx(spread.propagation.uncertainty("transfer"))
    assert best.then == pytest.approx(halved.propagation.uncertainty("transfer"), rel=1e-6)


def test_load_transfer_at_rest_and_anti_squat_by_hand():
    # Static rear load m g (1 - x/L) and its derivatives by hand, through the real solver.
    spread = spread_of(CAR, {"mass": 1.0, "cg.x": 0.002, "wheelbase": 0.001})
    m, x, length, g = 1200.0, 1.3, 2.7, 9.80665
    parts = (g * (1 - x / length) * 1.0, m * g / length * 0.002, m * g * x / length**2 * 0.001)
    assert spread.propagation.value("rear_load") == pytest.approx(m * g * (1 - x / length))
    assert spread.propagation.uncertainty("rear_load") == pytest.approx(math.hypot(*parts), rel=1e-5)
    assert spread.propagation.ranking("rear_load")[0].name == "cg.x"


def test_sensitivities_are_those_of_single_launches():
    spread = spread_of(CAR, SURVEY)
    for path in ("cg.z", "rear.springs.0.spring.rate", "rear.linkage.upper.chassis.z"):
        item = spread.propagation.inputs[path]
        column = list(spread.propagation.inputs).index(path)
        ends = [
            launch(car_from_dict(changed(DOCUMENT, path, item.value + side * item.uncertainty))).figures
            for side in (1, -1)
        ]
        for name in ("peak_rear_load", "peak_pitch", "upper_link_tension", "mean_rear_load_250ms"):
            slope = (ends[0][name] - ends[1][name]) / (2 * item.uncertainty)
            row = spread.figures.index(name)
            assert spread.propagation.sensitivities[row, column] == pytest.approx(slope, rel=1e-9)


def test_first_order_agrees_with_draws_of_whole_cars():
    # GUM Supplement 1, clause 8: 3 000 lanes; the draws' own standard deviation is good to 1.3 percent.
    spread = spread_of(CAR, SURVEY)
    draws = spread_by_draws(CAR, SURVEY, draws=3000, seed=5)
    # Times of peaks are read at the solver's steps, so their differences are coarse and told as such.
    assert [name for name in spread.curved if not name.endswith("_time")] == []
    checked = 0
    for name, drawn in zip(draws.names, draws.uncertainties, strict=True):
        if name in spread.figures and spread.propagation.uncertainty(name) > 1e-6:
            if name.endswith("_time"):
                continue
            assert drawn == pytest.approx(spread.propagation.uncertainty(name), rel=0.08), name
            checked += 1
    assert checked > 25


def test_times_of_peaks_are_no_better_than_a_step():
    spread = spread_of(CAR, {"mass": 0.01})
    assert spread.propagation.uncertainty("peak_rear_load_time") == pytest.approx(0.0, abs=1e-6)
    assert spread.uncertainty("peak_rear_load_time") == pytest.approx(
        LONGEST_STEP / math.sqrt(12.0), rel=1e-3
    )
    assert spread.uncertainty("peak_rear_load") == spread.propagation.uncertainty("peak_rear_load")
    # A finer run's peak lies within a step of the reported one.
    coarse, fine = launch(CAR).figures, launch(CAR, longest_step=LONGEST_STEP / 16).figures
    for name in ("peak_rear_load_time", "rear_squat_time", "peak_pitch_time"):
        assert abs(coarse[name] - fine[name]) <= LONGEST_STEP


def test_more_uncertain_measurements_spread_more():
    once, twice = (
        spread_of(CAR, {path: factor * value for path, value in SURVEY.items()}) for factor in (0.5, 1.0)
    )
    for name in ("anti_squat", "peak_rear_load", "peak_pitch"):
        ratio = twice.propagation.uncertainty(name) / once.propagation.uncertainty(name)
        assert ratio == pytest.approx(2.0, rel=0.02)


def test_correlated_numbers():
    # Mass and CG found by the same scales: full correlation adds, opposite cancels.
    pair = {"cg.x": 0.002, "wheelbase": 0.0042}
    alone = spread_of(CAR, pair).propagation.uncertainty("rear_load")
    together = spread_of(CAR, pair, {("cg.x", "wheelbase"): 1.0}).propagation.uncertainty("rear_load")
    assert together < 0.1 * alone


@pytest.mark.parametrize(
    ("uncertainties", "words"),
    [
        ({"cg.y": 0.1}, "'cg.y' is not in this car file"),
        ({"mass": -1.0}, "uncertainty of mass is -1"),
        ({"mass": 0.0}, "no spread to work out"),
        ({"run.duration": 0.01}, "cannot vary"),
        ({"cg.x": 2.0}, "cg.x"),
        ({"rear.linkage.upper.housing.x": 0.6}, "with rear.linkage.upper.housing.x at"),
    ],
)
def test_bad_input_is_named(uncertainties, words):
    with pytest.raises(ValueError, match=words):
        spread_of(CAR, uncertainties)
