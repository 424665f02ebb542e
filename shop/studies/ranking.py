"""Ranking a study's rows: limits, weights, the Pareto front and the nearest miss. Arrays over choices."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Columns = Mapping[str, Array]


@dataclass(frozen=True)
class Limit:
    """What a figure may be, SI; None leaves that side open."""

    figure: str
    least: float | None = None
    most: float | None = None

    def miss(self, values: Array) -> Array:
        """How far each value lies outside, in the figure's own unit; zero inside, inf where unknown."""
        below = np.zeros(len(values)) if self.least is None else self.least - values
        above = np.zeros(len(values)) if self.most is None else values - self.most
        return np.nan_to_num(np.maximum(np.maximum(below, above), 0.0), nan=math.inf)


@dataclass(frozen=True)
class Miss:
    """The nearest that any choice came to meeting a limit that none meets."""

    limit: Limit
    choice: int
    value: float
    by: float


def within(columns: Columns, limits: list[Limit], count: int) -> NDArray[np.bool_]:
    """Which choices meet every limit."""
    meets = np.ones(count, dtype=bool)
    for limit in limits:
        meets &= limit.miss(columns[limit.figure]) == 0.0
    return meets


def nearest_misses(columns: Columns, limits: list[Limit], count: int) -> list[Miss]:
    """For each limit, the choice that meets all the others and misses it by least; nearest first.

    Where the others already rule everything out, the least miss of any choice. Nearness is
    judged against the spread of the figure, so that pounds and inches can be compared.
    """
    found = []
    for limit in limits:
        others = within(columns, [other for other in limits if other is not limit], count)
        values = columns[limit.figure]
        miss = limit.miss(values)
        candidates = np.where(others, miss, math.inf) if others.any() else miss
        best = int(np.argmin(candidates))
        if math.isfinite(candidates[best]) and candidates[best] > 0:
            spread = float(np.nanmax(values) - np.nanmin(values)) or 1.0
            found.append((candidates[best] / spread, Miss(limit, best, float(values[best]), float(candidates[best]))))
    return [miss for _, miss in sorted(found, key=lambda pair: pair[0])]


def scores(columns: Columns, weights: Mapping[str, float], among: NDArray[np.bool_]) -> Array:
    """Weighted sum of figures, each scaled to 0 (worst) .. 1 (best) among the choices in the running.

    A positive weight wants more of the figure, a negative one less. NaN outside `among` and where a
    figure is unknown: such a choice is not ranked rather than ranked last.
    """
    total = np.zeros(len(among))
    used = {name: weight for name, weight in weights.items() if weight}
    for name, weight in used.items():
        values = np.where(among & np.isfinite(columns[name]), columns[name], np.nan)
        if np.isnan(values).all():
            return np.full(len(among), np.nan)
        low, high = np.nanmin(values), np.nanmax(values)
        share = (values - low) / (high - low) if high > low else np.where(np.isnan(values), np.nan, 0.5)
        total = total + abs(weight) * (share if weight > 0 else 1.0 - share)
    scale = sum(abs(weight) for weight in used.values()) or 1.0
    return np.where(among, total / scale, np.nan)


def order(score: Array) -> NDArray[np.intp]:
    """Ranked choices, best first; ties by choice number, so that a list never shuffles."""
    ranked = np.flatnonzero(~np.isnan(score))
    return ranked[np.argsort(-score[ranked], kind="stable")]


def pareto_front(first: Array, second: Array, *, more_first: bool, more_second: bool) -> NDArray[np.intp]:
    """Choices that no other beats on both figures, in the order of the first."""
    known = np.flatnonzero(np.isfinite(first) & np.isfinite(second))
    a = first[known] if more_first else -first[known]
    b = second[known] if more_second else -second[known]
    ranked = np.lexsort((-b, -a))
    front, best = [], -math.inf
    for position in ranked:
        if b[position] > best:
            front.append(known[position])
            best = b[position]
    return np.array(front[::-1], dtype=np.intp)
