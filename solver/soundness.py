"""What must hold between the numbers of a car before it can be solved."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import TYPE_CHECKING, Any

from solver.car import FourLink, Hit
from solver.faults import Fault

if TYPE_CHECKING:
    from solver.car import Car

GRAVITY = 9.80665
SAME_PIN = 1e-3


def faults_of(car: Car) -> list[Fault]:
    """Every fault in how a car's numbers stand together.

    Parameters
    ----------
    car : Car
        With each number already in its own range.

    Returns
    -------
    list of Fault
        Empty for a car that can be solved.
    """
    faults = [*_weights(car), *_mounts(car), *_drive(car)]
    linkage = car.rear.linkage
    faults += _four_link(linkage) if isinstance(linkage, FourLink) else _ladder_bar(linkage, car)
    if isinstance(car.rear.linkage, FourLink) and not faults:
        from solver.linkage_travel import travel_faults

        faults += travel_faults(car)
    return faults


def _weights(car: Car) -> Iterator[Fault]:
    front, rear = car.front.unsprung_mass, car.rear.unsprung_mass
    x, z = car.cg
    sprung = car.mass - front - rear
    if sprung <= 0.0:
        yield Fault("mass", car.mass, f"must be more than its axles weigh ({front + rear:g} kg)")
        return
    if not 0.0 < x < car.wheelbase:
        yield Fault("cg.x", x, f"must be between the axles: from 0 to {car.wheelbase:g} m")
        return
    radius = car.rear.tyre_radius
    if z <= radius and z <= car.front.tyre_radius:
        yield Fault("cg.z", z, f"must be above the axle centre ({radius:g} m)")
    elif z > min(1.5, 0.6 * car.wheelbase):
        yield Fault("cg.z", z, "is above the roof of any car: check the measurement")
    sprung_z = (car.mass * z - front * car.front.tyre_radius - rear * radius) / sprung
    if sprung_z <= 0.0:
        yield Fault("cg.z", z, "puts the sprung weight below the ground")
    front_load = car.mass * GRAVITY * x / car.wheelbase
    rear_load = car.mass * GRAVITY - front_load
    if front_load <= front * GRAVITY:
        yield Fault("front.unsprung_mass", front, "must weigh less than the front tyres carry")
    if rear_load <= rear * GRAVITY:
        yield Fault("rear.unsprung_mass", rear, "must weigh less than the rear tyres carry")


def _mounts(car: Car) -> Iterator[Fault]:
    if all(entry.spring is None for entry in car.rear.springs):
        yield Fault("rear.springs", None, "hold no spring: one entry needs a spring")
    for i, entry in enumerate(car.rear.springs):
        if math.dist(entry.chassis, entry.housing) < 0.02:
            where = f"rear.springs.{i}.chassis"
            yield Fault(where, entry.chassis, "must be at least 20 mm from the housing mount")
    for name in ("droop_stop", "bump_stop"):
        stop = getattr(car.rear, name)
        if stop and stop.chassis and math.dist(stop.chassis, stop.housing) < 0.02:
            where = f"rear.{name}.chassis"
            yield Fault(where, stop.chassis, "must be at least 20 mm from the housing mount")


def _drive(car: Car) -> Iterator[Fault]:
    if isinstance(car.hit, Hit):
        return
    tyre = car.rear.tyre
    needed = {
        "rear.wheel_inertia": car.rear.wheel_inertia,
        "rear.tyre.grip": tyre.grip,
        "rear.tyre.slip_stiffness": tyre.slip_stiffness,
    }
    for where, value in needed.items():
        if value is None:
            yield Fault(where, None, "is needed when the hit is a wheel torque or an engine")
    if tyre.grip and tyre.sliding_grip and tyre.sliding_grip > tyre.grip:
        most = f"must not be more than the peak grip ({tyre.grip:g})"
        yield Fault("rear.tyre.sliding_grip", tyre.sliding_grip, most)


def _four_link(linkage: Any) -> Iterator[Fault]:
    lower, upper, at = linkage.lower, linkage.upper, "rear.linkage"
    for name, link in (("lower", lower), ("upper", upper)):
        if math.dist(link.chassis, link.housing) < 0.05:
            where = f"{at}.{name}.chassis"
            yield Fault(where, link.chassis, "must be at least 50 mm from the bar's housing pin")
        elif link.chassis[0] <= link.housing[0]:
            where = f"{at}.{name}.chassis"
            yield Fault(where, link.chassis, "must be ahead of the bar's housing pin")
    for end in ("chassis", "housing"):
        low, high = getattr(lower, end), getattr(upper, end)
        if math.dist(low, high) < SAME_PIN:
            yield Fault(f"{at}.upper.{end}", high, "must not be the lower bar's pin: one hole each")
        elif high[1] <= low[1]:
            yield Fault(
                f"{at}.upper.{end}",
                high,
                f"must be above the lower bar's pin ({low[1]:g} m): the bars are crossed",
            )


def _ladder_bar(linkage: Any, car: Car) -> Iterator[Fault]:
    axle = (0.0, car.rear.tyre_radius)
    if linkage.chassis[0] <= 0.1 or math.dist(linkage.chassis, axle) < 0.1:
        yield Fault("rear.linkage.chassis", linkage.chassis, "must be at least 100 mm ahead of the axle")
