"""A study's choices as a person reads them: what is changed, what it reaches, which are worth a look."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from shop.garage.quantities import BRACKETS
from shop.launches.measures import Measure
from shop.setups.quantities import BY_KEY
from shop.studies.models import Study
from shop.studies.plan import Choice, read_plan
from shop.studies.ranking import Miss, nearest_misses, order, scores, within
from shop.studies.services import columns_so_far
from shop.studies.work import Columns
from shop.studies.yardsticks import FIGURES, USUAL, limits_of, study_measure
from shop.units import default_unit, show

SHORT = {
    "lower_chassis": "lower chassis",
    "lower_housing": "lower housing",
    "upper_chassis": "upper chassis",
    "upper_housing": "upper housing",
    "ladder_chassis": "ladder front",
}


@dataclass(frozen=True)
class RankedRow:
    """One choice in the table."""

    number: int
    place: int
    changes: list[str]
    score: str
    texts: list[str]
    is_base: bool
    sure: str = ""


@dataclass(frozen=True)
class Standing:
    """A study as it stands: what is solved, what meets the limits, the best of it."""

    solved: int
    refused: dict[str, str]
    meeting: int
    rows: list[RankedRow]
    misses: list[str]
    columns: Columns
    score: np.ndarray
    among: np.ndarray


def change_words(key: str, value: float, units: str) -> str:
    if key in BRACKETS:
        return f"{SHORT[key]} hole {value:g}"
    quantity = BY_KEY[key]
    return f"{quantity.label.lower()} {show(value, quantity.dimension, default_unit(quantity.dimension, units))}"


def same(value: float, other: float) -> bool:
    # Far below any step of the trade; a relative measure alone would never call two zeros of ballast alike.
    return math.isclose(value, other, rel_tol=1e-9, abs_tol=1e-12)


def changes_of(choice: Choice, base: Mapping[str, float], units: str) -> list[str]:
    """What a choice changes on the revision, in words; empty for the revision itself."""
    return [
        change_words(key, value, units)
        for key, value in choice.items()
        if key not in base or not same(value, base[key])
    ]


def standing(study: Study, units: str, shown: list[str], most: int = 25) -> Standing:
    """Rank what there is so far. `shown` are the figures the table has columns for."""
    columns, refused = columns_so_far(study)
    count, linkage = study.choices, study.revision.survey.linkage
    known = {name: columns.get(name, np.full(count, np.nan)) for name in {*FIGURES, *shown}}
    solved = np.isfinite(columns["peak_rear_load"]) if columns else np.zeros(count, dtype=bool)
    limits = limits_of(study.limits)
    among = within(known, limits, count) & solved
    weights = {key: weight for key, weight in (study.weights or USUAL).items() if key in known}
    score = scores(known, weights, among)
    if not any(weights.values()):
        score = np.where(among, 0.0, np.nan)
    misses = []
    if limits and solved.any() and not among.any():
        only = {name: values[solved] for name, values in known.items()}
        places = np.flatnonzero(solved)
        misses = [_miss_words(miss, places, units, linkage) for miss in nearest_misses(only, limits, int(solved.sum()))]
        misses = misses or ["No choice comes near: the limits contradict each other."]
    ranked = (_fewest(study, among, score) if study.plan["mode"] == "few" else order(score))[:most]
    robust = _robust(study)
    measures = [study_measure(key, units, linkage) for key in shown]
    return Standing(
        int(solved.sum()),
        refused,
        int(among.sum()),
        _rows(study, ranked, score, known, measures, units, robust),
        misses,
        known,
        score,
        among,
    )


def _rows(study: Study, ranked, score, known: Columns, measures: list[Measure], units: str, robust) -> list[RankedRow]:
    plan = read_plan(study.plan)
    rows = []
    for place, number in enumerate(ranked.tolist(), 1):
        choice = choice_of(plan, number)
        changes = changes_of(choice, plan.base, units)
        texts = [measure.text(_plain(known[measure.key][number])) for measure in measures]
        sure = f"{100 * robust[str(number)]:.0f} %" if str(number) in robust else ""
        rows.append(RankedRow(number, place, changes, f"{100 * score[number]:.0f}", texts, not changes, sure))
    return rows


def _robust(study: Study) -> dict[str, float]:
    result = getattr(study.job, "result", None)
    return result.figures.get("robust", {}) if result else {}


def few_changes_first(study: Study) -> list[int]:
    """Choices that meet the limits, fewest changes first and the best score first among equals."""
    columns, _ = columns_so_far(study)
    among = within(_known(columns, study), limits_of(study.limits), study.choices) & _solved(columns, study)
    score = scores(_known(columns, study), dict(study.weights or USUAL), among)
    return _fewest(study, among, score).tolist()


def _fewest(study: Study, among: np.ndarray, score: np.ndarray) -> np.ndarray:
    plan = read_plan(study.plan)
    numbers = np.flatnonzero(among)
    changes = {
        number: sum(
            not same(value, plan.base[key]) for key, value in choice.items() if key in plan.base
        )
        for number, choice in enumerate(plan.between(0, study.choices))
        if among[number]
    }
    return np.array(
        sorted(numbers.tolist(), key=lambda n: (changes[n], -np.nan_to_num(score[n], nan=-1.0), n)), dtype=int
    )


def _known(columns: Columns, study: Study) -> Columns:
    return {name: columns.get(name, np.full(study.choices, np.nan)) for name in FIGURES}


def _solved(columns: Columns, study: Study) -> np.ndarray:
    return np.isfinite(columns["peak_rear_load"]) if columns else np.zeros(study.choices, dtype=bool)


def choice_of(plan, number: int) -> Choice:
    return next(plan.between(number, number + 1))


def _plain(value: float) -> float | None:
    return float(value) if np.isfinite(value) else None


def _miss_words(miss: Miss, places, units: str, linkage: str) -> str:
    known = study_measure(miss.limit.figure, units, linkage)
    side = "most" if miss.limit.most is not None and miss.value > miss.limit.most else "least"
    bound = miss.limit.most if side == "most" else miss.limit.least
    return (
        f"{known.label}: the nearest is choice {places[miss.choice] + 1} with {known.text(miss.value)}; "
        f"the limit is {'at most' if side == 'most' else 'at least'} {known.text(bound)}, missed by {known.text(miss.by)}"
    )
