"""What the scales say: corner weights, centre of gravity, sprung mass.

Masses are kilograms, as scales show them. `x` is forward of the rear axle
centre and `y` is to the left, as everywhere in this package.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from solver.checks import not_negative, positive

CORNER_NAMES = ("front_left", "front_right", "rear_left", "rear_right")


@dataclass(frozen=True)
class Corners:
    """One number for each corner of the car, in the order FL, FR, RL, RR."""

    front_left: float
    front_right: float
    rear_left: float
    rear_right: float

    @classmethod
    def from_array(cls, values: Iterable[float]) -> Corners:
        """Make corners from four numbers in the order FL, FR, RL, RR."""
        return cls(*(float(value) for value in values))

    def as_array(self) -> NDArray[np.float64]:
        """The four numbers as an array of shape (4,), in the order FL, FR, RL, RR."""
        return np.array([self.front_left, self.front_right, self.rear_left, self.rear_right], dtype=float)


@dataclass(frozen=True)
class Weighing:
    """Sums and percentages of four corner weights (kg and percent)."""

    corners: Corners
    total: float
    front: float
    rear: float
    left: float
    right: float
    front_percent: float
    rear_percent: float
    left_percent: float
    cross_weight: float
    cross_percent: float


@dataclass(frozen=True)
class AxleWeights:
    """What each axle's tyres carry, both sides together (kg)."""

    front: float
    rear: float


@dataclass(frozen=True)
class PlanCG:
    """Centre of gravity seen from above (m)."""

    x: float
    y: float
    behind_front_axle: float


@dataclass(frozen=True)
class SprungMass:
    """Mass that the springs carry (kg) and its centre of gravity (m)."""

    mass: float
    x: float
    z: float


def weigh(corners: Corners) -> Weighing:
    """Sum four corner weights and take the percentages a shop works with.

    Parameters
    ----------
    corners : Corners
        Scale readings, kg, all at or above zero.

    Returns
    -------
    Weighing
        ``cross_weight`` is right front plus left rear, the diagonal that the
        trade counts (common practice, no source).

    Raises
    ------
    ValueError
        When a reading is below zero or nothing stands on the scales.
    """
    values = [
        not_negative(f"the {name.replace('_', ' ')} scale reading", getattr(corners, name), "kg")
        for name in CORNER_NAMES
    ]
    front_left, front_right, rear_left, _rear_right = values
    total = positive("the total of the four scale readings", sum(values), "kg")
    front, left = front_left + front_right, front_left + rear_left
    cross = front_right + rear_left
    return Weighing(
        corners=corners,
        total=total,
        front=front,
        rear=total - front,
        left=left,
        right=total - left,
        front_percent=100.0 * front / total,
        rear_percent=100.0 * (total - front) / total,
        left_percent=100.0 * left / total,
        cross_weight=cross,
        cross_percent=100.0 * cross / total,
    )


def cg_from_scales(corners: Corners, wheelbase: float, front_track: float, rear_track: float) -> PlanCG:
    """Centre of gravity seen from above, from level corner weights.

    Moments about the rear axle and about the car's centre line:
    ``x = L W_f / W``, ``y = sum(W_i y_i) / W`` (statics; the same as
    ``a = L W_r / W`` behind the front axle, Jazar, *Vehicle Dynamics*).

    Parameters
    ----------
    corners : Corners
        Scale readings with all four pads level, kg.
    wheelbase : float
        Front to rear axle centre, m; the mean of both sides.
    front_track, rear_track : float
        Between the middles of the tyre patches, m.

    Returns
    -------
    PlanCG

    Raises
    ------
    ValueError
        When a length is not above zero or a reading is below zero.
    """
    weighing = weigh(corners)
    length = positive("the wheelbase", wheelbase, "m")
    half_front = positive("the front track", front_track, "m") / 2.0
    half_rear = positive("the rear track", rear_track, "m") / 2.0
    x = length * weighing.front / weighing.total
    moment = half_front * (corners.front_left - corners.front_right) + half_rear * (
        corners.rear_left - corners.rear_right
    )
    return PlanCG(x=x, y=moment / weighing.total, behind_front_axle=length - x)


def axle_weights(mass: float, cg_x: float, wheelbase: float) -> AxleWeights:
    """Front and rear axle weight (kg) of a car standing level.

    Parameters
    ----------
    mass : float
        Whole car with driver, kg.
    cg_x : float
        CG forward of the rear axle centre, m.
    wheelbase : float
        m.

    Returns
    -------
    AxleWeights
        From moments about the rear axle.

    Raises
    ------
    ValueError
        When mass or wheelbase is not above zero.
    """
    total = positive("the mass of the car", mass, "kg")
    front = total * cg_x / positive("the wheelbase", wheelbase, "m")
    return AxleWeights(front=front, rear=total - front)


def sprung_mass(
    mass: float,
    cg_x: float,
    cg_z: float,
    wheelbase: float,
    front_unsprung: float,
    rear_unsprung: float,
    front_radius: float,
    rear_radius: float,
) -> SprungMass:
    """Take the axles out of the whole car and leave what the springs carry.

    ``m_s = m - m_f - m_r``, ``m_s x_s = m x - m_f L``,
    ``m_s z_s = m h - m_f r_f - m_r r_r``: first moments, with each axle's mass
    at its own centre (statics).

    Parameters
    ----------
    mass, cg_x, cg_z : float
        Whole car with driver: kg, m forward of the rear axle, m above ground.
    wheelbase : float
        m.
    front_unsprung, rear_unsprung : float
        Both sides together, kg.
    front_radius, rear_radius : float
        Axle centre heights at static ride height, m.

    Returns
    -------
    SprungMass

    Raises
    ------
    ValueError
        When the car is lighter than its axles or a value is out of range.
    """
    total = positive("the mass of the car", mass, "kg")
    front = not_negative("the front unsprung mass", front_unsprung, "kg")
    rear = not_negative("the rear unsprung mass", rear_unsprung, "kg")
    length = positive("the wheelbase", wheelbase, "m")
    carried = total - front - rear
    if carried <= 0.0:
        raise ValueError(
            f"the car weighs {total:g} kg and its axles {front + rear:g} kg:"
            " the car must be heavier than its axles."
        )
    moment_x = total * cg_x - front * length
    moment_z = (
        total * cg_z
        - front * positive("the front axle height", front_radius, "m")
        - rear * positive("the rear axle height", rear_radius, "m")
    )
    return SprungMass(mass=carried, x=moment_x / carried, z=moment_z / carried)
