"""Load transfer and what the tyres can take: the arithmetic before any launch.

Whole-car figures, both sides together. Slopes are of the force line from the
rear patch, as rise over run.
"""

from __future__ import annotations

from dataclasses import dataclass

from solver.checks import number, positive

GRAVITY = 9.80665


@dataclass(frozen=True)
class AxleLoads:
    """Tyre loads under steady acceleration (N), and what moved rearward."""

    front: float
    rear: float
    transfer: float


@dataclass(frozen=True)
class TractionLimit:
    """Steady acceleration at the rear tyres' grip (m/s^2).

    `acceleration` is what the car can do; `wheels_lift` says that the front
    tyres leave the ground before the rear ones slip, at `lift_acceleration`.
    """

    acceleration: float
    lift_acceleration: float
    wheels_lift: bool


@dataclass(frozen=True)
class NeutralSlopes:
    """Slopes of the force line for a steady hit (dimensionless).

    ``no_squat`` leaves the rear springs alone, ``no_pitch`` keeps the body level.
    """

    no_squat: float
    no_pitch: float


def load_transfer(mass: float, acceleration: float, cg_height: float, wheelbase: float) -> float:
    """Load that moves to the rear tyres: ``m a h/L`` (moments about the front patch).

    Parameters
    ----------
    mass : float
        kg.
    acceleration : float
        Forward, m/s^2.
    cg_height, wheelbase : float
        m.

    Returns
    -------
    float
        N. Barton and Fieldhouse, *Automotive Chassis Engineering* (2018), eq. 3.63.

    Raises
    ------
    ValueError
        When mass, height or wheelbase is not above zero.
    """
    height = positive("the CG height", cg_height, "m")
    length = positive("the wheelbase", wheelbase, "m")
    return (
        positive("the mass of the car", mass, "kg")
        * number("the acceleration", acceleration)
        * height
        / length
    )


def axle_loads(
    mass: float,
    acceleration: float,
    cg_x: float,
    cg_height: float,
    wheelbase: float,
    gravity: float = GRAVITY,
) -> AxleLoads:
    """Axle loads under steady acceleration.

    Parameters
    ----------
    mass, acceleration, cg_height, wheelbase : float
        As `load_transfer`.
    cg_x : float
        CG forward of the rear axle, m.
    gravity : float
        m/s^2.

    Returns
    -------
    AxleLoads

    Raises
    ------
    ValueError
        When a value is out of range, or the front tyres would have left the ground.
    """
    moved = load_transfer(mass, acceleration, cg_height, wheelbase)
    front = mass * gravity * cg_x / wheelbase - moved
    if front < 0.0:
        raise ValueError(
            f"at {acceleration:g} m/s^2 the front tyres are off the ground: steady axle loads"
            " do not exist, run a launch instead."
        )
    return AxleLoads(front=front, rear=mass * gravity - front, transfer=moved)


def traction_limit(
    grip: float, cg_x: float, cg_height: float, wheelbase: float, gravity: float = GRAVITY
) -> TractionLimit:
    """Greatest steady acceleration of a rear-drive car.

    ``a = mu g (a1/L)/(1 - mu h/L)`` with a1 from the front axle to the CG (Jazar,
    *Vehicle Dynamics*), until the front tyres lift at ``a = g (L - a1)/h``.

    Parameters
    ----------
    grip : float
        Coefficient of friction of the rear tyres.
    cg_x : float
        CG forward of the rear axle, m.
    cg_height, wheelbase : float
        m.
    gravity : float
        m/s^2.

    Returns
    -------
    TractionLimit

    Raises
    ------
    ValueError
        When a value is out of range.
    """
    mu = positive("the grip", grip)
    height = positive("the CG height", cg_height, "m")
    length = positive("the wheelbase", wheelbase, "m")
    ahead = positive("the CG's distance from the rear axle", cg_x, "m")
    if ahead >= length:
        raise ValueError(f"the CG is {ahead:g} m forward of the rear axle: it must be behind the front axle.")
    lift = gravity * ahead / height
    room = 1.0 - mu * height / length
    slip = mu * gravity * (length - ahead) / length / room if room > 0.0 else float("inf")
    return TractionLimit(acceleration=min(slip, lift), lift_acceleration=lift, wheels_lift=lift < slip)


def rear_spring_change(
    mass: float, acceleration: float, cg_height: float, wheelbase: float, slope: float
) -> float:
    """Load that the rear springs gain in a steady hit, unsprung mass neglected.

    ``m a (h/L - e/d)`` with ``e/d`` the slope of the force line (Barton and
    Fieldhouse eqs 3.63 to 3.69).

    Parameters
    ----------
    mass, acceleration, cg_height, wheelbase : float
        As `load_transfer`.
    slope : float
        Instant centre's height over its distance ahead of the rear patch.

    Returns
    -------
    float
        N; below zero the springs lengthen (the body separates).

    Raises
    ------
    ValueError
        As `load_transfer`.
    """
    moved = load_transfer(mass, acceleration, cg_height, wheelbase)
    return moved - mass * acceleration * number("the slope", slope)


def neutral_slopes(cg_height: float, wheelbase: float, front_rate: float, rear_rate: float) -> NeutralSlopes:
    """Slopes of the force line for no squat and for no pitch.

    ``h/L`` and ``(1 + kr/kf) h/L`` (Barton and Fieldhouse eqs 3.66 to 3.69).

    Parameters
    ----------
    cg_height, wheelbase : float
        m.
    front_rate, rear_rate : float
        Wheel rates, N/m, in the same sense.

    Returns
    -------
    NeutralSlopes

    Raises
    ------
    ValueError
        When a value is not above zero.
    """
    slope = positive("the CG height", cg_height, "m") / positive("the wheelbase", wheelbase, "m")
    ratio = positive("the rear wheel rate", rear_rate, "N/m") / positive(
        "the front wheel rate", front_rate, "N/m"
    )
    return NeutralSlopes(no_squat=slope, no_pitch=(1.0 + ratio) * slope)
