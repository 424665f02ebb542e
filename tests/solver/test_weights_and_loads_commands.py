"""``python -m solver weights`` and ``loads`` from a car file."""

import json

import pytest

from solver.__main__ import main
from solver.carfile import car_from_dict
from solver.cli_loads import left_right_of
from solver.launching import launch
from solver.loads import loads_of
from solver.warming import EXAMPLE

CORNERS = {
    "measured": {"front_left": 300.0, "front_right": 280.0, "rear_left": 315.0, "rear_right": 305.0},
    "target_cross_percent": 50.0,
    "front": {
        "track": 1.5,
        "spring_rates": [45000.0, 45000.0],
        "motion_ratio": 0.7,
        "thread_pitch": 0.0015,
    },
    "rear": {
        "track": 1.4,
        "spring_rates": [27000.0, 27000.0],
        "thread_pitch": 0.0016,
        "spring_base": 1.0,
    },
    "driveshaft": {"final_drive": 4.1},
}
BARS = {
    "lower": {"outside_diameter": 0.03175, "wall": 0.0024, "material": "4130 normalised"},
    "upper": {
        "outside_diameter": 0.0254,
        "wall": 0.003,
        "material": {"name": "tube as bought", "modulus": 2e11, "yield_strength": 4e8},
        "rod_ends": [{"name": "chassis end", "radial_rating": 3000.0, "rating_source": "maker's sheet"}],
    },
}


def document(**sections):
    mass = 1200.0
    front = 580.0
    return {
        **EXAMPLE,
        "mass": mass,
        "cg": {"x": EXAMPLE["wheelbase"] * front / mass, "z": 0.52},
        "run": {"duration": 0.6, "output_step": 0.005},
        **sections,
    }


def command(tmp_path, name, content, *more):
    path = tmp_path / "car.json"
    path.write_text(json.dumps(content), encoding="utf-8")
    return main([name, str(path), *more])


def test_weights_prints_a_table(tmp_path, capsys):
    assert command(tmp_path, "weights", document(corners=CORNERS)) == 0
    out = capsys.readouterr().out
    assert "cross weight (right front + left rear)  49.58 %" in out
    assert "turns" in out and "Level the pads" in out


def test_weights_writes_json(tmp_path):
    out = tmp_path / "out.json"
    assert command(tmp_path, "weights", document(corners=CORNERS), "--json", str(out)) == 0
    data = json.loads(out.read_text())["weights"]
    assert data["weighing"]["total"] == 1200.0
    assert data["turns"]["keeps_height"] is True
    assert data["height"] is None


def test_weights_without_the_section(tmp_path, capsys):
    assert command(tmp_path, "weights", document()) == 0
    assert "sprung mass" in capsys.readouterr().out


@pytest.mark.parametrize(
    ("name", "sections", "words"),
    [
        ("weights", {"corners": {**CORNERS, "target_cross_percent": 99.0}}, "asks too much"),
        ("weights", {"corners": {**CORNERS, "rear": {"track": 0}}}, "corners.rear.track = 0: must be"),
        ("loads", {}, "bars: is missing"),
        ("loads", {"bars": {}}, "bars: describes no bar"),
        ("launch", {"bars": {"lower": {}}}, "bars.lower.wall"),
    ],
)
def test_faults_end_with_status_2_and_no_traceback(tmp_path, capsys, name, sections, words):
    assert command(tmp_path, name, document(**sections)) == 2
    captured = capsys.readouterr()
    assert words in captured.err and "Traceback" not in captured.err
    assert captured.out == ""


def test_loads_prints_bars_and_rear_tyres(tmp_path, capsys):
    assert command(tmp_path, "loads", document(corners=CORNERS, bars=BARS)) == 0
    out = capsys.readouterr().out
    for part in ("lower bar (2 share", "OVERLOADED", "rulebook in force", "Rear tyres left and right"):
        assert part in out


def test_loads_json_agrees_with_the_launch(tmp_path):
    out = tmp_path / "out.json"
    content = document(corners=CORNERS, bars=BARS)
    assert command(tmp_path, "loads", content, "--json", str(out)) == 0
    data = json.loads(out.read_text())
    run = launch(car_from_dict(content))
    lower = next(bar for bar in data["bars"]["bars"] if bar["name"] == "lower")
    assert lower["peak"]["compression"] == pytest.approx(-run.figures["lower_link_compression"] / 2)
    assert lower["peak"]["standing"] == pytest.approx(run.statics.lower_link_force / 2)
    history = data["rear_tyres"]["history"]
    for left, right, both in zip(
        history["rear_left"], history["rear_right"], run.histories["rear_load"], strict=True
    ):
        assert left + right == pytest.approx(both)


def test_peaks_are_at_least_those_of_the_histories():
    car = car_from_dict(document(bars=BARS))
    run = launch(car)
    for load in loads_of(car, run).bars:
        force = run.histories[f"{load.name}_link_force"] / load.count
        assert load.peak.tension >= force.max() - 1e-9
        assert load.peak.compression >= -force.min() - 1e-9


def test_launch_is_the_same_with_and_without_the_sections():
    plain = launch(car_from_dict(document()))
    described = launch(car_from_dict(document(corners=CORNERS, bars=BARS)))
    assert plain.figures == described.figures


def test_rear_tyres_start_from_the_scales():
    car = car_from_dict(document(corners=CORNERS))
    sides = left_right_of(car, launch(car))
    assert sides.history.rear_left[0] == pytest.approx(315.0 * 9.80665, rel=1e-6)
    assert sides.history.rear_right[0] == pytest.approx(305.0 * 9.80665, rel=1e-6)


def test_torque_drive_turns_the_driveshaft_by_its_own_torque():
    content = document(corners=CORNERS)
    content["hit"] = {"kind": "torque", "table": [[0.0, 0.0], [0.05, 4100.0]]}
    tyre = {"grip": 1.6, "sliding_grip": 1.3, "slip_stiffness": 80000.0}
    rear = {**EXAMPLE["rear"], "tyre": {**EXAMPLE["rear"]["tyre"], **tyre}, "wheel_inertia": 12.0}
    car = car_from_dict({**content, "rear": rear})
    sides = left_right_of(car, launch(car))
    assert sides.history.driveshaft_torque[-1] == pytest.approx(1000.0)
    assert sides.history.rear_difference[-1] > 100.0
