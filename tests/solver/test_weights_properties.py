"""Properties of the weights arithmetic that hold for any car."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from solver.corner_springs import Axle
from solver.raised_end import LevelCar, cg_height, raised_angle
from solver.turns import seat_turns
from solver.weights import Corners, cg_from_scales, sprung_mass, weigh

MASS = st.floats(500.0, 2500.0)
LENGTH = st.floats(2.0, 4.0)
PART = st.floats(0.3, 0.7)
HEIGHT = st.floats(0.35, 1.0)
RADIUS = st.floats(0.25, 0.5)
CORNER = st.floats(150.0, 600.0)


@settings(max_examples=60, deadline=None)
@given(MASS, LENGTH, PART, HEIGHT, RADIUS, RADIUS, st.floats(0.02, 0.4), st.sampled_from(["front", "rear"]))
def test_raised_end_finds_the_height_it_was_made_with(mass, length, part, height, front, rear, angle, raised):
    # Build the reading in world coordinates: turn wheel centres and CG, take moments.
    pitch = angle if raised == "front" else -angle
    turn = np.array([[math.cos(pitch), -math.sin(pitch)], [math.sin(pitch), math.cos(pitch)]])
    rear_axle, front_axle = turn @ [0.0, rear], turn @ [length, front]
    cg = turn @ [part * length, height]
    load_front = mass * (cg[0] - rear_axle[0]) / (front_axle[0] - rear_axle[0])
    standing = mass - load_front if raised == "front" else load_front
    if not 0.0 < standing < mass:
        return
    car = LevelCar(part * mass, mass - part * mass, length, front, rear)
    rise = (front_axle - rear_axle)[1] - (front - rear)
    rise = rise if raised == "front" else -rise
    assert raised_angle(car, raised, rise) == pytest.approx(angle, rel=1e-9)
    assert cg_height(car, raised, standing, angle).height == pytest.approx(height, rel=1e-6)


@settings(max_examples=60, deadline=None)
@given(CORNER, CORNER, CORNER, CORNER, LENGTH, st.floats(1.2, 1.8), st.floats(1.2, 1.8))
def test_swapping_sides_mirrors_the_cg(a, b, c, d, length, front, rear):
    here = cg_from_scales(Corners(a, b, c, d), length, front, rear)
    there = cg_from_scales(Corners(b, a, d, c), length, front, rear)
    assert there.x == pytest.approx(here.x)
    assert there.y == pytest.approx(-here.y, abs=1e-12)
    cross, mirrored = weigh(Corners(a, b, c, d)), weigh(Corners(b, a, d, c))
    assert cross.cross_percent + mirrored.cross_percent == pytest.approx(100.0)


@settings(max_examples=40, deadline=None)
@given(MASS, LENGTH, PART, HEIGHT, st.floats(20.0, 120.0), st.floats(50.0, 250.0))
def test_pounds_and_kilograms_give_the_same_sprung_cg(mass, length, part, height, front, rear):
    metric = sprung_mass(mass, part * length, height, length, front, rear, 0.33, 0.41)
    k = 1 / 0.45359237
    pounds = sprung_mass(mass * k, part * length, height, length, front * k, rear * k, 0.33, 0.41)
    assert (pounds.x, pounds.z) == pytest.approx((metric.x, metric.z))
    assert pounds.mass == pytest.approx(metric.mass * k)


@settings(max_examples=40, deadline=None)
@given(
    st.tuples(CORNER, CORNER, CORNER, CORNER),
    st.tuples(CORNER, CORNER, CORNER, CORNER),
    st.floats(0.4, 1.2),
    st.floats(15e3, 80e3),
    st.one_of(st.none(), st.floats(0.5, 1.3)),
    st.booleans(),
)
def test_turning_back_undoes_turning(now, then, ratio, rate, base, keep):
    measured, target = Corners(*now), Corners(*then)
    front = Axle(1.5, (rate, rate * 1.1), ratio, 0.0015, tyre_rate=2e5)
    rear = Axle(1.4, (rate * 0.8, rate * 0.7), 0.9, 0.0016, tyre_rate=2e5, spring_base=base)
    try:
        there = seat_turns(measured, target, 2.7, front, rear, keep_height=keep)
    except ValueError:
        return  # a target no car can reach
    back = seat_turns(there.corner_weights, measured, 2.7, front, rear, keep_height=keep)
    assert back.turns.as_array() == pytest.approx(-there.turns.as_array(), abs=1e-9)
    assert back.corner_weights.as_array() == pytest.approx(measured.as_array())
