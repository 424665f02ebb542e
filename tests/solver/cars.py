"""Cars for the solver's tests: the reference cases and one to vary."""

import copy
import json
from pathlib import Path

from solver.carfile import car_from_dict

REFERENCE = sorted((Path(__file__).parent / "reference").glob("*.json"))


def reference(number):
    """One reference case as stored: {"car", "expected"}."""
    return json.loads(REFERENCE[number - 1].read_text(encoding="utf-8"))


def door_car(**changes):
    """The first reference car as a dict, with dotted paths changed; None removes nothing."""
    data = copy.deepcopy(reference(1)["car"])
    for path, value in changes.items():
        put(data, path, value)
    return data


def put(data, path, value):
    """Set a dotted path (`rear.springs.0.spring`) in a car file's dict, in place."""
    *parents, last = path.split(".")
    for key in parents:
        data = data[int(key) if isinstance(data, list) else key]
    data[int(last) if isinstance(data, list) else last] = value


def car_with(changes):
    """A `Car`: the first reference car with dotted paths changed."""
    return car_from_dict(door_car(**changes))
