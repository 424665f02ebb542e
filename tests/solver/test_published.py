"""Numbers from outside the project, each with its source.

[pub] seen in the source named; [lib] computed with a general-purpose library;
[mem] recalled, not seen; [calc] the stated formula in independent code.
"""

import math

import numpy as np
import pytest
from scipy.integrate import solve_ivp

from solver.geometry import meeting
from solver.hinges import hinges, value_of
from solver.kernel import layout as L
from solver.kernel.lanes import settle_one
from solver.kernel.linear import close
from solver.kernel.tyre import fiala
from solver.launching import launch
from solver.modes import modes
from solver.packing import pack
from solver.statics import statics
from tests.solver.cars import car_with
from tests.solver.multipliers import constrained

INCH, POUND, LBF = 0.0254, 0.45359237, 4.4482216152605


def inches(x, z):
    return [x * INCH, z * INCH]


def pound_car(lower, upper, **more):
    """3000 lb, 300 lb of it at the rear axle, CG 19.6 in up, axle 16 in up, wheelbase 105 in."""
    changes = {
        "wheelbase": 105 * INCH,
        "mass": 3000 * POUND,
        "cg.z": 19.6 * INCH,
        "cg.x": 105 * INCH * (1 - 1650 / 3000),
        "front.unsprung_mass": 0.5,
        "rear.unsprung_mass": 300 * POUND,
        "rear.tyre_radius": 16 * INCH,
        "rear.linkage.lower": {"chassis": inches(*lower[1]), "housing": inches(*lower[0])},
        "rear.linkage.upper": {"chassis": inches(*upper[1]), "housing": inches(*upper[0])},
        "rear.springs.0.chassis": inches(0, 36),
        "rear.springs.0.housing": inches(0, 16),
    }
    return car_with({**changes, **more})


def towards(centre, pin, x):
    """A housing pin, and the chassis pin at `x` on the line from it to the instant centre."""
    return pin, (x, pin[1] + (x - pin[0]) * (centre[1] - pin[1]) / (centre[0] - pin[0]))


@pytest.mark.parametrize(
    "centre, dynamic, trade",
    [((50, 8), 0.942857, 0.857143), ((60, 12), 1.107143, 1.071429), ((40, 6.5), 0.997768, 0.870536)],
)
def test_anti_squat_with_the_axles_weight_taken_out(centre, dynamic, trade):
    # [(M zi + m r)/xi]/[(M hs + m r)/L], M 2700, m 300 lb, r 16, hs 20, L 105 in [calc].
    found = statics(pound_car(towards(centre, (0, 10), 20), towards(centre, (0, 22), 18)))
    assert found.anti_squat_dynamic == pytest.approx(100 * dynamic, abs=1e-4)
    assert found.anti_squat == pytest.approx(100 * trade, abs=1e-4)
    assert found.instant_centre.x == pytest.approx(centre[0] * INCH, rel=1e-9)


BARS = (((4, 11), (26, 12.5)), ((2, 22), (22, 20)))


def test_instant_centre_of_the_bar_force_example():
    # Lower (4,11)-(26,12.5), upper (2,22)-(22,20): IC (68.216216, 15.378378), 1.212574 [calc, two ways].
    found = statics(pound_car(*BARS))
    assert found.instant_centre.x == pytest.approx(68.216216 * INCH, rel=1e-7)
    assert found.instant_centre.z == pytest.approx(15.378378 * INCH, rel=1e-7)
    assert found.anti_squat_dynamic == pytest.approx(121.2574, abs=1e-4)
    assert found.rear_spring_force == pytest.approx(1350 * LBF, rel=1e-9)


def test_bar_forces_at_one_g():
    # The same: lower -5656.049 lbf, upper +2957.626, spring 1230.9588 from 1350 [calc, two ways].
    # Springs and tyres so stiff that the car keeps the shape the numbers are for.
    stiff = {
        "rear.springs.0.spring.rate": 5e6,
        "rear.springs.0.damper.rate": 1e5,
        "rear.tyre.rate": 1e7,
        "rear.tyre.damping": 2e4,
        "front.spring.rate": 5e6,
        "front.damper.rate": 2e4,
        "front.tyre.rate": 1e7,
        "front.tyre.damping": 2e3,
        "hit": {"kind": "force", "table": [[0, 0], [1.0, 3000 * LBF]]},
        "run": {"duration": 1.5, "output_step": 0.01},
    }
    end = {name: values[-1] / LBF for name, values in launch(pound_car(*BARS, **stiff)).histories.items()}
    assert end["lower_link_force"] == pytest.approx(-5656.049, rel=2e-3)
    assert end["upper_link_force"] == pytest.approx(2957.626, rel=2e-3)
    assert end["rear_spring_force"] == pytest.approx(1230.9588, rel=2e-3)
    assert end["rear_load"] - 1650 == pytest.approx(560.0, rel=2e-3)


def half_car(**dampings):
    """Axles that go straight up and down: level parallel bars, everything at one height."""
    sprung, front, rear, height = 700.0, 40.0, 35.5, 0.3
    mass = sprung + front + rear
    return car_with(
        {
            "wheelbase": 4.6,
            "mass": mass,
            "cg.x": (sprung * 2.3 + front * 4.6) / mass,
            "cg.z": height + 1e-4,
            "chassis.pitch_inertia": 2460.0,
            "front.unsprung_mass": front,
            "front.tyre_radius": height,
            "front.spring": {"rate": 19_960.0},
            "rear.unsprung_mass": rear,
            "rear.tyre_radius": height,
            "rear.housing_inertia": 0.01,
            "rear.linkage.lower": {"chassis": [1.0, 0.2], "housing": [0.0, 0.2]},
            "rear.linkage.upper": {"chassis": [1.0, 0.4], "housing": [0.0, 0.4]},
            "rear.springs.0": {
                "chassis": [0.0, 0.9],
                "housing": [0.0, 0.3],
                "spring": {"rate": 17_500.0},
                "damper": {"rate": dampings.get("rear", 0.0)},
            },
            "front.damper": {"rate": dampings.get("front", 0.0)},
            "front.tyre": {"rate": 175_500.0, "damping": dampings.get("tyre", 0.0)},
            "rear.tyre": {"rate": 175_500.0, "damping": dampings.get("tyre", 0.0)},
        }
    )


def test_half_car_undamped():
    # 700 kg, 2460 kg m^2, 40/35.5 kg, 2.3/2.3 m, 19 960/17 500, tyres 175 500 N/m [lib eigenvalues].
    found = [mode.frequency_hz for mode in modes(half_car())]
    assert found == pytest.approx([1.100265, 1.361117, 11.133900, 11.741240], rel=1e-5)


def test_half_car_damped():
    # The same with 1290/1620 and tyres 1000 N s/m: (Hz, zeta) [lib eigenvalues].
    found = modes(half_car(front=1290.0, rear=1620.0, tyre=1000.0))
    expected = [(1.12845, 0.25834), (1.36873, 0.29813), (11.01211, 0.41963), (11.51020, 0.51580)]
    for mode, (hertz, ratio) in zip(found, expected, strict=True):
        assert (mode.frequency_hz, mode.damping_ratio) == pytest.approx((hertz, ratio), rel=2e-5)


# Norton's usual four-bar, a 40, b 120, c 80, d 100, w2 25 [inputs mem, results calc]:
# th2: th3, w3, P13. The coupler is our housing, its cranks our bars, in metres for millimetres.
NORTON = {
    40: (20.2979, -4.12091, (216.53364, 181.69330)),
    30: (22.4090, -6.55598, (166.73804, 96.26625)),
}


def four_bar():
    """A settled row whose bars are Norton's cranks, standing at 40 degrees; axle at the coupler's end."""
    row = pack(car_with({}))
    settle_one(row.p, row.n)
    p, angle, coupler = row.p, math.radians(40), math.radians(20.29790)
    a = 0.040 * math.cos(angle), 0.040 * math.sin(angle)
    b = a[0] + 0.120 * math.cos(coupler), a[1] + 0.120 * math.sin(coupler)
    p[L.LCX], p[L.LCZ], p[L.UCX], p[L.UCZ] = 0.0, 0.0, 0.100, 0.0
    # Housing points count from below the axle centre, which stands at the first crank's end.
    p[L.REAR_RADIUS] = a[1]
    p[L.LHX], p[L.LHZ], p[L.UHX], p[L.UHZ] = a[0], a[1], b[0], b[1]
    p[L.LOWER_LENGTH], p[L.UPPER_LENGTH] = 0.040, 0.080
    p[L.SPRUNG_X], p[L.SPRUNG_Z] = 0.0, 0.0
    return p, a


def test_four_bar_positions_and_speeds():
    p, a = four_bar()
    # The housing turns about the coupler's end: shift its points there.
    p[L.LHX], p[L.UHX] = 0.0, p[L.UHX] - a[0]
    for degrees, (coupler, rate, _) in NORTON.items():
        y, angle = np.zeros(L.STATES), math.radians(degrees)
        y[L.HX] = a[0]
        y[L.HZ] = 0.040 * math.sin(angle) - a[1]
        y[7 + L.HZ] = 25.0 * 0.040 * math.cos(angle)
        close(p, y)
        assert y[L.HX] == pytest.approx(0.040 * math.cos(angle), abs=2e-8)
        assert math.degrees(y[L.HOUSING]) == pytest.approx(coupler - 20.2979, abs=2e-4)
        assert y[7 + L.HOUSING] == pytest.approx(rate, abs=2e-5)


@pytest.mark.parametrize("degrees", NORTON)
def test_four_bar_instant_centre(degrees):
    coupler, _, (x, z) = NORTON[degrees]
    angle, coupler = math.radians(degrees), math.radians(coupler)
    a = 40 * math.cos(angle), 40 * math.sin(angle)
    b = a[0] + 120 * math.cos(coupler), a[1] + 120 * math.sin(coupler)
    px, pz, w = meeting((0.0, 0.0), a, (100.0, 0.0), b)
    assert (px / w, pz / w) == pytest.approx((x, z), rel=2e-5)


@pytest.mark.parametrize("slip, force", [(0.002, 2000.0), (0.01, 4371.249), (0.1, 4888.744), (1.0, 4494.938)])
def test_fiala(slip, force):
    # Cs 1e6, 1.0/0.9, Fz 5000 [pub, a general open multibody engine's tyre model; calc].
    assert fiala(slip, 5000.0, 1e6, 1.0, 0.9) == pytest.approx(force, abs=1e-3)
    assert fiala(-slip, 5000.0, 1e6, 1.0, 0.9) == pytest.approx(-force, abs=1e-3)


@pytest.mark.parametrize(
    "table, joules",
    [
        ([[-1, -1500], [0, 0], [1, 1500]], 111.03305),
        ([[-1, -900], [0, 0], [1, 2100]], 111.03305),
        ([[-1, -1680], [-0.1, -600], [0, 0], [0.1, 600], [1, 1680]], 184.100987),
    ],
)
def test_shock_energy_of_a_cycle(table, joules):
    # Sine, 0.05 m, 1.5 Hz; linear 1500, asymmetric 900/2100, 6000 then 1200 above 0.1 m/s [calc].
    row, rate = hinges(table), 2.0 * math.pi * 1.5
    t = np.linspace(0.0, 1.0 / 1.5, 200_001)
    speed = 0.05 * rate * np.cos(rate * t)
    power = np.array([value_of(row, v) * v for v in speed[::20]])
    assert np.trapezoid(power, t[::20]) == pytest.approx(joules, rel=1e-6)


@pytest.mark.parametrize(
    ("time", "x", "y"),
    [
        (1.0, 0.986291751132, -0.165010853126),
        (5.0, -0.942305435044, -0.334754338414),
        (10.0, -0.275087462576, -0.961419205099),
    ],
)
def test_the_second_method_swings_the_benchmark_pendulum(time, x, y):
    """IFToMM benchmark A01: 1 kg on 1 m, let go from (-1, 0), g 9.81 [values lib mpmath, by elliptic functions].

    What the launches are held against solves its constraints by the very function that is tried here.
    """

    def rate(t, state):
        q, v = state[:2], state[2:]
        a, _ = constrained(np.ones(2), lambda at: at[None, :], q, v, np.array([0.0, -9.81]))
        return np.concatenate([v, a])

    run = solve_ivp(rate, (0.0, time), [-1.0, 0.0, 0.0, 0.0], method="DOP853", rtol=1e-11, atol=1e-11)
    assert run.y[:2, -1] == pytest.approx([x, y], abs=2e-6)


def test_the_second_method_keeps_the_pendulum_s_period():
    """The same benchmark's period, 2.367841947576 s [lib mpmath]: after it the bob is back where it was let go."""

    def rate(t, state):
        a, _ = constrained(np.ones(2), lambda at: at[None, :], state[:2], state[2:], np.array([0.0, -9.81]))
        return np.concatenate([state[2:], a])

    run = solve_ivp(rate, (0.0, 2.367841947576), [-1.0, 0.0, 0.0, 0.0], method="DOP853", rtol=1e-11, atol=1e-11)
    assert run.y[:, -1] == pytest.approx([-1.0, 0.0, 0.0, 0.0], abs=2e-6)
