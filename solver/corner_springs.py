"""Springs, seats and tyres at the corners, as matrices over the four wheels."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from solver.checks import not_negative, positive


@dataclass(frozen=True)
class Axle:
    """Springs, seats and tyres of one axle, left and right.

    Attributes
    ----------
    track : float
        Between the middles of the tyre patches, m.
    spring_rates : tuple of float or None
        Left and right spring, N/m; None where nobody described them, and no turns
        can be worked out.
    motion_ratio : float
        Spring travel per wheel travel when both wheels move together.
    thread_pitch : float or None
        Seat travel along the spring for one turn, m; None for no threaded seat.
    tyre_rate : float or None
        One tyre, N/m; None for a rigid tyre.
    bar_rate : float
        Anti-roll bar: newtons at each wheel per metre of difference between the
        two wheels' travel; zero for none or disconnected.
    spring_base : float or None
        For a solid axle: distance between the springs across the car, m. Such an
        axle is stiffer in heave than in roll. None for independent wheels.
    adjustable : bool
        Whether its seats can be turned.
    """

    track: float
    spring_rates: tuple | None = None
    motion_ratio: float = 1.0
    thread_pitch: float | None = None
    tyre_rate: float | None = None
    bar_rate: float = 0.0
    spring_base: float | None = None
    adjustable: bool = True


def checked_axle(name: str, axle: Axle) -> Axle:
    """The axle, once its numbers allow seat turns; ValueError names what does not."""
    if axle.spring_rates is None:
        raise ValueError(f"the {name} springs are not described: seat turns cannot be worked out.")
    positive(f"the {name} track", axle.track, "m")
    for side, rate in zip(("left", "right"), axle.spring_rates, strict=True):
        positive(f"the {side} {name} spring rate", rate, "N/m")
    positive(f"the {name} motion ratio", axle.motion_ratio)
    if axle.thread_pitch is None and axle.adjustable:
        raise ValueError(f"the {name} seat's thread pitch is not given: seat turns cannot be worked out.")
    if axle.thread_pitch is not None:
        positive(f"the {name} seat's thread pitch", axle.thread_pitch, "m")
    not_negative(f"the {name} anti-roll bar rate", axle.bar_rate, "N/m")
    if axle.tyre_rate is not None:
        positive(f"the {name} tyre rate", axle.tyre_rate, "N/m")
    if axle.spring_base is not None:
        positive(f"the distance between the {name} springs", axle.spring_base, "m")
    return axle


def seat_pitches(axles: tuple[Axle, Axle]) -> NDArray[np.float64]:
    """Seat travel for one turn at each corner, zero where the seat does not turn."""
    return np.array([axle.thread_pitch if axle.adjustable else 0.0 for axle in axles for _ in range(2)])


def ride_matrix(length: float, front_track: float, rear_track: float) -> NDArray[np.float64]:
    """Rise at the four wheels for unit heave, nose-up pitch and left-up roll."""
    x = [length, length, 0.0, 0.0]
    y = [front_track / 2, -front_track / 2, rear_track / 2, -rear_track / 2]
    return np.column_stack([np.ones(4), x, y])


def warp_pattern(front_track: float, rear_track: float) -> NDArray[np.float64]:
    """The one pattern of load changes, shape (4,), that leaves heave, pitch and roll balanced."""
    return np.array([-1.0 / front_track, 1.0 / front_track, 1.0 / rear_track, -1.0 / rear_track])


def tyre_softness(axle: Axle) -> float:
    """Deflection of one tyre per load, m/N."""
    return 0.0 if axle.tyre_rate is None else 1.0 / axle.tyre_rate


def suspension(axles: tuple[Axle, Axle]) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Wheel stiffness (4, 4) and wheel force per seat travel (4, 4)."""
    stiffness, seats = np.zeros((4, 4)), np.zeros((4, 4))
    for index, axle in enumerate(axles):
        block = slice(2 * index, 2 * index + 2)
        near = 1.0 if axle.spring_base is None else (1.0 + axle.spring_base / axle.track) / 2.0
        levers = axle.motion_ratio * np.array([[near, 1.0 - near], [1.0 - near, near]])
        rates = np.diag(np.array(axle.spring_rates, dtype=float))
        bar = axle.bar_rate * np.array([[1.0, -1.0], [-1.0, 1.0]])
        stiffness[block, block] = levers.T @ rates @ levers + bar
        seats[block, block] = levers.T @ rates
    return stiffness, seats
