"""The hit as it stands in a car file: a force, a wheel torque, or an engine."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING, Any

from solver.car import Clutch, Converter, Engine, Gears, Hit, Powertrain, WheelTorque

if TYPE_CHECKING:
    from solver.car import Table

TIME = (0.0, 100.0)
TORQUE = (-1e6, 1e6)
MAX_TIMES = 2000  # a logged hit may be long


def read_drive(section: Any) -> Any:
    """Drive mode 1 (kind force) or 2 (kind torque), or None for a missing section."""
    if section is None:
        return None
    kind = section.choice("kind", ("force", "torque"))
    if kind == "torque" and section.has("engine"):
        drive: Hit | WheelTorque | Powertrain = _read_powertrain(section)
    elif kind == "torque":
        drive = WheelTorque(section.table("table", ("time in s", "torque in N m"), (TIME, TORQUE), most=MAX_TIMES))
    else:
        drive = Hit(section.table("table", ("time in s", "force in N"), (TIME, TORQUE), most=MAX_TIMES))
    section.refuse_the_rest()
    return drive


def drive_to_dict(drive: Any, plain: Callable) -> dict:
    """The section `read_drive` reads back; `plain` turns dataclasses into dicts."""
    if isinstance(drive, Powertrain):
        coupling = "clutch" if isinstance(drive.coupling, Clutch) else "converter"
        return {
            "kind": "torque",
            "engine": plain(drive.engine),
            coupling: plain(drive.coupling),
            "gears": plain(drive.gears),
        }
    return {"kind": "force" if isinstance(drive, Hit) else "torque", **plain(drive)}


def _read_powertrain(section: Any) -> Any:
    engine = _read_engine(section.section("engine"))
    if section.has("clutch") == section.has("converter"):
        section.fault("clutch", None, "give either a clutch or a converter")
        coupling: Clutch | Converter = Clutch(())
    elif section.has("clutch"):
        coupling = _read_clutch(section.section("clutch"))
    else:
        coupling = _read_converter(section.section("converter"))
    return Powertrain(engine, coupling, _read_gears(section.section("gears")))


def _read_engine(section: Any) -> Any:
    columns = ("engine speed in rad/s", "torque in N m")
    engine = Engine(
        section.table("curve", columns, ((0.0, 2000.0), (-1e4, 1e5))),
        section.number("inertia", 0.005, 50.0, "kg m^2"),
        section.number("launch_speed", 20.0, 1500.0, "rad/s"),
    )
    section.refuse_the_rest()
    return engine


def _read_clutch(section: Any) -> Any:
    columns = ("time in s", "capacity in N m")
    clutch = Clutch(
        section.table("capacity", columns, (TIME, (0.0, 1e5))),
        section.number("creep", 1.0, 200.0, "rad/s", default=Clutch(()).creep),
    )
    section.refuse_the_rest()
    return clutch


def _read_converter(section: Any) -> Any:
    usual = Converter(1.0, 1.0)
    share = ("speed ratio", "ratio")

    def shape(key: str, low: float, high: float) -> Table:
        if not section.has(key):
            return getattr(usual, key)
        return section.table(key, share, ((0.0, 1.5), (low, high)))

    converter = Converter(
        section.number("stall_speed", 50.0, 1500.0, "rad/s"),
        section.number("stall_torque", 10.0, 1e5, "N m"),
        shape("torque_ratio", 0.5, 5.0),
        shape("capacity", -2.0, 5.0),
        usual.throttle
        if not section.has("throttle")
        else section.table("throttle", ("time in s", "throttle"), (TIME, (0.0, 1.0))),
    )
    section.refuse_the_rest()
    return converter


def _read_gears(section: Any) -> Any:
    if section is None:
        return None
    ratios = section.take("ratios", "a list of gear ratios from first up")
    usable = isinstance(ratios, list | tuple) and 1 <= len(ratios) <= 8
    for ratio in ratios if usable else ():
        number = isinstance(ratio, int | float) and not isinstance(ratio, bool)
        usable = usable and number and 0.2 <= ratio <= 10.0
    if ratios is not None and not usable:
        section.fault("ratios", ratios, "must be a list of 1 to 8 ratios from 0.2 to 10")
    gears = Gears(
        tuple(float(ratio) for ratio in ratios) if usable else (),
        section.number("final_drive", 0.5, 15.0, ""),
        section.optional_number("shift_speed", 50.0, 1500.0, "rad/s"),
        section.number("efficiency", 0.3, 1.0, "", default=1.0),
    )
    if len(gears.ratios) > 1 and gears.shift_speed is None and section.data.get("shift_speed") is None:
        section.fault("shift_speed", None, "is needed with more than one gear")
    section.refuse_the_rest()
    return gears
