"""Tables as sums of hinges, the form the kernel reads (`solver.kernel.curves`)."""

from __future__ import annotations

from itertools import pairwise
from typing import Any


def hinges(table: Any, ratio: float = 1.0) -> list[float]:
    """Value and slope at zero as the first leg has them, then (knot, change of slope).

    Parameters
    ----------
    table : sequence of (v, f)
        At least two points, v rising.
    ratio : float
        Motion ratio: the wheel moves ``v / ratio`` and feels ``ratio * f``.

    Returns
    -------
    list of float
        f0, s0, v1, d1, v2, d2, ...
    """
    points = [(v / ratio, f * ratio) for v, f in table]
    slopes = [(b[1] - a[1]) / (b[0] - a[0]) for a, b in pairwise(points)]
    row = [points[0][1] - slopes[0] * points[0][0], slopes[0]]
    for (v, _), (before, after) in zip(points[1:-1], pairwise(slopes), strict=True):
        if after != before:
            row += [v, after - before]
    return row


def value_of(row: list[float], v: float) -> float:
    """The curve's value, in plain Python."""
    pairs = zip(row[2::2], row[3::2], strict=True)
    return row[0] + row[1] * v + sum(change * max(0.0, v - knot) for knot, change in pairs)
