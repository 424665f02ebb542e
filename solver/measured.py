"""Measured inputs: value, tolerance, kind of distribution and correlation.

JCGM 100:2008 (GUM) clauses 4.3, 4.4 and 5.2.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from solver.checks import between, not_negative, number, one_of

# Standard uncertainty of a tolerance of +-1 (GUM 4.3 and 4.4). A tolerance called
# normal is taken for about 95 percent, two standard uncertainties.
TOLERANCE_FACTOR = {
    "normal": 1.0 / 2.0,
    "rectangular": 1.0 / math.sqrt(3.0),
    "triangular": 1.0 / math.sqrt(6.0),
    "arcsine": 1.0 / math.sqrt(2.0),
}


@dataclass(frozen=True)
class Input:
    """One input: its value, standard uncertainty and kind of distribution."""

    value: float
    uncertainty: float
    kind: str = "normal"


def standard_uncertainty(tolerance: float, kind: str = "normal") -> float:
    """Standard uncertainty from a tolerance, +- half-width (GUM 4.3, 4.4).

    Parameters
    ----------
    tolerance : float
        Half-width, at or above zero, in the unit of the measurement.
    kind : {'normal', 'rectangular', 'triangular', 'arcsine'}
        ``'normal'``: about 95 percent lie within it (two standard
        uncertainties); ``'rectangular'``: any value within it is as likely.

    Returns
    -------
    float

    Raises
    ------
    ValueError
        When the tolerance is below zero or the kind is unknown.
    """
    one_of("the kind of distribution", kind, tuple(TOLERANCE_FACTOR))
    return not_negative("the tolerance", tolerance) * TOLERANCE_FACTOR[kind]


def covariance_of(
    inputs: Mapping[str, Input], correlations: Mapping[tuple[str, str], float] | None = None
) -> NDArray[np.float64]:
    """Covariance matrix of the inputs, shape (n, n), in their order.

    Raises
    ------
    ValueError
        When an uncertainty is below zero, a kind is unknown, a pair is not among
        the inputs, or the coefficients contradict each other.
    """
    if not inputs:
        raise ValueError("there are no inputs: at least one is needed.")
    order = list(inputs)
    for name, item in inputs.items():
        number(f"the value of {name}", item.value)
        not_negative(f"the uncertainty of {name}", item.uncertainty)
        one_of(f"the kind of {name}", item.kind, tuple(TOLERANCE_FACTOR))
    matrix = np.eye(len(order))
    for (first, second), coefficient in (correlations or {}).items():
        if first not in inputs or second not in inputs or first == second:
            raise ValueError(f"the correlation of {first} and {second} does not name two inputs.")
        between(f"the correlation of {first} and {second}", coefficient, -1.0, 1.0)
        a, b = order.index(first), order.index(second)
        matrix[a, b] = matrix[b, a] = coefficient
    if np.linalg.eigvalsh(matrix)[0] < -1e-9:
        raise ValueError("the correlations contradict each other: no set of inputs can have them all.")
    spread = np.array([item.uncertainty for item in inputs.values()])
    return matrix * np.outer(spread, spread)
