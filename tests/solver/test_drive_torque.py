"""Drive mode 2: wheels that spin, a tyre that slips and hooks, engine, clutch, converter, gears."""

import numpy as np
import pytest

from solver.carfile import car_from_dict, car_to_dict
from solver.launching import launch
from tests.solver.cars import car_with

TYRE = {
    "rear.wheel_inertia": 6.0,
    "rear.tyre.grip": 2.2,
    "rear.tyre.sliding_grip": 1.4,
    "rear.tyre.slip_stiffness": 120_000.0,
}
ENGINE = {"curve": [[200, 500], [400, 700], [600, 750], [750, 650], [800, 0]], "inertia": 0.25}
GEARS = {"ratios": [2.2, 1.5, 1.0], "final_drive": 4.1, "shift_speed": 300, "efficiency": 0.9}
CLUTCH = {"capacity": [[0, 0], [0.1, 600], [0.8, 900]]}
CONVERTER = {"stall_speed": 450, "stall_torque": 700}


def torque(peak, **more):
    return car_with({**TYRE, "hit": {"kind": "torque", "table": [[0, 0], [0.05, peak]]}, **more})


def powered(coupling, speed=600, **more):
    engine = {**ENGINE, "launch_speed": speed}
    return car_with({**TYRE, "hit": {"kind": "torque", "engine": engine, "gears": GEARS, **coupling}, **more})


CARS = {
    "hooks": torque(4700.0),
    "spins": torque(7700.0),
    "clutch": powered({"clutch": CLUTCH}),
    "converter": powered({"converter": CONVERTER}, speed=450),
}


@pytest.mark.parametrize("name", CARS)
def test_half_the_step_changes_nothing(name):
    coarse, fine = launch(CARS[name]).histories, launch(CARS[name], longest_step=5e-4).histories
    for channel in ("pitch", "rear_load", "hit", "wheel_speed", "slip", "speed", "lower_link_force"):
        assert np.abs(coarse[channel] - fine[channel]).max() < 1e-3 * np.ptp(fine[channel]), channel


@pytest.mark.parametrize("name", CARS)
def test_round_trip(name):
    assert car_from_dict(car_to_dict(CARS[name])) == CARS[name]


def test_the_wheels_spin_up_by_what_the_tyres_do_not_take():
    """``I_w w = integral of T - F z``; z worked out here from the load to the fourth figure."""
    h = launch(torque(7700.0, run={"duration": 0.6, "output_step": 2.5e-4})).histories
    # The axle stands off the ground by its radius and what its tyre gave.
    squash = 0.4064 + axle_rise(h, 420_304.4046, 875.6341762)
    left = h["wheel_torque"] - h["hit"] * squash
    step = 2.5e-4
    total = step / 3.0 * (left[0] + 4 * left[1:-1:2].sum() + 2 * left[2:-1:2].sum() + left[-1])
    assert 6.0 * h["wheel_speed"][-1] == pytest.approx(total, rel=1e-4)


def axle_rise(h, rate, damping):
    """Axle height from the tyre's load: ``N = N0 - k z - c z'``, solved step by step."""
    z, step = np.zeros(len(h["t"])), h["t"][1]
    drive = (h["rear_load"][0] - h["rear_load"]) / damping
    for i in range(1, len(z)):
        z[i] = (z[i - 1] * (1 - 0.5 * step * rate / damping) + 0.5 * step * (drive[i] + drive[i - 1])) / (
            1 + 0.5 * step * rate / damping
        )
    return z


def test_a_tyre_that_cannot_slip_is_the_prescribed_hit():
    """Grip without end and wheels without inertia: torque over radius is the force of drive mode 1."""
    sure = {
        "rear.wheel_inertia": 0.05,
        "rear.tyre.grip": 10.0,
        "rear.tyre.slip_stiffness": 1e7,
        "rear.tyre.relaxation_length": 0.3,
    }
    slow = [[0.0, 0.0], [0.4, 4000.0]]
    spun = launch(car_with({**sure, "hit": {"kind": "torque", "table": slow}})).histories
    pushed = [[t, m / 0.4064] for t, m in slow]
    given = launch(car_with({"hit": {"kind": "force", "table": pushed}})).histories
    for name in ("rear_load", "pitch", "upper_link_force", "speed"):
        # The axle sinks and rises on its tyre: a percent of lever.
        assert np.abs(spun[name] - given[name]).max() < 0.03 * np.ptp(given[name]), name


def test_too_much_torque_spins_and_goes_slower():
    hooked, spun = launch(CARS["hooks"]), launch(CARS["spins"])
    assert hooked.figures["peak_slip"] < 0.2 and spun.figures["peak_slip"] > 0.9
    assert spun.histories["wheel_speed"][-1] * 0.4064 > 2.0 * spun.histories["speed"][-1]
    assert np.all(np.abs(spun.histories["hit"]) <= 2.2 * spun.histories["rear_load"] + 1e-6)


def test_it_shifts_and_the_engine_comes_down():
    result = launch(powered({"converter": CONVERTER}, speed=450, **{"rear.tyre.grip": 4.0, "rear.tyre.sliding_grip": 3.5}))
    shifts = [event.time for event in result.events if event.kind == "shift"]
    assert shifts
    engine, t = result.histories["engine_speed"], result.histories["t"]
    after = (t > shifts[0]) & (t < shifts[0] + 0.15)
    assert engine[after].min() < engine[t <= shifts[0]].max()


def test_sixty_foot():
    # Constant 1 g: 60 ft past a rollout of r takes sqrt(2 (r + 60 ft)/a) - sqrt(2 r/a).
    pull = 1292.738255 * 9.80665
    level = {
        "hit": {"kind": "force", "table": [[0.0, pull], [1.0, pull]]},
        "cg.z": 0.42,
        "run": {"duration": 2.5, "output_step": 0.005},
    }
    figures = launch(car_with(level)).figures
    rollout = (2.0 * 0.3048 / 9.80665) ** 0.5
    sixty = (2.0 * (0.3048 + 18.288) / 9.80665) ** 0.5
    # The body rocks as it goes: the front axle is a few millimetres from where it would be.
    assert figures["rollout_time"] == pytest.approx(rollout, abs=0.02)
    assert figures["sixty_foot_time"] == pytest.approx(sixty - rollout, abs=0.02)
