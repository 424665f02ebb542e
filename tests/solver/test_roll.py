"""The roll plane against the published formula and an independent balance of moments."""

import math

import numpy as np
import pytest

from solver.preload import cancelling_preload
from solver.roll import roll_history
from solver.roll_stiffness import (
    RollAxle,
    driveshaft_torque,
    front_share,
    roll_stiffness,
    torque_difference,
)
from solver.weights import Corners, weigh

G = 9.80665
FRONT = RollAxle(track=1.5, roll_stiffness=40000.0)
REAR = RollAxle(track=1.4, roll_stiffness=60000.0)
EVEN = Corners(330.0, 330.0, 300.0, 300.0)
FRONT_ON_TYRES = RollAxle(1.5, 40000.0, tyre_rate=230000.0)
REAR_ON_TYRES = RollAxle(1.4, 60000.0, tyre_rate=200000.0)


def run(torque, front_load, rear_load, corners=EVEN, front=FRONT, rear=REAR, rotation="standard"):
    n = len(torque)
    return roll_history(np.linspace(0, 1, n), front_load, rear_load, torque, corners, front, rear, rotation)


def test_published_formula_for_a_solid_drive_axle():
    # dFz = Fx r/(Nf t) Kf/(Kf + Kr) on each rear tyre (Gillespie, solid drive axle) [mem].
    force, radius, ratio = 12000.0, 0.40, 4.10
    expected = force * radius / (ratio * 1.4) * 40000.0 / 100000.0
    torque = float(driveshaft_torque(force * radius, ratio))
    assert torque_difference(torque, FRONT, REAR) / 2 == pytest.approx(expected)
    history = run([torque], [5000.0], [7500.0])
    assert history.rear_left[0] - 3750.0 == pytest.approx(expected)
    assert 3750.0 - history.rear_right[0] == pytest.approx(expected)


def test_standard_rotation_loads_left_rear_and_right_front():
    history = run([1000.0], [5000.0], [7500.0])
    assert history.rear_left[0] > history.rear_right[0]
    assert history.front_right[0] > history.front_left[0]
    assert history.roll[0] > 0.0
    reverse = run([1000.0], [5000.0], [7500.0], rotation="reverse")
    assert reverse.rear_difference == pytest.approx(-history.rear_difference)


@pytest.mark.parametrize(("front", "rear"), [(FRONT, REAR), (FRONT_ON_TYRES, REAR_ON_TYRES)])
def test_share_against_a_balance_of_chassis_and_axles(front, rear):
    # Independent: solve for chassis roll, rear axle roll and front axle roll by a stiffness matrix.
    stiff = 1e12
    kf, kr = front.roll_stiffness, rear.roll_stiffness
    tf = stiff if front.tyre_rate is None else front.tyre_rate * front.track**2 / 2
    tr = stiff if rear.tyre_rate is None else rear.tyre_rate * rear.track**2 / 2
    matrix = np.array([[kf + kr, -kr, -kf], [-kr, kr + tr, 0], [-kf, 0, kf + tf]])
    chassis, rear_axle, front_axle = np.linalg.solve(matrix, [1000.0, -1000.0, 0.0])
    assert front_share(front, rear) == pytest.approx(tf * front_axle / 1000.0, rel=1e-6)
    assert -tr * rear_axle == pytest.approx(tf * front_axle, rel=1e-4)
    assert run([1000.0], [5000.0], [7500.0], front=front, rear=rear).roll[0] == pytest.approx(
        chassis, rel=1e-6
    )


def test_loads_and_couple_are_kept():
    corners = Corners(345.0, 325.0, 290.0, 310.0)
    torque = np.linspace(0.0, 3000.0, 50)
    ahead, behind = np.linspace(670 * G, 0.0, 50), np.linspace(600 * G, 1270 * G, 50)
    history = run(torque, ahead, behind, corners)
    assert history.front_left + history.front_right == pytest.approx(ahead)
    assert history.rear_left + history.rear_right == pytest.approx(behind)
    couple = (history.front_left - history.front_right) * 0.75 + history.rear_difference * 0.7
    assert couple == pytest.approx(np.full(50, (20 * 0.75 - 20 * 0.7) * G))
    assert history.rear_left[0] == pytest.approx(290.0 * G)
    for series in (history.front_left, history.front_right, history.rear_left, history.rear_right):
        assert series.min() >= 0.0


def test_rear_evens_out_with_the_front_in_the_air():
    history = run([2000.0, 2000.0], [6000.0, 0.0], [6356.0, 12356.0])
    assert history.rear_difference[0] > 500.0
    assert history.rear_difference[1] == pytest.approx(0.0, abs=1e-9)
    assert math.isnan(history.roll[1])
    assert "front tyre is off the ground" in history.doubts[0]


def test_no_front_roll_stiffness_no_difference():
    soft = RollAxle(1.5, 0.0)
    assert torque_difference(1000.0, soft, REAR) == 0.0
    assert run([1000.0], [5000.0], [7500.0], front=soft).roll[0] == pytest.approx(1000.0 / 60000.0)
    with pytest.raises(ValueError, match="neither axle resists roll"):
        front_share(soft, RollAxle(1.4, 0.0))


def test_roll_stiffness_of_springs():
    # k b^2/2 for a pair alike; energy of two springs in a pure couple for an unlike pair [calc].
    assert roll_stiffness((50000.0, 50000.0), 1.0, 1.0) == pytest.approx(25000.0)
    assert roll_stiffness((50000.0, 50000.0), 0.9, 1.0, bar_stiffness=900.0) == pytest.approx(
        25000 * 0.81 + 900
    )
    left, right, base = 40000.0, 60000.0, 1.1
    heave = (left - right) / (left + right) * base / 2  # rise that leaves no net spring force
    force = right * (base / 2 + heave)
    assert left * (base / 2 - heave) == pytest.approx(force)
    assert roll_stiffness((left, right), 1.0, base) == pytest.approx(force * base)


def planar():
    t = np.linspace(0.0, 1.0, 201)
    torque = np.interp(t, [0.0, 0.05, 1.0], [0.0, 1200.0, 900.0])
    ahead = np.interp(t, [0.0, 0.3, 1.0], [660 * G, 2600.0, 3500.0])
    return t, ahead, 1260 * G - ahead, torque


@pytest.mark.parametrize("time", [None, 0.25])
def test_preload_cancels_the_difference(time):
    t, ahead, behind, torque = planar()
    corners = Corners(335.0, 325.0, 305.0, 295.0)
    preload = cancelling_preload(t, ahead, torque, corners, FRONT_ON_TYRES, REAR_ON_TYRES, time)
    before = roll_history(t, ahead, behind, torque, corners, FRONT_ON_TYRES, REAR_ON_TYRES)
    after = roll_history(t, ahead, behind, torque, preload.corners, FRONT_ON_TYRES, REAR_ON_TYRES)
    index = int(np.argmin(np.abs(t - preload.time)))
    assert abs(before.rear_difference[index]) > 100.0
    assert after.rear_difference[index] == pytest.approx(0.0, abs=1e-6)
    # More weight on right rear and left front, no axle's total changed.
    assert preload.change.rear_right > 0.0 and preload.change.front_left > 0.0
    assert weigh(preload.corners).front == pytest.approx(660.0)
    assert preload.couple == pytest.approx(preload.change.rear_right * G * 1.4)
    assert preload.time == (0.05 if time is None else time)


def test_big_preload_is_doubted_and_impossible_ones_refused():
    t, ahead, _, torque = planar()
    assert "cross weight" in cancelling_preload(t, ahead, torque * 3, EVEN, FRONT, REAR).doubts[0].lower()
    with pytest.raises(ValueError, match="more than a corner carries"):
        cancelling_preload(t, ahead, torque * 30, EVEN, FRONT, REAR)
    with pytest.raises(ValueError, match="choose an earlier time"):
        cancelling_preload(t, ahead * 0.0, torque, EVEN, FRONT, REAR)
    with pytest.raises(ValueError, match="time is 2 s"):
        cancelling_preload(t, ahead, torque, EVEN, FRONT, REAR, time=2.0)


@pytest.mark.parametrize(
    ("call", "words"),
    [
        (lambda: run([1.0], [1.0, 2.0], [1.0]), "of one length"),
        (lambda: run([1.0], [1.0], [1.0], rotation="left"), "rotation is 'left'"),
        (lambda: driveshaft_torque(1.0, 0.0), "final drive ratio is 0"),
        (lambda: front_share(RollAxle(0.0, 1.0), REAR), "front track is 0 m"),
        (lambda: roll_stiffness((1.0, 0.0), 1.0, 1.0), "spring rate is 0 N/m"),
    ],
)
def test_bad_input_is_named(call, words):
    with pytest.raises(ValueError, match=words):
        call()
