"""What the web's side of a study costs beside its launches, in one run: services, rows and database against the kernel.

``python tests/benchmarks/study.py [--choices N]``. One process plays the worker, on a fresh SQLite file; the same
choices then go through the kernel alone, on the same threads. Only the ratio means anything: absolute times are this
machine's.
"""

import argparse
import math
import os
import sys
import time
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parents[2]))
os.environ["DJANGO_SETTINGS_MODULE"] = "tests.settings"

import django
import numpy as np

django.setup()

from django.test.runner import DiscoverRunner
from django_scopes import scope

from shop.launches.bridge import sweep
from shop.launches.tasks import run
from shop.setups.car_file import build_from
from shop.studies import services, work
from shop.studies.plan import read_plan
from shop.studies.rows import standing
from shop.studies.yardsticks import SHOWN
from solver.carfile import car_from_dict
from solver.sweeping import sweep as kernel_sweep
from solver.warming import warm
from tests.shop.setups_world import make_issued, make_world


def main():
    """Print the parts side by side."""
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("--choices", type=int, default=10_000)
    options = parser.parse_args()
    warm()
    runner = DiscoverRunner(verbosity=0, interactive=False)
    databases = runner.setup_databases()
    try:
        measure(options.choices)
    finally:
        runner.teardown_databases(databases)


def measure(choices):
    """Ask for a study, work on all of it, rank it; then the same launches with less and less around them."""
    world = make_world()
    revision = make_issued(world)
    rates = np.linspace(15e3, 45e3, math.ceil(choices / 400)).tolist()
    holes = [{"key": place, "values": list(range(1, drilled(world, place) + 1))} for place in revision.holes]
    plan = {"mode": "every", "axes": [*holes, {"key": "rear_spring_rate", "values": rates}]}
    with scope(shop=world.shop):
        start = time.perf_counter()
        study = services.request_study(world.owner, revision, plan, "Benchmark")
        asked = time.perf_counter()
        run(study.job_id)
        worked = time.perf_counter()
        stand = standing(study, world.shop.units, list(SHOWN))
        ranked = time.perf_counter()
        stored = study.job.input
    assert stand.solved + len(stand.refused) == study.choices
    built, files = timed(lambda: build(stored))
    packed, _ = timed(lambda: sweep(files))
    alone = kernel(files)
    print(f"{study.choices} choices, {stand.solved} solved; {os.cpu_count()} cores")
    for name, seconds in (("asking for it", asked - start), ("a worker on it, all told", worked - asked),
                          ("ranking it for a page", ranked - worked), ("of these: writing car files", built),
                          ("of these: car files to figures", packed), ("the kernel alone", alone)):
        print(f"  {name:32s} {seconds:7.2f} s")
    whole = ranked - start
    print(f"from click to the last ranked row: {whole / alone:.2f} times the kernel alone; "
          f"what stands around the launches costs {(whole - alone) / alone:.2f} of them")


def drilled(world, place):
    """How many holes the survey has there."""
    with scope(shop=world.shop):
        return len(world.survey.brackets.get(place=place).holes)


def timed(work_on):
    start = time.perf_counter()
    found = work_on()
    return time.perf_counter() - start, found


def build(stored):
    """The car file of each choice."""
    plan = read_plan(stored["plan"])
    return [build_from(work.inputs_with(stored, choice), "") for choice in plan.between(0, len(plan))]


def kernel(files):
    """Seconds for the same launches from arrays: no files, no rows."""
    def column(read):
        return np.array([read(file) for file in files])

    changes = {"rear.springs.0.spring.rate": column(lambda f: f["rear"]["springs"][0]["spring"]["rate"])}
    for link in ("lower", "upper"):
        for end in ("chassis", "housing"):
            for axis, name in enumerate("xz"):
                changes[f"rear.linkage.{link}.{end}.{name}"] = column(
                    lambda f, link=link, end=end, axis=axis: f["rear"]["linkage"][link][end][axis]
                )
    base = car_from_dict(files[0])
    return timed(lambda: kernel_sweep(base, changes))[0]


if __name__ == "__main__":
    main()
