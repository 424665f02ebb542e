"""CG height by the raised-end method.

One end of the car is lifted with the suspension blocked solid, and the load
that moves to the other end tells how high the CG is. With the suspension
blocked the wheel centres are points of the body, the patches stay below them,
and the result is exact for front and rear tyres of different radius:

    (Ff/W) [L cos(p) - (Rf - Rr) sin(p)] = x cos(p) - (h - Rr) sin(p)

with p the pitch from level, nose up, x the CG forward of the rear axle and Rf,
Rr the loaded radii *at level* (moments about the rear patch). SAE 2004-01-1076
warns that many formulas mishandle unequal radii; this is the exact form.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from solver.checks import between, not_negative, one_of, positive

SMALL_ANGLE = math.radians(5.0)
CAUTION = (
    "A raised car can fall: block the wheels that stay down, use stands rated for the load,"
    " keep everyone out from under it, and follow the lift's instructions."
)


@dataclass(frozen=True)
class LevelCar:
    """The car standing level on the scales, suspension blocked.

    Attributes
    ----------
    front, rear : float
        Axle scale readings, kg.
    wheelbase : float
        m.
    front_radius, rear_radius : float
        Wheel centre heights above the pads, m.
    """

    front: float
    rear: float
    wheelbase: float
    front_radius: float
    rear_radius: float

    def __post_init__(self) -> None:
        not_negative("the front axle weight", self.front, "kg")
        not_negative("the rear axle weight", self.rear, "kg")
        positive("the weight of the car", self.front + self.rear, "kg")
        positive("the wheelbase", self.wheelbase, "m")
        positive("the front loaded radius", self.front_radius, "m")
        positive("the rear loaded radius", self.rear_radius, "m")

    @property
    def mass(self) -> float:
        """Both axles together, kg."""
        return self.front + self.rear

    @property
    def cg_x(self) -> float:
        """CG forward of the rear axle, m."""
        return self.wheelbase * self.front / self.mass


@dataclass(frozen=True)
class CGHeight:
    """CG height (m) from one raised reading.

    ``load_moved`` is what the axle that stayed down gained, kg; ``angle`` is the
    pitch from level, rad, as a size; ``doubts`` are sentences to show.
    """

    height: float
    angle: float
    load_moved: float
    doubts: tuple
    caution: str = CAUTION


def raised_angle(car: LevelCar, raised: str, rise: float) -> float:
    """Pitch of the chassis from level, from the rise of the raised wheel centres.

    The line between the wheel centres turns about the centre that stays, so the
    angle is exact for unequal radii and large angles (plane geometry).

    Parameters
    ----------
    car : LevelCar
    raised : {'front', 'rear'}
    rise : float
        How far the raised wheel *centre* rose against the centre of the other
        end, m, above zero. Measured from the pads it is only right when neither
        tyre changed its deflection: see `centre_rise`.

    Returns
    -------
    float
        rad, above zero.

    Raises
    ------
    ValueError
        When the rise is not above zero or more than the wheelbase allows.
    """
    one_of("the raised end", raised, ("front", "rear"))
    positive("the rise of the wheel centre", rise, "m")
    step = car.front_radius - car.rear_radius
    if raised == "rear":
        step = -step
    line = math.hypot(car.wheelbase, step)
    if step + rise >= line:
        raise ValueError(
            f"the rise of the wheel centre is {rise:g} m: with a wheelbase of"
            f" {car.wheelbase:g} m it must be below {line - step:g} m."
        )
    return math.asin((step + rise) / line) - math.asin(step / line)


def centre_rise(
    pad_rise: float,
    raised_radius: float,
    raised_radius_now: float,
    standing_radius: float,
    standing_radius_now: float,
) -> float:
    """Rise of the raised wheel centre when the pads' heights were measured.

    The standing tyres squash a little more as the load moves to them and the
    raised ones less: ISO 10392 asks for this correction when the angle comes
    from heights.

    Parameters
    ----------
    pad_rise : float
        How far the raised pads stand above the others, m.
    raised_radius, raised_radius_now : float
        Loaded radius of the raised end, level and raised, m.
    standing_radius, standing_radius_now : float
        The same at the end that stayed down, m.

    Returns
    -------
    float
        m.

    Raises
    ------
    ValueError
        When a radius is not above zero.
    """
    for name, value in (
        ("the raised end's level radius", raised_radius),
        ("the raised end's radius when raised", raised_radius_now),
        ("the standing end's level radius", standing_radius),
        ("the standing end's radius when raised", standing_radius_now),
    ):
        positive(name, value, "m")
    return pad_rise + (raised_radius_now - raised_radius) - (standing_radius_now - standing_radius)


def cg_height(car: LevelCar, raised: str, standing_load: float, angle: float) -> CGHeight:
    """CG height from one reading with one end raised.

    Front raised: ``h = Rr + [x - (Ff/W) L] cot(p) + (Ff/W)(Rf - Rr)``; rear
    raised: the same with the ends exchanged. Moments about the standing patch;
    checked against the exact table for radii of 13 and 16 in in the tests.

    Parameters
    ----------
    car : LevelCar
    raised : {'front', 'rear'}
    standing_load : float
        Scale reading of the axle that stayed down, kg.
    angle : float
        Pitch of the chassis from level, rad, above zero and below 45 degrees.

    Returns
    -------
    CGHeight
        Above the ground with the car level.

    Raises
    ------
    ValueError
        When a value is out of range or the height comes out below the ground.
    """
    one_of("the raised end", raised, ("front", "rear"))
    between("the angle in degrees", math.degrees(angle), 0.01, 45.0)
    mass, length = car.mass, car.wheelbase
    between("the standing axle's reading", standing_load, 0.0, mass, "kg")
    # Everything below is written for the end that stayed down.
    if raised == "front":
        level, stays, lifts, from_raised = car.rear, car.rear_radius, car.front_radius, length - car.cg_x
    else:
        level, stays, lifts, from_raised = car.front, car.front_radius, car.rear_radius, car.cg_x
    share = (mass - standing_load) / mass
    arm = length - from_raised - share * length
    height = stays + arm / math.tan(angle) + share * (lifts - stays)
    if height <= 0.0:
        raise ValueError(
            f"the CG height comes out at {height:g} m, below the ground: look again at the"
            f" readings. The axle that stayed down went from {level:g} to {standing_load:g} kg,"
            " and it should gain weight."
        )
    return CGHeight(
        height=height,
        angle=angle,
        load_moved=standing_load - level,
        doubts=_doubts(height, angle, standing_load - level, min(stays, lifts)),
    )


def _doubts(height: float, angle: float, moved: float, radius: float) -> tuple[str, ...]:
    doubts = []
    if angle < SMALL_ANGLE:
        doubts.append(
            f"The car was raised only {math.degrees(angle):.1f} degrees: below 5 degrees a"
            " small error of a scale becomes a large one of the height."
        )
    if moved <= 0.0:
        doubts.append(
            "The axle that stayed down did not gain weight, so the CG comes out no higher"
            " than the wheel centres: check that the suspension is blocked."
        )
    elif height < radius:
        doubts.append("The CG comes out below the wheel centres, which is rare: check the readings.")
    return tuple(doubts)
