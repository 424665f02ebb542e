"""Reaching numbers of a car file by path."""

import pytest

from solver.car_paths import number_at

CAR = {
    "name": "demo",
    "mass": 1210,
    "cg": {"x": 1.32, "z": 0.51},
    "rear": {"springs": [{"spring": {"rate": 52000.0}, "damper": None}]},
    "hit": {"kind": "force", "table": [[0.0, 0.0], [0.05, 13000.0]]},
    "flag": True,
}


def test_numbers_by_path():
    assert number_at(CAR, "cg.z") == 0.51
    assert number_at(CAR, "rear.springs.0.spring.rate") == 52000.0
    assert number_at(CAR, "hit.table.1.1") == 13000.0


def test_points_by_axis():
    car = {"lower": {"chassis": [0.56, 0.22]}}
    assert number_at(car, "lower.chassis.z") == number_at(car, "lower.chassis.1") == 0.22


@pytest.mark.parametrize(
    ("path", "words"),
    [
        ("cg.y", "cg.y. is not in this car file"),
        ("rear.springs.3.spring.rate", "is not in this car file"),
        ("rear.springs.spring", "is not in this car file"),
        ("mass.0", "is not in this car file"),
        ("name", "name is not a number"),
        ("flag", "flag is not a number"),
        ("cg", "cg is not a number"),
        ("hit.table.-1.1", "is not in this car file"),
        ("", "is not in this car file"),
    ],
)
def test_wrong_paths_are_named(path, words):
    with pytest.raises(ValueError, match=words):
        number_at(CAR, path)
