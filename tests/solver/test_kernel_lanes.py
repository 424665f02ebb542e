"""Same input, same bits: alone, in a batch, again, and without the compiler."""

import dataclasses
import os
import subprocess
import sys
from concurrent.futures import ThreadPoolExecutor

import numpy as np
import pytest

from solver.carfile import car_from_dict
from solver.faults import CarError
from solver.kernel import layout as L
from solver.launching import launch
from solver.packing import pack
from solver.sweeping import sweep, sweep_cars
from tests.solver.cars import car_with, door_car, put
from tests.solver.random_cars import SPECIALS, special

PLAIN = """
import sys
import numpy as np
from solver.launching import launch
from tests.solver.random_cars import special
result = launch(special(sys.argv[1]))
np.savez(sys.argv[2], **result.histories)
"""


def test_a_run_is_reproducible():
    first, again = launch(special("lift-off")), launch(special("lift-off"))
    assert first.figures == again.figures
    for name, values in first.histories.items():
        assert np.array_equal(values, again.histories[name], equal_nan=True), name


def test_a_lane_is_the_same_launch_to_the_last_bit():
    heights = np.linspace(0.31, 0.39, 7)
    rates = np.linspace(40_000.0, 70_000.0, 7)
    study = sweep(
        car_with({}),
        {"rear.linkage.upper.chassis.z": heights, "rear.springs.0.spring.rate": rates},
        chunk=3,
    )
    for i in range(7):
        data = door_car()
        data["rear"]["linkage"]["upper"]["chassis"][1] = heights[i]
        put(data, "rear.springs.0.spring.rate", rates[i])
        alone = launch(car_from_dict(data))
        for name, value in alone.figures.items():
            lane = study.figures[name][i]
            assert (np.isnan(lane) and value is None) or lane == value, name
        assert study.statics["anti_squat_dynamic"][i] == alone.statics.anti_squat_dynamic
        assert study.statics["instant_centre_x"][i] == alone.statics.instant_centre.x


def test_studies_in_two_threads_at_once():
    rates = np.linspace(40_000.0, 70_000.0, 120)
    path = "rear.springs.0.spring.rate"
    expected = sweep(car_with({}), {path: rates}).figures["peak_rear_load"]
    with ThreadPoolExecutor(4) as pool:
        runs = list(pool.map(lambda _: sweep(car_with({}), {path: rates}), range(4)))
    for run in runs:
        assert np.array_equal(run.figures["peak_rear_load"], expected)


@pytest.mark.skipif(not hasattr(os, "fork"), reason="only systems that fork")
def test_a_study_after_a_fork():
    """A worker that warmed up, then forked: the child must be able to study."""
    code = (
        "import os, sys; from solver.warming import warm; from solver.sweeping import sweep;"
        "from tests.solver.cars import car_with; warm(); change = {'hit.scale': [1.0] * 60};"
        "sweep(car_with({}), change); child = os.fork();"
        "child or os._exit(sweep(car_with({}), change).codes.max());"
        "sys.exit(os.waitpid(child, 0)[1])"
    )
    env = {**os.environ, "PYTHONPATH": os.pathsep.join(sys.path), "NUMBA_NUM_THREADS": "2"}
    assert subprocess.run([sys.executable, "-c", code], env=env, timeout=120).returncode == 0


def test_cars_of_every_make_up_in_one_study():
    cars = [special(name) for name in SPECIALS] + [car_with({"mass": 1300.0 + i}) for i in range(5)]
    study = sweep_cars(cars, chunk=3)
    for i, car in enumerate(cars):
        for name, value in launch(car).figures.items():
            lane = study.figures[name][i]
            assert (np.isnan(lane) and value is None) or lane == value, (i, name)


def test_a_study_of_cars_names_the_bad_one():
    with pytest.raises(CarError) as refused:
        sweep_cars([car_with({}), dataclasses.replace(car_with({}), mass=1.0)])
    assert refused.value.faults[0].field == "cars.1.mass"


def test_a_lanes_neighbours_do_not_matter():
    rates = np.linspace(40_000.0, 70_000.0, 64)
    path = "rear.springs.0.spring.rate"
    together = sweep(car_with({}), {path: rates}).figures["peak_rear_load"]
    apart = [sweep(car_with({}), {path: rates[i : i + 1]}).figures["peak_rear_load"][0] for i in (0, 31, 63)]
    assert [together[0], together[31], together[63]] == apart


@pytest.mark.parametrize("name", ["stop contact", "shock table knee"])
def test_plain_python_gives_the_same(name, tmp_path):
    """The kernel's own source run by the interpreter: what the compiler did is right."""
    out = tmp_path / "plain.npz"
    subprocess.run(
        [sys.executable, "-c", PLAIN, name, str(out)],
        check=True,
        env={**os.environ, "NUMBA_DISABLE_JIT": "1", "PYTHONPATH": os.pathsep.join(sys.path)},
    )
    plain, compiled = np.load(out), launch(special(name)).histories
    for channel, values in compiled.items():
        span = max(1e-9, np.ptp(plain[channel]))
        assert np.allclose(values, plain[channel], rtol=0, atol=1e-9 * span, equal_nan=True), channel


def test_importing_compiles_nothing_and_loads_no_numba():
    code = "import sys, solver; print('numba' in sys.modules, 'scipy' in sys.modules)"
    done = subprocess.run(
        [sys.executable, "-c", code],
        capture_output=True,
        text=True,
        check=True,
        env={**os.environ, "PYTHONPATH": os.pathsep.join(sys.path)},
    )
    assert done.stdout.split() == ["False", "False"]


def test_every_place_in_the_layout_is_its_own():
    places = [L.WHEELBASE, L.EFFICIENCY, L.GEARS, L.LINES, L.DERIVED, L.UHZ, L.LEGS, L.SCALARS]
    assert places == sorted(set(places))
    row = pack(special("shock table knee"))
    taken = [row.n[L.CURVES + 2 * which] for which in range(L.N_CURVES)]
    assert min(taken) >= L.SCALARS and len(row.p) >= max(taken)


@pytest.mark.parametrize("name", SPECIALS)
def test_every_special_runs(name):
    result = launch(special(name))
    assert np.isfinite(result.histories["rear_load"]).all()
    assert result.quality["link_drift"] < 1e-7
