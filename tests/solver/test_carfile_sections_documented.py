"""What CARFILE.md shows of the optional sections can be read, and it names every key."""

import dataclasses
import json
import re
from pathlib import Path

import pytest

import solver
from solver.bar_check import Bar
from solver.carfile import car_from_dict
from solver.corner_section import CornerPlan, Driveshaft
from solver.corner_springs import Axle
from solver.fasteners import RodEnd, Thread
from solver.members import Allowances, Material
from solver.raised_steps import RaisedStep
from solver.warming import EXAMPLE

TEXT = (Path(solver.__file__).parent / "CARFILE.md").read_text(encoding="utf-8")


@pytest.mark.parametrize("name", ["corners", "bars"])
def test_the_example_is_read(name):
    block = re.search(rf'```json\n"{name}": (.*?)\n```', TEXT, re.DOTALL)
    section = json.loads(block.group(1))
    car = car_from_dict({**EXAMPLE, name: section})
    assert getattr(car, name) is not None


@pytest.mark.parametrize(
    "described", [CornerPlan, Axle, Driveshaft, RaisedStep, Bar, Thread, RodEnd, Material, Allowances]
)
def test_every_key_is_named(described):
    for key in (field.name for field in dataclasses.fields(described)):
        assert re.search(rf"[`.\"]{key}[`\"\[]", TEXT), f"{described.__name__}: {key}"
