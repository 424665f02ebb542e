"""Whatever stands in a car file: an answer, a fault by name, or a failed launch. Nothing else."""

import copy
import json
import math

from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from solver.carfile import car_from_dict
from solver.faults import CarError, LaunchFailed
from solver.launching import launch
from tests.solver.cars import door_car, put
from tests.solver.random_cars import SPECIALS


def paths(data, prefix=""):
    """Every dotted path in a car file."""
    pairs = data.items() if isinstance(data, dict) else enumerate(data)
    for key, value in pairs:
        yield f"{prefix}{key}"
        if isinstance(value, dict | list):
            yield from paths(value, f"{prefix}{key}.")


RICH = [door_car(**changes) for changes in ({}, *SPECIALS.values())]
for car in RICH:
    car["run"] = {"duration": 0.3, "output_step": 0.01}
ODD = st.one_of(
    st.none(),
    st.booleans(),
    st.text(max_size=5),
    st.integers(-(10**12), 10**12),
    st.floats(),
    st.lists(st.floats(), max_size=3),
    st.dictionaries(st.text(max_size=5), st.floats(), max_size=2),
)
NEAR = st.floats(-3.0, 3.0, allow_nan=False)


@settings(max_examples=400, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))
@given(st.sampled_from(RICH), st.data())
def test_one_value_changed(base, data):
    changed = copy.deepcopy(base)
    path = data.draw(st.sampled_from(sorted(paths(base))))
    old = get(base, path)
    if isinstance(old, int | float) and data.draw(st.booleans()):
        value = old * (1.0 + data.draw(NEAR))
    else:
        value = data.draw(ODD)
    put(changed, path, value)
    answer(changed)


@settings(max_examples=200, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))
@given(st.sampled_from(RICH), st.data())
def test_everything_stretched(base, data):
    changed = copy.deepcopy(base)
    for path in paths(base):
        old = get(base, path)
        if isinstance(old, float) and data.draw(st.booleans()):
            put(changed, path, old * data.draw(st.floats(0.3, 3.0)))
    changed["run"] = base["run"]
    answer(changed)


def get(data, path):
    for key in path.split("."):
        data = data[int(key) if isinstance(data, list) else key]
    return data


def answer(data):
    if isinstance(data.get("run"), dict) and data["run"].get("duration") != 0.3:
        return
    try:
        result = launch(car_from_dict(data))
    except (CarError, LaunchFailed) as error:
        assert str(error)
        return
    json.dumps(result.to_dict(), allow_nan=False)
    assert all(math.isfinite(value) for value in result.histories["rear_load"])
