"""Safety factors of one bar: what it carries, against what, and what governs."""

from __future__ import annotations

import math
from dataclasses import dataclass

from solver.checks import not_negative, positive
from solver.fasteners import thread_strength
from solver.members import CAUTIONS, Allowances, Column, Material, Section, column, tube_section


@dataclass(frozen=True)
class Bar:
    """One link bar as it was made.

    Attributes
    ----------
    name : str
    outside_diameter, wall : float
        Of the tube, m.
    material : Material
    length : float or None
        Between rod-end centres, m; None where it follows from the link's pins.
    count : int
        How many such bars share the link's force.
    fixity, bow : float
        See `solver.members.column`; two rod ends are pinned, 1.
    threads : tuple of Thread
        Tube inserts or shanks in the line of the load.
    rod_ends : tuple of RodEnd
    """

    name: str
    outside_diameter: float
    wall: float
    material: Material
    length: float | None = None
    count: int = 2
    fixity: float = 1.0
    bow: float = 0.0
    threads: tuple = ()
    rod_ends: tuple = ()


@dataclass(frozen=True)
class Limit:
    """One way for a bar to fail.

    Attributes
    ----------
    what : str
    load : float
        Greatest load of that kind, N, the dynamic allowance included.
    strength : float
        N, the fatigue allowance included where it applies.
    factor : float
        Strength over load; infinite without load.
    """

    what: str
    load: float
    strength: float
    factor: float


@dataclass(frozen=True)
class BarCheck:
    """Every limit of one bar, least factor first.

    `tension` and `compression` are the loads as computed, N, before allowances,
    both at or above zero.
    """

    name: str
    tension: float
    compression: float
    column: Column
    limits: tuple
    allowances: Allowances
    cautions: tuple = CAUTIONS

    @property
    def governs(self) -> Limit:
        """The limit with the least factor."""
        return self.limits[0]


def check_bar(bar: Bar, tension: float, compression: float, allowances: Allowances | None = None) -> BarCheck:
    """Safety factors of a bar for its greatest tension and compression.

    Parameters
    ----------
    bar : Bar
    tension, compression : float
        Greatest of each over the run, *per bar*, N, both at or above zero.
    allowances : Allowances or None
        None takes the defaults, which are common practice without a source.

    Returns
    -------
    BarCheck

    Raises
    ------
    ValueError
        When a value of the bar or a load is out of range, naming the bar.
    """
    allowances = allowances or Allowances()
    try:
        if bar.length is None:
            raise ValueError("the length of the bar is not given.")
        pull = not_negative("the tension", tension, "N") * allowances.dynamic
        push = not_negative("the compression", compression, "N") * allowances.dynamic
        section = tube_section(bar.outside_diameter, bar.wall)
        strut = column(section, bar.length, bar.material, bar.fixity, bar.bow)
        limits = _limits(bar, section, strut, pull, push, allowances.fatigue)
    except ValueError as error:
        raise ValueError(f"{bar.name}: {error}") from None
    return BarCheck(
        name=bar.name,
        tension=float(tension),
        compression=float(compression),
        column=strut,
        limits=tuple(sorted(limits, key=lambda limit: limit.factor)),
        allowances=allowances,
    )


def _limits(
    bar: Bar, section: Section, strut: Column, pull: float, push: float, fatigue: float
) -> list[Limit]:
    either = max(pull, push)
    crooked = strut.crooked < strut.ideal
    how = "Perry-Robertson, crooked bar" if crooked else strut.formula
    limits = [
        _limit(f"tube buckles ({how})", push, strut.critical),
        _limit("tube yields", either, section.area * bar.material.yield_strength * fatigue),
    ]
    for number, thread in enumerate(bar.threads, start=1):
        limits.append(_limit(f"thread {number} yields", either, thread_strength(thread) * fatigue))
    for rod_end in bar.rod_ends:
        rating = positive(f"the rating of {rod_end.name}", rod_end.radial_rating, "N")
        limits.append(_limit(f"{rod_end.name}, radial rating", either, rating * fatigue))
        if rod_end.shank is not None:
            strength = thread_strength(rod_end.shank) * fatigue
            limits.append(_limit(f"{rod_end.name}, shank thread", either, strength))
    return limits


def _limit(what: str, load: float, strength: float) -> Limit:
    return Limit(what, load, strength, strength / load if load > 0.0 else math.inf)
