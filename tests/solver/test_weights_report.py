"""All that the weights of one car say together."""

import json
import math
from dataclasses import replace

import numpy as np
import pytest

from solver.carfile import car_from_dict, car_to_dict
from solver.cli_weights import plain, weights_text
from solver.corner_springs import Axle
from solver.faults import CarError
from solver.roll_plan import greatest_difference, left_right, roll_axle
from solver.turns import seat_turns, target_from_cross
from solver.weights import Corners
from solver.weights_report import report_weights

BARS = {
    "lower": {
        "outside_diameter": 0.03175,
        "wall": 0.0024,
        "material": "4130 normalised",
        "threads": [{"diameter": 0.01905, "pitch": 0.0015875, "proof_strength": 690e6}],
        "rod_ends": [{"name": "chassis end", "radial_rating": 120e3, "rating_source": "maker's sheet"}],
    }
}
MASS, LENGTH, X, Z = 1286.0, 2.69, 2.69 * 683.0 / 1286.0, 0.51
FRONT_RADIUS, REAR_RADIUS = 0.33, 0.40


def raised_front(angle):
    """Front load (kg) with the rear raised: moments about the rear patch in the turned frame."""
    across = X * math.cos(angle) + (Z - REAR_RADIUS) * math.sin(angle)
    base = LENGTH * math.cos(angle) + (FRONT_RADIUS - REAR_RADIUS) * math.sin(angle)
    return MASS * across / base


def car_file(x=X, z=Z, **changes):
    """A whole car file whose scales, raised readings and CG agree, as JSON holds it."""
    return {
        "format": "launch-ledger/car",
        "version": 1,
        "name": "invented",
        "mass": MASS,
        "cg": {"x": x, "z": z},
        "wheelbase": LENGTH,
        "chassis": {"pitch_inertia": 900.0},
        "front": {
            "unsprung_mass": 62.0,
            "tyre_radius": FRONT_RADIUS,
            "spring": {"rate": 43000.0},
            "damper": {"rate": 1700.0},
            "tyre": {"rate": 520000.0, "damping": 900.0},
        },
        "rear": {
            "unsprung_mass": 160.0,
            "tyre_radius": REAR_RADIUS,
            "housing_inertia": 6.0,
            "linkage": {
                "kind": "four-link",
                "lower": {"chassis": [0.56, 0.22], "housing": [0.01, 0.26]},
                "upper": {"chassis": [0.46, 0.35], "housing": [0.02, 0.48]},
            },
            "springs": [
                {
                    "chassis": [-0.10, 0.85],
                    "housing": [-0.13, 0.33],
                    "spring": {"rate": 52000.0},
                    "damper": {"rate": 2100.0},
                }
            ],
            "tyre": {"rate": 430000.0, "damping": 800.0},
        },
        "hit": {"kind": "force", "table": [[0.0, 0.0], [0.05, 9000.0]]},
        "run": {"duration": 0.5, "output_step": 0.005},
        "corners": CORNERS,
        **changes,
    }


CORNERS = {
    "measured": {"front_left": 352.0, "front_right": 331.0, "rear_left": 305.0, "rear_right": 298.0},
    "target_cross_percent": 50.0,
    "front": {"track": 1.52, "spring_rates": [40000.0, 40000.0], "motion_ratio": 0.7, "thread_pitch": 0.0015},
    "rear": {
        "track": 1.40,
        "spring_rates": [30000.0, 30000.0],
        "motion_ratio": 0.95,
        "thread_pitch": 0.0016,
        "spring_base": 1.0,
        "bar_rate": 4000.0,
    },
    "raised": [
        {"raised": "rear", "angle": angle, "front": raised_front(angle), "way": way}
        for angle, way in ((0.1, "up"), (0.2, "up"), (0.3, "up"), (0.2, "down"))
    ],
    "driveshaft": {"final_drive": 4.1, "even_at": 0.1},
}


def report(document):
    return report_weights(car_from_dict(document))


def test_one_car_from_scales_to_turns():
    found = report(car_file())
    assert found.height.height == pytest.approx(Z)
    assert found.height.x == pytest.approx(X)
    assert found.sprung.mass == pytest.approx(MASS - 222.0)
    assert found.axle_loads.front == pytest.approx(683.0 * 9.80665)
    assert found.plan_cg.x == pytest.approx(X)
    assert found.turns.cross_percent == pytest.approx(50.0, abs=0.2)
    assert not any("not of one weighing" in doubt for doubt in found.doubts)


def test_text_holds_the_figures_and_the_cautions():
    text = weights_text(report(car_file()))
    for part in ("352.0", "cross weight", "CG above ground", "0.5100 m", "turns", "A raised car can fall"):
        assert part in text
    assert "nan" not in text


def test_plain_data_is_json():
    found = report(car_file())
    data = json.loads(json.dumps(plain(found), allow_nan=False))
    assert data["weighing"]["total"] == 1286.0
    assert data["turns"]["turns"]["front_left"] == pytest.approx(found.turns.turns.front_left)
    assert len(data["height"]["residuals"]) == 5


def test_a_car_without_the_section_still_answers():
    document = car_file()
    del document["corners"]
    found = report(document)
    assert found.weighing is None and found.turns is None
    assert "sprung mass" in weights_text(found)


def test_scales_and_file_that_differ_are_doubted():
    doubts = " ".join(report(car_file(x=X + 0.05, z=Z + 0.05, mass=1300.0)).doubts)
    for part in ("add up to 1286.0 kg", "ahead of the rear axle", "high and the car file"):
        assert part in doubts


def test_impossible_targets_are_refused():
    with pytest.raises(ValueError, match="less than nothing"):
        report(car_file(corners={**CORNERS, "target_cross_percent": 99.0}))


def test_the_sections_go_there_and_back():
    car = car_from_dict(car_file(bars=BARS))
    document = json.loads(json.dumps(car_to_dict(car)))
    assert car_from_dict(document) == car
    assert document["corners"]["rear"]["spring_base"] == 1.0


def test_a_fault_of_a_section_refuses_the_car():
    with pytest.raises(CarError) as refused:
        car_from_dict(car_file(corners={"measured": {}}, bars={}))
    places = [fault.field for fault in refused.value.faults]
    assert "corners.measured.front_left" in places and "bars" in places


@pytest.mark.parametrize("base", [None, 1.0])
def test_roll_and_seat_models_agree(base):
    # What the roll plane calls roll stiffness, found by turning seats: equal and opposite seats at
    # the two axles leave a couple between them that only the roll stiffnesses share.
    axle = Axle(1.4, (30000.0, 30000.0), 0.95, 0.0016, bar_rate=4000.0, spring_base=base)
    stiff = replace(axle, spring_rates=(3e9, 3e9))
    corners = Corners(300.0, 300.0, 300.0, 300.0)
    fixed = replace(stiff, adjustable=False)
    target = target_from_cross(corners, 52.0)
    turned = seat_turns(corners, target, 2.7, fixed, axle, keep_height=False)
    couple = (turned.corner_weights.rear_right - turned.corner_weights.rear_left) * 9.80665 * 0.7
    lever = 1.4 if base is None else base
    spring_couple = 30000.0 * 0.95 * lever**2 / 2 * (turned.seat_travel.rear_right / (lever / 2))
    assert couple == pytest.approx(spring_couple, rel=1e-3)
    assert roll_axle(axle).roll_stiffness == pytest.approx(
        30000.0 * (0.95 * lever) ** 2 / 2 + 4000.0 * 1.4**2
    )


def test_left_and_right_over_a_run():
    plan = car_from_dict(car_file()).corners
    t = np.linspace(0.0, 0.5, 101)
    hit = np.interp(t, [0.0, 0.05, 0.5], [0.0, 9000.0, 8000.0])
    front = 683.0 * 9.80665 - hit * 0.51 / 2.69
    result = left_right(t, front, 1286 * 9.80665 - front, hit * 0.4, plan)
    assert result.preload.time == 0.1
    worst = greatest_difference(result.history)
    assert worst.difference > 100.0 and 0.0 < worst.time <= 0.1
    assert result.reason == ""


def test_no_preload_when_the_front_is_in_the_air():
    plan = car_from_dict(car_file()).corners
    t = np.array([0.0, 0.1])
    result = left_right(t, [6000.0, 0.0], [6600.0, 12600.0], [0.0, 4000.0], plan)
    assert result.preload is None
    assert "choose an earlier time" in result.reason
