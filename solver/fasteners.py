"""Threads and rod ends of a bar."""

from __future__ import annotations

import math
from dataclasses import dataclass

from solver.checks import between, one_of, positive

STRESS_AREA_CONSTANT = {"unified": 0.9743, "metric": 0.9382}


@dataclass(frozen=True)
class Thread:
    """A screw thread in tension.

    Attributes
    ----------
    diameter, pitch : float
        Basic major diameter and pitch, m.
    proof_strength : float
        Stress it may carry, Pa: yield or proof strength of the threaded part.
    form : {'unified', 'metric'}
    """

    diameter: float
    pitch: float
    proof_strength: float
    form: str = "unified"


@dataclass(frozen=True)
class RodEnd:
    """A rod end as its maker rates it.

    Attributes
    ----------
    name : str
    radial_rating : float
        Static radial rating from the maker's sheet, N: the lowest of race, head
        and male shank. Bending of the shank is not in it.
    rating_source : str
        Which sheet it was typed in from.
    shank : Thread or None
    """

    name: str
    radial_rating: float
    rating_source: str
    shank: Thread | None = None


def stress_area(diameter: float, pitch: float, form: str = "unified") -> float:
    """Tensile stress area of a screw thread.

    Unified: ``0.7854 (D - 0.9743/n)^2``, n threads per inch (ASME B1.1).
    Metric: ``0.7854 (d - 0.9382 P)^2`` (ISO 898-1, from memory).

    Parameters
    ----------
    diameter, pitch : float
        Basic major diameter and pitch, m.
    form : {'unified', 'metric'}

    Returns
    -------
    float
        m^2.

    Raises
    ------
    ValueError
        When a value is not above zero or the pitch is too coarse for the thread.
    """
    major = positive("the thread's diameter", diameter, "m")
    step = positive("the thread's pitch", pitch, "m")
    between("the thread's pitch over its diameter", step / major, 0.0, 0.4)
    constant = STRESS_AREA_CONSTANT[one_of("the thread form", form, tuple(STRESS_AREA_CONSTANT))]
    return math.pi / 4.0 * (major - constant * step) ** 2


def thread_strength(thread: Thread) -> float:
    """Tension that a thread carries: stress area times proof strength.

    Parameters
    ----------
    thread : Thread

    Returns
    -------
    float
        N.

    Raises
    ------
    ValueError
        When a value is not above zero.
    """
    strength = positive("the thread's proof strength", thread.proof_strength, "Pa")
    return stress_area(thread.diameter, thread.pitch, thread.form) * strength


def axial_warning(name: str = "rod end") -> str:
    """What to say when a rod end is loaded along its bolt.

    Makers' engineering notes put the axial strength at about a tenth to a fifth
    of the radial rating (published engineering notes).
    """
    return (
        f"The {name}'s rating is radial only: along its bolt it holds about 10 to 20 percent of that,"
        " and bending of its shank is not rated at all."
    )
