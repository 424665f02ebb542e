"""Pitch inertia of the chassis: added up from components, or a typical value."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from solver.checks import not_negative, positive

# The dynamic index k^2/(a b) of a car is near one: common practice, no source.
TYPICAL_DYNAMIC_INDEX = 0.9
TYPICAL_INDEX_SPREAD = 0.2
TYPICAL_SOURCE = (
    "typical value, not measured: k^2 = 0.9 a b with a spread of 0.2 either way (common practice, no source)"
)


@dataclass(frozen=True)
class Component:
    """One part of the car as a block, for adding up pitch inertia.

    Attributes
    ----------
    name : str
    mass : float
        kg.
    x, z : float
        Its own CG, m, in the car's axes.
    length, height : float
        Size along x and z of the block it is taken for, m; zero for a point.
    own_inertia : float or None
        Pitch inertia about its own CG, kg m^2, when it is known better than
        that of the block.
    """

    name: str
    mass: float
    x: float
    z: float
    length: float = 0.0
    height: float = 0.0
    own_inertia: float | None = None


@dataclass(frozen=True)
class Share:
    """One component's part of the pitch inertia (kg m^2)."""

    name: str
    own: float
    offset: float
    total: float


@dataclass(frozen=True)
class PitchInertia:
    """Pitch inertia about the CG, and where the figure comes from.

    Attributes
    ----------
    inertia : float
        kg m^2.
    radius_of_gyration : float
        m.
    mass, x, z : float
        Of the components together, to compare with the scales (kg, m); ``x``
        and ``z`` are None for a typical value.
    spread : float
        Half-width within which the value is expected to lie, kg m^2; zero
        where the list does not say.
    source : str
    shares : tuple of Share
    """

    inertia: float
    radius_of_gyration: float
    mass: float
    x: float | None
    z: float | None
    spread: float
    source: str
    shares: tuple = ()


def pitch_inertia(components: Iterable[Component]) -> PitchInertia:
    """Add up the pitch inertia of a list of components about their common CG.

    Parallel-axis theorem: ``I = sum(I_i + m_i d_i^2)``, with
    ``I_i = m (l^2 + h^2)/12`` for a block (any statics text).

    Parameters
    ----------
    components : sequence of Component
        At least one; leave out the axles when the chassis alone is wanted.

    Returns
    -------
    PitchInertia

    Raises
    ------
    ValueError
        When the list is empty or a component's mass or size is out of range.
    """
    parts = list(components)
    if not parts:
        raise ValueError("the list of components is empty: at least one is needed.")
    for part in parts:
        positive(f"the mass of {part.name}", part.mass, "kg")
    mass = sum(part.mass for part in parts)
    x = sum(part.mass * part.x for part in parts) / mass
    z = sum(part.mass * part.z for part in parts) / mass
    shares = tuple(_share(part, x, z) for part in parts)
    inertia = sum(share.total for share in shares)
    return PitchInertia(
        inertia=inertia,
        radius_of_gyration=(inertia / mass) ** 0.5,
        mass=mass,
        x=x,
        z=z,
        spread=0.0,
        source="added up from components",
        shares=shares,
    )


def _share(part: Component, x: float, z: float) -> Share:
    if part.own_inertia is None:
        length = not_negative(f"the length of {part.name}", part.length, "m")
        height = not_negative(f"the height of {part.name}", part.height, "m")
        own = part.mass * (length**2 + height**2) / 12.0
    else:
        own = not_negative(f"the own inertia of {part.name}", part.own_inertia, "kg m^2")
    offset = part.mass * ((part.x - x) ** 2 + (part.z - z) ** 2)
    return Share(name=part.name, own=own, offset=offset, total=own + offset)


def typical_pitch_inertia(mass: float, cg_x: float, wheelbase: float) -> PitchInertia:
    """A typical pitch inertia, for a car that was never measured.

    ``I = 0.9 m a b``, with a and b from the CG to the axles: the dynamic index
    ``k^2/(a b)`` of road cars lies near one (common practice, no source). The
    result carries its spread, so that a launch can show what it is worth.

    Parameters
    ----------
    mass : float
        Sprung mass, kg.
    cg_x : float
        Sprung CG forward of the rear axle, m.
    wheelbase : float
        m.

    Returns
    -------
    PitchInertia

    Raises
    ------
    ValueError
        When the CG is not between the axles or a value is out of range.
    """
    carried = positive("the sprung mass", mass, "kg")
    length = positive("the wheelbase", wheelbase, "m")
    if not 0.0 < cg_x < length:
        raise ValueError(
            f"the sprung CG is {cg_x:g} m forward of the rear axle: for a typical pitch"
            f" inertia it must lie between the axles, from 0 to {length:g} m."
        )
    square = cg_x * (length - cg_x)
    return PitchInertia(
        inertia=TYPICAL_DYNAMIC_INDEX * carried * square,
        radius_of_gyration=(TYPICAL_DYNAMIC_INDEX * square) ** 0.5,
        mass=carried,
        x=None,
        z=None,
        spread=TYPICAL_INDEX_SPREAD * carried * square,
        source=TYPICAL_SOURCE,
    )
