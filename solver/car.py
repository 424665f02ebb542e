"""One car in one setup, as the car file describes it. SI units throughout.

Axes: x forward, z up, origin on the ground below the rear axle at ride height.
Both sides of the car are lumped. Points are ``(x, z)`` tuples; tables are tuples
of pairs.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from solver.corner_section import CornerPlan
    from solver.loads import BarPlan

Point = tuple[float, float]
Table = tuple[tuple[float, float], ...]


@dataclass(frozen=True)
class Spring:
    """A rate in N/m, or a table of (compression, force) from ride height.

    With a motion ratio the rate or table is the spring's own, and the wheel
    sees ``rate * motion_ratio**2``.
    """

    rate: float | None = None
    table: Table | None = None
    motion_ratio: float = 1.0


@dataclass(frozen=True)
class Click:
    """One dyno'd position of an adjuster: (speed, force) of one stroke, both positive."""

    click: float
    table: Table


@dataclass(frozen=True)
class Adjuster:
    """One stroke of an adjustable shock: its dyno'd clicks and where it stands."""

    setting: float
    clicks: tuple[Click, ...]


@dataclass(frozen=True)
class Damper:
    """A rate in N s/m, a table of (velocity, force), or two adjusters' dyno curves."""

    rate: float | None = None
    table: Table | None = None
    compression: Adjuster | None = None
    rebound: Adjuster | None = None
    motion_ratio: float = 1.0


@dataclass(frozen=True)
class Tyre:
    """A pair of tyres as a vertical spring (N/m) and damper (N s/m) that push only.

    Grip, sliding grip (at full slip), slip stiffness (N, both tyres) and relaxation
    length (m) are the driven tyres', for drive torque.
    """

    rate: float
    damping: float
    grip: float | None = None
    sliding_grip: float | None = None
    slip_stiffness: float | None = None
    relaxation_length: float | None = None


@dataclass(frozen=True)
class Stop:
    """A push-only spring and damper met after a clearance from ride height.

    The rate, or a table of (compression past contact, force), for a bump rubber.
    """

    clearance: float
    rate: float | None = None
    damping: float = 0.0
    table: Table | None = None
    chassis: Point | None = None
    housing: Point | None = None


@dataclass(frozen=True)
class Link:
    """A pair of bars between a chassis pin and a housing pin."""

    chassis: Point
    housing: Point
    plan_angle: float = 0.0


@dataclass(frozen=True)
class FourLink:
    """Upper and lower bars."""

    lower: Link
    upper: Link


@dataclass(frozen=True)
class LadderBar:
    """Bars fixed to the housing and pinned to the chassis at one point."""

    chassis: Point


@dataclass(frozen=True)
class RearSpring:
    """A line between two mounts with a spring, a damper or both on it."""

    chassis: Point
    housing: Point
    spring: Spring | None = None
    damper: Damper | None = None


@dataclass(frozen=True)
class Front:
    """Front wheels on a slide along the chassis z axis; rates are wheel rates."""

    unsprung_mass: float
    tyre_radius: float
    spring: Spring
    damper: Damper | None
    tyre: Tyre
    droop_stop: Stop | None = None
    bump_stop: Stop | None = None


@dataclass(frozen=True)
class Rear:
    """The axle: housing and wheels, the links and what stands on them."""

    unsprung_mass: float
    housing_inertia: float
    tyre_radius: float
    linkage: FourLink | LadderBar
    springs: tuple[RearSpring, ...]
    tyre: Tyre
    droop_stop: Stop | None = None
    bump_stop: Stop | None = None
    wheel_inertia: float | None = None


@dataclass(frozen=True)
class WheelieBar:
    """Wheels behind the car: where, how far off the ground, how stiff the bar is."""

    x: float
    clearance: float
    rate: float
    damping: float = 0.0
    mounted_on: str = "chassis"


@dataclass(frozen=True)
class Hit:
    """Drive mode 1: a horizontal force at the rear patch, (time, N)."""

    table: Table


@dataclass(frozen=True)
class WheelTorque:
    """Drive mode 2 from a table of (time, N m), both rear wheels together."""

    table: Table


@dataclass(frozen=True)
class Engine:
    """Full-throttle torque over speed (rad/s, N m), and its speed when the car is let go."""

    curve: Table
    inertia: float
    launch_speed: float


@dataclass(frozen=True)
class Clutch:
    """A slipping clutch: capacity over time (s, N m); locked, it creeps up to `creep` rad/s."""

    capacity: Table
    creep: float = 25.0


@dataclass(frozen=True)
class Converter:
    """A torque converter by its stall point, with its shape over speed ratio.

    Takes ``stall_torque (engine speed / stall_speed)^2 capacity(ratio)`` and passes
    that times ``torque_ratio(ratio)``; both tables over turbine speed / engine speed.
    """

    stall_speed: float
    stall_torque: float
    torque_ratio: Table = ((0.0, 2.0), (0.88, 1.0), (1.0, 1.0))
    capacity: Table = ((0.0, 1.0), (0.88, 0.85), (1.0, 0.0))
    throttle: Table = ((0.0, 1.0), (1.0, 1.0))


@dataclass(frozen=True)
class Gears:
    """Gearbox ratios from first up, the axle's ratio, and when it shifts (input rad/s)."""

    ratios: tuple[float, ...]
    final_drive: float
    shift_speed: float | None = None
    efficiency: float = 1.0


@dataclass(frozen=True)
class Powertrain:
    """Drive mode 2 from an engine through a clutch or a converter and gears."""

    engine: Engine
    coupling: Clutch | Converter
    gears: Gears


@dataclass(frozen=True)
class Run:
    """How long to solve, how often to report (s), and the rollout (m)."""

    duration: float
    output_step: float
    rollout: float = 0.3048


@dataclass(frozen=True)
class Car:
    """Everything one launch needs, and two optional sections that no launch uses.

    ``corners`` is a `solver.corner_section.CornerPlan`, ``bars`` a
    `solver.loads.BarPlan`; see CARFILE.md.
    """

    name: str
    wheelbase: float
    mass: float
    cg: Point
    pitch_inertia: float
    front: Front
    rear: Rear
    hit: Hit | WheelTorque | Powertrain
    run: Run
    wheelie_bar: WheelieBar | None = None
    corners: CornerPlan | None = None
    bars: BarPlan | None = None


def has_engine(car: Car) -> bool:
    """Whether the hit comes from an engine."""
    return isinstance(car.hit, Powertrain)
