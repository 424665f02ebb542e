"""Every channel against constraint equations with multipliers (`multipliers.py`), 0.1 % of its range.

Forty cars drawn at random and every special one, each for as long as its event takes.
"""

import dataclasses

import numpy as np
import pytest

from solver.carfile import car_to_dict
from solver.launching import launch
from tests.solver.multipliers import solve
from tests.solver.random_cars import SPECIALS, random_car, special

LATE = {"lift-off": 1.3, "wheelie bar contact": 1.3, "wheelie bar on the housing": 1.3}
# What each special must show, or it proves nothing.
SHOWS = {
    "lift-off": {"front_tyres_leave", "front_tyres_land"},
    "stop contact": {"rear_bottoms", "front_tops", "rear_off_bump"},
    "stop on its own mounts": {"rear_tops"},
    "bump rubber": {"rear_bottoms"},
    "wheelie bar contact": {"wheelie_bar_touches", "wheelie_bar_lifts"},
    "wheelie bar on the housing": {"wheelie_bar_touches"},
}


def agree(car, duration):
    car = dataclasses.replace(car, run=dataclasses.replace(car.run, duration=duration, output_step=0.01))
    result = launch(car)
    expected = solve(car_to_dict(car), result.histories["t"], tolerance=1e-8, longest=5e-3)
    ladder = not hasattr(car.rear.linkage, "lower")
    for name, values in expected.items():
        if ladder and "link" in name:
            continue
        off = np.abs(result.histories[name] - values).max() / np.ptp(values)
        assert off < 1e-3, f"{name}: {100 * off:.4f} % of range"
    return result


@pytest.mark.parametrize("seed", range(40))
def test_random_cars(seed):
    agree(random_car(seed), 0.6)


@pytest.mark.parametrize("name", SPECIALS)
def test_special_cars(name):
    result = agree(special(name), LATE.get(name, 0.8))
    assert SHOWS.get(name, set()) <= {event.kind for event in result.events}


def test_knees_are_crossed():
    # The dual-rate and the shock table cars must work on both sides of their knees.
    squeezed = launch(special("dual-rate knee")).histories["rear_spring_travel"]
    assert squeezed.min() < 0.0 and squeezed.max() > 0.004
    speed = launch(special("shock table knee")).histories["rear_shock_velocity"]
    assert speed.min() < -0.03 and speed.max() > 0.06
