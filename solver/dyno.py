"""A shock's force-velocity curve at an adjuster setting between two dyno'd clicks."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from solver.car import Damper, Table


def damper_table(damper: Damper) -> Table:
    """The (velocity, force) table of a damper, compression positive.

    Parameters
    ----------
    damper : Damper
        With a table, or with the clicks of both strokes.

    Returns
    -------
    tuple of (float, float)
    """
    if damper.table is not None:
        return damper.table
    squeeze, rebound = stroke(damper.compression), stroke(damper.rebound)
    return tuple((-v, -f) for v, f in reversed(rebound[1:])) + squeeze


def stroke(adjuster: Any) -> Table:
    """One stroke's (speed, force) at its setting.

    Between two dyno'd clicks the force at a speed is interpolated linearly in
    clicks, over the speeds of both curves as far as the shorter one goes; beyond
    its last measured speed a curve goes on with its end slope (`CARFILE.md`).

    Parameters
    ----------
    adjuster : Adjuster

    Returns
    -------
    tuple of (float, float)
        From (0, 0) up.

    Raises
    ------
    ValueError
        When the setting is beyond the clicks that were on the dyno.
    """
    clicks = adjuster.clicks
    if not clicks[0].click <= adjuster.setting <= clicks[-1].click:
        raise ValueError(
            f"setting {adjuster.setting:g} is beyond the clicks that were on the dyno "
            f"({clicks[0].click:g} to {clicks[-1].click:g})"
        )
    for softer, harder in pairwise(clicks):
        if softer.click <= adjuster.setting <= harder.click:
            share = (adjuster.setting - softer.click) / (harder.click - softer.click)
            return _blend(softer.table, harder.table, share)
    return clicks[0].table


def _blend(one: Table, other: Table, share: float) -> Table:
    if share == 0.0:
        return one
    if share == 1.0:
        return other
    reach = min(one[-1][0], other[-1][0])
    speeds = sorted({v for v, _ in (*one, *other) if v <= reach})
    return tuple((v, (1.0 - share) * at(one, v) + share * at(other, v)) for v in speeds)


def at(table: Table, v: float) -> float:
    """Force of a table at a speed, linear between points and beyond the ends."""
    i = 1
    while i < len(table) - 1 and v > table[i][0]:
        i += 1
    (v0, f0), (v1, f1) = table[i - 1], table[i]
    return f0 + (f1 - f0) * (v - v0) / (v1 - v0)
