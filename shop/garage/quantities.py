"""What a survey measures, in the order in which one walks around the car.

Ranges refuse slips of the tape and of the unit, not unusual cars. Typical values are
common practice without a source unless a line says otherwise; they are wide on purpose.
"""

from __future__ import annotations

from shop.quantities import Quantity, Values
from shop.units import INCH, POUND, POUND_FORCE

LB_IN = POUND_FORCE / INCH
IN = INCH
LB = POUND

SECTIONS = {
    "wheels": "Wheels and wheelbase",
    "scales": "On the scales, ready to race, driver in",
    "cg": "Height of the centre of gravity",
    "unsprung": "What the springs do not carry",
    "front": "Front springs, shocks and tyres",
    "rear": "Rear springs, shocks and tyres",
    "mounts": "Rear spring and shock mounts",
    "links": "Link angles in plan view",
    "heights": "Ride heights",
    "travel": "Travel limits",
    "wheelie": "Wheelie bar",
}


def _sum(values: Values, *keys: str) -> float | None:
    return sum(values[key] for key in keys) if all(key in values for key in keys) else None


def _constant(value: float):
    return lambda values: value


def _share(value: float, share: float):
    """A typical value together with its tolerance as a share of it."""
    return {"typical": lambda values: value, "typical_tolerance": lambda values: share * value}


def _pitch_inertia(values: Values) -> float | None:
    """0.8 m_s a b: the dynamic index of a front-engined car; common practice, no source."""
    mass = _sum(values, "weight_lf", "weight_rf", "weight_lr", "weight_rr")
    front = _sum(values, "weight_lf", "weight_rf")
    if mass is None or front is None or "wheelbase" not in values:
        return None
    unsprung = values.get("front_unsprung_weight", 0.0) + values.get("rear_unsprung_weight", 0.0)
    length = values["wheelbase"]
    ahead = length * front / mass
    return 0.8 * max(mass - unsprung, 0.0) * ahead * (length - ahead)


def _cg_height(values: Values) -> float | None:
    return 0.21 * values["wheelbase"] if "wheelbase" in values else None


def _same(key: str):
    return lambda values: values.get(key)


def _length(key: str, label: str, section: str, least: float, most: float, **more) -> Quantity:
    return Quantity(
        key, label, "length", least * IN, most * IN, more.pop("tolerance", 0.06) * IN, section=section, **more
    )


def _weight(key: str, label: str, **more) -> Quantity:
    return Quantity(key, label, "mass", 20 * LB, 4000 * LB, 2 * LB, section="scales", **more)


def _rate(key: str, label: str, section: str, most: float, **more) -> Quantity:
    return Quantity(
        key, label, "rate", 1 * LB_IN, most * LB_IN, more.pop("tolerance", 5) * LB_IN, section=section, **more
    )


def _damping(key: str, label: str, section: str, **more) -> Quantity:
    return Quantity(key, label, "damping", 0.0, 200 * LB_IN, 1.0 * LB_IN, section=section, **more)


QUANTITIES: tuple[Quantity, ...] = (
    _length(
        "wheelbase",
        "Wheelbase",
        "wheels",
        60,
        350,
        tolerance=0.12,
        help="Axle centre to axle centre, mean of both sides.",
    ),
    _length(
        "front_tyre_radius",
        "Front loaded tyre radius",
        "wheels",
        6,
        24,
        help="Ground to spindle centre, car on its wheels.",
    ),
    _length(
        "rear_tyre_radius",
        "Rear loaded tyre radius",
        "wheels",
        8,
        30,
        help="Ground to axle centre, car on its wheels.",
    ),
    _weight("weight_lf", "Left front"),
    _weight("weight_rf", "Right front"),
    _weight("weight_lr", "Left rear"),
    _weight("weight_rr", "Right rear"),
    Quantity(
        "total_weight",
        "Total as read",
        "mass",
        200 * LB,
        9000 * LB,
        4 * LB,
        section="scales",
        optional=True,
        help="If the scales show it: checked against the sum of the four pads.",
    ),
    _weight("empty_lf", "Left front, driver out", optional=True),
    _weight("empty_rf", "Right front, driver out", optional=True),
    _weight("empty_lr", "Left rear, driver out", optional=True),
    _weight("empty_rr", "Right rear, driver out", optional=True),
    _length(
        "cg_height",
        "CG height above ground",
        "cg",
        5,
        70,
        tolerance=1.0,
        typical=_cg_height,
        typical_tolerance=lambda values: 2.0 * IN,
        help="From the raised-end method. Left blank: a typical 0.21 of the wheelbase is used until it is measured.",
    ),
    Quantity(
        "pitch_inertia",
        "Pitch inertia of the sprung mass",
        "inertia",
        20.0,
        20000.0,
        100.0,
        section="cg",
        typical=_pitch_inertia,
        typical_tolerance=lambda values: 0.2 * (_pitch_inertia(values) or 0.0),
        help="Rarely measured. Left blank: a typical 0.8 of sprung mass times the distances from its CG to the axles.",
    ),
    Quantity(
        "front_unsprung_weight",
        "Front unsprung weight, both sides",
        "mass",
        20 * LB,
        500 * LB,
        5 * LB,
        section="unsprung",
        **_share(150 * LB, 0.15),
        help="Wheels, tyres, brakes, spindles, half of the arms.",
    ),
    Quantity(
        "rear_unsprung_weight",
        "Rear unsprung weight, axle complete",
        "mass",
        60 * LB,
        1200 * LB,
        10 * LB,
        section="unsprung",
        **_share(350 * LB, 0.12),
        help="Housing, third member, axles, brakes, wheels, tyres, half of the bars.",
    ),
    Quantity(
        "housing_inertia",
        "Housing pitch inertia, wheels not counted",
        "inertia",
        0.05,
        60.0,
        0.3,
        section="unsprung",
        **_share(1.3, 0.4),
        help="Housing and third member about the axle centre.",
    ),
    _rate(
        "front_spring_rate",
        "Front spring rate, each",
        "front",
        2500,
        help="As marked or as checked on the spring rater.",
    ),
    Quantity(
        "front_motion_ratio",
        "Front motion ratio",
        "ratio",
        0.2,
        1.2,
        0.01,
        section="front",
        typical=_constant(1.0),
        typical_tolerance=lambda values: 0.05,
        help="Spring travel for one of wheel travel. Strut: about 1; spring on the arm: less.",
    ),
    _damping(
        "front_shock_rate",
        "Front shock damping, each",
        "front",
        **_share(4.0 * LB_IN, 0.3),
        help="Force over shaft speed at launch speeds, as the shock is set; a curve from the parts library says more.",
    ),
    _rate("front_tyre_rate", "Front tyre rate, each", "front", 6000, tolerance=100, **_share(1300 * LB_IN, 0.25)),
    _damping("front_tyre_damping", "Front tyre damping, each", "front", **_share(2.0 * LB_IN, 0.5)),
    Quantity(
        "front_pressure",
        "Front tyre pressure when weighed",
        "pressure",
        5000.0,
        600000.0,
        3000.0,
        section="front",
        optional=True,
    ),
    _rate("rear_spring_rate", "Rear spring rate, each", "rear", 2500),
    _damping(
        "rear_shock_rate",
        "Rear shock damping, each",
        "rear",
        **_share(6.0 * LB_IN, 0.3),
        help="Force over shaft speed at launch speeds, as the shock is set; a curve from the parts library says more.",
    ),
    _rate(
        "rear_tyre_rate",
        "Rear tyre rate, each",
        "rear",
        6000,
        tolerance=100,
        **_share(1200 * LB_IN, 0.25),
        help="No public source gives it for large slicks: measure it on the scales with a jack, or keep the wide typical.",
    ),
    _damping("rear_tyre_damping", "Rear tyre damping, each", "rear", **_share(2.5 * LB_IN, 0.5)),
    Quantity(
        "tyre_pressure_share",
        "Share of tyre rate that pressure carries",
        "ratio",
        0.0,
        1.0,
        0.05,
        section="rear",
        typical=_constant(0.7),
        typical_tolerance=lambda values: 0.2,
        help="How a pressure other than the one when weighed changes the tyre rate; the rest is the carcass.",
    ),
    Quantity(
        "rear_pressure",
        "Rear tyre pressure when weighed",
        "pressure",
        5000.0,
        600000.0,
        1500.0,
        section="rear",
        optional=True,
    ),
    _length("spring_chassis_x", "Spring upper mount, ahead of axle", "mounts", -40, 40),
    _length("spring_chassis_z", "Spring upper mount, above ground", "mounts", 4, 70),
    _length("spring_housing_x", "Spring lower mount, ahead of axle", "mounts", -40, 40),
    _length("spring_housing_z", "Spring lower mount, above ground", "mounts", 1, 60),
    _length(
        "shock_chassis_x",
        "Shock upper mount, ahead of axle",
        "mounts",
        -40,
        40,
        optional=True,
        help="Only where the shock stands apart from the spring; then all four.",
    ),
    _length("shock_chassis_z", "Shock upper mount, above ground", "mounts", 4, 70, optional=True),
    _length("shock_housing_x", "Shock lower mount, ahead of axle", "mounts", -40, 40, optional=True),
    _length("shock_housing_z", "Shock lower mount, above ground", "mounts", 1, 60, optional=True),
    Quantity(
        "lower_plan_angle",
        "Lower link angle in plan view",
        "angle",
        0.0,
        1.05,
        0.01,
        section="links",
        typical=_constant(0.0),
        typical_tolerance=lambda values: 0.01,
        linkages=("four-link",),
        help="Zero for links that run straight ahead.",
    ),
    Quantity(
        "upper_plan_angle",
        "Upper link angle in plan view",
        "angle",
        0.0,
        1.05,
        0.01,
        section="links",
        typical=_constant(0.0),
        typical_tolerance=lambda values: 0.01,
        linkages=("four-link",),
    ),
    _length(
        "ride_height_front",
        "Front ride height",
        "heights",
        0.5,
        30,
        help="At the front axle line, chassis reference to ground.",
        optional=True,
    ),
    _length(
        "ride_height_rear",
        "Rear ride height",
        "heights",
        0.5,
        30,
        help="At the rear axle line, chassis reference to ground.",
        optional=True,
    ),
    _length(
        "front_droop_clearance",
        "Front travel until the limiter holds",
        "travel",
        0.1,
        15,
        optional=True,
        help="Body rise at the front wheels from ride height, limiter strap or topped-out strut.",
    ),
    _length("front_bump_clearance", "Front travel until the bump stop", "travel", 0.1, 15, optional=True),
    _length(
        "rear_droop_clearance",
        "Rear shock travel until topped out",
        "travel",
        0.1,
        15,
        optional=True,
        help="Shaft travel left in extension at ride height.",
    ),
    _length("rear_bump_clearance", "Rear shock travel until bottomed", "travel", 0.1, 15, optional=True),
    _length(
        "wheelie_bar_x",
        "Wheelie bar wheel, behind axle",
        "wheelie",
        10,
        120,
        optional=True,
        help="Rear axle centre to the wheel's contact, measured along the ground.",
    ),
    _length("wheelie_bar_clearance", "Wheelie bar wheel, above ground", "wheelie", 0.1, 20, optional=True),
    _rate(
        "wheelie_bar_rate",
        "Wheelie bar stiffness, all wheels",
        "wheelie",
        20000,
        tolerance=100,
        **_share(1500 * LB_IN, 0.4),
    ),
)

BY_KEY = {quantity.key: quantity for quantity in QUANTITIES}

# Bracket places: where holes are drilled, and the words for it.
BRACKETS = {
    "lower_chassis": "Lower link, chassis bracket",
    "lower_housing": "Lower link, housing bracket",
    "upper_chassis": "Upper link, chassis bracket",
    "upper_housing": "Upper link, housing bracket",
    "ladder_chassis": "Ladder bar, chassis bracket",
}
BRACKETS_OF = {
    "four-link": ("lower_chassis", "lower_housing", "upper_chassis", "upper_housing"),
    "ladder-bar": ("ladder_chassis",),
}
HOLES_AT_MOST = 40
HOLE_X = (-60 * IN, 150 * IN)
HOLE_Z = (0.5 * IN, 70 * IN)
