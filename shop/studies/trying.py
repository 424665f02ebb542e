"""A choice put on the car: to draw it, and to begin the next revision with it."""

from __future__ import annotations

import math

from shop.garage.quantities import BRACKETS
from shop.setups.car_file import inputs_of
from shop.setups.choices import Choices
from shop.setups.models import Revision
from shop.setups.quantities import BY_KEY
from shop.studies.plan import Choice
from shop.studies.work import usual_ballast_place
from shop.units import default_unit, unit_of


def choices_with(revision: Revision, chosen: Choice, units: str, reason: str) -> Choices:
    """The revision's choices with `chosen` put on them, as a form would have read it in the shop's units."""
    start = Choices.of(revision)
    holes, settings = dict(start.holes), dict(start.settings)
    if chosen.get("ballast_weight"):
        # Where the study let it sit, unless the revision says so itself.
        places = usual_ballast_place(inputs_of(revision))
        chosen = {**{key: value for key, value in places.items() if key not in settings}, **chosen}
    for key, value in chosen.items():
        if key in BRACKETS:
            holes[key] = int(value)
            continue
        dimension = BY_KEY[key].dimension
        unit = settings.get(key, {}).get("unit") or default_unit(dimension, units)
        shown = float(f"{unit_of(dimension, unit).from_si(value):.9g}")
        # What stays as it is keeps the words in which it was typed.
        same = key in settings and math.isclose(settings[key]["value"], shown, rel_tol=1e-7)
        if same or (key not in settings and value == 0):
            continue
        settings[key] = {"typed": f"{shown:g}", "value": shown, "unit": unit}
    return Choices(holes, settings, start.hit_table, start.hit_lines, start.hit_lines_unit, reason[:200])


def revision_with(revision: Revision, choices: Choices) -> Revision:
    """An unsaved revision, to draw."""
    draft = Revision(
        shop=revision.shop, car=revision.car, survey=revision.survey, parent=revision, author=revision.author,
        parts=dict(revision.parts),
    )
    return choices.put_on(draft)
