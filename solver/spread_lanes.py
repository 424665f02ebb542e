"""Solving the lanes of a spread: the numbers that vary in, figures out."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from solver.car import Car
from solver.sweeping import sweep


@dataclass(frozen=True)
class LaneFigures:
    """Figures of many lanes.

    ``figures`` maps each name to an array over the lanes, NaN in a lane that does
    not have it; ``refused`` says by lane number why it has no answer at all.
    """

    figures: Mapping[str, ArrayLike]
    refused: Mapping[int, str]


# Takes the numbers that vary, an array over the lanes by path, and solves every lane.
Lanes = Mapping[str, NDArray[np.float64]]
FiguresOf = Callable[[Lanes], LaneFigures]


def launch_figures(car: Car) -> FiguresOf:
    """Solver of lanes: figures of the launch and of ride height, by `solver.sweep`."""

    def solve(lanes: Lanes) -> LaneFigures:
        study = sweep(car, lanes)
        refused = {int(lane): study.reason(int(lane)) for lane in np.flatnonzero(study.codes)}
        return LaneFigures(figures={**study.statics, **study.figures}, refused=refused)

    return solve
