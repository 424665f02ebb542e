"""Every channel against exudyn, a general-purpose multibody engine, 0.1 % of its range."""

import dataclasses

import numpy as np
import pytest

from solver.carfile import car_to_dict
from solver.launching import launch
from tests.solver.engine import Engine
from tests.solver.random_cars import random_car, special

# The engine renamed some settings; the old names work in every release we allow.
pytestmark = pytest.mark.filterwarnings("ignore:SimulationSettings parameter:DeprecationWarning")

# The engine calls Python functions for tables, stops and lift-off: those need shorter steps.
SPECIAL = {
    "parallel links": (0.6, 5e-4),
    "angled coil-over": (0.6, 5e-4),
    "separate spring and shock": (0.6, 5e-4),
    "dual-rate knee": (0.5, 2.5e-4),
    "shock table knee": (0.5, 2.5e-4),
    "bump rubber": (0.5, 2.5e-4),
    "stop contact": (0.5, 2.5e-4),
    "lift-off": (1.3, 2.5e-4),
}


def agree(car, duration, step, lift_off=False):
    car = dataclasses.replace(car, run=dataclasses.replace(car.run, duration=duration, output_step=0.01))
    ours = launch(car).histories
    theirs = Engine(car_to_dict(car), lift_off).run(duration, step, 0.01)
    assert theirs["t"] == pytest.approx(ours["t"], abs=1e-9)
    for name, values in theirs.items():
        # The engine tells how much a link carries, not which way.
        mine = np.abs(ours[name]) if "link" in name else ours[name]
        off = np.abs(mine - values).max() / np.ptp(values)
        assert off < 1e-3, f"{name}: {100 * off:.4f} % of range"


@pytest.mark.parametrize("seed", range(40))
def test_random_cars(seed):
    car = random_car(seed)
    agree(car, 0.4, 5e-4 if car.rear.springs[0].damper.rate else 2.5e-4)


@pytest.mark.parametrize("name", SPECIAL)
def test_special_cars(name):
    duration, step = SPECIAL[name]
    agree(special(name), duration, step, lift_off=name == "lift-off")
