"""The planar launch solver: pure functions over frozen dataclasses, SI throughout.

``load_car`` or ``car_from_dict`` give a `Car`; ``statics``, ``modes``, ``launch`` and
``sweep`` answer from it. Nothing is compiled at import: `warm` does that, once.
"""

from __future__ import annotations

import importlib
import sys
import types
from typing import Any

from solver.version import SOLVER_VERSION

__version__ = SOLVER_VERSION

# Where each public name lives. Looked up at first use, so that importing the
# package costs neither numba nor numpy.
_HOMES = {
    "Car": "car",
    "CarError": "faults",
    "Fault": "faults",
    "LaunchFailed": "faults",
    "load_car": "carfile",
    "car_from_dict": "carfile",
    "car_to_dict": "carfile",
    "Statics": "statics",
    "statics": "statics",
    "Mode": "modes",
    "modes": "modes",
    "Launch": "launching",
    "launch": "launching",
    "Sweep": "sweeping",
    "sweep": "sweeping",
    "sweep_cars": "sweeping",
    "sweepable": "sweeping",
    "warm": "warming",
    "FIGURES": "figures",
    "HISTORIES": "figures",
    "STATIC_FIGURES": "figures",
}

__all__ = ["SOLVER_VERSION", *_HOMES]


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'solver' has no attribute {name!r}")
    return getattr(importlib.import_module(f"solver.{_HOMES[name]}"), name)


class _Package(types.ModuleType):
    """Keeps a function from being hidden by the module of the same name it lives in.

    Importing ``solver.statics`` would otherwise put that module where
    ``solver.statics(car)`` looks for the function.
    """

    def __setattr__(self, name: str, value: Any) -> None:
        if not (name in _HOMES and isinstance(value, types.ModuleType)):
            super().__setattr__(name, value)


sys.modules[__name__].__class__ = _Package
