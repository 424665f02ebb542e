"""Short tables a person can read, for the command line."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING

from solver.figures import FIGURES

if TYPE_CHECKING:
    from solver.launching import Launch
    from solver.modes import Mode
    from solver.statics import Statics
    from solver.sweeping import Sweep

UNITS = {
    "force": "N",
    "length": "m",
    "speed": "m/s",
    "acceleration": "m/s^2",
    "time": "s",
    "angle": "rad",
    "torque": "N m",
    "spin": "rad/s",
    "percent": "%",
    "coefficient": "",
    "ratio": "",
}
CAUTION = (
    "Advice from a planar model. Bars, rod ends and wheelie bars are decided by the rulebook in\n"
    "force, local codes and a qualified fabricator."
)


def statics_table(statics: Statics) -> str:
    """Ride height in lines of label and value."""
    centre = statics.instant_centre
    where = "parallel bars" if centre.x is None else f"{centre.x:.4f} m ahead, {centre.z:.4f} m up"
    rows = [
        ("Rear tyres", f"{statics.rear_load:.1f} N"),
        ("Front tyres", f"{statics.front_load:.1f} N"),
        ("Rear springs", f"{statics.rear_spring_force:.1f} N"),
        ("Front springs", f"{statics.front_spring_force:.1f} N"),
        ("Upper bars", f"{statics.upper_link_force:+.1f} N (tension positive)"),
        ("Lower bars", f"{statics.lower_link_force:+.1f} N (tension positive)"),
        ("Instant centre", where),
        ("Force line slope", f"{centre.slope:.5f}"),
        ("Neutral line slope", f"{statics.neutral_slope:.5f}"),
        ("Anti-squat, trade", f"{statics.anti_squat:.1f} %"),
        ("Anti-squat, sprung mass", f"{statics.anti_squat_dynamic:.1f} %"),
        ("Load transfer", f"{statics.load_transfer_per_newton:.4f} N for each N of hit"),
    ]
    return _aligned(rows)


def modes_table(modes: Sequence[Mode]) -> str:
    """Frequencies and damping ratios, slowest first."""
    rows = [
        (f"{mode.frequency_hz:.3f} Hz", f"damping ratio {mode.damping_ratio:.3f}, mostly {_most(mode)}") for mode in modes
    ]
    return _aligned(rows)


def launch_table(launch: Launch) -> str:
    """Ride height, modes, what happened when, and every figure that there is."""
    figures = []
    for name, value in launch.figures.items():
        if value is None or (name.endswith("_time") and name[:-5] in FIGURES):
            continue
        when = launch.figures.get(f"{name}_time")
        text = f"{value:.4g} {UNITS[FIGURES[name].dimension]}".rstrip()
        figures.append((FIGURES[name].label, text + (f" at {when:.3f} s" if when is not None else "")))
    events = [(f"{event.time:.4f} s", event.words) for event in launch.events]
    parts = [statics_table(launch.statics), modes_table(launch.modes), _aligned(figures)]
    if events:
        parts.append(_aligned(events))
    return "\n\n".join([*parts, CAUTION])


SWEEP_COLUMNS = {
    "anti_squat": "anti-squat %",
    "peak_rear_load": "peak rear N",
    "rear_load_dip": "rear dip N",
    "rear_separation": "separation m",
    "peak_pitch": "pitch rad",
    "front_lift_height": "front lift m",
}


def sweep_table(changes: Mapping, sweep: Sweep) -> str:
    """One line a lane: what varies, then a few figures; or why it was refused."""
    names = [*changes, *SWEEP_COLUMNS.values()]
    lines = ["  ".join(names)]
    known = {**sweep.figures, **sweep.statics}
    for lane in range(len(sweep)):
        cells = [f"{values[lane]:>{len(path)}.5g}" for path, values in changes.items()]
        why = sweep.reason(lane)
        if why:
            cells.append(why)
        else:
            cells += [f"{known[k][lane]:>{len(v)}.5g}" for k, v in SWEEP_COLUMNS.items()]
        lines.append("  ".join(cells))
    return "\n".join(lines)


def _most(mode: Mode) -> str:
    name = max(mode.shape, key=lambda key: abs(mode.shape[key]))
    return name.replace("_", " ")


def _aligned(rows: list) -> str:
    width = max(len(label) for label, _ in rows)
    return "\n".join(f"{label:<{width}}  {value}" for label, value in rows)
