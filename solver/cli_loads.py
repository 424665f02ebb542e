"""``python -m solver loads FILE``: bars against a launch, and the rear tyres left and right."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from solver.car import Car, Hit
from solver.cli_weights import Answer, plain
from solver.faults import CarError, Fault
from solver.loads import BarLoad, LoadReport, loads_of
from solver.roll_plan import LeftRight, greatest_difference, left_right

if TYPE_CHECKING:
    from solver.launching import Launch


def loads_answer(car: Car) -> Answer:
    """What ``python -m solver loads`` answers for a car; solves its launch.

    Raises
    ------
    CarError
        When the car file describes neither bars nor a driveshaft, or the launch
        cannot be solved from it.
    LaunchFailed
        When the run cannot be carried on.
    """
    from solver.launching import launch

    shaft = car.corners is not None and car.corners.driveshaft is not None
    if car.bars is None and not shaft:
        raise CarError(
            [Fault("bars", None, "is missing: loads need bars, or a driveshaft in the corners section")]
        )
    run = launch(car)
    data: dict[str, Any] = {}
    text = []
    if car.bars is not None:
        report = loads_of(car, run)
        data["bars"] = plain(report)
        text.append(bars_text(report))
    if shaft:
        sides = left_right_of(car, run)
        data["rear_tyres"] = plain(sides)
        text.append(left_right_text(sides))
    return Answer(data=data, text="\n\n".join(text))


def left_right_of(car: Car, run: Launch) -> LeftRight:
    """Left and right tyre loads of a car's launch.

    The wheel torque is the run's own where torque drives it, else the hit times the
    rear tyre's radius at ride height.

    Parameters
    ----------
    car : solver.Car
        With a ``corners`` section that describes a driveshaft.
    run : solver.Launch
        Of that car.

    Returns
    -------
    LeftRight

    Raises
    ------
    CarError
        When the section does not describe what the roll plane needs.
    """
    histories = run.histories
    by_force = isinstance(car.hit, Hit)
    torque = histories["hit"] * car.rear.tyre_radius if by_force else histories["wheel_torque"]
    try:
        if car.corners is None:
            raise ValueError("the car file has no corners section.")
        return left_right(
            histories["t"], histories["front_load"], histories["rear_load"], torque, car.corners
        )
    except ValueError as error:
        raise CarError([Fault("corners", None, str(error))]) from None


def bars_text(report: LoadReport) -> str:
    """A short table a person can read, in SI units, the weakest bar first."""
    lines = ["Bars, each"]
    for load in report.bars:
        lines += ["", *_bar_lines(load)]
    stated = report.bars[0].check.allowances
    lines += [
        "",
        f"  Allowances: loads x {stated.dynamic:g}, strengths but buckling x {stated.fatigue:g} ({stated.source})",
        "",
        "Take care",
        *(f"  - {sentence}" for sentence in report.cautions),
    ]
    return "\n".join(lines)


def left_right_text(sides: LeftRight) -> str:
    """Rear tyres left and right, and the preload that evens them."""
    worst = greatest_difference(sides.history)
    lines = [
        "Rear tyres left and right",
        _row("greatest difference", f"{worst.difference:+.0f} N (left more) at {worst.time:.3f} s"),
        _row("part of the torque the front reacts", f"{100 * sides.history.front_share:.0f} %"),
    ]
    if sides.preload is None:
        lines.append(f"  No preload evens them: {sides.reason}")
    else:
        change = sides.preload.change.rear_right
        lines += [
            _row("even at", f"{sides.preload.time:.3f} s with {change:+.1f} kg on the right rear, standing"),
            _row("preload of springs or bar", f"{sides.preload.couple:.0f} N m"),
            _row("cross weight then", f"{sides.preload.cross_percent:.2f} %"),
        ]
    doubts = (*sides.history.doubts, *(sides.preload.doubts if sides.preload else ()), sides.history.caution)
    return "\n".join([*lines, *(f"  - {sentence}" for sentence in doubts)])


def _bar_lines(load: BarLoad) -> list[str]:
    peak, column = load.peak, load.check.column
    lines = [
        f"{load.check.name} ({load.count} share the link's force)",
        _row("standing", f"{peak.standing:+.0f} N, tension positive"),
        _row("greatest tension", _at(peak.tension, peak.tension_time)),
        _row("greatest compression", _at(peak.compression, peak.compression_time)),
        _row("slenderness", f"{column.slenderness:.1f}, changeover {column.changeover:.1f}"),
    ]
    for limit in load.check.limits:
        factor = "no load" if math.isinf(limit.factor) else f"factor {limit.factor:.2f}"
        lines.append(_row(limit.what, f"{factor}   ({limit.strength:.0f} N against {limit.load:.0f} N)"))
    if load.check.governs.factor < 1.0:
        lines.append(f"  OVERLOADED by these allowances: {load.check.governs.what}")
    return lines


def _at(force: float, time: float | None) -> str:
    return f"{force:.0f} N" if time is None else f"{force:.0f} N at {time:.3f} s"


def _row(label: str, text: str) -> str:
    return f"  {label:<48}{text}"
