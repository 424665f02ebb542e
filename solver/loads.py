"""From the link forces of a launch to the safety factors of its bars."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import ArrayLike

from solver.bar_check import Bar, BarCheck, check_bar
from solver.car import Car, FourLink, Link
from solver.checks import between
from solver.members import CAUTIONS, Allowances

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
    sees that sign. ``standing`` is the force at the first instant, tension
    positive.
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


def peak_load(t: ArrayLike, force: ArrayLike, count: int = 2) -> PeakLoad:
    """Greatest tension and compression of one bar from the lumped link force.

    Parameters
    ----------
    t : array_like, shape (n,)
        s.
    force : array_like, shape (n,)
        Sum over the bars of one height along the bar, N, tension positive.
    count : int
        Bars that share it.

    Returns
    -------
    PeakLoad

    Raises
    ------
    ValueError
        When lengths differ, a force is not finite, or the count is not 1 to 4.
    """
    share = between("the number of bars", count, 1, 4)
    times, each = np.asarray(t, dtype=float), np.asarray(force, dtype=float) / share
    if times.ndim != 1 or times.shape != each.shape or times.size == 0:
        raise ValueError("times and link forces must be of one length, one sample or more.")
    if not np.all(np.isfinite(each)):
        raise ValueError("a link force of this run is not a finite number: the run has no answer there.")
    high, low = int(np.argmax(each)), int(np.argmin(each))
    pull, push = max(float(each[high]), 0.0), max(-float(each[low]), 0.0)
    return PeakLoad(
        tension=pull,
        tension_time=float(times[high]) if pull > 0.0 else None,
        compression=push,
        compression_time=float(times[low]) if push > 0.0 else None,
        standing=float(each[0]),
    )


def bar_loads(
    t: ArrayLike,
    forces: Mapping[str, ArrayLike],
    bars: Mapping[str, Bar],
    allowances: Allowances | None = None,
) -> LoadReport:
    """Check every bar against its greatest loads in a run.

    Parameters
    ----------
    t : array_like, shape (n,)
        s.
    forces : dict of str to array_like, each of shape (n,)
        Lumped force along the bar by height (``'lower'``, ``'upper'``), N.
    bars : dict of str to Bar
        By the same names; each with its length.
    allowances : solver.members.Allowances or None
        None takes the defaults, common practice without a source.

    Returns
    -------
    LoadReport

    Raises
    ------
    ValueError
        When a bar has no force in this run, or a value is out of range.
    """
    stated = allowances or Allowances()
    found = []
    for name, bar in bars.items():
        if name not in forces:
            raise ValueError(f"the run has no link called {name!r}: there are {', '.join(forces)}.")
        peak = peak_load(t, forces[name], bar.count)
        check = check_bar(bar, peak.tension, peak.compression, stated)
        found.append(BarLoad(name=name, count=bar.count, peak=peak, check=check))
    return LoadReport(bars=tuple(sorted(found, key=lambda load: load.check.governs.factor)))


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


def loads_of(car: Car, run: Launch) -> LoadReport:
    """Check a car's described bars against one of its launches.

    Peaks are those read at every step of the run, not at its reports.

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
    found = []
    for name, bar in with_lengths(car.bars, car.rear.linkage).items():
        peak = _peak_of_figures(run, name, bar.count)
        check = check_bar(bar, peak.tension, peak.compression, car.bars.allowances)
        found.append(BarLoad(name=name, count=bar.count, peak=peak, check=check))
    return LoadReport(bars=tuple(sorted(found, key=lambda load: load.check.governs.factor)))


def _peak_of_figures(run: Launch, name: str, count: int) -> PeakLoad:
    most, least = run.figures[f"{name}_link_tension"], run.figures[f"{name}_link_compression"]
    pull, push = max(most, 0.0) / count, max(-least, 0.0) / count
    return PeakLoad(
        tension=pull,
        tension_time=run.figures[f"{name}_link_tension_time"] if pull > 0.0 else None,
        compression=push,
        compression_time=run.figures[f"{name}_link_compression_time"] if push > 0.0 else None,
        standing=getattr(run.statics, f"{name}_link_force") / count,
    )
