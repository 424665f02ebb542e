"""From the kernel's accumulators to named figures: the same for one lane and for thousands."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from solver.car import Hit, has_engine
from solver.kernel import layout as L
from solver.rest_figures import plan_angles

if TYPE_CHECKING:
    from solver.car import Car

# name: (output, greatest or least, factor)
_PEAKS = {
    "peak_rear_load": (L.O_REAR_LOAD, "greatest", 1.0),
    "least_rear_load": (L.O_REAR_LOAD, "least", 1.0),
    "peak_front_load": (L.O_FRONT_LOAD, "greatest", 1.0),
    "least_front_load": (L.O_FRONT_LOAD, "least", 1.0),
    "peak_rear_spring_force": (L.O_REAR_SPRING, "greatest", 1.0),
    "least_rear_spring_force": (L.O_REAR_SPRING, "least", 1.0),
    "peak_rear_shock_force": (L.O_REAR_SHOCK, "greatest", 1.0),
    "least_rear_shock_force": (L.O_REAR_SHOCK, "least", 1.0),
    "peak_front_spring_force": (L.O_FRONT_SPRING, "greatest", 1.0),
    "least_front_spring_force": (L.O_FRONT_SPRING, "least", 1.0),
    "upper_link_tension": (L.O_UPPER, "greatest", 1.0),
    "upper_link_compression": (L.O_UPPER, "least", 1.0),
    "lower_link_tension": (L.O_LOWER, "greatest", 1.0),
    "lower_link_compression": (L.O_LOWER, "least", 1.0),
    "rear_squat": (L.O_TRAVEL, "greatest", 1.0),
    "rear_separation": (L.O_TRAVEL, "least", -1.0),
    "rear_shock_compression_speed": (L.O_SHOCK_SPEED, "greatest", 1.0),
    "rear_shock_rebound_speed": (L.O_SHOCK_SPEED, "least", -1.0),
    "front_bump": (L.O_FRONT_TRAVEL, "greatest", 1.0),
    "front_droop": (L.O_FRONT_TRAVEL, "least", -1.0),
    "peak_pitch": (L.O_PITCH, "greatest", 1.0),
    "peak_housing_angle": (L.O_HOUSING, "greatest", 1.0),
    "least_housing_angle": (L.O_HOUSING, "least", 1.0),
    "front_rise": (L.O_RIDE_FRONT, "greatest", 1.0),
    "rear_rise": (L.O_RIDE_REAR, "greatest", 1.0),
    "rear_drop": (L.O_RIDE_REAR, "least", 1.0),
    "peak_acceleration": (L.O_ACCELERATION, "greatest", 1.0),
    "peak_grip_needed": (L.O_GRIP, "greatest", 1.0),
    "front_lift_height": (L.O_FRONT_CLEARANCE, "greatest", 1.0),
    "peak_wheelie_bar_load": (L.O_WHEELIE, "greatest", 1.0),
    "peak_rear_bump_stop_force": (L.O_REAR_STOP, "greatest", 1.0),
    "peak_rear_droop_stop_force": (L.O_REAR_STOP, "least", -1.0),
    "peak_front_bump_stop_force": (L.O_FRONT_STOP, "greatest", 1.0),
    "peak_front_droop_stop_force": (L.O_FRONT_STOP, "least", -1.0),
    "peak_slip": (L.O_SLIP, "greatest", 1.0),
    "peak_wheel_torque": (L.O_WHEEL_TORQUE, "greatest", 1.0),
    "least_engine_speed": (L.O_ENGINE, "least", 1.0),
}

_FIRST_TIMES = {
    "front_lift_time": (L.GATE_FRONT_TYRE, 0),
    "front_landing_time": (L.GATE_FRONT_TYRE, 1),
    "rear_unload_time": (L.GATE_REAR_TYRE, 0),
    "rear_bottoming_time": (L.GATE_REAR_BUMP, 1),
    "rear_topping_time": (L.GATE_REAR_DROOP, 1),
    "front_bottoming_time": (L.GATE_FRONT_BUMP, 1),
    "front_topping_time": (L.GATE_FRONT_DROOP, 1),
    "wheelie_bar_time": (L.GATE_WHEELIE, 1),
    "rollout_time": (L.GATE_ROLLOUT, 1),
    "sixty_foot_time": (L.GATE_SIXTY_FOOT, 1),
}

# What a car may lack: (figures, whether the car has it).
_NEEDS = (
    (("peak_wheelie_bar_load",), lambda car: car.wheelie_bar),
    (("peak_rear_bump_stop_force",), lambda car: car.rear.bump_stop),
    (("peak_rear_droop_stop_force",), lambda car: car.rear.droop_stop),
    (("peak_front_bump_stop_force",), lambda car: car.front.bump_stop),
    (("peak_front_droop_stop_force",), lambda car: car.front.droop_stop),
    (("peak_slip", "peak_wheel_torque"), lambda car: not isinstance(car.hit, Hit)),
    (("least_engine_speed",), has_engine),
)

_NAMES = list(_PEAKS)
_PLACES = np.array([4 * output + (0 if side == "greatest" else 2) for output, side, _ in _PEAKS.values()])
_FACTORS = np.array([factor for *_, factor in _PEAKS.values()])
_LIFT, _GRIP = _NAMES.index("front_lift_height"), _NAMES.index("peak_grip_needed")


def reduce(car: Car, p: np.ndarray, kept: np.ndarray, log: np.ndarray, counts: np.ndarray) -> dict[str, np.ndarray]:
    """Figures of lanes that share a car's structure.

    Parameters
    ----------
    car : Car
        The base car: which stops, bars and grips there are.
    p : float array (lanes, width)
        Settled rows.
    kept, log, counts : arrays (lanes, ACCUMULATORS), (lanes, EVENTS, 2), (lanes,)

    Returns
    -------
    dict of str to float array (lanes,)
        SI; NaN where there is nothing to tell (front tyres that never left).
    """
    figures = _peaks(car, p, kept)
    _first_peak(figures, kept)
    for i, (window, name) in enumerate(zip(L.WINDOWS, ("100ms", "250ms", "500ms"), strict=True)):
        held = kept[:, L.A_WINDOWS + i] / window
        figures[f"mean_rear_load_{name}"] = np.where(p[:, L.DURATION] >= window - 1e-9, held, np.nan)
    first = first_times(log, counts)
    for name, (gate, state) in _FIRST_TIMES.items():
        figures[name] = first[:, 2 * gate + state]
    figures["sixty_foot_time"] = figures["sixty_foot_time"] - figures["rollout_time"]
    figures["end_speed"] = kept[:, L.A_LAST + L.O_SPEED] + 0.0
    figures["end_distance"] = kept[:, L.A_LAST + L.O_DISTANCE] + 0.0
    _travel_left(figures, car, p, kept)
    return figures


def first_times(log: np.ndarray, counts: np.ndarray) -> np.ndarray:
    """Time of the first event of every kind, (lanes, kinds); NaN where there was none."""
    first = np.full((len(log), 2 * L.N_GATES), np.nan)
    for slot in range(min(int(counts.max(initial=0)), log.shape[1]) - 1, -1, -1):
        lanes = np.flatnonzero(counts > slot)
        first[lanes, log[lanes, slot, 0].astype(np.int64)] = log[lanes, slot, 1]
    return first


def _peaks(car: Car, p: np.ndarray, kept: np.ndarray) -> dict[str, np.ndarray]:
    """Greatest and least values with their times; a time of nothing is nothing."""
    values, times = kept[:, _PLACES] * _FACTORS, kept[:, _PLACES + 1]
    for names, has in _NEEDS:
        if not has(car):
            values[:, [_NAMES.index(name) for name in names]] = np.nan
    for side, plan in zip(("lower", "upper"), plan_angles(car), strict=True):
        if plan:
            both = [_NAMES.index(f"{side}_link_{stress}") for stress in ("tension", "compression")]
            values[:, both] /= np.cos(plan)
    times[:, _LIFT] = np.where(values[:, _LIFT] > 0.0, times[:, _LIFT], np.nan)
    times[np.isnan(values)] = np.nan
    figures = {}
    for i, name in enumerate(_NAMES):
        figures[name], figures[f"{name}_time"] = values[:, i], times[:, i]
    grip = p[:, L.GRIP] if car.rear.tyre.grip else np.full(len(p), np.nan)
    figures["peak_grip_used"] = values[:, _GRIP] / grip
    figures["peak_grip_used_time"] = times[:, _GRIP] + 0.0 * grip
    return figures


def _first_peak(figures: dict, kept: np.ndarray) -> None:
    fell = kept[:, L.A_DIP_TIME] >= 0.0
    for name, at, time in (
        ("first_peak_rear_load", L.A_FIRST_PEAK, L.A_FIRST_PEAK_TIME),
        ("rear_load_dip", L.A_DIP, L.A_DIP_TIME),
    ):
        figures[name] = np.where(fell, kept[:, at], np.nan)
        figures[f"{name}_time"] = np.where(fell, kept[:, time], np.nan)


def _travel_left(figures: dict, car: Car, p: np.ndarray, kept: np.ndarray) -> None:
    """Clearance less the greatest travel; below nil is how far into the stop it went."""
    left = {
        "rear_bump": (car.rear.bump_stop, -kept[:, 4 * L.O_REAR_BUMP_PAST]),
        "rear_droop": (car.rear.droop_stop, -kept[:, 4 * L.O_REAR_DROOP_PAST]),
        "front_bump": (car.front.bump_stop, p[:, L.FRONT_BUMP_CLEARANCE] - figures["front_bump"]),
        "front_droop": (car.front.droop_stop, p[:, L.FRONT_DROOP_CLEARANCE] - figures["front_droop"]),
    }
    for name, (stop, values) in left.items():
        figures[f"{name}_travel_left"] = values if stop else np.full(len(p), np.nan)
