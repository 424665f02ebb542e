"""Strength of a bar: tube section, buckling, yield and what governs.

Pure statics on numbers typed in: SI, forces in newtons. Allowances for shock
and repeated load are stated, never hidden; see `Allowances`.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from solver.checks import between, not_negative, positive

# End fixity C of Euler's formula (column theory). A bar on rod ends is pinned at both.
END_FIXITY = {"pin-pin": 1.0, "fixed-pin": 2.0, "fixed-fixed": 4.0, "fixed-free": 0.25}

CAUTIONS = (
    (
        "These loads come from a planar model: side load, kerbs, wheel shake, a broken part and a"
        " crash are not in them."
    ),
    "The rulebook in force and local codes come first, whatever is computed here.",
    (
        "Have bars, brackets, welds and threads chosen and made by a qualified fabricator, and use the"
        " rating on the maker's sheet of the very part."
    ),
    "A factor above one is not a promise: look for bends, cracks and worn rod ends before every event.",
)


@dataclass(frozen=True)
class Material:
    """A bar's material: modulus and strengths, Pa, and where they come from."""

    name: str
    modulus: float
    yield_strength: float
    ultimate_strength: float | None = None
    source: str = "typed in"


# Handbook class, from memory: wall to 4.8 mm (0.188 in), 95 and 75 ksi, 29e6 psi.
# There is no entry for DOM tube: sources disagree, so it is typed in.
NORMALISED_4130 = Material(
    "4130 steel tube, normalised",
    modulus=199.9e9,
    yield_strength=517.1e6,
    ultimate_strength=655.0e6,
    source="handbook class, from memory: check against the mill certificate",
)


@dataclass(frozen=True)
class Section:
    """Cross-section of a bar (SI)."""

    outside_diameter: float
    area: float
    second_moment: float
    radius_of_gyration: float


@dataclass(frozen=True)
class Column:
    """How a bar carries compression (N).

    Attributes
    ----------
    slenderness, changeover : float
        Length over radius of gyration, and where Euler takes over from Johnson.
    euler, johnson : float
        Either formula's load.
    ideal : float
        That of the one which holds for this slenderness.
    formula : str
        ``'Euler'`` or ``'Johnson'``.
    crooked : float
        Load at first yield of a bar that is not straight (Perry-Robertson).
    critical : float
        The lower of `ideal` and `crooked`.
    """

    slenderness: float
    changeover: float
    euler: float
    johnson: float
    ideal: float
    formula: str
    crooked: float
    critical: float


@dataclass(frozen=True)
class Allowances:
    """What is added to loads and taken from strengths before a factor is formed.

    Attributes
    ----------
    dynamic : float
        Loads are multiplied by it, for shock that the planar model lacks.
    fatigue : float
        Yield, thread and rod-end strengths are multiplied by it, for repeated
        load; buckling is not.
    source : str
    """

    dynamic: float = 1.5
    fatigue: float = 0.5
    source: str = "common practice, no source"

    def __post_init__(self) -> None:
        between("the dynamic allowance", self.dynamic, 1.0, 10.0)
        between("the fatigue allowance", self.fatigue, 0.05, 1.0)


def tube_section(outside_diameter: float, wall: float) -> Section:
    """Area, second moment and radius of gyration of a round tube.

    Parameters
    ----------
    outside_diameter, wall : float
        m; a wall of half the diameter is a solid bar.

    Returns
    -------
    Section

    Raises
    ------
    ValueError
        When a size is not above zero or the wall is thicker than the tube.
    """
    outside = positive("the outside diameter", outside_diameter, "m")
    thickness = positive("the wall", wall, "m")
    inside = outside - 2.0 * thickness
    if inside < -1e-12:
        raise ValueError(
            f"the wall is {thickness:g} m: a tube of {outside:g} m outside diameter has at most {outside / 2:g} m."
        )
    inside = max(inside, 0.0)
    area = math.pi / 4.0 * (outside**2 - inside**2)
    second = math.pi / 64.0 * (outside**4 - inside**4)
    return Section(outside, area, second, math.sqrt(second / area))


def column(
    section: Section, length: float, material: Material, fixity: float = 1.0, bow: float = 0.0
) -> Column:
    """Compression that a bar carries before it buckles or yields.

    Euler ``C pi^2 E A/(l/k)^2`` above the changeover slenderness
    ``sqrt(2 pi^2 C E/Sy)``, Johnson ``A [Sy - (Sy l/(2 pi k))^2/(C E)]`` below it
    (Shigley, *Mechanical Engineering Design*, from memory). A crooked bar
    yields earlier: Perry-Robertson (Ayrton and Perry 1886, Robertson 1925, from
    memory), the mean stress at which ``s + s (bow c/k^2)/(1 - s/se) = Sy``.

    Parameters
    ----------
    section : Section
    length : float
        Between rod-end centres, m.
    material : Material
    fixity : float
        End fixity C, from `END_FIXITY`; 0.25 to 4.
    bow : float
        How far the middle is off the straight line, m.

    Returns
    -------
    Column

    Raises
    ------
    ValueError
        When a value is out of range.
    """
    long = positive("the length of the bar", length, "m")
    strength = positive("the yield strength", material.yield_strength, "Pa")
    modulus = positive("the modulus", material.modulus, "Pa")
    ends = between("the end fixity", fixity, 0.25, 4.0)
    off = not_negative("the bow of the bar", bow, "m")
    slender = long / section.radius_of_gyration
    changeover = math.sqrt(2.0 * math.pi**2 * ends * modulus / strength)
    stress = ends * math.pi**2 * modulus / slender**2
    johnson = section.area * (strength - (strength * slender / (2.0 * math.pi)) ** 2 / (ends * modulus))
    long_bar = slender > changeover
    ideal = section.area * stress if long_bar else johnson
    crooked = section.area * _perry_robertson(section, strength, stress, off)
    return Column(
        slenderness=slender,
        changeover=changeover,
        euler=section.area * stress,
        johnson=johnson,
        ideal=ideal,
        formula="Euler" if long_bar else "Johnson",
        crooked=crooked,
        critical=min(ideal, crooked),
    )


def _perry_robertson(section: Section, strength: float, euler_stress: float, bow: float) -> float:
    if bow == 0.0:
        return min(strength, euler_stress)
    crookedness = bow * section.outside_diameter / 2.0 / section.radius_of_gyration**2
    half = (strength + (1.0 + crookedness) * euler_stress) / 2.0
    # The smaller root, written so that a nearly straight bar loses no digits.
    return strength * euler_stress / (half + math.sqrt(half**2 - strength * euler_stress))


def per_side(lumped_force: float, bars: int = 2) -> float:
    """One bar's force from that of the planar model, which lumps both sides.

    Parameters
    ----------
    lumped_force : float
        Sum of all bars that share it, N, tension positive.
    bars : int
        How many share it equally; 1 for a single upper bar.

    Returns
    -------
    float
        N. Roll, torque reaction and unequal bars are not in it.

    Raises
    ------
    ValueError
        When `bars` is below one.
    """
    return lumped_force / between("the number of bars", bars, 1, 4)
