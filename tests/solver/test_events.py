"""Events are dated to within 0.1 ms, peaks read between steps."""

import pytest

from solver.launching import launch
from tests.solver.random_cars import random_car, special

CARS = ("lift-off", "stop contact", "stop on its own mounts", "bump rubber", "wheelie bar contact")


@pytest.mark.parametrize("name", CARS)
def test_dates(name):
    found, exact = launch(special(name)).events, launch(special(name), longest_step=2e-5).events
    assert len(exact) > 1 and [event.kind for event in found] == [event.kind for event in exact]
    for event, truth in zip(found, exact, strict=True):
        assert event.time == pytest.approx(truth.time, abs=1e-4), event.kind


@pytest.mark.parametrize("seed", range(10))
def test_peaks(seed):
    found = launch(random_car(seed)).figures
    exact = launch(random_car(seed), longest_step=5e-5).figures
    for name in ("peak_rear_load", "least_front_load", "lower_link_compression", "peak_pitch", "rear_squat"):
        assert found[name] == pytest.approx(exact[name], rel=5e-4, abs=5e-6), name
    for name in ("peak_rear_load", "lower_link_compression"):
        assert found[f"{name}_time"] == pytest.approx(exact[f"{name}_time"], abs=2e-3), name
    assert found["mean_rear_load_250ms"] == pytest.approx(exact["mean_rear_load_250ms"], rel=1e-4)
