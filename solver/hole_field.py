"""Statics of every hole choice at once: arrays over lanes, no launch.

A lane is one choice of holes. Where `solver.statics` answers for one car in full, this
answers the questions of the trade for ten thousand in a few milliseconds.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

# A choice whose links cross the far side of this distance (m) is parallel for the trade.
FAR = 1e4
_NEWTON_STEPS = 25
_CLOSED = 1e-9


@dataclass(frozen=True)
class Masses:
    """What the field needs of the car beside its links (SI).

    Attributes
    ----------
    wheelbase, cg_height : float
        Metres; the CG is the whole car's.
    mass, rear_unsprung : float
        Kilograms, whole car and rear axle.
    axle_height : float
        Rear axle centre above ground, metres.
    """

    wheelbase: float
    cg_height: float
    mass: float
    rear_unsprung: float
    axle_height: float


@dataclass(frozen=True)
class HoleField:
    """Figures of each lane; every array has shape (lanes,).

    Attributes
    ----------
    ic_x, ic_z : Array
        Instant centre in metres; NaN where the links are parallel.
    slope : Array
        Slope of the line from the rear patch to the instant centre.
    anti_squat, anti_squat_dynamic : Array
        Percent, of the whole car and of the sprung mass.
    lower_length, upper_length : Array
        Bar lengths centre to centre, metres, plan angle counted; NaN for a ladder bar's upper.
    lower_angle, upper_angle : Array
        Side-view angle, radians, positive when the chassis end is the higher.
    bar_gap : Array
        Least distance between the two bars' centre lines in side view, metres.
    pinion_bump, pinion_droop : Array
        Change of the housing angle (radians, nose-up positive) over the stated travels; NaN where
        the linkage locks before it gets there.
    """

    ic_x: Array
    ic_z: Array
    slope: Array
    anti_squat: Array
    anti_squat_dynamic: Array
    lower_length: Array
    upper_length: Array
    lower_angle: Array
    upper_angle: Array
    bar_gap: Array
    pinion_bump: Array
    pinion_droop: Array


def _line(p: Array, q: Array) -> Array:
    """Homogeneous line through two points, shape (lanes, 3)."""
    one = np.ones(len(p))
    return np.cross(np.column_stack([p, one]), np.column_stack([q, one]))


def _anti_squat(centre: Array, masses: Masses) -> tuple[Array, Array, Array]:
    """Slope and both anti-squat figures from the homogeneous instant centre (X, Z, W).

    Trade: 100 (z/x)/(h/L). Sprung: 100 [((m - m_r) z + m_r r)/x]/(m h/L), from moments on the
    axle about its patch; written with (X, Z, W) both stay finite for parallel links.
    """
    x, z, w = centre.T
    neutral = masses.cg_height / masses.wheelbase
    sprung = masses.mass - masses.rear_unsprung
    with np.errstate(divide="ignore", invalid="ignore"):
        slope = z / x
        lift = (sprung * z + masses.rear_unsprung * masses.axle_height * w) / x
    return slope, 100 * slope / neutral, 100 * lift / (masses.mass * neutral)


def _segment_gap(a: Array, b: Array, c: Array, d: Array) -> Array:
    """Least distance between segments ab and cd in the plane; zero where they cross."""

    def to_segment(p: Array, q: Array, r: Array) -> Array:
        along = r - q
        share = np.clip(np.sum((p - q) * along, axis=1) / np.maximum(np.sum(along**2, axis=1), 1e-30), 0, 1)
        return np.hypot(*(p - q - share[:, None] * along).T)

    def side(p: Array, q: Array, r: Array) -> Array:
        return (q[:, 0] - p[:, 0]) * (r[:, 1] - p[:, 1]) - (q[:, 1] - p[:, 1]) * (r[:, 0] - p[:, 0])

    gap = np.minimum.reduce([to_segment(a, c, d), to_segment(b, c, d), to_segment(c, a, b), to_segment(d, a, b)])
    crossing = (side(a, b, c) * side(a, b, d) < 0) & (side(c, d, a) * side(c, d, b) < 0)
    return np.where(crossing, 0.0, gap)


def _housing_angle(
    travel: float, axle_height: float, lower: tuple[Array, Array], upper: tuple[Array, Array]
) -> Array:
    """Housing rotation when the axle has moved up by `travel` against the chassis.

    Newton on the two link lengths for (shift along x, rotation): the four-bar loop closure of
    any kinematics text. NaN where it does not close: the linkage locks before that travel.
    """
    lanes = len(lower[0])
    axle = np.array([0.0, axle_height])
    arms = [lower[1] - axle, upper[1] - axle]
    pins = [lower[0], upper[0]]
    lengths = [np.hypot(*(pins[i] - axle - arms[i]).T) for i in (0, 1)]
    shift, angle = np.zeros(lanes), np.zeros(lanes)
    with np.errstate(all="ignore"):
        for _ in range(_NEWTON_STEPS):
            cosine, sine = np.cos(angle), np.sin(angle)
            rows = []
            for pin, arm, length in zip(pins, arms, lengths, strict=True):
                turned = np.column_stack([cosine * arm[:, 0] - sine * arm[:, 1], sine * arm[:, 0] + cosine * arm[:, 1]])
                dx = shift + turned[:, 0] - pin[:, 0]
                dz = axle_height + travel + turned[:, 1] - pin[:, 1]
                rows.append((dx**2 + dz**2 - length**2, 2 * dx, 2 * (-dx * turned[:, 1] + dz * turned[:, 0])))
            (f, fx, fa), (g, gx, ga) = rows
            determinant = fx * ga - fa * gx
            shift = shift - (f * ga - g * fa) / determinant
            angle = angle - (g * fx - f * gx) / determinant
        closed = (np.abs(f) < _CLOSED) & (np.abs(g) < _CLOSED) & (np.abs(angle) < np.pi / 2)
    return np.where(closed, angle, np.nan)


def four_link_field(
    lower_chassis: Array,
    lower_housing: Array,
    upper_chassis: Array,
    upper_housing: Array,
    masses: Masses,
    *,
    plan_angles: tuple[float, float] = (0.0, 0.0),
    travel: tuple[float, float] = (0.05, -0.05),
) -> HoleField:
    """Every figure of every four-link choice.

    Parameters
    ----------
    lower_chassis, lower_housing, upper_chassis, upper_housing : Array
        Pins, shape (lanes, 2), metres, in the axes of the launch model.
    masses : Masses
        The rest of the car.
    plan_angles : tuple of float
        Lower and upper link angle in plan view, radians.
    travel : tuple of float
        Axle travel against the chassis in bump (positive) and droop, metres.

    Returns
    -------
    HoleField

    Raises
    ------
    ValueError
        If the shapes differ or a number is not finite.
    """
    pins = [np.ascontiguousarray(p, dtype=float) for p in (lower_chassis, lower_housing, upper_chassis, upper_housing)]
    if any(p.shape != pins[0].shape or p.ndim != 2 or p.shape[1] != 2 for p in pins):
        raise ValueError("the four pins of each choice must come as (lanes, 2) arrays of one length")
    if not all(np.isfinite(p).all() for p in pins):
        raise ValueError("every hole needs a finite position")
    lc, lh, uc, uh = pins
    centre = np.cross(_line(lc, lh), _line(uc, uh))
    slope, trade, sprung = _anti_squat(centre, masses)
    with np.errstate(divide="ignore", invalid="ignore"):
        x, z = centre[:, 0] / centre[:, 2], centre[:, 1] / centre[:, 2]
    parallel = ~np.isfinite(x) | (np.abs(x) > FAR)
    ends = [_housing_angle(t, masses.axle_height, (lc, lh), (uc, uh)) for t in travel]
    return HoleField(
        ic_x=np.where(parallel, np.nan, x),
        ic_z=np.where(parallel, np.nan, z),
        slope=slope,
        anti_squat=trade,
        anti_squat_dynamic=sprung,
        lower_length=np.hypot(*(lc - lh).T) / np.cos(plan_angles[0]),
        upper_length=np.hypot(*(uc - uh).T) / np.cos(plan_angles[1]),
        lower_angle=np.arctan2(lc[:, 1] - lh[:, 1], lc[:, 0] - lh[:, 0]),
        upper_angle=np.arctan2(uc[:, 1] - uh[:, 1], uc[:, 0] - uh[:, 0]),
        bar_gap=_segment_gap(lc, lh, uc, uh),
        pinion_bump=ends[0],
        pinion_droop=ends[1],
    )


def ladder_bar_field(chassis: Array, masses: Masses, *, travel: tuple[float, float] = (0.05, -0.05)) -> HoleField:
    """The same for ladder bars: the chassis pin is the instant centre.

    Parameters
    ----------
    chassis : Array
        Chassis pins, shape (lanes, 2), metres.
    masses, travel
        As for `four_link_field`.

    Returns
    -------
    HoleField
        With NaN for what only an upper link has.

    Raises
    ------
    ValueError
        If the shape is wrong or a number is not finite.
    """
    pins = np.ascontiguousarray(chassis, dtype=float)
    if pins.ndim != 2 or pins.shape[1] != 2 or not np.isfinite(pins).all():
        raise ValueError("ladder-bar pins must come as a finite (lanes, 2) array")
    lanes = len(pins)
    slope, trade, sprung = _anti_squat(np.column_stack([pins, np.ones(lanes)]), masses)
    rise = pins[:, 1] - masses.axle_height
    length = np.hypot(pins[:, 0], rise)
    nothing = np.full(lanes, np.nan)
    rest = np.arctan2(rise, pins[:, 0])
    with np.errstate(invalid="ignore"):
        # The axle rises by t, so the pin falls by t against it; the bar keeps its length.
        ends = [np.arcsin((rise - t) / length) - rest for t in travel]
    return HoleField(
        ic_x=pins[:, 0].copy(), ic_z=pins[:, 1].copy(), slope=slope, anti_squat=trade, anti_squat_dynamic=sprung,
        lower_length=length, upper_length=nothing, lower_angle=rest, upper_angle=nothing, bar_gap=nothing,
        pinion_bump=ends[0], pinion_droop=ends[1],
    )
