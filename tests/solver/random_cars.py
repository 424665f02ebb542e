"""Cars drawn at random within stated bounds, and what makes a car special.

Bounds are of cars a chassis shop sees (common practice, no source).
"""

import random

from solver.faults import CarError
from solver.statics import statics
from tests.solver.cars import car_with

HARD_STOP = {"rate": 250_000.0, "damping": 1500.0}
SPECIALS = {
    "parallel links": {
        "rear.linkage.lower": {"chassis": [0.56, 0.31], "housing": [0.0, 0.24]},
        "rear.linkage.upper": {"chassis": [0.56, 0.551], "housing": [0.0, 0.481]},
    },
    "angled coil-over": {
        "rear.springs.0.chassis": [0.16, 0.70],
        "rear.springs.0.housing": [-0.14, 0.30],
    },
    "lift-off": {"cg.z": 0.66, "hit": {"kind": "force", "table": [[0, 0], [0.05, 19000.0]]}},
    "stop contact": {
        "front.droop_stop": {"clearance": 0.05, **HARD_STOP},
        "front.bump_stop": {"clearance": 0.03, **HARD_STOP},
        "rear.bump_stop": {"clearance": 0.006, **HARD_STOP},
        "rear.droop_stop": {"clearance": 0.006, **HARD_STOP},
    },
    "stop on its own mounts": {
        "rear.droop_stop": {"clearance": 0.004, "chassis": [-0.2, 0.5], "housing": [-0.12, 0.35], **HARD_STOP},
        "rear.linkage.upper.chassis": [0.4572, 0.32],
    },
    "bump rubber": {"rear.bump_stop": {"clearance": 0.004, "table": [[0, 0], [0.01, 800], [0.02, 4000]]}},
    "wheelie bar contact": {
        "cg.z": 0.64,
        "hit": {"kind": "force", "table": [[0, 0], [0.05, 18000.0], [0.5, 18000.0], [0.8, 6000.0]]},
        "wheelie_bar": {"x": -1.3, "clearance": 0.07, "rate": 120_000.0, "damping": 500.0},
    },
    "wheelie bar on the housing": {
        "cg.z": 0.64,
        "hit": {"kind": "force", "table": [[0, 0], [0.05, 18000.0], [0.5, 18000.0], [0.8, 6000.0]]},
        "wheelie_bar": {"x": -1.3, "clearance": 0.07, "rate": 120_000.0, "damping": 500.0, "mounted_on": "housing"},
    },
    "dual-rate knee": {
        "rear.springs.0.spring": {"table": [[-0.05, -2500], [0.0, 0.0], [0.004, 200], [0.05, 5000]]},
        "front.spring": {"table": [[-0.2, -7000], [-0.03, -1200], [0.1, 6000]]},
    },
    "shock table knee": {
        "rear.springs.0.damper": {"table": [[-1.0, -1900], [-0.03, -500], [0, 0], [0.06, 450], [1.0, 1400]]},
        "front.damper": {"table": [[-1.0, -700], [-0.1, -250], [0, 0], [0.1, 300], [1.0, 1200]]},
    },
    "steep bleed": {
        # A slow-speed bleed of 40 000 N s/m up to 20 mm/s, then 600: far stiffer than any tyre.
        "rear.springs.0.damper": {"table": [[-2.0, -2584.4], [-0.02, -1040.0], [0, 0], [0.02, 800], [2.0, 1988]]},
        "front.damper": {"table": [[-2.0, -1200], [-0.03, -390], [0, 0], [0.03, 300], [2.0, 1100]]},
    },
    "separate spring and shock": {
        "rear.springs": [
            {"chassis": [0.19, 0.56], "housing": [0.17, 0.356], "spring": {"rate": 73000.0}},
            {"chassis": [-0.127, 0.81], "housing": [-0.152, 0.317], "damper": {"rate": 3100.0}},
        ]
    },
    "ladder bar": {"rear.linkage": {"kind": "ladder-bar", "chassis": [0.82, 0.22]}},
    "triangulated links": {"rear.linkage.upper.plan_angle": 0.5, "rear.linkage.lower.plan_angle": -0.2},
}


def special(name):
    """A `Car` with one special thing about it."""
    return car_with(SPECIALS[name])


def random_car(seed):
    """A `Car` drawn within the bounds below; the same seed gives the same car."""
    draw = random.Random(seed)
    for _ in range(100):
        try:
            car = car_with(_changes(draw))
            if 20.0 < statics(car).anti_squat_dynamic < 220.0:
                return car
        except CarError:
            continue
    raise AssertionError(f"no sound car from seed {seed}")


def _changes(draw):
    rates = draw.uniform
    mass = rates(900.0, 1600.0)
    peak = mass * rates(5.0, 11.0)
    rise = rates(0.02, 0.15)
    tables = draw.random() < 0.5
    return {
        "wheelbase": rates(2.4, 3.2),
        "mass": mass,
        "cg.x": rates(1.15, 1.5),
        "cg.z": rates(0.45, 0.62),
        "chassis.pitch_inertia": rates(800.0, 2000.0),
        "front.unsprung_mass": rates(45.0, 80.0),
        "front.spring.rate": rates(25_000.0, 60_000.0),
        "front.damper": _damper(draw, tables),
        "front.tyre.rate": rates(350_000.0, 600_000.0),
        "rear.unsprung_mass": rates(120.0, 200.0),
        "rear.housing_inertia": rates(0.8, 6.0),
        "rear.tyre.rate": rates(300_000.0, 550_000.0),
        "rear.linkage.lower": {
            "chassis": [rates(0.45, 0.7), rates(0.18, 0.27)],
            "housing": [rates(-0.02, 0.03), rates(0.24, 0.28)],
        },
        "rear.linkage.upper": {
            "chassis": [rates(0.4, 0.65), rates(0.31, 0.42)],
            "housing": [rates(-0.02, 0.04), rates(0.46, 0.52)],
        },
        "rear.springs.0": {
            "chassis": [rates(-0.15, 0.08), rates(0.7, 0.9)],
            "housing": [rates(-0.16, -0.08), rates(0.29, 0.36)],
            "spring": {"rate": rates(35_000.0, 80_000.0)},
            "damper": _damper(draw, tables),
        },
        "hit": {"kind": "force", "table": [[0.0, 0.0], [rise, peak], [rise + 0.4, rates(0.6, 1.0) * peak]]},
    }


def _damper(draw, table):
    low, high = draw.uniform(2500.0, 8000.0), draw.uniform(600.0, 2000.0)
    if not table:
        return {"rate": draw.uniform(900.0, 3500.0)}
    knee = draw.uniform(0.03, 0.15)
    push, pull = knee * low, 1.3 * knee * low
    return {
        "table": [
            [-2.0, -pull - high * (2.0 - knee)],
            [-knee, -pull],
            [0.0, 0.0],
            [knee, push],
            [2.0, push + high * (2.0 - knee)],
        ]
    }
