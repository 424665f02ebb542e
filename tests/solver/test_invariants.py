"""What must hold for any car: energy, momentum, similarity, mirrors, neutral lines."""

import dataclasses

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from solver.carfile import car_from_dict, car_to_dict
from solver.kernel import layout as L
from solver.kernel.lanes import run_one, settle_one
from solver.launching import launch
from solver.packing import pack
from solver.statics import statics
from tests.solver.cars import car_with
from tests.solver.random_cars import random_car

GRAVITY = 9.80665
SEEDS = st.integers(min_value=0, max_value=400)
FEW = settings(max_examples=15, deadline=None, derandomize=True)


def dense(car, step=2.5e-4, duration=0.8):
    """States and outputs of a lane at every quarter millisecond."""
    row = pack(dataclasses.replace(car, run=dataclasses.replace(car.run, duration=duration, output_step=step)))
    settle_one(row.p, row.n)
    reports = round(duration / step) + 1
    states, outputs = np.zeros((reports, L.STATES)), np.zeros((reports, L.OUTPUTS))
    code, *_ = run_one(row.p, row.n, step, np.zeros(L.ACCUMULATORS), np.zeros((L.EVENTS, 2)), True, states, outputs)
    assert code == L.SOLVED
    return row.p, states, outputs


def simpson(values, step):
    return step / 3.0 * (values[0] + 4 * values[1:-1:2].sum() + 2 * values[2:-1:2].sum() + values[-1])


def front_wheels(p, states):
    """Height above rest, and the speeds, of the front wheels."""
    pitch, slide, rate = states[:, L.PITCH], states[:, L.SLIDE], states[:, 7 + L.PITCH]
    x, z = p[L.WHEELBASE] - p[L.SPRUNG_X], p[L.FRONT_RADIUS] - p[L.SPRUNG_Z] + slide
    along, up = np.cos(pitch) * x - np.sin(pitch) * z, np.sin(pitch) * x + np.cos(pitch) * z
    speed = states[:, 7 + L.SLIDE]
    vx = states[:, 7 + L.X] - rate * up - np.sin(pitch) * speed
    vz = states[:, 7 + L.Z] + rate * along + np.cos(pitch) * speed
    return states[:, L.Z] + up - (p[L.FRONT_RADIUS] - p[L.SPRUNG_Z]), vx, vz


@FEW
@given(SEEDS)
def test_momentum(seed):
    """The ground's forces are all that moves the car as a whole: impulse is momentum to 1e-6."""
    p, states, outputs = dense(smooth(seed))
    step = 2.5e-4
    _, vx, vz = front_wheels(p, states)
    forward = p[L.SPRUNG_MASS] * states[-1, 7 + L.X] + p[L.REAR_MASS] * states[-1, 7 + L.HX] + p[L.FRONT_MASS] * vx[-1]
    pushed = simpson(outputs[:, L.O_HIT], step)
    assert forward == pytest.approx(pushed, rel=1e-6)
    up = p[L.SPRUNG_MASS] * states[-1, 7 + L.Z] + p[L.REAR_MASS] * states[-1, 7 + L.HZ] + p[L.FRONT_MASS] * vz[-1]
    lifted = simpson(outputs[:, L.O_REAR_LOAD] + outputs[:, L.O_FRONT_LOAD] - p[L.MASS] * GRAVITY, step)
    assert up == pytest.approx(lifted, abs=1e-6 * pushed)


@FEW
@given(SEEDS)
def test_energy(seed):
    """Work put in by the hit is motion, height, spring energy and heat, to 1e-6 of it."""
    car = smooth(seed)
    p, states, outputs = dense(car)
    step = 2.5e-4
    rise, vx, vz = front_wheels(p, states)
    v = states[-1, 7:14]
    motion = 0.5 * (
        p[L.SPRUNG_MASS] * (v[L.X] ** 2 + v[L.Z] ** 2)
        + p[L.CHASSIS_INERTIA] * v[L.PITCH] ** 2
        + p[L.REAR_MASS] * (v[L.HX] ** 2 + v[L.HZ] ** 2)
        + p[L.HOUSING_INERTIA] * v[L.HOUSING] ** 2
        + p[L.FRONT_MASS] * (vx[-1] ** 2 + vz[-1] ** 2)
    )
    height = GRAVITY * (p[L.SPRUNG_MASS] * states[-1, L.Z] + p[L.REAR_MASS] * states[-1, L.HZ] + p[L.FRONT_MASS] * rise[-1])
    # Everything that stores or burns, as power: springs, shocks and both tyres.
    power = (
        -outputs[:, L.O_REAR_SPRING] * outputs[:, L.O_TRAVEL_SPEED]
        - outputs[:, L.O_FRONT_SPRING] * outputs[:, L.O_FRONT_SPEED]
        + outputs[:, L.O_REAR_LOAD] * states[:, 7 + L.HZ]
        + outputs[:, L.O_FRONT_LOAD] * vz
    )
    axle = states[:, 7 + L.HX] + (p[L.REAR_RADIUS] + states[:, L.HZ]) * states[:, 7 + L.HOUSING]
    hit = outputs[:, L.O_HIT] * axle
    work = simpson(hit, step)
    assert motion + height == pytest.approx(work + simpson(power, step), abs=1e-6 * work)


def smooth(seed):
    """A random car without kinks but the hit's, whose knots fall on reports of a quarter millisecond."""
    data = car_to_dict(random_car(seed))
    data["rear"]["springs"][0]["damper"] = {"rate": 2000.0}
    data["front"]["damper"] = {"rate": 1500.0}
    peak = data["hit"]["table"][1][1]
    data["hit"]["table"] = [[0.0, 0.0], [0.8, 0.7 * peak]]
    return car_from_dict(data)


@FEW
@given(SEEDS)
def test_half_the_step_changes_nothing(seed):
    car = random_car(seed)
    coarse, fine = launch(car).histories, launch(car, longest_step=1.25e-3).histories
    for name in ("pitch", "rear_load", "front_load", "rear_spring_force", "lower_link_force", "front_travel"):
        assert np.abs(coarse[name] - fine[name]).max() < 2e-4 * np.ptp(fine[name]), name


@FEW
@given(SEEDS, st.floats(0.5, 2.0), st.floats(0.5, 2.0))
def test_any_units_will_do(seed, length, mass):
    """Lengths times a, masses times b, times times sqrt(a): gravity is the same, so is the launch."""
    car, time = random_car(seed), length**0.5
    other = scaled(car, length, mass)
    one, two = launch(car), launch(other)
    factors = {"pitch": 1.0, "cg_z": length, "rear_load": mass, "upper_link_force": mass, "speed": length / time}
    for name, factor in factors.items():
        expected = factor * one.histories[name]
        assert np.abs(two.histories[name] - expected).max() < 2e-4 * np.ptp(expected), name
    for mine, theirs in zip(one.modes, two.modes, strict=True):
        assert theirs.frequency_hz == pytest.approx(mine.frequency_hz / time, rel=1e-6)
        assert theirs.damping_ratio == pytest.approx(mine.damping_ratio, rel=1e-6)


def scaled(car, a, b):
    """The car in other units of length and mass, gravity kept."""
    time = a**0.5
    rates, dampings = b / a, b / time

    def table(rows, first, second):
        return tuple((x * first, y * second) for x, y in rows)

    def point(p):
        return p[0] * a, p[1] * a

    def spring(s):
        return dataclasses.replace(s, rate=s.rate * rates)

    def damper(d):
        if d.rate is not None:
            return dataclasses.replace(d, rate=d.rate * dampings)
        return dataclasses.replace(d, table=table(d.table, a / time, b))

    def tyre(t):
        return dataclasses.replace(t, rate=t.rate * rates, damping=t.damping * dampings)

    def link(part):
        return dataclasses.replace(part, chassis=point(part.chassis), housing=point(part.housing))

    swap, front, rear = dataclasses.replace, car.front, car.rear
    front = swap(
        front,
        unsprung_mass=front.unsprung_mass * b,
        tyre_radius=front.tyre_radius * a,
        spring=spring(front.spring),
        damper=damper(front.damper),
        tyre=tyre(front.tyre),
    )
    entry = rear.springs[0]
    entry = swap(link(entry), spring=spring(entry.spring), damper=damper(entry.damper))
    rear = swap(
        rear,
        unsprung_mass=rear.unsprung_mass * b,
        housing_inertia=rear.housing_inertia * a * a * b,
        tyre_radius=rear.tyre_radius * a,
        tyre=tyre(rear.tyre),
        springs=(entry,),
        linkage=swap(rear.linkage, lower=link(rear.linkage.lower), upper=link(rear.linkage.upper)),
    )
    return swap(
        car,
        wheelbase=car.wheelbase * a,
        mass=car.mass * b,
        cg=point(car.cg),
        pitch_inertia=car.pitch_inertia * a * a * b,
        front=front,
        rear=rear,
        hit=swap(car.hit, table=table(car.hit.table, time, b)),
        run=swap(car.run, duration=car.run.duration * time, output_step=car.run.output_step * time),
    )


@FEW
@given(SEEDS)
def test_the_mirrored_car_does_the_mirrored_thing(seed):
    row = pack(random_car(seed))
    mirrored = row.p.copy()
    across = [L.WHEELBASE, L.CG_X, L.HIT_SCALE, L.LINES + L.LINE_CX, L.LINES + L.LINE_HX]
    across += [L.LOWER_CX, L.LOWER_HX, L.UPPER_CX, L.UPPER_HX]
    mirrored[across] *= -1.0
    runs = []
    for p in (row.p, mirrored):
        settle_one(p, row.n)
        states, outputs = np.zeros((301, L.STATES)), np.zeros((301, L.OUTPUTS))
        run_one(p, row.n, 2.5e-3, np.zeros(L.ACCUMULATORS), np.zeros((L.EVENTS, 2)), True, states, outputs)
        runs.append((states, outputs))
    (states, outputs), (other, other_outputs) = runs
    for at, sign in ((L.X, -1), (L.Z, 1), (L.PITCH, -1), (L.HOUSING, -1), (L.SLIDE, 1)):
        assert np.allclose(other[:, at], sign * states[:, at], rtol=0, atol=1e-10)
    for at in (L.O_REAR_LOAD, L.O_UPPER, L.O_LOWER, L.O_FRONT_LOAD):
        assert np.allclose(other_outputs[:, at], outputs[:, at], rtol=0, atol=1e-5)


def aimed(car, share):
    """The car with its lower bar turned until the dynamic anti-squat is `share`."""
    low, high = -0.15, 0.25
    data = car_to_dict(car)
    start = data["rear"]["linkage"]["lower"]["chassis"][1]

    def at(dz):
        data["rear"]["linkage"]["lower"]["chassis"][1] = start + dz
        return car_from_dict(data)

    for _ in range(30):
        middle = 0.5 * (low + high)
        if statics(at(middle)).anti_squat_dynamic < 100.0 * share:
            low = middle
        else:
            high = middle
    return at(low)


@pytest.mark.parametrize("x, z, mass", [(1.25, 0.48, 1100.0), (1.37, 0.52, 1290.0), (1.5, 0.56, 1450.0)])
def test_a_hit_on_the_neutral_line_moves_no_rear_spring(x, z, mass):
    """At 100 percent, dynamic, a steady hit leaves the spring alone; above it separates, below it squats.

    Not to the last bit: the bars' loads at rest turn a little with the body.
    """
    # Slow and slight, so that the linkage stays where the definition holds.
    base = car_with(
        {
            "cg.x": x,
            "cg.z": z,
            "mass": mass,
            "hit": {"kind": "force", "table": [[0.0, 0.0], [6.0, 300.0]]},
            "rear.springs.0.damper": {"rate": 6000.0},
            "front.damper": {"rate": 6000.0},
            "run": {"duration": 8.0, "output_step": 0.05},
        }
    )
    squat, still, lift = (launch(aimed(base, share)).histories["rear_spring_travel"][-1] for share in (0.7, 1.0, 1.3))
    assert squat > 0.0 > lift
    assert abs(still) < 0.1 * min(squat, -lift)
