"""What is known of each kind of part: its numbers, and its curves.

A version's `data` holds {"numbers": {key: {"typed", "value", "unit"}}, "curves": [curve, ...]}.
A curve is {"setting": {"side", "click"} or {}, "points": [[x, y], ...]} in SI.
"""

from __future__ import annotations

from dataclasses import dataclass, field

from shop.quantities import Quantity
from shop.units import INCH, POUND_FORCE, RPM

LB_IN = POUND_FORCE / INCH
KSI = 1000 * POUND_FORCE / INCH**2
LBF_FT = POUND_FORCE * 12 * INCH


@dataclass(frozen=True)
class CurveKind:
    """A measured curve: its axes, whether it comes once per click, and what shape it must have."""

    label: str
    x_label: str
    x_dimension: str
    y_label: str
    y_dimension: str
    per_click: bool = False
    optional: bool = False
    rising: bool = True
    least_points: int = 2


@dataclass(frozen=True)
class Kind:
    key: str
    label: str
    plural: str
    quantities: tuple[Quantity, ...] = ()
    curve: CurveKind | None = None
    choices: dict[str, tuple[str, ...]] = field(default_factory=dict)

    def quantity(self, key: str) -> Quantity:
        return next(quantity for quantity in self.quantities if quantity.key == key)


def _q(key: str, label: str, dimension: str, least: float, most: float, **more) -> Quantity:
    return Quantity(key, label, dimension, least, most, more.pop("tolerance", 0.0), **more)


_LIST = (
    Kind(
        "spring",
        "spring",
        "Springs",
        (
            _q("rate", "Rate", "rate", 1 * LB_IN, 3000 * LB_IN, help="As checked on the spring rater, or as marked."),
            _q("free_length", "Free length", "length", 2 * INCH, 30 * INCH, optional=True),
            _q("bind_travel", "Travel to coil bind", "length", 0.5 * INCH, 20 * INCH, optional=True),
        ),
        CurveKind("Load curve", "compression", "length", "force", "force", optional=True),
    ),
    Kind(
        "shock",
        "shock",
        "Shocks",
        (
            _q("stroke", "Stroke", "length", 1 * INCH, 20 * INCH),
            _q("closed_length", "Length closed, eye to eye", "length", 4 * INCH, 40 * INCH, optional=True),
        ),
        CurveKind("Dyno curve", "shaft speed", "shaft_speed", "force", "force", per_click=True),
    ),
    Kind(
        "tyre",
        "tyre",
        "Tyres",
        (
            _q("rate", "Vertical rate", "rate", 100 * LB_IN, 6000 * LB_IN),
            _q("pressure", "Pressure at which the rate was taken", "pressure", 5000.0, 600000.0),
            _q("radius", "Loaded radius", "length", 6 * INCH, 30 * INCH, optional=True),
            _q(
                "peak_grip",
                "Peak grip",
                "ratio",
                0.2,
                6.0,
                optional=True,
                help="Greatest tyre force over load, on the surface raced on.",
            ),
            _q("sliding_grip", "Sliding grip", "ratio", 0.1, 6.0, optional=True),
        ),
    ),
    Kind(
        "tube",
        "tube",
        "Tubes",
        (
            _q("outer_diameter", "Outside diameter", "length", 0.25 * INCH, 4 * INCH),
            _q("wall", "Wall", "length", 0.02 * INCH, 0.75 * INCH),
            _q(
                "yield_strength",
                "Yield strength",
                "stress",
                20 * KSI,
                260 * KSI,
                help="From the mill certificate; tables disagree.",
            ),
            _q("modulus", "Modulus of elasticity", "stress", 5000 * KSI, 40000 * KSI),
        ),
    ),
    Kind(
        "rod_end",
        "rod end",
        "Rod ends",
        (
            _q(
                "static_rating",
                "Static radial rating",
                "force",
                200 * POUND_FORCE,
                300000 * POUND_FORCE,
                help="From the maker's sheet for this very part: the lowest of race, head and shank counts.",
            ),
            _q("thread_diameter", "Thread diameter", "length", 0.15 * INCH, 2 * INCH),
            _q("threads_per_inch", "Threads per inch", "ratio", 4, 60),
            _q("shank_yield", "Shank yield strength", "stress", 20 * KSI, 260 * KSI, optional=True),
        ),
    ),
    Kind(
        "engine",
        "engine",
        "Engines",
        (
            _q(
                "inertia",
                "Rotating inertia",
                "inertia",
                0.005,
                5.0,
                help="Crank, flywheel or converter pump, clutch cover.",
            ),
        ),
        CurveKind("Torque curve", "engine speed", "rotation", "torque", "torque", rising=False),
    ),
    Kind(
        "clutch",
        "clutch",
        "Clutches",
        (
            _q("capacity", "Torque it carries when slipping", "torque", 20 * LBF_FT, 20000 * LBF_FT),
            _q("engage_time", "Time to full clamp", "time", 0.0, 2.0),
        ),
    ),
    Kind(
        "converter",
        "converter",
        "Converters",
        (
            _q("stall_speed", "Stall speed", "rotation", 800 * RPM, 12000 * RPM),
            _q("stall_torque", "Engine torque at which it stalls there", "torque", 20 * LBF_FT, 5000 * LBF_FT),
            _q("torque_ratio", "Torque ratio at stall", "ratio", 1.0, 4.0),
        ),
    ),
)

KINDS = {kind.key: kind for kind in _LIST}
SIDES = ("compression", "rebound")
MOST_CURVES = 80
MOST_POINTS = 400
