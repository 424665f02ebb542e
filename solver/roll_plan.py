"""Rear tyres left and right over a launch, from a car file's ``corners`` section."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from solver.corner_section import CornerPlan
from solver.corner_springs import Axle
from solver.preload import Preload, cancelling_preload
from solver.roll import RollHistory, roll_history
from solver.roll_stiffness import RollAxle, driveshaft_torque, roll_stiffness


@dataclass(frozen=True)
class LeftRight:
    """Tyre loads left and right of one launch, and the preload that evens the rear.

    ``preload`` is None when none can; ``reason`` says why.
    """

    history: RollHistory
    preload: Preload | None
    reason: str


@dataclass(frozen=True)
class Greatest:
    """A greatest difference (N) and when it comes (s)."""

    time: float
    difference: float


def roll_axle(axle: Axle) -> RollAxle:
    """How an axle of `solver.corner_springs` resists roll.

    Parameters
    ----------
    axle : solver.corner_springs.Axle
        Its anti-roll bar's rate at the wheels b counts as ``b t^2`` in roll (a
        couple of forces b t phi, a track apart).

    Returns
    -------
    RollAxle

    Raises
    ------
    ValueError
        When a value is out of range.
    """
    if axle.spring_rates is None:
        raise ValueError("the axle's springs are not described: its roll stiffness cannot be worked out.")
    base = axle.track if axle.spring_base is None else axle.spring_base
    stiffness = roll_stiffness(
        axle.spring_rates, axle.motion_ratio, base, bar_stiffness=axle.bar_rate * axle.track**2
    )
    return RollAxle(track=axle.track, roll_stiffness=stiffness, tyre_rate=axle.tyre_rate)


def left_right(
    t: ArrayLike, front_load: ArrayLike, rear_load: ArrayLike, wheel_torque: ArrayLike, plan: CornerPlan
) -> LeftRight:
    """Left and right tyre loads of a launch.

    Parameters
    ----------
    t, front_load, rear_load : array_like, shape (n,)
        Of the planar run: s, N.
    wheel_torque : array_like, shape (n,)
        Both wheels together, N m.
    plan : solver.corner_section.CornerPlan
        With both axles' springs and a driveshaft.

    Returns
    -------
    LeftRight

    Raises
    ------
    ValueError
        When the plan describes no driveshaft or springs, or lengths differ.
    """
    if plan.driveshaft is None:
        raise ValueError("the car file's corners section describes no driveshaft.")
    front, rear = roll_axle(plan.front), roll_axle(plan.rear)
    torque = driveshaft_torque(wheel_torque, plan.driveshaft.final_drive)
    rotation = plan.driveshaft.rotation
    history = roll_history(t, front_load, rear_load, torque, plan.measured, front, rear, rotation)
    try:
        preload = cancelling_preload(
            t, front_load, torque, plan.measured, front, rear, plan.driveshaft.even_at, rotation
        )
    except ValueError as error:
        return LeftRight(history=history, preload=None, reason=str(error))
    return LeftRight(history=history, preload=preload, reason="")


def greatest_difference(history: RollHistory) -> Greatest:
    """The greatest difference of the rear tyres over the run, left less right: `Greatest`."""
    index = int(np.argmax(np.abs(history.rear_difference)))
    return Greatest(time=float(history.t[index]), difference=float(history.rear_difference[index]))
