"""What a setup means at rest, in the shop's units: the bridge's figures, and those that need no solver."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import Any

from shop.launches import bridge
from shop.launches.bridge import Row
from shop.quantities import Quantity
from shop.setups import car_file
from shop.setups.differences import signed
from shop.setups.models import Revision
from shop.units import GRAVITY, default_unit, show

PADS = {"weight_lf": "Left front", "weight_rf": "Right front", "weight_lr": "Left rear", "weight_rr": "Right rear"}
ANGLE_NAMES = {"lower": "Lower bars, slope in side view", "upper": "Upper bars, slope in side view",
               "ladder": "Ladder bar, slope in side view"}


HEADLINE = ("ic_x", "ic_z", "anti_squat", "anti_squat_dynamic", "lower", "upper", "ladder")


@dataclass(frozen=True)
class Figures:
    """Groups of rows under their headings, and the inputs nobody measured."""

    groups: list[tuple[str, list[Row]]]
    provisional: list[Quantity] = field(default_factory=list)

    def row(self, key: str) -> Row | None:
        return next((row for _, rows in self.groups for row in rows if row.key == key), None)


def figures_at_rest(revision: Revision, units: str) -> Figures:
    """Everything the revision form and page show beside the drawing; Refused where it cannot be had."""
    seen = bridge.preview(revision, units)
    inputs = car_file.inputs_of(revision)
    car = car_file.build(revision)
    return Figures(
        [
            ("At rest", seen.figures),
            ("Bars", [*seen.bars, *bar_slopes(inputs)]),
            ("On the hit", load_transfer(car, units)),
            ("Corner weights, as scaled in the survey", corner_weights(inputs, units)),
        ],
        seen.provisional,
    )


def bar_slopes(inputs: car_file.Inputs) -> list[Row]:
    """How far each bar leans from level, positive when it rises towards the front."""
    stance = car_file.attitude(inputs)
    if inputs.linkage == "ladder-bar":
        ends = {"ladder": ((0.0, inputs.survey["rear_tyre_radius"]), stance.move(inputs.holes["ladder_chassis"]))}
    else:
        ends = {
            link: (inputs.holes[f"{link}_housing"], stance.move(inputs.holes[f"{link}_chassis"]))
            for link in ("lower", "upper")
        }
    rows = []
    for link, (rear, front) in ends.items():
        slope = math.atan2(front[1] - rear[1], front[0] - rear[0])
        text = show(slope, "angle", "°")
        rows.append(Row(f"{link}_slope", ANGLE_NAMES[link], text, "positive: rises towards the front", slope))
    return rows


def load_transfer(car: dict[str, Any], units: str) -> list[Row]:
    """The load that leaves the front tyres at the peak of the hit, dN = F h / L (moments about the front patch)."""
    force_unit = default_unit("force", units)
    peak = max(force for _, force in car["hit"]["table"])
    moved = peak * car["cg"]["z"] / car["wheelbase"]
    weight = car["mass"] * GRAVITY
    note = f"{peak / weight:.2f} g for the car as it races"
    return [
        Row("hit_force", "Force at the tyres at the peak", show(peak, "force", force_unit), note, peak),
        Row("load_transfer", "Load moved from front to rear", show(moved, "force", force_unit),
            "held long enough to settle", moved),
    ]


def corner_weights(inputs: car_file.Inputs, units: str) -> list[Row]:
    unit = default_unit("mass", units)
    pads = {key: inputs.survey[key] for key in PADS}
    total = sum(pads.values())
    rear = pads["weight_lr"] + pads["weight_rr"]
    rows = [Row(key, label, show(pads[key], "mass", unit), si=pads[key]) for key, label in PADS.items()]
    note = f"{100 * rear / total:.1f} % on the rear"
    added = inputs.settings.get("ballast_weight", 0.0)
    if added:
        note += f"; {show(added, 'mass', unit)} of ballast comes on top"
    return [*rows, Row("total", "Total", show(total, "mass", unit), note, total)]


@dataclass(frozen=True)
class Line:
    """A figure beside the same figure of another revision."""

    row: Row
    before: str = ""
    difference: str = ""


def beside(before: Figures | None, after: Figures, units: str) -> list[tuple[str, list[Line]]]:
    """The groups of `after`, each figure with that of `before` and the signed difference."""
    return [(title, [_line(before, row, units) for row in rows]) for title, rows in after.groups]


def headline(groups: list[tuple[str, list[Line]]]) -> list[Line]:
    """The figures one looks at while choosing holes."""
    return [line for _, lines in groups for line in lines if line.row.key in HEADLINE]


def _line(before: Figures | None, row: Row, units: str) -> Line:
    other = before.row(row.key) if before else None
    return Line(row, other.text if other else "", _difference(other, row, units))


_DIMENSION = {"ic_x": "length", "ic_z": "length", "lower": "length", "upper": "length", "ladder": "length",
              "lower_slope": "angle", "upper_slope": "angle", "ladder_slope": "angle",
              **dict.fromkeys(PADS, "mass"), "total": "mass",
              **dict.fromkeys(("rear_load", "front_load", "rear_spring_force", "hit_force", "load_transfer"), "force")}


def _difference(before: Row | None, after: Row, units: str) -> str:
    if before is None or before.si is None or after.si is None:
        return ""
    step = after.si - before.si
    if before.text == after.text:
        return ""
    if after.key in ("anti_squat", "anti_squat_dynamic"):
        return f"{'+' if step > 0 else '−'}{abs(step):.1f} points"
    dimension = _DIMENSION.get(after.key)
    return signed(step, dimension, default_unit(dimension, units)) if dimension else ""
