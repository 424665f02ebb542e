"""``python -m solver weights FILE``: what the scales say, as text and as plain data."""

from __future__ import annotations

import dataclasses
import math
from typing import Any

import numpy as np

from solver.car import Car
from solver.faults import CarError, Fault
from solver.raised_steps import FittedHeight
from solver.turns import SeatTurns
from solver.weights import CORNER_NAMES, Corners, PlanCG, Weighing
from solver.weights_report import WeightsReport, report_weights


@dataclasses.dataclass(frozen=True)
class Answer:
    """One command's answer: plain data for JSON, and a table a person can read."""

    data: dict[str, Any]
    text: str


HEADS = ("front left", "front right", "rear left", "rear right")


def weights_answer(car: Car) -> Answer:
    """What ``python -m solver weights`` answers for a car.

    Raises
    ------
    CarError
        When the weights contradict each other or a target cannot be met.
    """
    try:
        report = report_weights(car)
    except ValueError as error:
        raise CarError([Fault("corners" if car.corners else "mass", None, str(error))]) from None
    return Answer(data={"weights": plain(report)}, text=weights_text(report))


def weights_text(report: WeightsReport) -> str:
    """A short table a person can read, in SI units."""
    lines = ["Weights", ""]
    lines += _car_lines(report)
    if report.weighing is not None and report.plan_cg is not None:
        lines += ["", *_scale_lines(report.weighing, report.plan_cg)]
    if report.height is not None:
        lines += ["", *_height_lines(report.height)]
    if report.turns is not None and report.target is not None:
        lines += ["", *_turn_lines(report.turns, report.target)]
    for title, sentences in (("Doubts", report.doubts), ("Take care", report.cautions)):
        if sentences:
            lines += ["", title, *(f"  - {sentence}" for sentence in sentences)]
    return "\n".join(lines)


def plain(value: Any) -> Any:
    """A result as dicts, lists and numbers, for JSON; what is not finite becomes null."""
    if dataclasses.is_dataclass(value) and not isinstance(value, type):
        return {field.name: plain(getattr(value, field.name)) for field in dataclasses.fields(value)}
    if isinstance(value, dict):
        return {str(key): plain(item) for key, item in value.items()}
    if isinstance(value, list | tuple | np.ndarray):
        return [plain(item) for item in value]
    if isinstance(value, float | np.floating):
        return float(value) if math.isfinite(value) else None
    if isinstance(value, np.bool_ | np.integer):
        return value.item()
    return value


def _car_lines(report: WeightsReport) -> list[str]:
    sprung, typical = report.sprung, report.typical_inertia
    return [
        _row("front axle load", f"{report.axle_loads.front:.1f} N"),
        _row("rear axle load", f"{report.axle_loads.rear:.1f} N"),
        _row("sprung mass", f"{sprung.mass:.2f} kg"),
        _row("sprung CG ahead of the rear axle", f"{sprung.x:.4f} m"),
        _row("sprung CG above ground", f"{sprung.z:.4f} m"),
        _row("typical pitch inertia", f"{typical.inertia:.0f} +- {typical.spread:.0f} kg m2"),
        f"    ({typical.source})",
    ]


def _scale_lines(weighing: Weighing, plan_cg: PlanCG) -> list[str]:
    return [
        "Corner weights, kg",
        _table_head(),
        _table_row("measured", weighing.corners, ".1f"),
        _row("total", f"{weighing.total:.1f} kg"),
        _row("front / rear", f"{weighing.front_percent:.2f} / {weighing.rear_percent:.2f} %"),
        _row("left", f"{weighing.left_percent:.2f} %"),
        _row("cross weight (right front + left rear)", f"{weighing.cross_percent:.2f} %"),
        _row("CG left of the centre line", f"{plan_cg.y * 1000:.1f} mm"),
    ]


def _height_lines(height: FittedHeight) -> list[str]:
    spread = (
        "no scatter to judge by"
        if math.isnan(height.height_uncertainty)
        else (f"standard uncertainty from scatter {height.height_uncertainty * 1000:.1f} mm")
    )
    return [
        "CG height from the raised readings",
        _row("CG above ground", f"{height.height:.4f} m ({spread})"),
        _row("CG ahead of the rear axle", f"{height.x:.4f} m"),
        _row("down less up, front axle", f"{height.up_down + 0.0:.2f} kg"),
    ]


def _turn_lines(turns: SeatTurns, target: Corners) -> list[str]:
    kept = "ride height kept" if turns.keeps_height else "least turns, ride height moves"
    return [
        f"Spring seats ({kept}); positive raises the corner",
        _table_head(),
        _table_row("turns", turns.turns, "+.2f"),
        _table_row("scales then, kg", turns.corner_weights, ".1f"),
        _table_row("target, kg", target, ".1f"),
        _table_row("body rises, mm", turns.height_change, "+.1f", 1000.0),
        _row("cross weight then", f"{turns.cross_percent:.2f} %"),
    ]


def _row(label: str, text: str) -> str:
    return f"  {label:<40}{text}"


def _table_head() -> str:
    return f"  {'':<20}" + "".join(f"{head:>13}" for head in HEADS)


def _table_row(label: str, corners: Corners, form: str, scale: float = 1.0) -> str:
    values = (getattr(corners, name) * scale for name in CORNER_NAMES)
    # Adding zero turns -0.0 into 0.0, which a person reads as no change.
    return f"  {label:<20}" + "".join(f"{format(round(value, 4) + 0.0, form):>13}" for value in values)
