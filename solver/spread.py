"""What the survey's tolerances do to the figures of a launch.

Every figure gets a standard uncertainty (GUM, first order, central differences)
from the standard uncertainties of the car file's numbers. All the runs this
takes go through the solver as lanes of one batch.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from solver.car import Car
from solver.car_paths import number_at
from solver.carfile import car_to_dict
from solver.checks import not_negative, positive
from solver.measured import Input
from solver.monte_carlo import Draws, draw_inputs, summarise
from solver.spread_lanes import FiguresOf, LaneFigures, Lanes, launch_figures
from solver.uncertainty import Propagation, from_sensitivities

# A figure whose curvature over one standard uncertainty is more than this part of its
# uncertainty is not well told by the first order.
CURVED = 0.25
# Of a study alone: the hit as a multiple of the car file's.
HIT_SCALE = "hit.scale"


@dataclass(frozen=True)
class Spread:
    """Figures of a launch with their standard uncertainties.

    Attributes
    ----------
    propagation : solver.uncertainty.Propagation
        Of the measurements: inputs by path, outputs by figure; its ``value``,
        ``ranking`` and ``remeasured`` answer for each figure.
    reading : dict of str to float
        Standard uncertainty with which a figure is read off a run, where it is not
        read exactly: a peak's time, to a solver's step (rectangular, GUM 4.3.7).
    left_out : tuple of str
        Figures that some lane does not have (the front tyres lift with one set
        of numbers and not with another), so that no spread can be stated.
    curved : tuple of str
        Figures for which the first order is doubtful: bent within the tolerance, or
        as coarse as the solver's step (times of peaks).
    """

    propagation: Propagation
    reading: Mapping[str, float]
    left_out: tuple[str, ...]
    curved: tuple[str, ...]

    @property
    def figures(self) -> tuple[str, ...]:
        """Names of the figures that have a spread."""
        return self.propagation.names

    def uncertainty(self, figure: str) -> float:
        """One figure's standard uncertainty, reading included."""
        return math.hypot(self.propagation.uncertainty(figure), self.reading.get(figure, 0.0))


@dataclass(frozen=True)
class Purchase:
    """What measuring one number better would buy for one figure.

    ``now`` and ``then`` are the figure's standard uncertainties before and after.
    """

    path: str
    tolerance_part: float
    now: float
    then: float


def spread_of(
    car: Car,
    uncertainties: Mapping[str, float],
    correlations: Mapping[tuple[str, str], float] | None = None,
    step: float = 1.0,
    figures_of: FiguresOf | None = None,
) -> Spread:
    """Figures of a launch with standard uncertainties.

    Sensitivities by ``[f(x + s u) - f(x - s u)]/(2 s u)`` (JCGM 100:2008, 5.1.3
    note 2, which takes s = 1); combined by its equation 13.

    Parameters
    ----------
    car : solver.Car
    uncertainties : dict of str to float
        Standard uncertainty of the number at each path, in its own unit: any of
        `solver.sweepable`; see `solver.measured.standard_uncertainty` for
        tolerances.
    correlations : dict of (str, str) to float, optional
    step : float
        Half-width of the differences in standard uncertainties.
    figures_of : callable, optional
        Solves the lanes; None takes `launch_figures`.

    Returns
    -------
    Spread

    Raises
    ------
    ValueError
        When a path cannot vary, an uncertainty is below zero, or a lane has no
        answer: with the number at fault and the reason.
    """
    inputs = _inputs(car, uncertainties)
    reach = positive("the step", step)
    lanes = _differences(inputs, reach)
    found = (figures_of or launch_figures(car))(lanes)
    _refuse_unsolved(found, lanes, inputs)
    names, table, left_out = _table(found.figures)
    middle, above, below = table[:, :1], table[:, 1::2], table[:, 2::2]
    widths = np.array([2.0 * reach * item.uncertainty for item in inputs.values()])
    propagation = from_sensitivities(inputs, names, middle[:, 0], (above - below) / widths, correlations)
    bend = np.sqrt((((above + below) / 2.0 - middle) ** 2).sum(axis=1)) / reach**2
    curved = tuple(
        name
        for name, size, spread in zip(names, bend, propagation.uncertainties, strict=True)
        if size > CURVED * spread
    )
    reading = {name: width / math.sqrt(12.0) for name, width in found.steps.items() if name in names}
    return Spread(propagation=propagation, reading=reading, left_out=left_out, curved=curved)


def spread_by_draws(
    car: Car,
    uncertainties: Mapping[str, float],
    draws: int = 1000,
    seed: int = 1,
    correlations: Mapping[tuple[str, str], float] | None = None,
    figures_of: FiguresOf | None = None,
) -> Draws:
    """The same by drawing whole cars at random (GUM Supplement 1), one a lane.

    Parameters
    ----------
    car, uncertainties, correlations, figures_of
        As `spread_of`; every number is drawn from a normal distribution.
    draws, seed : int

    Returns
    -------
    solver.monte_carlo.Draws
        Of the figures that every lane has.

    Raises
    ------
    ValueError
        As `spread_of`.
    """
    inputs = _inputs(car, uncertainties)
    lanes = draw_inputs(inputs, draws, seed, correlations)
    found = (figures_of or launch_figures(car))(lanes)
    if found.refused:
        lane, reason = next(iter(found.refused.items()))
        raise ValueError(
            f"{len(found.refused)} of {draws} draws have no answer, the first of them (draw {lane}): {reason}"
        )
    names, table, _ = _table(found.figures)
    return summarise(names, table)


def best_purchases(spread: Spread, figure: str, part: float = 0.5) -> tuple[Purchase, ...]:
    """Which number to measure again, for one figure.

    Parameters
    ----------
    spread : Spread
    figure : str
    part : float
        New tolerance over the old, 0 to 1.

    Returns
    -------
    tuple of Purchase
        The most useful first.

    Raises
    ------
    ValueError
        When the figure has no spread or the part is below zero.
    """
    not_negative("the part of the tolerance", part)
    now, reading = spread.uncertainty(figure), spread.reading.get(figure, 0.0)
    found = [
        Purchase(
            path=path,
            tolerance_part=part,
            now=now,
            then=math.hypot(spread.propagation.remeasured({path: part * item.uncertainty})[figure], reading),
        )
        for path, item in spread.propagation.inputs.items()
    ]
    return tuple(sorted(found, key=lambda purchase: purchase.then))


def _inputs(car: Car, uncertainties: Mapping[str, float]) -> dict[str, Input]:
    """Inputs that are uncertain at all: a zero adds two lanes and nothing else."""
    document, inputs = car_to_dict(car), {}
    for path, value in uncertainties.items():
        if not_negative(f"the uncertainty of {path}", value) > 0.0:
            centre = 1.0 if path == HIT_SCALE else number_at(document, path)
            inputs[path] = Input(centre, float(value))
    if not inputs:
        raise ValueError("no number of the car file has an uncertainty: there is no spread to work out.")
    return inputs


def _differences(inputs: Mapping[str, Input], reach: float) -> dict[str, NDArray[np.float64]]:
    """The car itself, then each number above and below, one after the other."""
    lanes = {path: np.full(2 * len(inputs) + 1, item.value) for path, item in inputs.items()}
    for place, (path, item) in enumerate(inputs.items()):
        lanes[path][2 * place + 1] += reach * item.uncertainty
        lanes[path][2 * place + 2] -= reach * item.uncertainty
    return lanes


def _refuse_unsolved(found: LaneFigures, lanes: Lanes, inputs: Mapping[str, Input]) -> None:
    for lane, reason in found.refused.items():
        if lane == 0:
            raise ValueError(f"the launch itself has no answer: {reason}")
        path = list(inputs)[(lane - 1) // 2]
        raise ValueError(f"with {path} at {lanes[path][lane]:g} the launch has no answer: {reason}")


def _table(
    found: Mapping[str, ArrayLike],
) -> tuple[tuple[str, ...], NDArray[np.float64], tuple[str, ...]]:
    """Figures that every lane has, shape (figures, lanes), and the names of the others."""
    arrays = {name: np.asarray(values, dtype=float) for name, values in found.items()}
    whole = {name: values for name, values in arrays.items() if np.isfinite(values).all()}
    if not whole:
        raise ValueError("no figure is there in every lane: there is no spread to work out.")
    # What no lane has (a wheelie bar the car lacks) is not worth telling.
    some = {name for name, values in arrays.items() if np.isfinite(values).any()}
    return tuple(whole), np.stack(list(whole.values())), tuple(sorted(some - set(whole)))
