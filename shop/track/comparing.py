"""Which group was better, and whether it is real, in words a tuner and a statistician can both sign."""

from __future__ import annotations

from dataclasses import dataclass

from shop.launches import bridge
from shop.track.figures import Figure
from shop.track.groups import Group, Question

CONFIDENCE = 0.95


@dataclass(frozen=True)
class Statement:
    """`words` first; `how` says how the interval was made, `chance` what the permutation test says;
    `cautions` name what else could explain it."""

    words: str
    verdict: str  # "real", "likely", "not told apart" or "too few"
    how: tuple[str, ...]
    chance: str
    cautions: tuple[str, ...]


def compare(first: Group, second: Group, question: Question, comparisons: int = 1) -> Statement:
    """Hold `first` against `second`. Of several comparisons each is asked to be surer, so that
    all of them together keep the confidence (Bonferroni)."""
    confidence = 1 - (1 - CONFIDENCE) / comparisons
    result = bridge.compare_passes(
        first.values, second.values, lower_is_better=not question.figure.speed, confidence=min(confidence, 0.999)
    )
    interval = result.bootstrap or result.interval
    chance = result.permutation.p if result.permutation else None
    # For times less is better: turned round so that a gain is positive for both.
    sign = 1.0 if question.figure.speed else -1.0
    gain = sign * result.difference
    spread = sorted((sign * interval.low, sign * interval.high)) if interval else None
    verdict = _verdict(spread, chance, 1 - confidence)
    counts = f"{first.count_text} against {len(second.values)}"
    words = _words(first.label, second.label, gain, spread, verdict, question, counts)
    return Statement(
        words, verdict, tuple(_how(interval, comparisons)), _chance_words(result),
        # The solver's first words are the verdict itself, said above in the trade's words.
        (*(result.words[1:] if interval else result.words), *_cautions(first, second)),
    )


def _verdict(spread: list[float] | None, chance: float | None, alpha: float) -> str:
    if spread is None:
        return "too few"
    if spread[0] <= 0 <= spread[1]:
        return "not told apart"
    # The interval leans on a normal scatter, the permutation test does not: both must agree.
    return "real" if chance is not None and chance <= alpha else "likely"


def _words(
    first: str, second: str, gain: float, spread: list[float] | None, verdict: str, question: Question, counts: str
) -> str:
    figure = question.figure
    better = figure.better if gain >= 0 else figure.worse
    size = _size(figure, abs(gain), question.units)
    if spread is None:
        return (
            f"{first} was {better} {figure.where} than {second} by {size} on average, {counts}:"
            " too few, or too alike, to say whether that is real."
        )
    if verdict == "not told apart":
        low = _side(figure, spread[0], question.units)
        high = _side(figure, spread[1], question.units)
        return (
            f"{first} and {second} cannot be told apart {figure.where}: {first} was {size} {better} on average,"
            f" but anything from {low} to {high} fits, {counts}."
        )
    ends = sorted(abs(end) for end in spread)
    between = " to ".join(_size(figure, end, question.units).rsplit(" ", 1)[0] for end in ends)
    verb = "is" if verdict == "real" else "seems"
    return f"{first} {verb} {better} {figure.where} than {second} by {size} ({between}), {counts}."


def _size(figure: Figure, value: float, units: str) -> str:
    return figure.text(value, units)


def _side(figure: Figure, gain: float, units: str) -> str:
    return f"{_size(figure, abs(gain), units)} {figure.better if gain >= 0 else figure.worse}"


def _how(interval: bridge.Interval | None, comparisons: int) -> list[str]:
    how = []
    if interval:
        how.append(f"{interval.confidence * 100:.3g} % interval of the difference of the means, by {interval.method}.")
    if comparisons > 1:
        how.append(
            f"{comparisons} comparisons stand on this page, so each interval is wide enough that all of them"
            f" hold together at {CONFIDENCE * 100:.0f} % (Bonferroni)."
        )
    return how


def _chance_words(result: bridge.Comparison) -> str:
    test = result.permutation
    if test is None:
        return ""
    tried = f"all {test.arrangements} arrangements" if test.exact else f"{test.arrangements} random arrangements"
    return f"Permutation test over {tried}: p {'is less than 0.001' if test.p < 0.001 else f'= {test.p:.3f}'}."


def _cautions(first: Group, second: Group) -> list[str]:
    return [words for words in (_lanes(first, second), _order(first, second), _weekends(first, second)) if words]


def _lanes(first: Group, second: Group) -> str:
    noted = [{lane for lane in group.lanes if lane in ("left", "right")} for group in (first, second)]
    if not all(noted):
        return ""
    if noted[0].isdisjoint(noted[1]):
        return (
            f"{first.label} ran only in the {noted[0].pop()} lane and {second.label} only in the {noted[1].pop()}:"
            " lane and setup cannot be told apart here."
        )
    shares = [group.lanes["left"] / (group.lanes["left"] + group.lanes["right"]) for group in (first, second)]
    if abs(shares[0] - shares[1]) > 0.5:
        return (
            f"The lanes are shared unequally ({first.label}: {first.lanes_text}; {second.label}: {second.lanes_text});"
            " look at one lane alone as well."
        )
    return ""


def _order(first: Group, second: Group) -> str:
    times = [[(run.day, run.clock) for run in group.runs if run.clock] for group in (first, second)]
    if not all(times) or any(len(t) < len(g.runs) for t, g in zip(times, (first, second), strict=True)):
        return ""
    if min(times[0]) > max(times[1]) or max(times[0]) < min(times[1]):
        return "One ran wholly after the other: a track that came in or went off between them would look the same."
    return ""


def _weekends(first: Group, second: Group) -> str:
    if {run.weekend_id for run in first.runs}.isdisjoint(run.weekend_id for run in second.runs):
        return "They ran on different weekends: surface and air were not the same."
    return ""
