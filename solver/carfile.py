"""The car file: one JSON object that describes one car in one setup (CARFILE.md)."""

from __future__ import annotations

import dataclasses
import json
from pathlib import Path
from typing import TYPE_CHECKING, Any

from solver.bar_section import read_bars
from solver.car import Car, FourLink, Front, Rear, Run, WheelieBar
from solver.carfile_drive import drive_to_dict, read_drive
from solver.carfile_parts import (
    read_damper,
    read_linkage,
    read_rear_spring,
    read_spring,
    read_stop,
    read_tyre,
)
from solver.corner_section import read_corners
from solver.faults import CarError, Fault
from solver.reading import Section
from solver.soundness import faults_of

if TYPE_CHECKING:
    pass

FORMAT, VERSION = "launch-ledger/car", 1
MAX_REAR_SPRINGS = 4
MAX_REPORTS = 20_000


def load_car(path: str | Path) -> Car:
    """Read a car file.

    Parameters
    ----------
    path : str or pathlib.Path

    Returns
    -------
    Car

    Raises
    ------
    CarError
        When the file cannot be read, is no JSON, repeats a key, holds NaN or
        Infinity, or describes no car that can be solved; carries every fault.
    """
    try:
        text = Path(path).read_text(encoding="utf-8")
    except OSError as error:
        raise CarError([Fault("", str(path), f"cannot be read: {error.strerror}")]) from None
    except UnicodeDecodeError:
        raise CarError([Fault("", str(path), "is not a text file in UTF-8")]) from None
    return parse_car(text, str(path))


def parse_car(text: str, name: str = "the file") -> Car:
    """Read a car file's text.

    Parameters
    ----------
    text : str
    name : str, optional
        What to call it in a fault.

    Returns
    -------
    Car

    Raises
    ------
    CarError
        As for `load_car`.
    """
    try:
        data = json.loads(text, object_pairs_hook=_no_repeats, parse_constant=_no_constant)
    except CarError:
        raise
    except (ValueError, RecursionError) as error:
        raise CarError([Fault("", name, f"is not valid JSON: {error}")]) from None
    return car_from_dict(data)


def car_from_dict(data: Any) -> Car:
    """Make a car from the car file's JSON object, checking everything.

    Parameters
    ----------
    data : dict

    Returns
    -------
    Car

    Raises
    ------
    CarError
        With every fault found: unknown or missing keys, values out of range,
        geometry that cannot work.
    """
    faults: list[Fault] = []
    top = Section(data, "", faults)
    if not isinstance(data, dict):
        raise CarError(faults)
    _read_header(top)
    car = _read_car(top)
    top.refuse_the_rest()
    if not faults:
        faults.extend(faults_of(car))
    if faults:
        raise CarError(faults)
    object.__setattr__(car, "_sound", True)
    return car


def ensure_sound(car: Car) -> None:
    """Refuse a car made by hand that the car file would refuse.

    Raises
    ------
    CarError
    """
    if not getattr(car, "_sound", False):
        car_from_dict(car_to_dict(car))
        object.__setattr__(car, "_sound", True)


def car_to_dict(car: Car) -> dict[str, Any]:
    """The car file's JSON object for a car; `car_from_dict` gives the same car back.

    Parameters
    ----------
    car : Car

    Returns
    -------
    dict
    """
    kind = "four-link" if isinstance(car.rear.linkage, FourLink) else "ladder-bar"
    rear = {**_plain(car.rear), "linkage": {"kind": kind, **_plain(car.rear.linkage)}}
    sections = {"corners": car.corners, "bars": car.bars}
    return {
        "format": FORMAT,
        "version": VERSION,
        "name": car.name,
        "wheelbase": car.wheelbase,
        "mass": car.mass,
        "cg": {"x": car.cg[0], "z": car.cg[1]},
        "chassis": {"pitch_inertia": car.pitch_inertia},
        "front": _plain(car.front),
        "rear": rear,
        "wheelie_bar": _plain(car.wheelie_bar),
        "hit": drive_to_dict(car.hit, _plain),
        "run": _plain(car.run),
        **{name: _plain(section) for name, section in sections.items() if section is not None},
    }


# Keys the car file shows as null when there is nothing; every other one is left out.
SHOWN_EMPTY = {"spring", "damper", "droop_stop", "bump_stop"}


def _plain(thing: Any) -> Any:
    if dataclasses.is_dataclass(thing):
        pairs = ((f.name, getattr(thing, f.name), f.default) for f in dataclasses.fields(thing))
        return {name: _plain(value) for name, value, default in pairs if name in SHOWN_EMPTY or value != default}
    return [_plain(part) for part in thing] if isinstance(thing, tuple) else thing


def _read_header(top: Section) -> None:
    if top.take("format", f"{FORMAT!r}") not in (None, FORMAT):
        top.fault("format", top.data["format"], f"must be {FORMAT!r}")
    version = top.take("version", "the format's version")
    if version is not None and (isinstance(version, bool) or version != VERSION):
        top.fault("version", version, f"must be {VERSION}, the only version there is")


def _read_car(top: Section) -> Car:
    name = top.text("name")
    wheelbase = top.number("wheelbase", 1.0, 10.0, "m")
    mass = top.number("mass", 50.0, 20_000.0, "kg")
    car = Car(
        name=name,
        wheelbase=wheelbase,
        mass=mass,
        cg=_read_cg(top.section("cg")),
        pitch_inertia=_read_chassis(top.section("chassis")),
        front=_read_front(top.section("front")),
        rear=_read_rear(top.section("rear")),
        hit=read_drive(top.section("hit")),
        run=_read_run(top.section("run")),
        wheelie_bar=_read_wheelie_bar(top.optional_section("wheelie_bar")),
        corners=read_corners(top.optional_section("corners")),
    )
    return dataclasses.replace(car, bars=read_bars(top.optional_section("bars"), car.rear.linkage if car.rear else None))


def _read_cg(section: Any) -> Any:
    if section is None:
        return None
    cg = section.number("x", 0.01, 10.0, "m"), section.number("z", 0.05, 3.0, "m")
    section.refuse_the_rest()
    return cg


def _read_chassis(section: Any) -> Any:
    if section is None:
        return None
    inertia = section.number("pitch_inertia", 1.0, 1e5, "kg m^2")
    section.refuse_the_rest()
    return inertia


def _read_front(section: Any) -> Any:
    if section is None:
        return None
    front = Front(
        unsprung_mass=section.number("unsprung_mass", 0.5, 2000.0, "kg"),
        tyre_radius=section.number("tyre_radius", 0.1, 1.0, "m"),
        spring=read_spring(section.section("spring")),
        damper=read_damper(section.optional_section("damper")),
        tyre=read_tyre(section.section("tyre"), driven=False),
        droop_stop=read_stop(section.optional_section("droop_stop"), own_mounts=False),
        bump_stop=read_stop(section.optional_section("bump_stop"), own_mounts=False),
    )
    section.refuse_the_rest()
    return front


def _read_rear(section: Any) -> Any:
    if section is None:
        return None
    rear = Rear(
        unsprung_mass=section.number("unsprung_mass", 1.0, 5000.0, "kg"),
        housing_inertia=section.number("housing_inertia", 0.01, 1000.0, "kg m^2"),
        tyre_radius=section.number("tyre_radius", 0.1, 1.5, "m"),
        linkage=read_linkage(section.section("linkage")),
        springs=tuple(read_rear_spring(s) for s in section.sections("springs", 1, MAX_REAR_SPRINGS)),
        tyre=read_tyre(section.section("tyre"), driven=True),
        droop_stop=read_stop(section.optional_section("droop_stop"), own_mounts=True),
        bump_stop=read_stop(section.optional_section("bump_stop"), own_mounts=True),
        wheel_inertia=section.optional_number("wheel_inertia", 0.01, 1000.0, "kg m^2"),
    )
    section.refuse_the_rest()
    return rear


def _read_wheelie_bar(section: Any) -> Any:
    if section is None:
        return None
    bar = WheelieBar(
        x=section.number("x", -5.0, -0.2, "m, behind the rear axle"),
        clearance=section.number("clearance", 1e-4, 1.0, "m, off the ground at ride height"),
        rate=section.number("rate", 1e3, 1e7, "N/m"),
        damping=section.number("damping", 0.0, 1e5, "N s/m", default=0.0),
        mounted_on=section.choice("mounted_on", ("chassis", "housing"), default="chassis"),
    )
    section.refuse_the_rest()
    return bar


def _read_run(section: Any) -> Any:
    if section is None:
        return None
    duration = section.number("duration", 0.01, 20.0, "s")
    step = section.number("output_step", 1e-4, 1.0, "s")
    if duration / step > MAX_REPORTS:
        section.fault("output_step", step, f"asks for more than {MAX_REPORTS} reports in the run")
    elif step > duration:
        section.fault("output_step", step, "must not be longer than the run")
    rollout = section.number("rollout", 0.0, 2.0, "m", default=Run(1.0, 1.0).rollout)
    section.refuse_the_rest()
    return Run(duration, step, rollout)


def _no_repeats(pairs: list) -> dict:
    found = {}
    for key, value in pairs:
        if key in found:
            raise CarError([Fault(key, value, "stands twice in one section: keep one")])
        found[key] = value
    return found


def _no_constant(word: str) -> None:
    raise CarError([Fault("", word, "must be a finite number")])
