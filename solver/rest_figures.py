"""Ride height by name, for one lane or thousands."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from solver.car import FourLink
from solver.geometry import meeting, parallel
from solver.kernel import layout as L

if TYPE_CHECKING:
    from solver.car import Car


def plan_angles(car: Car) -> tuple[float, float]:
    """Plan angles of the lower and the upper bars, rad; nil for a ladder bar."""
    linkage = car.rear.linkage
    if isinstance(linkage, FourLink):
        return linkage.lower.plan_angle, linkage.upper.plan_angle
    return 0.0, 0.0


def rest_figures(car: Car, p: np.ndarray) -> dict[str, np.ndarray]:
    """Ride height of settled lanes by the names of `STATIC_FIGURES`, arrays (lanes,)."""
    lower = (p[:, L.LCX], p[:, L.LCZ]), (p[:, L.LHX], p[:, L.LHZ])
    upper = (p[:, L.UCX], p[:, L.UCZ]), (p[:, L.UHX], p[:, L.UHZ])
    x, z, w = meeting(*lower, *upper)
    lower_plan, upper_plan = plan_angles(car)
    with np.errstate(divide="ignore", invalid="ignore"):
        centre_x = x / np.where(parallel(*lower, *upper, w), np.nan, w)
        centre_z, slope = centre_x * z / x, z / x
        neutral = p[:, L.CG_Z] / p[:, L.WHEELBASE]
        rear = p[:, L.REAR_MASS]
        axle = np.nan_to_num(rear * p[:, L.REAR_RADIUS] / centre_x)
        # With parallel bars the instant centre is so far off that the axle's part is nil.
        dynamic = ((p[:, L.MASS] - rear) * slope + axle) / (p[:, L.MASS] * neutral)
    return {
        "rear_load": p[:, L.REAR_STATIC] + 0.0,
        "front_load": p[:, L.FRONT_STATIC] + 0.0,
        "rear_spring_force": p[:, L.REAR_SPRING_STATIC] + 0.0,
        "upper_link_force": p[:, L.UPPER_STATIC] / np.cos(upper_plan),
        "lower_link_force": p[:, L.LOWER_STATIC] / np.cos(lower_plan),
        "instant_centre_x": centre_x,
        "instant_centre_z": centre_z,
        "instant_centre_slope": slope,
        "anti_squat": 100.0 * slope / neutral,
        "anti_squat_dynamic": 100.0 * dynamic,
        "upper_bar_length": p[:, L.UPPER_LENGTH] / np.cos(upper_plan),
        "lower_bar_length": p[:, L.LOWER_LENGTH] / np.cos(lower_plan),
    }
