"""Checks across a survey's values: what the tape and the scales cannot both have said."""

from __future__ import annotations

from collections.abc import Iterator

from shop.garage.readings import SurveyReading
from shop.units import show

CORNERS = ("weight_lf", "weight_rf", "weight_lr", "weight_rr")
# A driver weighs something and not as much as an axle; common practice, no source.
DRIVER = (20.0, 250.0)
SAME = 0.003


def check_together(reading: SurveyReading) -> dict[str, str]:
    """Field and words of each contradiction, the first for a field kept."""
    faults: dict[str, str] = {}
    for check in (_total, _driver, _cg, _unsprung, _struts, _pins, _wheelie):
        for name, words in check(reading):
            faults.setdefault(name, words)
    return faults


def _text(reading: SurveyReading, key: str, si: float) -> str:
    dimension = {"cg_height": "length", "total_weight": "mass"}.get(key, "length")
    return show(si, dimension, reading.taken[key].unit if key in reading.taken else "m")


def _total(reading: SurveyReading) -> Iterator[tuple[str, str]]:
    si = reading.si()
    if "total_weight" not in si:
        return
    corners, read = sum(si[key] for key in CORNERS), si["total_weight"]
    allowed = sum(reading.taken[key].tolerance * _factor(reading, key) for key in (*CORNERS, "total_weight"))
    if abs(corners - read) > max(allowed, 0.5):
        unit = reading.taken["total_weight"].unit
        yield "total_weight", (
            f"the four corners add up to {show(corners, 'mass', unit)}, the total reads {show(read, 'mass', unit)}: "
            f"they may differ by {show(allowed, 'mass', unit)} within the tolerances. Read the pads again"
        )


def _factor(reading: SurveyReading, key: str) -> float:
    taken = reading.taken[key]
    return taken.si / taken.value if taken.value else 1.0


def _driver(reading: SurveyReading) -> Iterator[tuple[str, str]]:
    si = reading.si()
    empty = [f"empty_{key[-2:]}" for key in CORNERS]
    given = [key for key in empty if key in si]
    if not given:
        return
    for key in empty:
        if key not in si:
            yield key, "weigh all four corners with the driver out, or none"
    if len(given) < 4:
        return
    driver = sum(si[key] for key in CORNERS) - sum(si[key] for key in empty)
    if not DRIVER[0] <= driver <= DRIVER[1]:
        unit = reading.taken["empty_lf"].unit
        yield "empty_lf", (
            f"the driver would weigh {show(driver, 'mass', unit)}; with the driver out a car is lighter by "
            f"{show(DRIVER[0], 'mass', unit)} to {show(DRIVER[1], 'mass', unit)}"
        )


def _cg(reading: SurveyReading) -> Iterator[tuple[str, str]]:
    si = reading.si()
    height, axle, length = si["cg_height"], min(si["front_tyre_radius"], si["rear_tyre_radius"]), si["wheelbase"]
    words = f"{_text(reading, 'cg_height', height)} is "
    if height < 0.6 * axle:
        yield "cg_height", words + f"far below the axles; a car's CG is not under {_text(reading, 'cg_height', 0.6 * axle)}"
    elif height > min(0.5 * length, 1.4):
        yield "cg_height", words + (
            f"above the roof; for this wheelbase up to {_text(reading, 'cg_height', min(0.5 * length, 1.4))} is believable"
        )


def _unsprung(reading: SurveyReading) -> Iterator[tuple[str, str]]:
    si = reading.si()
    for end, corners in (("front", CORNERS[:2]), ("rear", CORNERS[2:])):
        key = f"{end}_unsprung_weight"
        axle = sum(si[corner] for corner in corners)
        if si[key] >= 0.9 * axle:
            unit = reading.taken[key].unit
            yield key, (
                f"{show(si[key], 'mass', unit)} of the {show(axle, 'mass', unit)} on the {end} axle would be unsprung; "
                "it must be well below the axle weight"
            )


def _struts(reading: SurveyReading) -> Iterator[tuple[str, str]]:
    si = reading.si()
    shock = [f"shock_{at}" for at in ("chassis_x", "chassis_z", "housing_x", "housing_z")]
    given = [key for key in shock if key in si]
    if given and len(given) < 4:
        for key in shock:
            if key not in si:
                yield key, "a shock apart from the spring needs all four of its mount measurements; or leave all blank"
    for name in ("spring", "shock"):
        upper, lower = si.get(f"{name}_chassis_z"), si.get(f"{name}_housing_z")
        if upper is not None and lower is not None and upper - lower < 0.02:
            yield f"{name}_chassis_z", f"the {name}'s upper mount must stand above its lower mount"


def _pins(reading: SurveyReading) -> Iterator[tuple[str, str]]:
    holes = {place: drilled.si() for place, drilled in reading.brackets.items()}
    if reading.linkage == "ladder-bar":
        if any(x < 0.2 for x, _ in holes["ladder_chassis"]):
            yield "ladder_chassis_first_x", "the front of a ladder bar is well ahead of the axle"
        return
    for side, words in (("chassis", "chassis"), ("housing", "housing")):
        lower, upper = holes[f"lower_{side}"], holes[f"upper_{side}"]
        for number, (x, z) in enumerate(upper, 1):
            for other, (x2, z2) in enumerate(lower, 1):
                if abs(x - x2) < SAME and abs(z - z2) < SAME:
                    yield f"upper_{side}_first_z", (
                        f"upper hole {number} and lower hole {other} of the {words} bracket are the same point; "
                        "two links cannot share a pin"
                    )
                elif z <= z2:
                    yield f"upper_{side}_first_z", (
                        f"the links would cross: upper hole {number} of the {words} bracket is not above lower hole {other}"
                    )
    for link in ("lower", "upper"):
        behind = max(x for x, _ in holes[f"{link}_housing"])
        ahead = min(x for x, _ in holes[f"{link}_chassis"])
        if ahead - behind < 0.05:
            yield f"{link}_chassis_first_x", f"the {link} link's chassis holes must be ahead of its housing holes"


def _wheelie(reading: SurveyReading) -> Iterator[tuple[str, str]]:
    si = reading.si()
    if ("wheelie_bar_x" in si) != ("wheelie_bar_clearance" in si):
        missing = "wheelie_bar_clearance" if "wheelie_bar_x" in si else "wheelie_bar_x"
        yield missing, "a wheelie bar needs both: how far behind the axle, and how far above ground"
