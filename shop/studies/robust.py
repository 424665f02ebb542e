"""How robust a choice is: in what share of cars that the survey cannot tell apart does it still meet the limits?

Draws (seeded) every doubtful value evenly within its tolerance, and launches each choice in each drawn car.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from shop.launches import bridge
from shop.refusals import Refused
from shop.setups.car_file import build_from
from shop.studies.plan import Choice
from shop.studies.ranking import Limit, within
from shop.studies.spread import moved
from shop.studies.work import inputs_with

DRAWS = 64


def share_within(stored: Mapping[str, Any], choices: list[Choice], limits: list[Limit], seed: int = 1) -> list[float]:
    """For each choice, the share of drawn cars in which it meets every limit; an unsolved draw does not."""
    keys = list(stored["tolerances"])
    widths = np.array([stored["tolerances"][key]["tolerance"] for key in keys])
    draws = np.random.default_rng(seed).uniform(-1, 1, (DRAWS, len(keys))) * widths
    files: list[dict[str, Any] | None] = []
    for choice in choices:
        # The holes a choice is drilled for move with their bracket's tolerance, whichever they are.
        numbers = {**stored["holes"], **{key: int(value) for key, value in choice.items() if key in stored["brackets"]}}
        for draw in draws:
            car = {**stored, "holes": numbers}
            for key, by in zip(keys, draw, strict=True):
                car = moved(car, key, by)
            try:
                files.append(build_from(inputs_with(car, choice), "draw"))
            except Refused:
                files.append(None)
    columns, _ = bridge.sweep(files)
    known = {limit.figure: columns.get(limit.figure, np.full(len(files), np.nan)) for limit in limits}
    meets = within(known, limits, len(files)).reshape(len(choices), DRAWS)
    return [float(share) for share in meets.mean(axis=1)]
