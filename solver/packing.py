"""From a `Car` to the kernel's rows of numbers, and from file paths to columns."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from solver.car import FourLink
from solver.dyno import damper_table
from solver.hinges import hinges, value_of
from solver.kernel import layout as L
from solver.packing_drive import put_drive

if TYPE_CHECKING:
    from solver.car import Car, Damper, Point, Rear, Spring, Stop, WheelieBar


class Row:
    """One lane as the kernel reads it: floats `p`, integers `n`, and where each path went."""

    def __init__(self, p: np.ndarray, n: np.ndarray, columns: dict) -> None:
        self.p, self.n, self.columns = p, n, columns


def pack(car: Car) -> Row:
    """Lay a car's numbers out for the kernel.

    Parameters
    ----------
    car : Car

    Returns
    -------
    Row
        `columns` maps car-file paths to (column of `p`, factor on the file's value).
    """
    n = np.zeros(L.INTEGERS, dtype=np.int64)
    scalars = np.zeros(L.SCALARS)
    columns: dict[str, tuple[int, float]] = {}
    _put_body(scalars, columns, car)
    _put_linkage(scalars, n, columns, car.rear.linkage)
    lines = _put_lines(scalars, n, columns, car.rear)
    _put_wheelie_bar(scalars, n, columns, car.wheelie_bar)
    _put_stops(scalars, columns, car)
    n[L.FRONT_STOPS] = car.front.bump_stop is not None or car.front.droop_stop is not None
    tail: list[float] = []
    adder = Curves(scalars, n, tail, columns)
    _put_curves(adder, car, lines)
    table = put_drive(scalars, n, adder, car)
    n[L.HIT_AT], n[L.HIT_COUNT] = L.SCALARS + len(tail), len(table)
    tail.extend(value for pair in table for value in pair)
    return Row(np.concatenate([scalars, tail]), n, columns)


def _put(scalars: np.ndarray, columns: dict, where: int, path: str, value: float) -> None:
    scalars[where] = value
    columns[path] = (where, 1.0)


def _put_body(scalars: np.ndarray, columns: dict, car: Car) -> None:
    front, rear = car.front, car.rear
    plain = {
        "wheelbase": (L.WHEELBASE, car.wheelbase),
        "mass": (L.MASS, car.mass),
        "cg.x": (L.CG_X, car.cg[0]),
        "cg.z": (L.CG_Z, car.cg[1]),
        "chassis.pitch_inertia": (L.CHASSIS_INERTIA, car.pitch_inertia),
        "front.unsprung_mass": (L.FRONT_MASS, front.unsprung_mass),
        "front.tyre_radius": (L.FRONT_RADIUS, front.tyre_radius),
        "front.tyre.rate": (L.FRONT_TYRE_RATE, front.tyre.rate),
        "front.tyre.damping": (L.FRONT_TYRE_DAMPING, front.tyre.damping),
        "rear.unsprung_mass": (L.REAR_MASS, rear.unsprung_mass),
        "rear.housing_inertia": (L.HOUSING_INERTIA, rear.housing_inertia),
        "rear.tyre_radius": (L.REAR_RADIUS, rear.tyre_radius),
        "rear.tyre.rate": (L.REAR_TYRE_RATE, rear.tyre.rate),
        "rear.tyre.damping": (L.REAR_TYRE_DAMPING, rear.tyre.damping),
        "hit.scale": (L.HIT_SCALE, 1.0),
    }
    for path, (where, value) in plain.items():
        _put(scalars, columns, where, path, value)
    scalars[L.DURATION], scalars[L.OUTPUT_STEP] = car.run.duration, car.run.output_step
    scalars[L.ROLLOUT] = car.run.rollout


def _put_linkage(scalars: np.ndarray, n: np.ndarray, columns: dict, linkage: Any) -> None:
    n[L.KIND] = L.FOUR_LINK if isinstance(linkage, FourLink) else L.LADDER_BAR
    if n[L.KIND] == L.LADDER_BAR:
        _put_point(scalars, columns, L.LOWER_CX, "rear.linkage.chassis", linkage.chassis)
        return
    for name, at in (("lower", L.LOWER_CX), ("upper", L.UPPER_CX)):
        link, path = getattr(linkage, name), f"rear.linkage.{name}"
        _put_point(scalars, columns, at, f"{path}.chassis", link.chassis)
        _put_point(scalars, columns, at + 2, f"{path}.housing", link.housing)


def _put_point(scalars: np.ndarray, columns: dict, at: int, path: str, point: Point) -> None:
    scalars[at], scalars[at + 1] = point
    columns[f"{path}.x"], columns[f"{path}.z"] = (at, 1.0), (at + 1, 1.0)


def _put_lines(scalars: np.ndarray, n: np.ndarray, columns: dict, rear: Rear) -> list:
    """Spring lines, then lines for stops on mounts of their own; the lines' entries."""
    entries = [(f"rear.springs.{i}", entry) for i, entry in enumerate(rear.springs)]
    for name, slot in (("bump_stop", L.BUMP_LINE), ("droop_stop", L.DROOP_LINE)):
        stop = getattr(rear, name)
        n[slot] = -1
        if stop is not None:
            n[slot] = 0
            if stop.chassis is not None:
                n[slot] = len(entries)
                entries.append((f"rear.{name}", stop))
    for i, (path, entry) in enumerate(entries):
        at = L.LINES + L.LINE_WIDTH * i
        _put_point(scalars, columns, at + L.LINE_CX, f"{path}.chassis", entry.chassis)
        _put_point(scalars, columns, at + L.LINE_HX, f"{path}.housing", entry.housing)
    n[L.N_LINES] = len(entries)
    n[L.TRAVEL_LINE] = next(i for i, s in enumerate(rear.springs) if s.spring)
    n[L.SHOCK_LINE] = next((i for i, s in enumerate(rear.springs) if s.damper), n[L.TRAVEL_LINE])
    return entries


def _put_wheelie_bar(scalars: np.ndarray, n: np.ndarray, columns: dict, bar: WheelieBar | None) -> None:
    if bar is None:
        return
    n[L.WHEELIE_ON] = L.ON_CHASSIS if bar.mounted_on == "chassis" else L.ON_HOUSING
    places = (L.WHEELIE_X, L.WHEELIE_CLEARANCE, L.WHEELIE_RATE, L.WHEELIE_DAMPING)
    for where, name in zip(places, ("x", "clearance", "rate", "damping"), strict=True):
        _put(scalars, columns, where, f"wheelie_bar.{name}", getattr(bar, name))


def _put_stops(scalars: np.ndarray, columns: dict, car: Car) -> None:
    for path, stop, clearance, damping in (
        ("front.bump_stop", car.front.bump_stop, L.FRONT_BUMP_CLEARANCE, L.FRONT_BUMP_DAMPING),
        ("front.droop_stop", car.front.droop_stop, L.FRONT_DROOP_CLEARANCE, L.FRONT_DROOP_DAMPING),
        ("rear.bump_stop", car.rear.bump_stop, L.REAR_BUMP_CLEARANCE, L.REAR_BUMP_DAMPING),
        ("rear.droop_stop", car.rear.droop_stop, L.REAR_DROOP_CLEARANCE, L.REAR_DROOP_DAMPING),
    ):
        if stop is not None:
            _put(scalars, columns, clearance, f"{path}.clearance", stop.clearance)
            _put(scalars, columns, damping, f"{path}.damping", stop.damping)


def _put_curves(adder: Curves, car: Car, lines: list) -> None:
    front, rear = car.front, car.rear
    stops = (
        (L.FRONT_BUMP, "front.bump_stop", front.bump_stop),
        (L.FRONT_DROOP, "front.droop_stop", front.droop_stop),
        (L.REAR_BUMP, "rear.bump_stop", rear.bump_stop),
        (L.REAR_DROOP, "rear.droop_stop", rear.droop_stop),
    )
    adder.spring(L.FRONT_SPRING, "front.spring", front.spring)
    adder.damper(L.FRONT_DAMPER, "front.damper", front.damper)
    for which, path, stop in stops:
        adder.stop(which, path, stop)
    for i in range(L.MAX_LINES):
        path, entry = lines[i] if i < len(lines) else ("", None)
        adder.spring(L.LINE_SPRING + i, f"{path}.spring", getattr(entry, "spring", None))
        adder.damper(L.LINE_DAMPER + i, f"{path}.damper", getattr(entry, "damper", None))


class Curves:
    """Lays curves down one after another and notes where each stands."""

    def __init__(self, scalars: np.ndarray, n: np.ndarray, tail: list[float], columns: dict) -> None:
        self.scalars, self.n, self.tail, self.columns = scalars, n, tail, columns

    def add(self, which: int, row: list[float], path: str | None = None, factor: float = 1.0) -> None:
        """Lay down (value, slope, knot, change, ...), noting the slope's column under `path`."""
        leg = L.LEGS + 2 * which
        self.scalars[leg], self.scalars[leg + 1] = row[:2]
        self.n[L.CURVES + 2 * which] = L.SCALARS + len(self.tail)
        self.n[L.CURVES + 2 * which + 1] = (len(row) - 2) // 2
        self.tail.extend(row[2:])
        if path:
            self.columns[path] = (leg + 1, factor)

    def spring(self, which: int, path: str, spring: Spring | None) -> None:
        if spring is None:
            self.add(which, [0.0, 0.0])
        elif spring.rate is not None:
            at_wheel = spring.motion_ratio**2
            self.add(which, [0.0, spring.rate * at_wheel], f"{path}.rate", at_wheel)
        else:
            row = hinges(spring.table, spring.motion_ratio)
            # Measured from ride height: the solved preload replaces the table's own.
            row[0] -= value_of(row, 0.0)
            self.add(which, row)

    def damper(self, which: int, path: str, damper: Damper | None) -> None:
        if damper is None:
            self.add(which, [0.0, 0.0])
        elif damper.rate is not None:
            at_wheel = damper.motion_ratio**2
            self.add(which, [0.0, damper.rate * at_wheel], f"{path}.rate", at_wheel)
        else:
            self.add(which, hinges(damper_table(damper), damper.motion_ratio))

    def stop(self, which: int, path: str, stop: Stop | None) -> None:
        if stop is None:
            self.add(which, [0.0, 0.0])
        elif stop.rate is not None:
            self.add(which, [0.0, stop.rate], f"{path}.rate")
        else:
            self.add(which, hinges(stop.table))
