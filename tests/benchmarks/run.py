"""How much faster than a general-purpose multibody engine, at equal accuracy, in one run.

``python tests/benchmarks/run.py [--lanes N]``. Both sides solve the same 1.5 s launches
and are held to the same tight reference (this solver at 25 microsecond steps, which the
tests hold to two other methods). The engine (exudyn: planar bodies, C++ connectors,
generalised-alpha, modified Newton) gets the longest of its tried steps that keeps
every channel within 0.1 % of its range on that car; so do we. Only ratios mean anything: absolute times are
this machine's.
"""

import argparse
import dataclasses
import os
import statistics
import subprocess
import sys
import time
from concurrent.futures import ProcessPoolExecutor
from pathlib import Path

import numpy as np

sys.path.insert(0, str(Path(__file__).parents[2]))

from solver.carfile import car_to_dict
from solver.launching import launch
from solver.sweeping import sweep
from solver.warming import warm
from tests.solver.cars import reference
from tests.solver.engine import Engine

ROOT = Path(__file__).parents[2]
# Linux keeps a process's greatest resident memory as VmHWM, in kB.
STUDY = """
import sys
import numpy as np
from solver.sweeping import sweep
from solver.warming import warm
from tests.solver.cars import car_with
warm()
sweep(car_with({}), {"rear.linkage.upper.chassis.z": np.linspace(0.32, 0.39, int(sys.argv[1]))})
with open("/proc/self/status") as status:
    print(next(int(line.split()[1]) // 1024 for line in status if line.startswith("VmHWM")))
"""
ENGINE_STEPS = (4e-3, 2.5e-3, 2e-3, 1.25e-3, 1e-3, 5e-4)
OUR_STEPS = (5e-3, 2.5e-3)
WITHIN = 1e-3
CHANNELS = (
    "pitch",
    "cg_x",
    "cg_z",
    "housing_angle",
    "rear_spring_force",
    "rear_load",
    "front_load",
    "upper_link_force",
    "lower_link_force",
    "front_travel",
)
# What the engine can do in C++: linear springs and shocks, tyres that stay on the ground.
CASES = (1, 2, 4, 5, 7)


def main():
    """Print the figures side by side."""
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("--lanes", type=int, default=10_000)
    options = parser.parse_args()
    warm()
    print(f"{os.cpu_count()} cores; every channel within {100 * WITHIN:g} % of its range\n")
    singles()
    throughput(options.lanes)
    linear()
    importing()


def car(number):
    """A reference car, 1.5 s."""
    from solver.carfile import car_from_dict

    made = car_from_dict(reference(number)["car"])
    return dataclasses.replace(made, run=dataclasses.replace(made.run, duration=1.5))


def worst(found, truth):
    """The greatest error of any channel over its range."""
    off = 0.0
    for name in CHANNELS:
        mine, expected = found[name], truth[name]
        if "link" in name:
            mine, expected = np.abs(mine), np.abs(expected)
        off = max(off, np.abs(mine - expected).max() / np.ptp(expected))
    return off


def engine_launch(data, step):
    """Seconds and channels of one launch in the engine, from a car in memory."""
    start = time.perf_counter()
    channels = Engine(data).run(1.5, step, 0.005)
    return time.perf_counter() - start, channels


def timed(function, repeats):
    best = []
    for _ in range(repeats):
        start = time.perf_counter()
        function()
        best.append(time.perf_counter() - start)
    return min(best)


def singles():
    """One launch, warm, from a car in memory to figures and histories."""
    print("one launch         engine step  error %     ms |  our step  error %     ms |  times faster")
    ratios = []
    for number in CASES:
        made = car(number)
        data, truth = car_to_dict(made), launch(made, longest_step=2.5e-5).histories
        for step in ENGINE_STEPS:
            seconds, channels = engine_launch(data, step)
            theirs = worst(channels, truth)
            if theirs < WITHIN:
                break
        seconds = min(seconds, *(engine_launch(data, step)[0] for _ in range(2)))
        for ours_step in OUR_STEPS:
            error = worst(launch(made, longest_step=ours_step).histories, truth)
            if error < WITHIN:
                break
        ours = timed(lambda made=made, step=ours_step: launch(made, longest_step=step), 30)
        ratios.append(seconds / ours)
        print(
            f"reference car {number}    {1e3 * step:8.2f} ms {100 * theirs:8.4f} {1e3 * seconds:6.1f} |"
            f"  {1e3 * ours_step:.2f} ms {100 * error:8.4f} {1e3 * ours:6.3f} |  {seconds / ours:8.0f}"
        )
    print(f"median: {statistics.median(ratios):.0f} times faster\n")


def engine_worker(step):
    """Launches a second of one engine process over about two seconds."""
    data = car_to_dict(car(1))
    engine_launch(data, step)
    start, count = time.perf_counter(), 0
    while time.perf_counter() - start < 2.0:
        engine_launch(data, step)
        count += 1
    return count / (time.perf_counter() - start)


def choices(lanes):
    """Holes up and down at both front pins, and spring rates."""
    random = np.random.default_rng(1)
    return {
        "rear.linkage.upper.chassis.z": 0.3429 + random.uniform(-0.02, 0.05, lanes),
        "rear.linkage.lower.chassis.z": 0.2032 + random.uniform(-0.03, 0.03, lanes),
        "rear.springs.0.spring.rate": random.uniform(45_000.0, 70_000.0, lanes),
    }


def throughput(lanes):
    """A study against the engine in as many processes as there are cores."""
    made = car(1)
    truth = launch(made, longest_step=2.5e-5).histories
    fits = [s for s in ENGINE_STEPS if worst(engine_launch(car_to_dict(made), s)[1], truth) < WITHIN]
    ours = [s for s in OUR_STEPS if worst(launch(made, longest_step=s).histories, truth) < WITHIN]
    cores = os.cpu_count()
    with ProcessPoolExecutor(cores) as pool:
        theirs = sum(pool.map(engine_worker, [fits[0]] * cores))
    print(f"study of {lanes}     launches a second on {cores} cores")
    print(f"engine, {1e3 * fits[0]:.2f} ms, {cores} processes   {theirs:10.1f}")
    for step in sorted({ours[0], OUR_STEPS[-1]}, reverse=True):
        start = time.perf_counter()
        sweep(made, choices(lanes), longest_step=step)
        rate = lanes / (time.perf_counter() - start)
        print(f"solver, {1e3 * step:.2f} ms, threads       {rate:10.0f}   {rate / theirs:6.0f} times")
    done = subprocess.run([sys.executable, "-c", STUDY, str(lanes)], cwd=ROOT, capture_output=True, text=True, check=True)
    print(f"greatest memory of a process that solves {lanes} lanes: {done.stdout.strip()} MB\n")


def linear():
    """Cost against lanes and against simulated time, as ratios."""
    made = car(1)
    few, many = (timed(lambda n=n: sweep(made, choices(n)), 2) for n in (1000, 4000))
    print(f"4 times the lanes costs {many / few:.2f} times")
    longer = dataclasses.replace(made, run=dataclasses.replace(made.run, duration=6.0))
    once, four = (timed(lambda m=m: sweep(m, choices(500)), 2) for m in (made, longer))
    print(f"4 times the simulated time costs {four / once:.2f} times\n")


def importing():
    """`import solver` against `import numpy`, in fresh processes."""

    def of(what):
        return timed(lambda: subprocess.run([sys.executable, "-c", f"import {what}"], check=True), 5)

    bare, numpy, solver = of("sys"), of("numpy"), of("solver")
    print(f"import solver {1e3 * (solver - bare):.0f} ms over a bare interpreter, numpy {1e3 * (numpy - bare):.0f} ms")


if __name__ == "__main__":
    main()
