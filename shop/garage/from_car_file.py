"""A car file read back into a survey: the way in for a car that another shop, or the solver alone, describes.

A survey holds what one measures on a car, one rate each for springs, shocks and tyres; tables and
other things a car file may also hold have no place in it and are refused by name rather than lost.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from shop.garage.quantities import BY_KEY
from shop.garage.readings import Drilled, SurveyReading, Taken, check_ranges
from shop.refusals import Refused
from shop.units import unit_of

_UNITS = {
    "length": "mm", "mass": "kg", "rate": "N/mm", "damping": "N·s/mm", "inertia": "kg·m²", "angle": "°", "ratio": "",
    "pressure": "kPa",
}


def survey_of(data: Mapping[str, Any]) -> SurveyReading:
    """The survey that a (sound) car file amounts to; Refused names what a survey cannot hold."""
    reading = SurveyReading(data["rear"]["linkage"]["kind"])
    _refuse_what_does_not_fit(data)
    for key, si in _values(data).items():
        reading.taken[key] = _taken(key, si)
    for place, point in _pins(data["rear"]["linkage"]).items():
        holes = [[1000 * point[0], 1000 * point[1]]]
        reading.brackets[place] = Drilled(place, "each", "mm", 1.5, holes)
    check_ranges(reading)
    return reading


def hit_of(data: Mapping[str, Any]) -> list[list[float]]:
    """The hit as a revision keeps it: seconds and newtons."""
    return [[float(time), float(force)] for time, force in data["hit"]["table"]]


def _taken(key: str, si: float) -> Taken:
    quantity = BY_KEY[key]
    unit = unit_of(quantity.dimension, _UNITS[quantity.dimension])
    value = unit.from_si(si)
    tolerance = float(f"{quantity.tolerance / unit.factor:.3g}")
    return Taken(key, f"{value:.9g}", value, unit.symbol, tolerance, "measured")


def _refuse_what_does_not_fit(data: Mapping[str, Any]) -> None:
    faults = []
    ends = [("front spring", data["front"]["spring"]), ("front damper", data["front"]["damper"])]
    for line in data["rear"]["springs"]:
        ends += [("rear spring", line["spring"]), ("rear damper", line["damper"])]
    for name, part in ends:
        if part is not None and part.get("rate") is None:
            faults.append(f"the {name} is a table; put its curve in the parts library, and a rate in the file")
    if data["front"]["damper"] is None:
        faults.append("the front has no damper")
    if data["hit"]["kind"] != "force":
        faults.append("the hit is a drive torque; a survey's revisions launch on a force")
    kinds = [(line["spring"] is not None, line["damper"] is not None) for line in data["rear"]["springs"]]
    if kinds not in ([(True, True)], [(True, False), (False, True)], [(False, True), (True, False)]):
        faults.append("the rear has neither one coil-over nor one spring and one shock on each side")
    if faults:
        raise Refused("; ".join(faults))


def _values(data: Mapping[str, Any]) -> dict[str, float]:
    """Survey quantities in SI. Both sides are lumped in the file: each corner gets half."""
    front, rear = data["front"], data["rear"]
    on_front = data["mass"] * data["cg"]["x"] / data["wheelbase"]
    ratio = front["spring"].get("motion_ratio", 1.0)
    values = {
        "wheelbase": data["wheelbase"],
        "front_tyre_radius": front["tyre_radius"], "rear_tyre_radius": rear["tyre_radius"],
        "weight_lf": on_front / 2, "weight_rf": on_front / 2,
        "weight_lr": (data["mass"] - on_front) / 2, "weight_rr": (data["mass"] - on_front) / 2,
        "cg_height": data["cg"]["z"], "pitch_inertia": data["chassis"]["pitch_inertia"],
        "front_unsprung_weight": front["unsprung_mass"], "rear_unsprung_weight": rear["unsprung_mass"],
        "housing_inertia": rear["housing_inertia"],
        "front_spring_rate": front["spring"]["rate"] / 2, "front_motion_ratio": ratio,
        # The shop's front shock works through the same ratio as its spring.
        "front_shock_rate": front["damper"]["rate"] * (front["damper"].get("motion_ratio", 1.0) / ratio) ** 2 / 2,
        "tyre_pressure_share": 0.7,
    }
    for end in ("front", "rear"):
        values[f"{end}_tyre_rate"] = data[end]["tyre"]["rate"] / 2
        values[f"{end}_tyre_damping"] = data[end]["tyre"]["damping"] / 2
        for stop in ("droop", "bump"):
            if data[end].get(f"{stop}_stop"):
                values[f"{end}_{stop}_clearance"] = data[end][f"{stop}_stop"]["clearance"]
    return values | _rear_springs(rear["springs"]) | _plan_angles(rear["linkage"]) | _wheelie_bar(data.get("wheelie_bar"))


def _rear_springs(lines: list[Mapping[str, Any]]) -> dict[str, float]:
    values: dict[str, float] = {}
    for line in lines:
        names = ["spring"] if line["spring"] is not None else ["shock"]
        for name in names:
            for end in ("chassis", "housing"):
                values[f"{name}_{end}_x"], values[f"{name}_{end}_z"] = line[end]
        if line["spring"] is not None:
            values["rear_spring_rate"] = line["spring"]["rate"] / 2
        if line["damper"] is not None:
            values["rear_shock_rate"] = line["damper"]["rate"] / 2
    return values


def _plan_angles(linkage: Mapping[str, Any]) -> dict[str, float]:
    if linkage["kind"] != "four-link":
        return {}
    return {f"{link}_plan_angle": linkage[link].get("plan_angle", 0.0) for link in ("lower", "upper")}


def _wheelie_bar(bar: Mapping[str, Any] | None) -> dict[str, float]:
    if bar is None:
        return {}
    return {"wheelie_bar_x": -bar["x"], "wheelie_bar_clearance": bar["clearance"], "wheelie_bar_rate": bar["rate"]}


def _pins(linkage: Mapping[str, Any]) -> dict[str, list[float]]:
    if linkage["kind"] == "ladder-bar":
        return {"ladder_chassis": linkage["chassis"]}
    return {f"{link}_{end}": linkage[link][end] for link in ("lower", "upper") for end in ("chassis", "housing")}
