"""What a revision sets on the car. Each starts from its parent, or from the survey."""

from __future__ import annotations

from shop.quantities import Quantity
from shop.units import DIMENSIONS, GRAVITY, INCH, POUND, POUND_FORCE, Reading, ReadingError, parse_reading

LB_IN = POUND_FORCE / INCH
IN = INCH

SECTIONS = {
    "springs": "Springs and shocks",
    "tyres": "Tyre pressures",
    "heights": "Ride heights",
    "ballast": "Ballast",
    "hit": "The hit",
}

# The survey's key that a setting starts from, where there is one.
FROM_SURVEY = {
    "front_spring_rate": "front_spring_rate",
    "rear_spring_rate": "rear_spring_rate",
    "front_shock_rate": "front_shock_rate",
    "rear_shock_rate": "rear_shock_rate",
    "front_pressure": "front_pressure",
    "rear_pressure": "rear_pressure",
    "ride_height_front": "ride_height_front",
    "ride_height_rear": "ride_height_rear",
    "front_limiter": "front_droop_clearance",
    "wheelie_bar_height": "wheelie_bar_clearance",
}

QUANTITIES: tuple[Quantity, ...] = (
    Quantity("front_spring_rate", "Front springs, each", "rate", 1 * LB_IN, 2500 * LB_IN, 5 * LB_IN, section="springs"),
    Quantity("front_shock_rate", "Front shock damping, each", "damping", 0.0, 200 * LB_IN, LB_IN, section="springs"),
    Quantity("front_shock_compression", "Front shock compression setting", "clicks", 0, 60, 0,
             section="springs", optional=True),
    Quantity("front_shock_rebound", "Front shock rebound setting", "clicks", 0, 60, 0,
             section="springs", optional=True),
    Quantity("front_limiter", "Front travel until the limiter holds", "length", 0.1 * IN, 15 * IN, 0.1 * IN,
             section="springs", optional=True),
    Quantity("rear_spring_rate", "Rear springs, each", "rate", 1 * LB_IN, 2500 * LB_IN, 5 * LB_IN, section="springs"),
    Quantity("rear_shock_rate", "Rear shock damping, each", "damping", 0.0, 200 * LB_IN, LB_IN, section="springs"),
    Quantity("rear_shock_compression", "Rear shock compression setting", "clicks", 0, 60, 0,
             section="springs", optional=True),
    Quantity("rear_shock_rebound", "Rear shock rebound setting", "clicks", 0, 60, 0, section="springs", optional=True),
    Quantity("front_pressure", "Front tyre pressure", "pressure", 5000.0, 600000.0, 3000.0,
             section="tyres", optional=True),
    Quantity("rear_pressure", "Rear tyre pressure", "pressure", 5000.0, 600000.0, 1500.0,
             section="tyres", optional=True),
    Quantity("ride_height_front", "Front ride height", "length", 0.5 * IN, 30 * IN, 0.06 * IN,
             section="heights", optional=True),
    Quantity("ride_height_rear", "Rear ride height", "length", 0.5 * IN, 30 * IN, 0.06 * IN,
             section="heights", optional=True),
    Quantity("wheelie_bar_height", "Wheelie bar wheel, above ground", "length", 0.1 * IN, 20 * IN, 0.06 * IN,
             section="heights", optional=True),
    Quantity("ballast_weight", "Ballast added since the survey", "mass", 0.0, 500 * POUND, POUND,
             section="ballast", optional=True),
    Quantity("ballast_x", "Ballast, ahead of rear axle", "length", -80 * IN, 350 * IN, 0.5 * IN,
             section="ballast", optional=True),
    Quantity("ballast_z", "Ballast, above ground", "length", 0.0, 70 * IN, 0.5 * IN, section="ballast", optional=True),
    Quantity("hit_peak", "Peak of the hit", "acceleration", 0.05 * GRAVITY, 6 * GRAVITY, 0.05 * GRAVITY, section="hit",
             help="Forward acceleration in g at full bite, or the force at the tyres in lbf or N: the unit typed decides."),
    Quantity("hit_rise", "Time to the peak", "time", 0.005, 1.0, 0.01, section="hit",
             help="From the first motion of the car to full bite."),
)

BY_KEY = {quantity.key: quantity for quantity in QUANTITIES}

# A stated default: a firm but ordinary launch. Common practice, no source.
HIT_PEAK_G = 1.0
HIT_RISE = 0.05

# The hit's peak when it is typed as a force at the tyres, both together.
HIT_FORCE = Quantity("hit_peak", "Peak of the hit", "force", 100.0, 150e3, 100.0, section="hit")


def quantity_of(key: str, unit: str) -> Quantity:
    """What `key` means in `unit`: only the peak of the hit goes by two dimensions."""
    if key == HIT_FORCE.key and unit in DIMENSIONS["force"]:
        return HIT_FORCE
    return BY_KEY[key]


def units_for(key: str) -> list[str]:
    """Every unit in which a setting may be typed."""
    also = list(DIMENSIONS["force"]) if key == HIT_FORCE.key else []
    return list(DIMENSIONS[BY_KEY[key].dimension]) + also


def read_setting(key: str, typed: str, unit: str) -> Reading:
    """The reading within range; a unit typed with the number wins, also from g to a force."""
    meant = quantity_of(key, unit)
    if key == HIT_FORCE.key:
        for one in (BY_KEY[key], HIT_FORCE):
            if _names_a_unit_of(one.dimension, typed):
                return one.read(typed, "")
    return meant.read(typed, unit)


def _names_a_unit_of(dimension: str, typed: str) -> bool:
    try:
        parse_reading(typed, "", dimension)
    except ReadingError:
        return False
    return True
