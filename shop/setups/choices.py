"""What a person chooses for a revision, and what a new one begins from."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from typing import Any

from shop.garage.models import Measurement, Survey
from shop.garage.quantities import BRACKETS_OF
from shop.setups.models import Revision
from shop.setups.quantities import FROM_SURVEY, HIT_PEAK_G, HIT_RISE, QUANTITIES
from shop.units import DIMENSIONS, Reading, unit_of

Setting = dict[str, Any]


@dataclass(frozen=True)
class Choices:
    """The whole content of a revision form, read and within range."""

    holes: dict[str, int]
    settings: dict[str, Setting]
    hit_table: list[list[float]] | None = None
    hit_lines: str = ""
    hit_lines_unit: str = ""
    reason: str = ""
    notes: str = ""

    def put_on(self, revision: Revision) -> Revision:
        for name, value in self.fields().items():
            setattr(revision, name, value)
        return revision

    def fields(self) -> dict[str, Any]:
        names = ("holes", "settings", "hit_table", "hit_lines", "hit_lines_unit", "reason", "notes")
        return {name: getattr(self, name) for name in names}

    def standing_in(self, start: Choices, faulty: set[str]) -> Choices:
        """These choices, with those of `start` where a field is faulty: what can be drawn meanwhile."""
        return replace(
            self,
            holes={**{key: hole for key, hole in start.holes.items() if key in faulty}, **self.holes},
            settings={**{key: setting for key, setting in start.settings.items() if key in faulty}, **self.settings},
            hit_table=start.hit_table if "hit_lines" in faulty else self.hit_table,
        )

    @classmethod
    def of(cls, revision: Revision) -> Choices:
        return cls(
            dict(revision.holes), dict(revision.settings), revision.hit_table,
            revision.hit_lines, revision.hit_lines_unit, revision.reason, revision.notes,
        )


@dataclass(frozen=True)
class Surveyed:
    """What one survey offers a revision: its measurements by key and how many holes each bracket has."""

    measurements: Mapping[str, Measurement]
    hole_counts: Mapping[str, int] = field(default_factory=dict)

    @classmethod
    def of(cls, survey: Survey) -> Surveyed:
        drilled = {bracket.place: len(bracket.holes) for bracket in survey.brackets.all()}
        places = BRACKETS_OF[survey.linkage]
        return cls(
            {measurement.key: measurement for measurement in survey.measurements.all()},
            {place: drilled.get(place, 0) for place in places},
        )

    def setting(self, key: str) -> Setting | None:
        """The setting as the survey found it; one that nobody measured stays marked typical."""
        found = self.measurements.get(FROM_SURVEY.get(key, ""))
        if found is None:
            return None
        setting = {"typed": found.typed, "value": found.value, "unit": found.unit}
        return {**setting, "origin": "typical"} if found.origin == "typical" else setting

    def typical(self, key: str) -> Setting | None:
        """The value in use while nobody has measured or chosen one."""
        found = self.setting(key) or _stated_default(key)
        return found if found and "origin" in found else None

    def as_setting(self, key: str, reading: Reading) -> Setting:
        """A reading as it is stored; typing the survey's typical value again does not make it measured."""
        setting: Setting = {"typed": reading.typed, "value": reading.value, "unit": reading.unit}
        typical = self.typical(key)
        if typical and _same(typical, reading):
            setting["origin"] = "typical"
        return setting


def _same(setting: Setting, reading: Reading) -> bool:
    if setting["unit"] not in DIMENSIONS[reading.dimension]:
        return False
    before = unit_of(reading.dimension, setting["unit"]).to_si(setting["value"])
    return abs(before - reading.si) <= 1e-9 * max(abs(before), 1e-9)


def beginning(survey: Survey, parent: Revision | None) -> Choices:
    """What a new revision starts from: its parent where it has one, else the survey.

    A setting the parent only had as a typical value is taken from the survey anew, so that
    a later measurement takes its place. A hole the survey's bracket lacks goes to the middle.
    """
    surveyed = Surveyed.of(survey)
    carried = dict(parent.settings) if parent else {}
    settings: dict[str, Setting] = {}
    for quantity in QUANTITIES:
        setting = carried.get(quantity.key)
        if setting is None or "origin" in setting:
            setting = surveyed.setting(quantity.key) or setting
        if setting is None:
            setting = _stated_default(quantity.key)
        if setting is not None:
            settings[quantity.key] = setting
    holes = {
        place: _hole(parent.holes.get(place) if parent else None, count)
        for place, count in surveyed.hole_counts.items()
    }
    if parent is None:
        return Choices(holes, settings)
    return Choices(holes, settings, parent.hit_table, parent.hit_lines, parent.hit_lines_unit)


def _hole(before: int | None, count: int) -> int:
    return before if before is not None and 1 <= before <= count else (count + 1) // 2


def _stated_default(key: str) -> Setting | None:
    if key == "hit_peak":
        return {"typed": f"{HIT_PEAK_G:g}", "value": HIT_PEAK_G, "unit": "g", "origin": "typical"}
    if key == "hit_rise":
        return {"typed": f"{HIT_RISE:g}", "value": HIT_RISE, "unit": "s", "origin": "typical"}
    return None
