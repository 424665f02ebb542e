"""The package's public names are what they say, in whatever order its modules are imported."""

import subprocess
import sys

import pytest


@pytest.mark.parametrize(
    "first", ["import solver", "from solver.statics import Statics", "import solver.modes"]
)
def test_functions_are_not_hidden_by_their_modules(first):
    script = f"""
{first}
import solver
from solver.warming import EXAMPLE
car = solver.car_from_dict(EXAMPLE)
for _ in range(2):
    assert solver.statics(car).rear_load > 0
    assert len(solver.modes(car)) > 0
"""
    subprocess.run([sys.executable, "-c", script], check=True)


def test_every_public_name_is_there():
    import solver

    for name in solver.__all__:
        assert getattr(solver, name) is not None
        assert type(getattr(solver, name)).__name__ != "module"


def test_importing_the_package_is_light():
    script = "import sys, solver; assert not {'numba', 'scipy', 'numpy'} & set(sys.modules)"
    subprocess.run([sys.executable, "-c", script], check=True)
