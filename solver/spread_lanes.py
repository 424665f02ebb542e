"""Solving the lanes of a spread: the numbers that vary in, figures out."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import ArrayLike, NDArray

from solver.car import Car
from solver.figures import FIGURES
from solver.launching import LONGEST_STEP
from solver.sweeping import sweep

# Figures that come with the time at which they were read.
PEAKS = frozenset(name for name in FIGURES if f"{name}_time" in FIGURES)


@dataclass(frozen=True)
class LaneFigures:
    """Figures of many lanes.

    ``figures`` maps each name to an array over the lanes, NaN in a lane that does
    not have it; ``refused`` says by lane number why it has no answer at all;
    ``steps`` holds the step in which a figure is read, where it is not read exactly.
    """

    figures: Mapping[str, ArrayLike]
    refused: Mapping[int, str]
    steps: Mapping[str, float] = field(default_factory=dict)


# Takes the numbers that vary, an array over the lanes by path, and solves every lane.
Lanes = Mapping[str, NDArray[np.float64]]
FiguresOf = Callable[[Lanes], LaneFigures]


def launch_figures(car: Car) -> FiguresOf:
    """Solver of lanes: figures of the launch and of ride height, by `solver.sweep`."""

    def solve(lanes: Lanes) -> LaneFigures:
        study = sweep(car, lanes)
        refused = {int(lane): study.reason(int(lane)) or "" for lane in np.flatnonzero(study.codes)}
        # A peak's time is that of the integration step at which it was read.
        steps = {
            name: LONGEST_STEP for name in study.figures if name[:-5] in PEAKS and name.endswith("_time")
        }
        return LaneFigures({**study.statics, **study.figures}, refused, steps)

    return solve
