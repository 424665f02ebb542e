"""Spring-seat turns that bring corner weights to a target.

Model: a rigid chassis on four springs that stand on four tyres on level pads,
small movements, no friction, anti-roll bars included when given. Turning seats
cannot move the CG, so the two axle weights and the left-right moment stay; what
seats can change is one number only, the diagonal (warp). A target that asks for
more is met as nearly as possible and the rest is reported: it takes moved
weight, not turns.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from solver.checks import positive
from solver.corner_springs import (
    Axle,
    checked_axle,
    ride_matrix,
    seat_pitches,
    suspension,
    tyre_softness,
    warp_pattern,
)
from solver.weights import CORNER_NAMES, Corners, weigh

CAUTIONS = (
    (
        "Level the pads, set tyre pressures, put the driver's weight in the seat and bounce the"
        " car before every reading."
    ),
    "Disconnect one end of each anti-roll bar while the car is scaled, unless its rate is given here.",
    "The model has no friction and small movements only: turn, roll the car off and on, weigh again.",
)


@dataclass(frozen=True)
class SeatTurns:
    """What to turn, and what the scales will then show.

    Attributes
    ----------
    turns : Corners
        Turns of each seat; positive compresses the spring (raises that corner).
    seat_travel : Corners
        The same in metres along the spring.
    corner_weights : Corners
        Expected afterwards, kg.
    height_change : Corners
        Rise of the chassis above the pad at each wheel, m.
    cross_percent : float
        Expected afterwards.
    out_of_reach : Corners
        Target less `corner_weights`, kg: what no turning of seats can change.
    keeps_height : bool
    cautions : tuple of str
    """

    turns: Corners
    seat_travel: Corners
    corner_weights: Corners
    height_change: Corners
    cross_percent: float
    out_of_reach: Corners
    keeps_height: bool
    cautions: tuple = CAUTIONS


def target_from_cross(measured: Corners, cross_percent: float) -> Corners:
    """Corner weights with the same axles and sides but another cross weight.

    Parameters
    ----------
    measured : Corners
        kg.
    cross_percent : float
        Right front plus left rear, percent of the total.

    Returns
    -------
    Corners
        kg. The warp is spread so that axle weights do not change and, with
        equal tracks, neither do the sides; `seat_turns` settles the rest.

    Raises
    ------
    ValueError
        When a corner would have to carry less than nothing.
    """
    now = weigh(measured)
    half = (cross_percent / 100.0 * now.total - now.cross_weight) / 2.0
    target = Corners.from_array(measured.as_array() + half * np.array([-1.0, 1.0, 1.0, -1.0]))
    if min(target.as_array()) < 0.0:
        raise ValueError(
            f"the cross weight is {cross_percent:g} percent: a corner would have to carry less than nothing."
        )
    return target


def seat_turns(
    measured: Corners,
    target: Corners,
    wheelbase: float,
    front: Axle,
    rear: Axle,
    gravity: float = 9.80665,
    keep_height: bool = True,
) -> SeatTurns:
    """Turns at each corner that bring measured corner weights to a target.

    With ``dN = lam w`` the only change that leaves heave, pitch and roll
    balanced (``B^T w = 0``), seats ``s`` and chassis ride ``q`` obey
    ``D s = Kw (Kw^-1 + Kt^-1) dN + Kw B q`` (statics of springs in series).
    Keeping the ride height sets ``q = 0``; otherwise the smallest turns (least
    squares) at the adjustable seats are taken.

    Parameters
    ----------
    measured, target : Corners
        kg, driver in the car.
    wheelbase : float
        m.
    front, rear : Axle
    gravity : float
        m/s^2.
    keep_height : bool
        Keep the chassis where it is above all four pads; needs all seats.

    Returns
    -------
    SeatTurns

    Raises
    ------
    ValueError
        When an input is out of range, no seat can be turned, or the height is
        to be kept with seats that cannot be turned.
    """
    axles = (checked_axle("front", front), checked_axle("rear", rear))
    _check_seats(axles, keep_height)
    length = positive("the wheelbase", wheelbase, "m")
    weigh(measured)
    weigh(target)
    ride = ride_matrix(length, front.track, rear.track)
    warp = warp_pattern(front.track, rear.track)
    wanted = (target.as_array() - measured.as_array()) * gravity
    change = warp * (warp @ wanted) / (warp @ warp)
    stiffness, seats = suspension(axles)
    soft = np.diag([tyre_softness(axle) for axle in axles for _ in range(2)])
    needed = change + stiffness @ soft @ change
    if keep_height:
        travel = np.asarray(np.linalg.solve(seats, needed), dtype=np.float64)
        rise = np.zeros(4)
    else:
        # w.Kw^-1 (D s - needed) = w.B q = 0: one condition on the seats.
        pitch = seat_pitches(axles)
        row = np.linalg.solve(stiffness, seats).T @ warp * pitch
        count = row * (warp @ np.linalg.solve(stiffness, needed)) / (row @ row)
        travel = count * pitch
        moved = np.linalg.solve(stiffness, seats @ travel - needed)
        rise = ride @ np.asarray(np.linalg.lstsq(ride, moved, rcond=None)[0], dtype=np.float64)
    return _result(measured, target, change / gravity, travel, rise, axles, keep_height)


def _result(
    measured: Corners,
    target: Corners,
    change: NDArray[np.float64],
    travel: NDArray[np.float64],
    rise: NDArray[np.float64],
    axles: tuple[Axle, Axle],
    keep_height: bool,
) -> SeatTurns:
    pitches = seat_pitches(axles)
    after = measured.as_array() + change
    for name, value in zip(CORNER_NAMES, after, strict=True):
        if value < 0.0:
            raise ValueError(
                f"the {name.replace('_', ' ')} tyre would leave its scale: the target asks too much."
            )
    return SeatTurns(
        turns=Corners.from_array(np.divide(travel, pitches, out=np.zeros(4), where=pitches > 0.0)),
        seat_travel=Corners.from_array(travel),
        corner_weights=Corners.from_array(after),
        height_change=Corners.from_array(rise),
        cross_percent=weigh(Corners.from_array(after)).cross_percent,
        out_of_reach=Corners.from_array(target.as_array() - after),
        keeps_height=keep_height,
    )


def _check_seats(axles: tuple[Axle, Axle], keep_height: bool) -> None:
    if not any(axle.adjustable for axle in axles):
        raise ValueError("no spring seat can be turned: at least one axle must be adjustable.")
    if keep_height and not all(axle.adjustable for axle in axles):
        raise ValueError(
            "the ride height is to be kept, which takes turns at all four seats:"
            " one axle is marked as not adjustable."
        )
