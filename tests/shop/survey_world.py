"""What a browser sends for a survey: a sound one of the demo's first car, to be changed one value at a time."""

from __future__ import annotations

from shop.demo.data import CARS

MARIGOLD = CARS[0]
LADDER = next(car for car in CARS if car.linkage == "ladder-bar")


def survey_form(car=MARIGOLD, **typed: str) -> dict[str, str]:
    form = {"linkage": car.linkage, "taken_on": "2026-03-02", "notes": "", "do": "keep", **car.measured}
    for place, row in car.brackets.items():
        names = ("first_x", "first_z", "last_x", "last_z", "count")
        form |= {f"{place}_entry": "row"} | {
            f"{place}_{name}": str(value) for name, value in zip(names, row, strict=True)
        }
    return {key: value for key, value in {**form, **typed}.items() if value is not None}
