"""Natural frequencies and damping ratios of the model linearised at ride height."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from solver.carfile import ensure_sound
from solver.faults import CarError
from solver.kernel import layout as L
from solver.kernel.lanes import settle_one
from solver.kernel.linear import linearise
from solver.packing import pack
from solver.statics import rest_faults

if TYPE_CHECKING:
    from solver.car import Car
    from solver.packing import Row


@dataclass(frozen=True)
class Mode:
    """One oscillatory mode.

    Attributes
    ----------
    frequency_hz : float
        Undamped natural frequency, ``|eigenvalue|/(2 pi)``.
    damping_ratio : float
        Below 1.
    shape : dict of str to float
        Heights of ``front_body``, ``rear_body``, ``front_wheels`` and ``rear_axle``
        at one instant, the greatest being 1.
    """

    frequency_hz: float
    damping_ratio: float
    shape: dict[str, float]


def modes(car: Car) -> tuple[Mode, ...]:
    """Oscillatory modes at ride height, slowest first.

    Eigenvalues of the model's own right-hand side, linearised; a shock with
    another slope each way counts with the mean of the two.

    Parameters
    ----------
    car : Car

    Returns
    -------
    tuple of Mode
        At most four; over-damped motions have no frequency and are left out.

    Raises
    ------
    CarError
    """
    ensure_sound(car)
    row = pack(car)
    settle_one(row.p, row.n)
    if faults := rest_faults(row.p):
        raise CarError(faults)
    return modes_of_row(row)


def modes_of_row(row: Row) -> tuple[Mode, ...]:
    """`Mode` tuple from a settled row, which is left as it was."""
    # Nothing depends on how far the car has gone; with that coordinate in, the rest
    # of a steady roll would be a double eigenvalue, which rounding splits.
    matrix = state_matrix(row)[1:, 1:]
    values, vectors = np.linalg.eig(matrix)
    slow = 1e-6 * np.abs(values).max()
    found = [i for i in range(9) if values[i].imag > slow]
    found.sort(key=lambda i: abs(values[i]))
    return tuple(_mode(values[i], vectors[:4, i], row.p) for i in found)


def state_matrix(row: Row) -> np.ndarray:
    """The (10, 10) matrix of (x, z, pitch, axle height, slide) and their rates."""
    matrix = np.empty((10, 10))
    linearise(row.p.copy(), row.n, matrix)
    return matrix


def _mode(value: complex, vector: np.ndarray, p: np.ndarray) -> Mode:
    size = float(abs(value))
    return Mode(size / (2.0 * math.pi), float(-value.real) / size, _shape(vector, p))


def _shape(vector: np.ndarray, p: np.ndarray) -> dict[str, float]:
    z, pitch, axle, slide = vector
    front = z + pitch * (p[L.WHEELBASE] - p[L.SPRUNG_X])
    heights = {
        "front_body": front,
        "rear_body": z - pitch * p[L.SPRUNG_X],
        "front_wheels": front + slide,
        "rear_axle": axle,
    }
    greatest = max(heights.values(), key=abs)
    return {name: float((height / greatest).real) for name, height in heights.items()}
