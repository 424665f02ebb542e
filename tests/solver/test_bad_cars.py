"""Every way a car can be wrong is refused by name, before any integration, in every entry point."""

import dataclasses
import json
import math
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest

from solver.carfile import car_from_dict, car_to_dict, load_car
from solver.faults import CarError, LaunchFailed
from solver.launching import launch
from solver.modes import modes
from solver.statics import statics
from solver.sweeping import changed, sweep, sweepable
from tests.solver.cars import car_with, door_car, reference

ROOT = Path(__file__).parents[2]
UPPER = "rear.linkage.upper"

# (changes to the car file, the field that must be named)
BAD = {
    "crossed": ({f"{UPPER}.chassis": [0.45, 0.15]}, f"{UPPER}.chassis"),
    "identical pins": ({f"{UPPER}.chassis": [0.5334, 0.2032]}, f"{UPPER}.chassis"),
    "link of no length": ({f"{UPPER}.chassis": [0.0254, 0.4953]}, f"{UPPER}.chassis"),
    "link that runs back": ({f"{UPPER}.chassis": [-0.4, 0.35]}, f"{UPPER}.chassis"),
    "cg below the axles": ({"cg.z": 0.2}, "cg.z"),
    "cg above the roof": ({"cg.z": 2.2}, "cg.z"),
    "cg behind the axle": ({"cg.x": 3.0}, "cg.x"),
    "lighter than its axles": ({"mass": 200.0}, "mass"),
    "nan": ({"mass": math.nan}, "mass"),
    "infinity": ({"wheelbase": math.inf}, "wheelbase"),
    "huge": ({"rear.tyre.rate": 1e9}, "rear.tyre.rate"),
    "huge whole number": ({"mass": 10**400}, "mass"),
    "text": ({"mass": "1200"}, "mass"),
    "a yes": ({"mass": True}, "mass"),
    "negative rate": ({"rear.springs.0.spring.rate": -5.0}, "rear.springs.0.spring.rate"),
    "stop in contact": ({"front.bump_stop": {"clearance": 0.0, "rate": 1e5, "damping": 0.0}}, "front.bump_stop.clearance"),
    "one-point shock": ({"rear.springs.0.damper": {"table": [[0, 0]]}}, "rear.springs.0.damper.table"),
    "shock that pushes at rest": (
        {"rear.springs.0.damper": {"table": [[-1, -500], [1, 900]]}},
        "rear.springs.0.damper.table",
    ),
    "spring that falls": (
        {"rear.springs.0.spring": {"table": [[-0.1, 0], [0, 900], [0.1, 800]]}},
        "rear.springs.0.spring.table",
    ),
    "table that runs back": ({"rear.springs.0.spring": {"table": [[0, 0], [0, 900]]}}, "rear.springs.0.spring.table"),
    "hit of no length": ({"hit.table": [[0.0, 5000.0]]}, "hit.table"),
    "hit that runs back": ({"hit.table": [[0.1, 0.0], [0.1, 5000.0]]}, "hit.table"),
    "no spring": ({"rear.springs.0.spring": None}, "rear.springs"),
    "beyond the dyno": (
        {
            "front.damper": {
                "compression": {"setting": 7, "clicks": [{"click": 3, "table": [[0, 0], [1, 500]]}]},
                "rebound": {"setting": 3, "clicks": [{"click": 3, "table": [[0, 0], [1, 500]]}]},
            }
        },
        "front.damper.compression.setting",
    ),
    "unknown key": ({"rear.colour": "red"}, "rear.colour"),
    "wrong format": ({"format": "other"}, "format"),
    "later version": ({"version": 2}, "version"),
    "springs that pull": ({"rear.springs.0.housing": [-0.127, 1.4]}, "rear.springs"),
    "linkage that locks": (
        {"rear.linkage.lower.chassis": [0.12, 0.2667], "rear.bump_stop": {"clearance": 0.2, "rate": 1e5}},
        "rear.linkage",
    ),
    "wheel torque without a tyre": ({"hit": {"kind": "torque", "table": [[0, 0], [0.1, 3000]]}}, "rear.tyre.grip"),
}


@pytest.mark.parametrize("name", BAD)
def test_the_field_is_named(name):
    changes, field = BAD[name]
    with pytest.raises(CarError) as refused:
        statics(car_from_dict(door_car(**changes)))
    assert field in [fault.field for fault in refused.value.faults]


def test_every_fault_at_once():
    changes = {"mass": -1.0, "cg.z": "high", "hit.table": [], "rear.springs.0.spring.rate": 1e9}
    with pytest.raises(CarError) as refused:
        car_from_dict(door_car(**changes))
    assert {fault.field for fault in refused.value.faults} == set(changes)


@pytest.mark.parametrize("data", [None, [], 5, {}, {"format": "launch-ledger/car"}])
def test_not_a_car_at_all(data):
    with pytest.raises(CarError):
        car_from_dict(data)


@pytest.mark.parametrize("entry", [statics, modes, launch, lambda car: sweep(car, {"hit.scale": [1.0]})])
def test_a_car_made_by_hand_is_checked_too(entry):
    with pytest.raises(CarError) as refused:
        entry(dataclasses.replace(car_with({}), mass=math.nan))
    assert refused.value.faults[0].field == "mass"


def test_round_trip():
    for number in range(1, 9):
        car = car_from_dict(reference(number)["car"])
        assert car_from_dict(json.loads(json.dumps(car_to_dict(car)))) == car


@pytest.mark.parametrize("text", ["", "{", '{"mass": NaN}', '{"mass": 1, "mass": 2}', "[" * 100_000, "\x00", '"car"'])
def test_a_file_that_is_no_car(text, tmp_path):
    path = tmp_path / "car.json"
    path.write_text(text)
    with pytest.raises(CarError):
        load_car(path)


def test_a_file_that_is_not_there(tmp_path):
    with pytest.raises(CarError, match="cannot be read"):
        load_car(tmp_path / "none.json")


GOES_OVER = {
    "the car turned over": {"cg.z": 0.75, "hit": {"kind": "force", "table": [[0, 0], [0.05, 26_000.0]]}},
    "the rear axle folded up": {
        # Bars that fall steeply to the chassis below: the hit lifts the body over the axle.
        "rear.linkage.upper.chassis": [0.46, 0.36],
        "rear.linkage.lower.chassis": [0.4, 0.12],
        "rear.springs.0.spring.rate": 20_000.0,
        "cg.z": 0.42,
        "hit": {"kind": "force", "table": [[0, 0], [0.05, 20_000.0]]},
    },
}


@pytest.mark.parametrize("words", GOES_OVER)
def test_a_car_that_goes_over_has_no_curve(words):
    with pytest.raises(LaunchFailed, match=words) as failed:
        launch(car_with(GOES_OVER[words]))
    assert 0.1 < failed.value.time < 1.5


def test_a_lane_that_cannot_be_solved_says_why_and_leaves_the_rest():
    study = sweep(car_with({}), {"rear.linkage.upper.chassis.z": [0.3429, 0.15, 0.36]})
    assert study.reason(0) is None and "crossed" in study.reason(1)
    assert np.isfinite(study.figures["peak_rear_load"]).tolist() == [True, False, True]


def test_a_lane_is_refused_where_the_car_would_be():
    random = np.random.default_rng(5)
    lanes = 300
    changes = {
        "rear.linkage.lower.chassis.x": random.uniform(0.05, 0.6, lanes),
        "rear.linkage.lower.chassis.z": random.uniform(0.1, 0.4, lanes),
        "rear.linkage.upper.chassis.x": random.uniform(0.05, 0.6, lanes),
        "rear.linkage.upper.chassis.z": random.uniform(0.2, 0.5, lanes),
    }
    base = car_with({"run": {"duration": 0.01, "output_step": 0.01}})
    study = sweep(base, changes)
    refused = set()
    for lane in range(lanes):
        data = car_to_dict(base)
        for path, values in changes.items():
            data = changed(data, path, float(values[lane]))
        try:
            launch(car_from_dict(data))
        except CarError:
            refused.add(lane)
    assert refused == set(np.flatnonzero(study.codes).tolist()) and len(refused) > 20
    assert any("lock" in study.reason(lane) for lane in refused)


def test_a_study_refuses_what_it_cannot_vary():
    for changes in ({"rear.nothing": [1.0]}, {"mass": [1200.0, 1e9]}, {"mass": [math.nan]}, {}):
        with pytest.raises(CarError):
            sweep(car_with({}), changes)
    with pytest.raises(CarError, match="same number"):
        sweep(car_with({}), {"mass": [1200.0], "hit.scale": [1.0, 2.0]})
    assert "rear.linkage.upper.chassis.z" in sweepable(car_with({}))


def test_a_study_tells_how_far_it_is_and_stops_when_asked():
    seen = []
    study = sweep(
        car_with({}),
        {"hit.scale": np.linspace(0.5, 1.0, 10)},
        chunk=4,
        progress=lambda done, lanes: seen.append((done, lanes)),
        cancelled=lambda: len(seen) == 2,
    )
    assert seen == [(4, 10), (8, 10)]
    assert not study.complete and study.reason(9).startswith("not solved") and study.reason(7) is None


def command(*arguments):
    return subprocess.run([sys.executable, "-m", "solver", *map(str, arguments)], cwd=ROOT, capture_output=True, text=True)


def test_the_command_line_answers(tmp_path):
    car, out, table = tmp_path / "car.json", tmp_path / "out.json", tmp_path / "out.csv"
    car.write_text(json.dumps(door_car()))
    done = command("launch", car, "--json", out, "--csv", table)
    assert (done.returncode, done.stderr) == (0, "")
    answer = json.loads(out.read_text())
    assert answer["statics"]["instant_centre"]["slope"] == pytest.approx(0.14058519, abs=1e-7)
    assert len(answer["modes"]) == 4 and answer["figures"]["front_lift_time"] is None
    assert len(table.read_text().splitlines()) == 302
    for name in ("statics", "modes", "launch", "sweep"):
        done = command(name, car)
        assert done.returncode == 0 and len(done.stdout.splitlines()) >= 4, done.stderr


def test_the_command_line_refuses_in_lines(tmp_path):
    car = tmp_path / "car.json"
    car.write_text(json.dumps(door_car(mass=-5, **{"cg.z": 9.0})))
    for name in ("statics", "launch", "modes", "sweep"):
        done = command(name, car)
        assert done.returncode == 2 and len(done.stderr.splitlines()) == 2, done.stderr
        assert "Traceback" not in done.stderr and "mass" in done.stderr
