"""Grids of choices for a study, from what was typed on a command line."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from solver.car import FourLink
from solver.faults import CarError, Fault

if TYPE_CHECKING:
    from solver.car import Car

MOST_LANES = 100_000


def grid(wanted: list[str]) -> dict[str, np.ndarray]:
    """Every combination of the ranges in ``PATH=LOW:HIGH:COUNT`` texts.

    Parameters
    ----------
    wanted : list of str

    Returns
    -------
    dict of str to float array (lanes,)

    Raises
    ------
    CarError
        When a text cannot be read or the grid is too large.
    """
    axes = dict(_axis(text) for text in wanted)
    lanes = int(np.prod([float(len(values)) for values in axes.values()]))
    if lanes > MOST_LANES:
        raise CarError([Fault("--vary", lanes, f"makes more than {MOST_LANES} lanes")])
    full = np.meshgrid(*axes.values(), indexing="ij")
    return {path: values.ravel() for path, values in zip(axes, full, strict=True)}


def usual_grid(car: Car) -> dict[str, np.ndarray]:
    """Front pins of the bars 20 mm up and down in five steps each."""
    linkage = car.rear.linkage
    if isinstance(linkage, FourLink):
        pins = {f"{name}.chassis": getattr(linkage, name).chassis for name in ("lower", "upper")}
    else:
        pins = {"chassis": linkage.chassis}
    return grid([f"rear.linkage.{path}.z={z - 0.02}:{z + 0.02}:5" for path, (_, z) in pins.items()])


def _axis(text: str) -> tuple[str, np.ndarray]:
    path, equals, range_ = text.partition("=")
    try:
        low, high, count = range_.split(":")
        values = np.linspace(float(low), float(high), int(count))
    except ValueError:
        values = np.empty(0)
    if not equals or not path or len(values) == 0 or not np.isfinite(values).all():
        raise CarError([Fault("--vary", text, "must be PATH=LOW:HIGH:COUNT, such as hit.scale=0.8:1.2:5")])
    return path, values
