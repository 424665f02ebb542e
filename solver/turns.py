"""Spring-seat turns that bring corner weights to a target.

Model: a rigid chassis on four springs that stand on four tyres on level pads,
small movements, no friction, anti-roll bars included when given. Turning seats
cannot move the CG, so the two axle weights and the left-right moment stay; what
seats can change is one number only, the diagonal (warp). A target that asks for
more is met as nearly as possible and the rest is reported: it takes moved
weight, not turns.
"""

from dataclasses import dataclass

import numpy as np

from solver.checks import not_negative, positive
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
class Axle:
    """Springs, seats and tyres of one axle, left and right.

    Attributes
    ----------
    track : float
        Between the middles of the tyre patches, m.
    spring_rates : tuple of float or None
        Left and right spring, N/m; None where nobody described them, and no turns
        can be worked out.
    motion_ratio : float
        Spring travel per wheel travel when both wheels move together.
    thread_pitch : float or None
        Seat travel along the spring for one turn, m; None for no threaded seat.
    tyre_rate : float or None
        One tyre, N/m; None for a rigid tyre.
    bar_rate : float
        Anti-roll bar: newtons at each wheel per metre of difference between the
        two wheels' travel; zero for none or disconnected.
    spring_base : float or None
        For a solid axle: distance between the springs across the car, m. Such an
        axle is stiffer in heave than in roll. None for independent wheels.
    adjustable : bool
        Whether its seats can be turned.
    """

    track: float
    spring_rates: tuple | None = None
    motion_ratio: float = 1.0
    thread_pitch: float | None = None
    tyre_rate: float | None = None
    bar_rate: float = 0.0
    spring_base: float | None = None
    adjustable: bool = True


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


def target_from_cross(measured, cross_percent):
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


def seat_turns(measured, target, wheelbase, front, rear, gravity=9.80665, keep_height=True):
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
    axles = (_checked("front", front), _checked("rear", rear))
    _check_seats(axles, keep_height)
    length = positive("the wheelbase", wheelbase, "m")
    weigh(measured)
    weigh(target)
    ride = _ride_matrix(length, front.track, rear.track)
    warp = _warp(front.track, rear.track)
    wanted = (target.as_array() - measured.as_array()) * gravity
    change = warp * (warp @ wanted) / (warp @ warp)
    stiffness, seats = _suspension(axles)
    soft = np.diag([_tyre_softness(axle) for axle in axles for _ in range(2)])
    needed = change + stiffness @ soft @ change
    if keep_height:
        travel = np.linalg.solve(seats, needed)
        rise = np.zeros(4)
    else:
        # w.Kw^-1 (D s - needed) = w.B q = 0: one condition on the seats.
        pitch = _pitches(axles)
        row = np.linalg.solve(stiffness, seats).T @ warp * pitch
        count = row * (warp @ np.linalg.solve(stiffness, needed)) / (row @ row)
        travel = count * pitch
        rise = np.linalg.solve(stiffness, seats @ travel - needed)
        rise = ride @ np.linalg.lstsq(ride, rise, rcond=None)[0]
    return _result(measured, target, change / gravity, travel, rise, axles, keep_height)


def _result(measured, target, change, travel, rise, axles, keep_height):
    pitches = _pitches(axles)
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


def _checked(name, axle):
    if axle.spring_rates is None:
        raise ValueError(f"the {name} springs are not described: seat turns cannot be worked out.")
    positive(f"the {name} track", axle.track, "m")
    for side, rate in zip(("left", "right"), axle.spring_rates, strict=True):
        positive(f"the {side} {name} spring rate", rate, "N/m")
    positive(f"the {name} motion ratio", axle.motion_ratio)
    if axle.thread_pitch is None and axle.adjustable:
        raise ValueError(f"the {name} seat's thread pitch is not given: seat turns cannot be worked out.")
    if axle.thread_pitch is not None:
        positive(f"the {name} seat's thread pitch", axle.thread_pitch, "m")
    not_negative(f"the {name} anti-roll bar rate", axle.bar_rate, "N/m")
    if axle.tyre_rate is not None:
        positive(f"the {name} tyre rate", axle.tyre_rate, "N/m")
    if axle.spring_base is not None:
        positive(f"the distance between the {name} springs", axle.spring_base, "m")
    return axle


def _check_seats(axles, keep_height):
    if not any(axle.adjustable for axle in axles):
        raise ValueError("no spring seat can be turned: at least one axle must be adjustable.")
    if keep_height and not all(axle.adjustable for axle in axles):
        raise ValueError(
            "the ride height is to be kept, which takes turns at all four seats:"
            " one axle is marked as not adjustable."
        )


def _pitches(axles):
    """Seat travel for one turn at each corner, zero where the seat does not turn."""
    return np.array([axle.thread_pitch if axle.adjustable else 0.0 for axle in axles for _ in range(2)])


def _ride_matrix(length, front_track, rear_track):
    """Rise at the four wheels for unit heave, nose-up pitch and left-up roll."""
    x = [length, length, 0.0, 0.0]
    y = [front_track / 2, -front_track / 2, rear_track / 2, -rear_track / 2]
    return np.column_stack([np.ones(4), x, y])


def _warp(front_track, rear_track):
    return np.array([-1.0 / front_track, 1.0 / front_track, 1.0 / rear_track, -1.0 / rear_track])


def _tyre_softness(axle):
    return 0.0 if axle.tyre_rate is None else 1.0 / axle.tyre_rate


def _suspension(axles):
    """Wheel stiffness (4, 4) and wheel force per seat travel (4, 4)."""
    stiffness, seats = np.zeros((4, 4)), np.zeros((4, 4))
    for index, axle in enumerate(axles):
        block = slice(2 * index, 2 * index + 2)
        near = 1.0 if axle.spring_base is None else (1.0 + axle.spring_base / axle.track) / 2.0
        levers = axle.motion_ratio * np.array([[near, 1.0 - near], [1.0 - near, near]])
        rates = np.diag(axle.spring_rates)
        bar = axle.bar_rate * np.array([[1.0, -1.0], [-1.0, 1.0]])
        stiffness[block, block] = levers.T @ rates @ levers + bar
        seats[block, block] = levers.T @ rates
    return stiffness, seats
