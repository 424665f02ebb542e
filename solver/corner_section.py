"""The car file's optional ``corners`` section: what the four scales say, and how the seats turn."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

from solver.corner_springs import Axle
from solver.raised_steps import RaisedStep
from solver.reading import Section, checked_number
from solver.weights import CORNER_NAMES, Corners

MAX_STEPS = 40


@dataclass(frozen=True)
class Driveshaft:
    """What the roll plane needs of the driveline.

    ``even_at`` is the time at which the rear tyres should carry alike, s; None
    for the time of the greatest torque.
    """

    final_drive: float
    rotation: str = "standard"
    even_at: float | None = None


@dataclass(frozen=True)
class CornerPlan:
    """The section as read.

    Attributes
    ----------
    measured : Corners
        kg.
    front, rear : solver.corner_springs.Axle
    target : Corners or None
    target_cross_percent : float or None
    keep_height : bool
    raised : tuple of RaisedStep
    driveshaft : Driveshaft or None
    """

    measured: Corners
    front: Axle
    rear: Axle
    target: Corners | None = None
    target_cross_percent: float | None = None
    keep_height: bool = True
    raised: tuple = ()
    driveshaft: Driveshaft | None = None

    @property
    def has_target(self) -> bool:
        """Whether corner weights are aimed at."""
        return self.target is not None or self.target_cross_percent is not None


def read_corners(section: Section | None) -> CornerPlan | None:
    """Read the section.

    Parameters
    ----------
    section : solver.reading.Section or None

    Returns
    -------
    CornerPlan or None
        None without the section; only of use when the section found no faults.
    """
    if section is None:
        return None
    measured = _corners(section.section("measured"))
    front, rear = _axle(section.section("front")), _axle(section.section("rear"))
    options: dict[str, Any] = {
        "target": _corners(section.optional_section("target")),
        "target_cross_percent": section.optional_number("target_cross_percent", 0.0, 100.0, "percent"),
        "keep_height": _flag(section, "keep_height"),
        "raised": tuple(_step(part) for part in _list(section, "raised")),
        "driveshaft": _driveshaft(section.optional_section("driveshaft")),
    }
    section.refuse_the_rest()
    if measured is None or front is None or rear is None:
        return None
    plan = CornerPlan(measured, front, rear, **options)
    _check_whole(section, plan)
    return plan


def _check_whole(section: Section, plan: CornerPlan) -> None:
    if plan.target is not None and plan.target_cross_percent is not None:
        section.fault(
            "target_cross_percent", plan.target_cross_percent, "stands beside a target: give one of the two"
        )
    axles = {"front": plan.front, "rear": plan.rear}
    for name, axle in axles.items():
        if axle.spring_rates is None and (plan.has_target or plan.driveshaft is not None):
            wanted = "spring seats" if plan.has_target else "the roll plane"
            section.fault(f"{name}.spring_rates", None, f"is missing: {wanted} cannot be worked out without")
        if axle.thread_pitch is None and plan.has_target and axle.adjustable:
            section.fault(f"{name}.thread_pitch", None, "is missing: give it, or adjustable as false")
    adjustable = [axle.adjustable for axle in axles.values()]
    if plan.has_target and not any(adjustable):
        section.fault("", None, "aims at a target, and neither axle is adjustable")
    elif plan.has_target and plan.keep_height and not all(adjustable):
        section.fault("keep_height", True, "takes seats that turn at all four corners")
    if sum(plan.measured.as_array()) == 0.0:
        section.fault("measured", None, "is nothing at all four corners")


def _corners(part: Section | None) -> Corners | None:
    if part is None:
        return None
    values = [part.number(name, 0.0, 10_000.0, "kg") for name in CORNER_NAMES]
    part.refuse_the_rest()
    return Corners(*values)


def _flag(section: Section, key: str) -> bool:
    if not section.has(key):
        return True
    value = section.data[key]
    if not isinstance(value, bool):
        section.fault(key, value, "must be true or false")
        return True
    return value


def _list(section: Section, key: str) -> list[Section]:
    return section.sections(key, 0, MAX_STEPS) if section.has(key) else []


def _axle(part: Section | None) -> Axle | None:
    if part is None:
        return None
    axle = Axle(
        track=part.number("track", 0.5, 4.0, "m"),
        spring_rates=_pair(part),
        motion_ratio=part.number("motion_ratio", 0.05, 5.0, "", default=1.0),
        thread_pitch=part.optional_number("thread_pitch", 1e-4, 0.02, "m"),
        tyre_rate=part.optional_number("tyre_rate", 1e4, 5e6, "N/m"),
        bar_rate=part.number("bar_rate", 0.0, 1e6, "N/m", default=0.0),
        spring_base=part.optional_number("spring_base", 0.1, 4.0, "m"),
        adjustable=_flag(part, "adjustable"),
    )
    part.refuse_the_rest()
    return axle


def _pair(part: Section) -> tuple[float, ...] | None:
    """Left and right spring rate as ``[left, right]`` in N/m."""
    if not part.has("spring_rates"):
        return None
    value = part.data["spring_rates"]
    if not isinstance(value, list | tuple) or len(value) != 2:
        part.fault("spring_rates", value, "must be two rates [left, right] in N/m")
        return (math.nan, math.nan)
    where = part.at("spring_rates")
    return tuple(
        checked_number(rate, f"{where}.{place}", 100.0, 5e6, "N/m", part.faults)
        for place, rate in enumerate(value)
    )


def _step(part: Section) -> RaisedStep:
    step = RaisedStep(
        angle=part.number("angle", 0.0, round(math.pi / 4, 4), "rad"),
        raised=part.choice("raised", ("front", "rear")),
        front=part.optional_number("front", 0.0, 20_000.0, "kg"),
        rear=part.optional_number("rear", 0.0, 20_000.0, "kg"),
        way=part.choice("way", ("up", "down"), default="up"),
    )
    part.refuse_the_rest()
    if step.front is None and step.rear is None:
        part.fault("", None, "has no reading: the front axle's, the rear's or both are needed")
    return step


def _driveshaft(part: Section | None) -> Driveshaft | None:
    if part is None:
        return None
    shaft = Driveshaft(
        final_drive=part.number("final_drive", 0.5, 20.0, ""),
        rotation=part.choice("rotation", ("standard", "reverse"), default="standard"),
        even_at=part.optional_number("even_at", 0.0, 60.0, "s"),
    )
    part.refuse_the_rest()
    return shaft
