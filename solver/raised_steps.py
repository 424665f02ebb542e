"""CG height from several raised readings, up and down again (ISO 10392)."""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from solver.checks import between, one_of, positive
from solver.raised_end import CAUTION


@dataclass(frozen=True)
class RaisedStep:
    """One step of a raised-end weighing.

    Attributes
    ----------
    angle : float
        Pitch from level, rad, zero or above.
    raised : {'front', 'rear'}
    front, rear : float or None
        Axle readings, kg; one may be missing, not both.
    way : {'up', 'down'}
        Whether the car was on its way up or down when it was read.
    """

    angle: float
    raised: str
    front: float | None = None
    rear: float | None = None
    way: str = "up"


@dataclass(frozen=True)
class FittedHeight:
    """CG from a straight-line fit of several raised readings.

    Attributes
    ----------
    height, x : float
        CG above ground and forward of the rear axle, m.
    height_uncertainty, x_uncertainty : float
        Standard uncertainties from the scatter about the line, m; NaN when
        there are no more readings than unknowns. What the scales, angle and
        lengths add on their own is not in them.
    residuals : ndarray, shape (n,)
        Front axle's load less the line, kg, one a step in the order given.
    scatter : float
        Standard deviation of the residuals with n - 2 degrees of freedom, kg.
    up_down : float
        Mean residual on the way down less on the way up, kg at the front axle:
        the friction and creep that the method cannot see otherwise. Zero when
        only one way was read.
    doubts : tuple of str
    """

    height: float
    x: float
    height_uncertainty: float
    x_uncertainty: float
    residuals: np.ndarray
    scatter: float
    up_down: float
    doubts: tuple
    caution: str = CAUTION


def fit_raised_steps(
    steps: Iterable[RaisedStep], mass: float, wheelbase: float, front_radius: float, rear_radius: float
) -> FittedHeight:
    """Fit the CG height to readings at several angles.

    ISO 10392 fits load against tan(angle). With unequal radii the load alone is
    not quite a straight line, but ``y = (Ff/W)[L - (Rf - Rr) t]``, t the tangent
    of the nose-up pitch, is: ``y = x - (h - Rr) t``. That is fitted, by least
    squares, to the mean of both axles' readings where both were taken.

    Parameters
    ----------
    steps : sequence of RaisedStep
        At least two different angles; level counts as one.
    mass : float
        Whole car, kg.
    wheelbase, front_radius, rear_radius : float
        m; radii are wheel centre heights at level.

    Returns
    -------
    FittedHeight

    Raises
    ------
    ValueError
        When there are too few angles, a step has no reading, or a reading is
        out of range.
    """
    for name, value, unit in (
        ("the mass of the car", mass, "kg"),
        ("the wheelbase", wheelbase, "m"),
        ("the front loaded radius", front_radius, "m"),
        ("the rear loaded radius", rear_radius, "m"),
    ):
        positive(name, value, unit)
    steps = list(steps)
    tangents = np.array([_tangent(number, step) for number, step in enumerate(steps, start=1)])
    loads = np.array([_front_load(number, step, mass) for number, step in enumerate(steps, start=1)])
    if len(np.unique(np.round(tangents, 6))) < 2:
        raise ValueError(
            "the readings are all at one angle: at least two different angles are needed,"
            " and ISO 10392 asks for three or more."
        )
    base = wheelbase - (front_radius - rear_radius) * tangents
    # Divided by the base, the line is one of loads, and each step's scale is as good as another's.
    matrix = np.column_stack([np.ones_like(tangents), -tangents]) / base[:, None] * mass
    solution = np.linalg.lstsq(matrix, loads, rcond=None)[0]
    residuals = loads - matrix @ solution
    freedom = len(steps) - 2
    scatter = math.sqrt(float(residuals @ residuals) / freedom) if freedom else math.nan
    covariance = np.linalg.inv(matrix.T @ matrix) * scatter**2
    return FittedHeight(
        height=float(solution[1] + rear_radius),
        x=float(solution[0]),
        height_uncertainty=math.sqrt(covariance[1, 1]) if freedom else math.nan,
        x_uncertainty=math.sqrt(covariance[0, 0]) if freedom else math.nan,
        residuals=residuals,
        scatter=scatter,
        up_down=_up_down(residuals, [step.way for step in steps]),
        doubts=_doubts(steps),
    )


def _tangent(number: int, step: RaisedStep) -> float:
    """Tangent of the nose-up pitch of one step."""
    one_of(f"the raised end of step {number}", step.raised, ("front", "rear"))
    one_of(f"the way of step {number}", step.way, ("up", "down"))
    degrees = between(f"the angle of step {number}", math.degrees(step.angle), 0.0, 45.0, "degrees")
    return math.tan(math.radians(degrees)) * (1.0 if step.raised == "front" else -1.0)


def _front_load(number: int, step: RaisedStep, mass: float) -> float:
    """The front axle's load at one step, from its own reading, the rear's, or the mean of both."""
    found = []
    if step.front is not None:
        found.append(between(f"the front reading of step {number}", step.front, 0.0, mass, "kg"))
    if step.rear is not None:
        found.append(mass - between(f"the rear reading of step {number}", step.rear, 0.0, mass, "kg"))
    if not found:
        raise ValueError(f"step {number} has no reading: give the front axle's, the rear's or both.")
    return sum(found) / len(found)


def _up_down(residuals: NDArray[np.float64], ways: list[str]) -> float:
    down = [value for value, way in zip(residuals, ways, strict=True) if way == "down"]
    up = [value for value, way in zip(residuals, ways, strict=True) if way == "up"]
    return float(np.mean(down) - np.mean(up)) if up and down else 0.0


def _doubts(steps: list[RaisedStep]) -> tuple[str, ...]:
    doubts = []
    angles = {round(step.angle, 6) for step in steps if step.angle > 0.0}
    if len(angles) < 3:
        doubts.append("Fewer than three raised steps: ISO 10392 asks for three or more.")
    if {step.way for step in steps} != {"up", "down"}:
        doubts.append("Read on one way only: ISO 10392 asks for the steps up and down again.")
    if any(step.front is None or step.rear is None for step in steps):
        doubts.append("Only one axle was read at some steps: reading both is better.")
    return tuple(doubts)
