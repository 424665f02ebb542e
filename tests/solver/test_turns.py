"""Spring-seat turns against an independent force balance of the whole car."""

import dataclasses

import numpy as np
import pytest
from scipy.optimize import minimize

from solver.corner_springs import Axle
from solver.turns import seat_turns, target_from_cross
from solver.weights import Corners, weigh

G = 9.80665
FRONT = Axle(1.52, (40000.0, 42000.0), 0.7, 0.0015, tyre_rate=230000.0)
REAR = Axle(1.40, (30000.0, 30000.0), 0.95, 0.0016, tyre_rate=210000.0, spring_base=1.0)
MEASURED = Corners(352.0, 331.0, 305.0, 298.0)
LENGTH = 2.69


def independent_loads(front, rear, travel):
    """Wheel loads and rise by minimising the potential energy of chassis and wheels (no matrices shared).

    Unknowns: chassis heave, pitch, roll and the four wheels' rise, from the measured state, in
    which every spring and tyre already carries its load.
    """
    start = MEASURED.as_array() * G
    x = [LENGTH, LENGTH, 0.0, 0.0]
    y = [front.track / 2, -front.track / 2, rear.track / 2, -rear.track / 2]

    def energy(v):
        heave, pitch, roll = v[:3]
        wheels = v[3:]
        body = [heave + pitch * x[i] + roll * y[i] for i in range(4)]
        total = 0.0
        for axle, a, b in ((front, 0, 1), (rear, 2, 3)):
            for i, rate in zip((a, b), axle.spring_rates, strict=True):
                if axle.spring_base is None:
                    travel_i = wheels[i] - body[i]
                else:
                    at = (1 if i == a else -1) * axle.spring_base / 2
                    mid = (wheels[a] + wheels[b] - body[a] - body[b]) / 2
                    slope = (wheels[a] - wheels[b] - body[a] + body[b]) / axle.track
                    travel_i = mid + slope * at
                total += rate / 2 * (axle.motion_ratio * travel_i + travel[i]) ** 2
            difference = (wheels[a] - body[a]) - (wheels[b] - body[b])
            total += axle.bar_rate / 2 * difference**2
            for i in (a, b):
                total += axle.tyre_rate / 2 * wheels[i] ** 2
        return total

    best = minimize(lambda v: energy(v / 1000.0), np.zeros(7), method="BFGS", options={"gtol": 1e-9})
    move = best.x / 1000.0
    tyre = np.array([front.tyre_rate] * 2 + [rear.tyre_rate] * 2)
    rise = [move[0] + move[1] * x[i] + move[2] * y[i] for i in range(4)]
    return (start - tyre * move[3:]) / G, np.array(rise)


@pytest.mark.parametrize("bar", [0.0, 9000.0])
@pytest.mark.parametrize("keep_height", [True, False])
def test_turned_seats_give_the_expected_scales(keep_height, bar):
    rear = dataclasses.replace(REAR, bar_rate=bar)
    result = seat_turns(
        MEASURED, target_from_cross(MEASURED, 50.0), LENGTH, FRONT, rear, keep_height=keep_height
    )
    loads, rise = independent_loads(FRONT, rear, result.seat_travel.as_array())
    assert loads == pytest.approx(result.corner_weights.as_array(), abs=2e-3)
    assert rise == pytest.approx(result.height_change.as_array(), abs=2e-6)
    if keep_height:
        assert np.all(result.height_change.as_array() == 0.0)


def test_only_the_warp_can_be_changed():
    # Axle weights and left-right moment belong to the CG; a target beyond them is reported.
    target = Corners(340.0, 340.0, 303.0, 303.0)
    result = seat_turns(MEASURED, target, LENGTH, FRONT, REAR)
    after, before = weigh(result.corner_weights), weigh(MEASURED)
    assert after.front == pytest.approx(before.front)
    assert after.rear == pytest.approx(before.rear)

    def moment(c):
        return (c.front_left - c.front_right) * FRONT.track + (c.rear_left - c.rear_right) * REAR.track

    assert moment(result.corner_weights) == pytest.approx(moment(MEASURED))
    # What is left over has no warp part, so no further turn could help.
    warp = np.array([-1 / FRONT.track, 1 / FRONT.track, 1 / REAR.track, -1 / REAR.track])
    assert warp @ result.out_of_reach.as_array() == pytest.approx(0.0, abs=1e-9)


def test_cross_percent_is_reached_with_equal_tracks():
    rear = dataclasses.replace(REAR, track=FRONT.track)
    result = seat_turns(MEASURED, target_from_cross(MEASURED, 51.5), LENGTH, FRONT, rear)
    assert result.cross_percent == pytest.approx(51.5)
    assert result.out_of_reach.as_array() == pytest.approx(np.zeros(4), abs=1e-9)


def test_nothing_to_change_takes_no_turns():
    result = seat_turns(MEASURED, MEASURED, LENGTH, FRONT, REAR)
    assert result.turns.as_array() == pytest.approx(np.zeros(4), abs=1e-12)


def test_rear_seats_alone_reach_the_same_warp_with_the_car_moving():
    fixed = dataclasses.replace(FRONT, adjustable=False)
    target = target_from_cross(MEASURED, 50.0)
    rear_only = seat_turns(MEASURED, target, LENGTH, fixed, REAR, keep_height=False)
    both = seat_turns(MEASURED, target, LENGTH, FRONT, REAR, keep_height=True)
    assert rear_only.turns.front_left == 0.0
    assert rear_only.corner_weights.as_array() == pytest.approx(both.corner_weights.as_array())
    assert abs(rear_only.height_change.rear_left) > 1e-5


def test_one_turn_by_hand_on_rigid_tyres():
    # Four equal wheel rates k and tracks: seats +s,-s,-s,+s change each corner by k s [calc].
    axle = Axle(1.5, (30000.0, 30000.0), 1.0, 0.002)
    corners = Corners(300.0, 300.0, 300.0, 300.0)
    target = target_from_cross(corners, 50.0 + 100 * 2 * 30000.0 * 0.002 / G / 1200.0)
    result = seat_turns(corners, target, 2.7, axle, axle)
    assert result.turns.as_array() == pytest.approx([-1.0, 1.0, 1.0, -1.0])


@pytest.mark.parametrize(
    ("change", "words"),
    [
        ({"front": dataclasses.replace(FRONT, thread_pitch=0.0)}, "front seat's thread pitch"),
        ({"rear": dataclasses.replace(REAR, spring_rates=(1.0, -1.0))}, "right rear spring rate"),
        ({"front": dataclasses.replace(FRONT, adjustable=False)}, "ride height is to be kept"),
        ({"wheelbase": -1.0}, "wheelbase is -1 m"),
    ],
)
def test_bad_input_is_named(change, words):
    arguments = {"measured": MEASURED, "target": MEASURED, "wheelbase": LENGTH, "front": FRONT, "rear": REAR}
    with pytest.raises(ValueError, match=words):
        seat_turns(**(arguments | change))


def test_a_cross_weight_beyond_the_car_is_refused():
    with pytest.raises(ValueError, match="less than nothing"):
        target_from_cross(MEASURED, 120.0)
