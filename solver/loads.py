"""From the link forces of a launch to the safety factors of its bars."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from solver.bar_check import Bar, BarCheck, check_bar
from solver.car import Car, FourLink, Link
from solver.fasteners import axial_warning
from solver.members import CAUTIONS, Allowances, per_side

if TYPE_CHECKING:
    from solver.launching import Launch

SHARING = (
    "The force of the planar model is shared alike by the bars of one height; torque reaction, a panhard"
    " bar and a bent housing share it unevenly."
)


@dataclass(frozen=True)
class BarPlan:
    """What a car's bars are made of, and the allowances to hold them against.

    The car file's optional ``bars`` section; a height without a description is
    None.
    """

    lower: Bar | None = None
    upper: Bar | None = None
    allowances: Allowances = field(default_factory=Allowances)


@dataclass(frozen=True)
class PeakLoad:
    """Greatest tension and compression of one bar over a run.

    Both are N per bar, at or above zero; times in s, None where the bar never
    sees that sign. ``standing`` is the force at ride height, tension positive.
    """

    tension: float
    tension_time: float | None
    compression: float
    compression_time: float | None
    standing: float


@dataclass(frozen=True)
class BarLoad:
    """One height's bars over a run: peaks per bar, and the check against them."""

    name: str
    count: int
    peak: PeakLoad
    check: BarCheck


@dataclass(frozen=True)
class LoadReport:
    """All bars of a run, the least safety factor first."""

    bars: tuple
    cautions: tuple = (*CAUTIONS, SHARING)


def link_length(link: Link) -> float:
    """Centre-to-centre length of a bar between its pins, its plan angle counted, m.

    Parameters
    ----------
    link : solver.car.Link

    Returns
    -------
    float
    """
    seen = math.dist(link.chassis, link.housing)
    return seen / math.cos(link.plan_angle)


def with_lengths(plan: BarPlan, linkage: FourLink) -> dict[str, Bar]:
    """The described bars by name, each with its length.

    Parameters
    ----------
    plan : BarPlan
    linkage : solver.car.FourLink

    Returns
    -------
    dict of str to Bar
    """
    described = {"lower": plan.lower, "upper": plan.upper}
    return {
        name: bar if bar.length is not None else replace(bar, length=link_length(getattr(linkage, name)))
        for name, bar in described.items()
        if bar is not None
    }


def bar_loads(
    plan: BarPlan,
    linkage: FourLink,
    figures: Mapping[str, float | None],
    standing: Mapping[str, float],
) -> LoadReport:
    """Check every described bar against its greatest loads in a run.

    Parameters
    ----------
    plan : BarPlan
    linkage : solver.car.FourLink
        For the lengths that the plan does not state.
    figures : dict of str to float or None
        Of a launch: ``lower_link_tension`` and so on with their times, lumped over
        the bars of one height, tension positive, as `solver.figures` names them.
        Read at every step of the run, not at its reports.
    standing : dict of str to float
        Lumped force at ride height by ``'lower'`` and ``'upper'``, N.

    Returns
    -------
    LoadReport

    Raises
    ------
    ValueError
        When the run has no figure for a bar, or a value of a bar is out of range.
    """
    found, described = [], with_lengths(plan, linkage)
    for name, bar in described.items():
        peak = peak_load(figures, standing[name], name, bar.count)
        check = check_bar(bar, peak.tension, peak.compression, plan.allowances)
        found.append(BarLoad(name=name, count=bar.count, peak=peak, check=check))
    return LoadReport(
        bars=tuple(sorted(found, key=lambda load: load.check.governs.factor)),
        cautions=(
            *CAUTIONS,
            SHARING,
            *((axial_warning(),) if any(bar.rod_ends for bar in described.values()) else ()),
        ),
    )


def peak_load(figures: Mapping[str, float | None], standing: float, name: str, count: int = 2) -> PeakLoad:
    """Greatest tension and compression of one bar out of `count` that share a link's force.

    Parameters
    ----------
    figures : dict of str to float or None
        As `bar_loads`.
    standing : float
        Lumped force at ride height, N.
    name : {'lower', 'upper'}
    count : int
        Bars that share it, 1 to 4.

    Returns
    -------
    PeakLoad

    Raises
    ------
    ValueError
        When the run has no figure for this link.
    """
    most, least = figures.get(f"{name}_link_tension"), figures.get(f"{name}_link_compression")
    if most is None or least is None:
        raise ValueError(f"the run has no greatest loads of the {name} bars.")
    pull, push = max(per_side(most, count), 0.0), max(-per_side(least, count), 0.0)
    return PeakLoad(
        tension=pull,
        tension_time=figures.get(f"{name}_link_tension_time") if pull > 0.0 else None,
        compression=push,
        compression_time=figures.get(f"{name}_link_compression_time") if push > 0.0 else None,
        standing=per_side(standing, count),
    )


def loads_of(car: Car, run: Launch) -> LoadReport:
    """Check a car's described bars against one of its launches.

    Parameters
    ----------
    car : solver.Car
        With its optional ``bars`` section.
    run : solver.Launch
        Of that car.

    Returns
    -------
    LoadReport

    Raises
    ------
    ValueError
        When the car file does not describe its bars.
    """
    if car.bars is None or not isinstance(car.rear.linkage, FourLink):
        raise ValueError("the car file describes no four-link bars: give its bars section.")
    standing = {"lower": run.statics.lower_link_force, "upper": run.statics.upper_link_force}
    return bar_loads(car.bars, car.rear.linkage, run.figures, standing)
