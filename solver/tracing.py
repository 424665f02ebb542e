"""Histories and dated events of one lane, from what the kernel recorded."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np

from solver.car import Hit, has_engine
from solver.geometry import meeting, parallel, turned
from solver.kernel import layout as L
from solver.rest_figures import plan_angles

if TYPE_CHECKING:
    from solver.car import Car

EVENT_WORDS = {
    (L.GATE_FRONT_TYRE, 0): ("front_tyres_leave", "Front tyres leave the ground"),
    (L.GATE_FRONT_TYRE, 1): ("front_tyres_land", "Front tyres land"),
    (L.GATE_REAR_TYRE, 0): ("rear_tyres_leave", "Rear tyres leave the ground"),
    (L.GATE_REAR_TYRE, 1): ("rear_tyres_land", "Rear tyres land"),
    (L.GATE_FRONT_BUMP, 1): ("front_bottoms", "Front meets its bump stop"),
    (L.GATE_FRONT_BUMP, 0): ("front_off_bump", "Front leaves its bump stop"),
    (L.GATE_FRONT_DROOP, 1): ("front_tops", "Front meets its droop stop"),
    (L.GATE_FRONT_DROOP, 0): ("front_off_droop", "Front leaves its droop stop"),
    (L.GATE_REAR_BUMP, 1): ("rear_bottoms", "Rear meets its bump stop"),
    (L.GATE_REAR_BUMP, 0): ("rear_off_bump", "Rear leaves its bump stop"),
    (L.GATE_REAR_DROOP, 1): ("rear_tops", "Rear meets its droop stop"),
    (L.GATE_REAR_DROOP, 0): ("rear_off_droop", "Rear leaves its droop stop"),
    (L.GATE_WHEELIE, 1): ("wheelie_bar_touches", "Wheelie bar touches"),
    (L.GATE_WHEELIE, 0): ("wheelie_bar_lifts", "Wheelie bar lifts off"),
    (L.GATE_SHIFT, 1): ("shift", "Shift to the next gear"),
    (L.GATE_SHIFT, 0): ("below_shift", "Back below the shift speed"),
    (L.GATE_ROLLOUT, 1): ("rollout", "Front tyres clear the starting beam"),
    (L.GATE_ROLLOUT, 0): ("rolled_back", "Front tyres roll back into the starting beam"),
    (L.GATE_SIXTY_FOOT, 1): ("sixty_foot", "60 ft past the beam"),
    (L.GATE_SIXTY_FOOT, 0): ("sixty_foot_back", "Back over 60 ft"),
}

# Histories that are one output of the kernel as it stands.
_DIRECT = {
    "rear_spring_force": L.O_REAR_SPRING,
    "rear_coil_force": L.O_REAR_COIL,
    "rear_shock_force": L.O_REAR_SHOCK,
    "rear_spring_travel": L.O_TRAVEL,
    "rear_spring_velocity": L.O_TRAVEL_SPEED,
    "rear_shock_travel": L.O_SHOCK_TRAVEL,
    "rear_shock_velocity": L.O_SHOCK_SPEED,
    "rear_load": L.O_REAR_LOAD,
    "front_load": L.O_FRONT_LOAD,
    "front_travel": L.O_FRONT_TRAVEL,
    "front_velocity": L.O_FRONT_SPEED,
    "front_spring_force": L.O_FRONT_SPRING,
    "front_clearance": L.O_FRONT_CLEARANCE,
    "ride_height_front": L.O_RIDE_FRONT,
    "ride_height_rear": L.O_RIDE_REAR,
    "acceleration": L.O_ACCELERATION,
    "hit": L.O_HIT,
    "grip_needed": L.O_GRIP,
    "rear_stop_force": L.O_REAR_STOP,
    "front_stop_force": L.O_FRONT_STOP,
    "wheelie_bar_load": L.O_WHEELIE,
    "speed": L.O_SPEED,
    "distance": L.O_DISTANCE,
}

# Only with drive torque.
_DRIVEN = {
    "wheel_torque": L.O_WHEEL_TORQUE,
    "wheel_speed": L.O_SPIN,
    "slip": L.O_SLIP,
    "engine_speed": L.O_ENGINE,
}


@dataclass(frozen=True)
class Event:
    """A contact that began or ended: when (s), a name for programs, words for people."""

    time: float
    kind: str
    words: str


def event_list(log: np.ndarray, count: int) -> tuple[Event, ...]:
    """`Event` tuple from a lane's log, in time order."""
    rows = log[: min(count, L.EVENTS)]
    found = [Event(float(t), *EVENT_WORDS[divmod(int(kind), 2)]) for kind, t in rows]
    return tuple(sorted(found, key=lambda event: event.time))


def histories_of(car: Car, p: np.ndarray, states: np.ndarray, outputs: np.ndarray) -> dict[str, np.ndarray]:
    """Named histories of one lane.

    Parameters
    ----------
    car : Car
    p : float array (width,)
        The settled row.
    states, outputs : float arrays (reports, STATES), (reports, OUTPUTS)

    Returns
    -------
    dict of str to float array (reports,)
    """
    lower_plan, upper_plan = plan_angles(car)
    # One copy, channel by channel: columns of the record are slow to walk.
    states, outputs = np.ascontiguousarray(states.T), np.ascontiguousarray(outputs.T)
    named = {
        "t": np.arange(states.shape[1]) * car.run.output_step,
        "pitch": states[L.PITCH],
        "cg_x": states[L.X],
        "cg_z": states[L.Z],
        "housing_angle": states[L.HOUSING],
        "upper_link_force": outputs[L.O_UPPER] / np.cos(upper_plan),
        "lower_link_force": outputs[L.O_LOWER] / np.cos(lower_plan),
    }
    named.update({name: outputs[at] for name, at in _DIRECT.items()})
    for name, at in _DRIVEN.items():
        there = has_engine(car) if name == "engine_speed" else not isinstance(car.hit, Hit)
        named[name] = outputs[at] if there else np.full(outputs.shape[1], np.nan)
    named.update(_moving_centre(car, p, states))
    return named


def _moving_centre(car: Car, p: np.ndarray, states: np.ndarray) -> dict[str, np.ndarray]:
    """Instant centre and the trade's anti-squat at each instant, and the distance run."""
    x, z, pitch = states[L.X] + p[L.SPRUNG_X], states[L.Z] + p[L.SPRUNG_Z], states[L.PITCH]
    axle_x, axle_z = states[L.HX], states[L.HZ] + p[L.REAR_RADIUS]

    body, housing = (np.cos(pitch), np.sin(pitch)), (np.cos(states[L.HOUSING]), np.sin(states[L.HOUSING]))

    def on_chassis(px: Any, pz: Any) -> tuple:
        dx, dz = turned(*body, (px - p[L.SPRUNG_X], pz - p[L.SPRUNG_Z]))
        return x + dx, z + dz

    def on_housing(px: Any, pz: Any) -> tuple:
        dx, dz = turned(*housing, (px, pz - p[L.REAR_RADIUS]))
        return axle_x + dx, axle_z + dz

    lower = on_chassis(p[L.LCX], p[L.LCZ]), on_housing(p[L.LHX], p[L.LHZ])
    upper = on_chassis(p[L.UCX], p[L.UCZ]), on_housing(p[L.UHX], p[L.UHZ])
    # Seen from the patch, which moves with the axle.
    a, b, c, d = ((px - axle_x, pz) for px, pz in (*lower, *upper))
    meet_x, meet_z, w = meeting(a, b, c, d)
    gone = parallel(a, b, c, d, w)
    w = np.where(gone, np.nan, w)
    front_x, front_z = on_chassis(p[L.WHEELBASE], p[L.FRONT_RADIUS] + states[L.SLIDE])
    height = (p[L.SPRUNG_MASS] * z + p[L.REAR_MASS] * axle_z + p[L.FRONT_MASS] * front_z) / car.mass
    with np.errstate(divide="ignore", invalid="ignore"):
        return {
            "instant_centre_x": meet_x / w,
            "instant_centre_z": meet_z / w,
            "anti_squat": 100.0 * (meet_z / meet_x) * (front_x - axle_x) / height,
        }
