"""First-order propagation of uncertainty (GUM) of any function of named inputs.

JCGM 100:2008 (GUM) clause 5, with sensitivities by central differences. What
the first order may miss is checked by `solver.monte_carlo`.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from solver.checks import not_negative, positive
from solver.measured import Input, covariance_of


@dataclass(frozen=True)
class Contribution:
    """What one input adds to one output.

    Attributes
    ----------
    name : str
    sensitivity : float
        Change of the output per unit of the input.
    amount : float
        ``|sensitivity| u``, in the output's unit.
    share : float
        Part of the output's variance, 0 to 1; correlated inputs may push single
        shares below zero, their sum stays 1.
    """

    name: str
    sensitivity: float
    amount: float
    share: float


@dataclass(frozen=True)
class Propagation:
    """Outputs with their uncertainties.

    Attributes
    ----------
    inputs : dict of str to Input
    names : tuple of str
        Of the outputs; ``'value'`` for a function that returns one number.
    values, uncertainties : ndarray, shape (m,)
    sensitivities : ndarray, shape (m, n)
    covariance : ndarray, shape (m, m)
        Of the outputs.
    input_covariance : ndarray, shape (n, n)
    """

    inputs: dict
    names: tuple
    values: np.ndarray
    uncertainties: np.ndarray
    sensitivities: np.ndarray
    covariance: np.ndarray
    input_covariance: np.ndarray

    def value(self, name: str = "value") -> float:
        """One output's value."""
        return float(self.values[self._row(name)])

    def uncertainty(self, name: str = "value") -> float:
        """One output's standard uncertainty."""
        return float(self.uncertainties[self._row(name)])

    def correlation(self, first: str, second: str) -> float:
        """Correlation coefficient of two outputs; zero when either has no uncertainty."""
        a, b = self._row(first), self._row(second)
        scale = self.uncertainties[a] * self.uncertainties[b]
        return float(self.covariance[a, b] / scale) if scale > 0.0 else 0.0

    def ranking(self, name: str = "value") -> tuple[Contribution, ...]:
        """Contributions to one output, greatest amount first: a tuple of `Contribution`."""
        row = self.sensitivities[self._row(name)]
        variance = float(row @ self.input_covariance @ row)
        joint = row * (self.input_covariance @ row)
        found = [
            Contribution(
                name=key,
                sensitivity=float(row[index]),
                amount=abs(float(row[index])) * self.inputs[key].uncertainty,
                share=float(joint[index]) / variance if variance > 0.0 else 0.0,
            )
            for index, key in enumerate(self.inputs)
        ]
        return tuple(sorted(found, key=lambda part: -part.amount))

    def remeasured(self, changes: Mapping[str, float]) -> dict[str, float]:
        """Standard uncertainties of all outputs if some inputs were measured better.

        Parameters
        ----------
        changes : dict of str to float
            New standard uncertainty of each input named; correlations stay.

        Returns
        -------
        dict of str to float

        Raises
        ------
        ValueError
            When a name is not an input or a new uncertainty is below zero.
        """
        scale = np.ones(len(self.inputs))
        for index, key in enumerate(self.inputs):
            if key in changes:
                new = not_negative(f"the new uncertainty of {key}", changes[key])
                old = self.inputs[key].uncertainty
                scale[index] = new / old if old > 0.0 else 0.0
        unknown = set(changes) - set(self.inputs)
        if unknown:
            raise ValueError(f"{', '.join(sorted(unknown))} is not among the inputs.")
        covariance = self.input_covariance * np.outer(scale, scale)
        variance = np.einsum("ij,jk,ik->i", self.sensitivities, covariance, self.sensitivities)
        return dict(zip(self.names, np.sqrt(np.maximum(variance, 0.0)).tolist(), strict=True))

    def _row(self, name: str) -> int:
        if name not in self.names:
            raise ValueError(f"{name!r} is not an output: there are {', '.join(self.names)}.")
        return self.names.index(name)


def propagate(
    function: Callable[..., Any],
    inputs: Mapping[str, Input],
    correlations: Mapping[tuple[str, str], float] | None = None,
    step: float = 0.1,
) -> Propagation:
    """Propagate standard uncertainties through a function, to first order.

    ``u_c^2(y) = sum c_i c_j u_i u_j r_ij`` (GUM equation 13), with ``c_i`` by
    central differences over ``step`` standard uncertainties (GUM 5.1.3, note 2
    takes 1).

    Parameters
    ----------
    function : callable
        Takes the inputs' values by name; returns a number, a sequence of
        numbers or a mapping of name to number.
    inputs : dict of str to Input
    correlations : dict of (str, str) to float, optional
        Coefficients of pairs of inputs; absent pairs are independent.
    step : float
        Half-width of the difference in standard uncertainties.

    Returns
    -------
    Propagation

    Raises
    ------
    ValueError
        When an input, a correlation or the step is out of range.
    """
    covariance_of(inputs, correlations)  # refuses bad inputs before the function sees them
    reach = positive("the step", step)
    names, values = _named(function(**_values(inputs)))
    columns = []
    for name, item in inputs.items():
        if item.uncertainty == 0.0:
            columns.append(np.zeros(len(names)))
            continue
        width = reach * item.uncertainty
        above = _named(function(**(_values(inputs) | {name: item.value + width})))[1]
        below = _named(function(**(_values(inputs) | {name: item.value - width})))[1]
        columns.append((above - below) / (2.0 * width))
    return from_sensitivities(inputs, names, values, np.column_stack(columns), correlations)


def from_sensitivities(
    inputs: Mapping[str, Input],
    names: Iterable[str],
    values: ArrayLike,
    sensitivities: ArrayLike,
    correlations: Mapping[tuple[str, str], float] | None = None,
) -> Propagation:
    """The same from sensitivities already at hand (GUM equation 13).

    Parameters
    ----------
    inputs : dict of str to Input
    names : sequence of str
        Of the m outputs.
    values : array_like, shape (m,)
    sensitivities : array_like, shape (m, n)
    correlations : dict of (str, str) to float, optional

    Returns
    -------
    Propagation

    Raises
    ------
    ValueError
        When an input or a correlation is out of range.
    """
    matrix = np.asarray(sensitivities, dtype=float)
    inner = covariance_of(inputs, correlations)
    outer = matrix @ inner @ matrix.T
    return Propagation(
        inputs=dict(inputs),
        names=tuple(names),
        values=np.asarray(values, dtype=float),
        uncertainties=np.sqrt(np.maximum(np.diag(outer), 0.0)),
        sensitivities=matrix,
        covariance=outer,
        input_covariance=inner,
    )


def _values(inputs: Mapping[str, Input]) -> dict[str, float]:
    return {name: item.value for name, item in inputs.items()}


def _named(result: Any) -> tuple[tuple[str, ...], NDArray[np.float64]]:
    if isinstance(result, dict):
        return tuple(result), np.array(list(result.values()), dtype=float)
    array = np.atleast_1d(np.asarray(result, dtype=float))
    names = ("value",) if array.size == 1 else tuple(str(index) for index in range(array.size))
    return names, array
