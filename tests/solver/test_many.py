"""Car files solved together give the very figures that each gives alone."""

import copy
import json
from pathlib import Path

import numpy as np
import pytest

import solver
from solver.many import sweep_files

CASES = Path(__file__).parent / "reference"


@pytest.fixture(scope="module")
def base():
    car = json.loads(next(CASES.glob("01-*.json")).read_text())["car"]
    car["run"]["duration"] = 0.6
    return car


def _with(base, change):
    car = copy.deepcopy(base)
    change(car)
    return car


def test_a_mixed_batch_equals_single_launches(base):
    def raise_upper(car):
        car["rear"]["linkage"]["upper"]["chassis"][1] += 0.02

    def softer(car):
        car["rear"]["springs"][0]["spring"]["rate"] *= 0.9

    def harder_hit(car):
        car["hit"]["table"] = [[time, 1.2 * force] for time, force in car["hit"]["table"]]

    def slower_hit(car):
        car["hit"]["table"][1][0] = 0.1

    def limiter(car):
        car["front"]["droop_stop"] = {"clearance": 0.05, "rate": 4e5, "damping": 2000.0}

    changes = (lambda car: None, raise_upper, softer, harder_hit, slower_hit, limiter)
    files = [_with(base, change) for change in changes]
    columns, reasons = sweep_files([files[0], None, *files[1:]])
    assert reasons == {}
    assert np.isnan(columns["peak_rear_load"][1])
    for lane, file in zip([0, 2, 3, 4, 5, 6], files, strict=True):
        alone = solver.launch(solver.car_from_dict(file)).figures
        for name in ("peak_rear_load", "peak_rear_load_time", "lower_link_compression", "peak_pitch"):
            assert columns[name][lane] == pytest.approx(alone[name], rel=1e-12), (lane, name)
    # The changes do change something, or equality would prove nothing.
    assert len(set(columns["peak_rear_load"][[0, 2, 3, 4, 5]])) == 5


def test_a_refused_lane_says_why_and_costs_no_other(base):
    def crossed(car):
        upper = car["rear"]["linkage"]["upper"]
        upper["chassis"] = list(car["rear"]["linkage"]["lower"]["chassis"])

    def negative(car):
        car["rear"]["springs"][0]["spring"]["rate"] = -1.0

    files = [_with(base, crossed), base, _with(base, negative)]
    columns, reasons = sweep_files(files)
    assert set(reasons) == {0, 2}
    assert all(reasons.values())
    assert np.isfinite(columns["peak_rear_load"][1])
    assert np.isnan(columns["peak_rear_load"][[0, 2]]).all()


def test_cancelling_leaves_what_was_solved(base):
    columns, reasons = sweep_files([base, base], cancelled=lambda: True)
    assert columns == {}
    assert reasons == {}
