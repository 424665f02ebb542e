"""Monte Carlo propagation, to check what the first order says (GUM Supplement 1)."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from solver.checks import between
from solver.measured import Input, covariance_of
from solver.uncertainty import Propagation


@dataclass(frozen=True)
class Draws:
    """Outputs over many draws of the inputs.

    Attributes
    ----------
    names : tuple of str
    samples : ndarray, shape (m, draws)
    means, uncertainties : ndarray, shape (m,)
    low, high : ndarray, shape (m,)
        Ends of the middle `coverage` of the draws.
    coverage : float
    """

    names: tuple
    samples: np.ndarray
    means: np.ndarray
    uncertainties: np.ndarray
    low: np.ndarray
    high: np.ndarray
    coverage: float


@dataclass(frozen=True)
class Agreement:
    """Whether the first order is good enough for one output.

    ``first_order`` and ``monte_carlo`` are standard uncertainties, ``tolerance``
    half a unit of the last figure kept, ``agrees`` whether both ends of the
    interval lie within it (GUM Supplement 1, clause 8).
    """

    name: str
    first_order: float
    monte_carlo: float
    low_difference: float
    high_difference: float
    tolerance: float
    agrees: bool


def draw_inputs(
    inputs: Mapping[str, Input],
    draws: int,
    seed: int,
    correlations: Mapping[tuple[str, str], float] | None = None,
) -> dict[str, NDArray[np.float64]]:
    """Draw the inputs at random.

    Parameters
    ----------
    inputs : dict of str to Input
    draws : int
    seed : int
        The same seed gives the same draws.
    correlations : dict of (str, str) to float, optional
        Only between normal inputs: for other kinds a coefficient does not say
        what the joint distribution is.

    Returns
    -------
    dict of str to ndarray, each of shape (draws,)

    Raises
    ------
    ValueError
        When an input is out of range or a correlated input is not normal.
    """
    covariance = covariance_of(inputs, correlations)
    count = int(between("the number of draws", draws, 2, 10_000_000))
    for pair in correlations or {}:
        for name in pair:
            if inputs[name].kind != "normal":
                raise ValueError(
                    f"{name} is {inputs[name].kind} and correlated: draws can be made for correlated"
                    " normal inputs only."
                )
    random = np.random.default_rng(seed)
    centres = np.array([item.value for item in inputs.values()])
    values, vectors = np.linalg.eigh(covariance)
    root = vectors * np.sqrt(np.maximum(values, 0.0))
    joint = centres[:, None] + root @ random.standard_normal((len(inputs), count))
    drawn = {}
    for index, (name, item) in enumerate(inputs.items()):
        drawn[name] = joint[index] if item.kind == "normal" else _single(item, random, count)
    return drawn


def _single(item: Input, random: np.random.Generator, count: int) -> NDArray[np.float64]:
    """Draws of one input that is not normal, with the standard uncertainty it states."""
    if item.kind == "rectangular":
        unit = random.uniform(-math.sqrt(3.0), math.sqrt(3.0), count)
    elif item.kind == "triangular":
        unit = math.sqrt(6.0) * (random.random(count) - random.random(count))
    else:
        unit = math.sqrt(2.0) * np.sin(random.uniform(-math.pi, math.pi, count))
    return item.value + item.uncertainty * unit


def monte_carlo(
    function: Callable[..., Any],
    inputs: Mapping[str, Input],
    draws: int = 100000,
    seed: int = 1,
    correlations: Mapping[tuple[str, str], float] | None = None,
    coverage: float = 0.95,
    vectorised: bool = True,
) -> Draws:
    """Propagate distributions by drawing inputs (GUM Supplement 1, clause 7).

    Parameters
    ----------
    function : callable
        As in `solver.uncertainty.propagate`. When `vectorised`, it is called
        once with arrays of shape (draws,), else once a draw with numbers.
    inputs : dict of str to Input
    draws, seed : int
    correlations : dict of (str, str) to float, optional
    coverage : float
        Of the interval, between 0 and 1.
    vectorised : bool

    Returns
    -------
    Draws

    Raises
    ------
    ValueError
        As `draw_inputs`, or when the coverage is out of range.
    """
    between("the coverage", coverage, 0.01, 0.9999)
    drawn = draw_inputs(inputs, draws, seed, correlations)
    if vectorised:
        result = function(**drawn)
        names, samples = _stacked(result, draws)
    else:
        rows = [function(**{name: float(v[i]) for name, v in drawn.items()}) for i in range(draws)]
        if isinstance(rows[0], dict):
            names, samples = _stacked({name: [row[name] for row in rows] for name in rows[0]}, draws)
        else:
            names, samples = _stacked(np.array(rows, dtype=float).reshape(draws, -1).T, draws)
    return summarise(names, samples, coverage)


def summarise(names: Iterable[str], samples: NDArray[np.float64], coverage: float = 0.95) -> Draws:
    """Means, standard deviations and intervals of samples of shape (m, draws).

    Returns
    -------
    Draws
    """
    tail = (1.0 - coverage) / 2.0
    low, high = np.quantile(samples, [tail, 1.0 - tail], axis=1)
    return Draws(
        names=tuple(names),
        samples=samples,
        means=samples.mean(axis=1),
        uncertainties=samples.std(axis=1, ddof=1),
        low=low,
        high=high,
        coverage=coverage,
    )


def compare(
    propagation: Propagation, draws: Draws, digits: int = 2, factor: float = 1.959964
) -> tuple[Agreement, ...]:
    """Hold the first order against Monte Carlo (GUM Supplement 1, clause 8.1).

    Parameters
    ----------
    propagation : solver.uncertainty.Propagation
    draws : Draws
        Of the same outputs, with 95 percent coverage.
    digits : int
        Figures of the standard uncertainty that matter: the tolerance is half a
        unit of the last.
    factor : float
        Coverage factor of the first order's interval.

    Returns
    -------
    tuple of Agreement
    """
    found = []
    for index, name in enumerate(propagation.names):
        value, spread = float(propagation.values[index]), float(propagation.uncertainties[index])
        low = abs(value - factor * spread - float(draws.low[index]))
        high = abs(value + factor * spread - float(draws.high[index]))
        size = max(spread, float(draws.uncertainties[index]))
        tolerance = 0.5 * 10.0 ** (math.floor(math.log10(size)) - digits + 1) if size > 0.0 else 0.0
        found.append(
            Agreement(
                name=name,
                first_order=spread,
                monte_carlo=float(draws.uncertainties[index]),
                low_difference=low,
                high_difference=high,
                tolerance=tolerance,
                agrees=max(low, high) <= tolerance,
            )
        )
    return tuple(found)


def _stacked(result: Any, draws: int) -> tuple[tuple[str, ...], NDArray[np.float64]]:
    if isinstance(result, dict):
        rows = [np.broadcast_to(np.asarray(value, dtype=float), (draws,)) for value in result.values()]
        return tuple(result), np.stack(rows)
    array = np.asarray(result, dtype=float).reshape(-1, draws)
    names = ("value",) if array.shape[0] == 1 else tuple(str(index) for index in range(array.shape[0]))
    return names, array
