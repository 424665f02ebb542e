"""What the survey's tolerances do to the figures of a launch.

Every figure gets a standard uncertainty (GUM, first order, central differences)
from the standard uncertainties of the car file's numbers. All the runs this
takes go through the solver as lanes of one batch.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from solver.car_paths import number_at, with_numbers
from solver.checks import not_negative, positive
from solver.measured import Input
from solver.monte_carlo import Draws, draw_inputs, summarise
from solver.uncertainty import Propagation, from_sensitivities

# Takes car files, one a lane, and gives each figure as an array over the lanes, NaN in a
# lane that does not have it.
FiguresOf = Callable[[list[dict[str, Any]]], Mapping[str, ArrayLike]]

# A figure whose curvature over one standard uncertainty is more than this part of its
# uncertainty is not well told by the first order.
CURVED = 0.25


@dataclass(frozen=True)
class Spread:
    """Figures of a launch with their standard uncertainties.

    Attributes
    ----------
    propagation : solver.uncertainty.Propagation
        Inputs by path, outputs by figure: ``value``, ``uncertainty``, ``ranking``
        and ``remeasured`` answer for each figure.
    left_out : tuple of str
        Figures that some lane does not have (the front tyres lift with one set
        of numbers and not with another), so that no spread can be stated.
    curved : tuple of str
        Figures for which the first order is doubtful.
    """

    propagation: Propagation
    left_out: tuple
    curved: tuple

    @property
    def figures(self) -> tuple[str, ...]:
        """Names of the figures that have a spread."""
        return self.propagation.names


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
    document: dict[str, Any],
    uncertainties: Mapping[str, float],
    figures_of: FiguresOf,
    correlations: Mapping[tuple[str, str], float] | None = None,
    step: float = 1.0,
) -> Spread:
    """Figures of a launch with standard uncertainties.

    Sensitivities by ``[f(x + s u) - f(x - s u)]/(2 s u)`` (JCGM 100:2008, 5.1.3
    note 2, which takes s = 1); combined by its equation 13.

    Parameters
    ----------
    document : dict
        The car file.
    uncertainties : dict of str to float
        Standard uncertainty of the number at each path, in its own unit;
        see `solver.measured.standard_uncertainty` for tolerances.
    figures_of : callable
        Takes a list of car files, one a lane, and returns a dict of figure to
        array over the lanes, NaN where a lane does not have it;
        `solver.spread_lanes.launch_figures`.
    correlations : dict of (str, str) to float, optional
    step : float
        Half-width of the differences in standard uncertainties.

    Returns
    -------
    Spread

    Raises
    ------
    ValueError
        When a path is not in the car file or an uncertainty is below zero; and
        what `figures_of` raises when a lane has no answer.
    """
    inputs = _inputs(document, uncertainties)
    reach = positive("the step", step)
    lanes = [document]
    for path, item in inputs.items():
        for side in (reach, -reach):
            lanes.append(with_numbers(document, {path: item.value + side * item.uncertainty}))
    found = figures_of(lanes)
    names, table, left_out = _table(found)
    middle, above, below = table[:, :1], table[:, 1::2], table[:, 2::2]
    widths = np.array([2.0 * reach * item.uncertainty for item in inputs.values()])
    propagation = from_sensitivities(inputs, names, middle[:, 0], (above - below) / widths, correlations)
    bend = np.sqrt((((above + below) / 2.0 - middle) ** 2).sum(axis=1)) / reach**2
    curved = tuple(
        name
        for name, size, spread in zip(names, bend, propagation.uncertainties, strict=True)
        if size > CURVED * spread
    )
    return Spread(propagation=propagation, left_out=left_out, curved=curved)


def spread_by_draws(
    document: dict[str, Any],
    uncertainties: Mapping[str, float],
    figures_of: FiguresOf,
    draws: int = 1000,
    seed: int = 1,
    correlations: Mapping[tuple[str, str], float] | None = None,
) -> Draws:
    """The same by drawing whole cars at random (GUM Supplement 1), one a lane.

    Parameters
    ----------
    document, uncertainties, figures_of, correlations
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
    inputs = _inputs(document, uncertainties)
    drawn = draw_inputs(inputs, draws, seed, correlations)
    lanes = [
        with_numbers(document, {path: values[lane] for path, values in drawn.items()})
        for lane in range(draws)
    ]
    names, table, _ = _table(figures_of(lanes))
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
    now = spread.propagation.uncertainty(figure)
    found = [
        Purchase(
            path=path,
            tolerance_part=part,
            now=now,
            then=spread.propagation.remeasured({path: part * item.uncertainty})[figure],
        )
        for path, item in spread.propagation.inputs.items()
    ]
    return tuple(sorted(found, key=lambda purchase: purchase.then))


def _inputs(document: dict[str, Any], uncertainties: Mapping[str, float]) -> dict[str, Input]:
    """Inputs that are uncertain at all: a zero adds two lanes and nothing else."""
    inputs = {}
    for path, value in uncertainties.items():
        if not_negative(f"the uncertainty of {path}", value) > 0.0:
            inputs[path] = Input(number_at(document, path), float(value))
    if not inputs:
        raise ValueError("no number of the car file has an uncertainty: there is no spread to work out.")
    return inputs


def _table(
    found: Mapping[str, ArrayLike],
) -> tuple[tuple[str, ...], NDArray[np.float64], tuple[str, ...]]:
    """Figures that every lane has, shape (figures, lanes), and the names of the others."""
    arrays = {name: np.asarray(values, dtype=float) for name, values in found.items()}
    whole = {name: values for name, values in arrays.items() if np.isfinite(values).all()}
    if not whole:
        raise ValueError("no figure is there in every lane: there is no spread to work out.")
    return tuple(whole), np.stack(list(whole.values())), tuple(name for name in arrays if name not in whole)
