"""Which choices a study looks at: axes, how they combine, and choice number n of them.

A plan is plain data, so that a study can be run again from its stored input:
{"mode": "every" | "one" | "sample" | "few" | "listed", "axes": [{"key", "values"}], "size", "seed"}.
Mode "few" takes every choice that differs from the car as it is in at most `size` things; "listed"
takes those of every combination whose numbers stand in "numbers".
A key is a bracket place (values: hole numbers) or a setting of a revision (values: SI).
Choices are numbered from 0; number n is worked out, never looked up.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property
from itertools import combinations, product
from typing import Any

import numpy as np
from scipy.stats import qmc

from shop.garage.quantities import BRACKETS
from shop.refusals import Refused
from shop.setups.quantities import BY_KEY

MOST_CHOICES = 50_000
MOST_VALUES = 200
MODES = {
    "every": "every combination",
    "one": "one at a time",
    "sample": "a spread of samples over all of them",
    "few": "every combination of a few changes",
}
# What the form offers are MODES; a list comes from a page on which choices were picked.
LISTED = "listed"
MOST_CHANGES = 3

Choice = dict[str, float | int]


@dataclass(frozen=True)
class Axis:
    """One thing that is varied, and the values it takes."""

    key: str
    values: tuple[float, ...]

    @property
    def label(self) -> str:
        return BRACKETS[self.key] if self.is_hole else BY_KEY[self.key].label

    @property
    def is_hole(self) -> bool:
        return self.key in BRACKETS


@dataclass(frozen=True)
class Plan:
    """Axes and how they are combined; `base` is the revision's own value on each axis."""

    mode: str
    axes: tuple[Axis, ...]
    base: Mapping[str, float] = field(default_factory=dict)
    size: int = 0
    seed: int = 1
    numbers: tuple[int, ...] = ()

    @property
    def combinations(self) -> int:
        """All there would be, however the plan picks from them."""
        return math.prod(len(axis.values) for axis in self.axes)

    def __len__(self) -> int:
        if self.mode == "every":
            return self.combinations
        if self.mode == LISTED:
            return len(self.numbers)
        if self.mode == "one":
            return 1 + sum(len(self._others(axis)) for axis in self.axes)
        if self.mode == "few":
            # Elementary symmetric sums of how many other values each axis has.
            sums = [1] + [0] * self.size
            for axis in self.axes:
                others = len(self._others(axis))
                for changes in range(self.size, 0, -1):
                    sums[changes] += sums[changes - 1] * others
            return sum(sums)
        return self.size

    def _others(self, axis: Axis) -> list[float]:
        own = self.base.get(axis.key)
        return [value for value in axis.values if own is None or not math.isclose(value, own, rel_tol=1e-9)]

    def between(self, start: int, stop: int) -> Iterator[Choice]:
        """Choices number `start` up to, not including, `stop`."""
        if self.mode == "every":
            yield from (self._combination(number) for number in range(start, stop))
        elif self.mode == LISTED:
            yield from (self._combination(number) for number in self.numbers[start:stop])
        else:
            yield from self._listed[start:stop]

    @cached_property
    def _listed(self) -> list[Choice]:
        makers = {"one": self._one_at_a_time, "few": self._few_changes, "sample": self._samples}
        return makers[self.mode]()

    def _combination(self, number: int) -> Choice:
        choice: Choice = {}
        for axis in reversed(self.axes):
            number, digit = divmod(number, len(axis.values))
            choice[axis.key] = axis.values[digit]
        return {axis.key: choice[axis.key] for axis in self.axes}

    def _one_at_a_time(self) -> list[Choice]:
        own = {axis.key: self.base[axis.key] for axis in self.axes if axis.key in self.base}
        return [own] + [{**own, axis.key: value} for axis in self.axes for value in self._others(axis)]

    def _few_changes(self) -> list[Choice]:
        """The car as it is, then one change, then two: fewest first."""
        own = {axis.key: self.base[axis.key] for axis in self.axes if axis.key in self.base}
        listed: list[Choice] = []
        for changes in range(self.size + 1):
            for axes in combinations(self.axes, changes):
                for values in product(*(self._others(axis) for axis in axes)):
                    listed.append({**own, **{axis.key: value for axis, value in zip(axes, values, strict=True)}})
        return listed

    def _samples(self) -> list[Choice]:
        """A scrambled Sobol' sequence over the axes' values: seeded, so it can be drawn again."""
        sampler = qmc.Sobol(len(self.axes), scramble=True, rng=np.random.default_rng(self.seed))
        # Sobol' points keep their balance in powers of two; draw one and use the front of it.
        points = sampler.random_base2(max(1, math.ceil(math.log2(max(2, self.size)))))[: self.size]
        counts = np.array([len(axis.values) for axis in self.axes])
        digits = np.minimum((points * counts).astype(int), counts - 1)
        return [{axis.key: axis.values[digit] for axis, digit in zip(self.axes, row, strict=True)} for row in digits]

    def to_dict(self) -> dict[str, Any]:
        return {
            "mode": self.mode,
            "axes": [{"key": axis.key, "values": list(axis.values)} for axis in self.axes],
            "base": dict(self.base),
            "size": self.size,
            "seed": self.seed,
            **({"numbers": list(self.numbers)} if self.mode == LISTED else {}),
        }


def read_plan(data: Mapping[str, Any]) -> Plan:
    """A plan from plain data; Refused in words when it asks for nothing, or for too much."""
    mode = data.get("mode", "every")
    if mode not in MODES and mode != LISTED:
        raise Refused({"mode": f"“{mode}” is not a way to combine; choose {', '.join(MODES.values())}"})
    axes = tuple(_read_axis(axis) for axis in data.get("axes", []))
    keys = [axis.key for axis in axes]
    if len(set(keys)) < len(keys):
        raise Refused({"axes": "the same thing is varied twice"})
    plan = Plan(mode, axes, data.get("base", {}), int(data.get("size") or 0), int(data.get("seed") or 1))
    if mode == LISTED:
        plan = replace(plan, numbers=_read_numbers(data.get("numbers", []), plan.combinations))
    if not axes or all(len(axis.values) < 2 for axis in axes):
        raise Refused({"axes": "nothing is varied: choose at least one bracket or setting with two values or more"})
    if mode == "sample" and not 2 <= plan.size <= MOST_CHOICES:
        raise Refused({"size": f"a sample has 2 to {MOST_CHOICES:,} choices; “{plan.size:,}” was asked for"})
    if mode == "few" and not 1 <= plan.size <= MOST_CHANGES:
        raise Refused({"size": f"at most 1 to {MOST_CHANGES} changes are looked for; “{plan.size:,}” was asked for"})
    if len(plan) > MOST_CHOICES:
        raise Refused({"axes": _too_many(plan)})
    return plan


def _read_numbers(numbers: Sequence[Any], combinations: int) -> tuple[int, ...]:
    if not numbers:
        raise Refused({"numbers": "no choice is left: widen the windows until some are"})
    if not all(isinstance(number, int) and 0 <= number < combinations for number in numbers):
        raise Refused({"numbers": f"a choice's number is a whole one from 0 to {combinations - 1:,}"})
    return tuple(dict.fromkeys(numbers))


def _read_axis(data: Mapping[str, Any]) -> Axis:
    key = data.get("key", "")
    if key not in BRACKETS and key not in BY_KEY:
        raise Refused({"axes": f"“{key}” is not something a study can vary"})
    try:
        values = tuple(float(value) for value in data.get("values", []))
    except (TypeError, ValueError) as error:
        raise Refused({key: "the values to try must be numbers"}) from error
    if not all(map(math.isfinite, values)):
        raise Refused({key: "the values to try must be finite numbers"})
    if len(values) > MOST_VALUES:
        raise Refused({key: f"{len(values):,} values to try; at most {MOST_VALUES} fit on one axis"})
    if key in BRACKETS:
        return Axis(key, tuple(int(value) for value in values))
    return Axis(key, values)


def _too_many(plan: Plan) -> str:
    if plan.mode == LISTED:
        return f"{len(plan):,} choices are left; at most {MOST_CHOICES:,} are solved in one study. Narrow the windows"
    widest = max(plan.axes, key=lambda axis: len(axis.values))
    if plan.mode == "few":
        return (
            f"{len(plan):,} choices of up to {plan.size} changes; at most {MOST_CHOICES:,} are solved in one study. "
            f"Narrow it: fewer changes at once, fewer values of “{widest.label}” ({len(widest.values)} now), "
            "or fewer things to change"
        )
    return (
        f"{len(plan):,} combinations; at most {MOST_CHOICES:,} are solved in one study. Narrow it: fewer values of "
        f"“{widest.label}” ({len(widest.values)} now), fewer axes, or a sample of up to {MOST_CHOICES:,} of them"
    )
