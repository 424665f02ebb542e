"""Every pass as a dot, a row for each group: the scatter itself, before any test. Positions for an SVG."""

from __future__ import annotations

import math
import statistics
from collections.abc import Callable, Sequence
from dataclasses import dataclass

WIDTH, LEFT, RIGHT, ROW, TOP, BOTTOM = 700, 190, 24, 34, 14, 40
LABEL_LETTERS = 27


@dataclass(frozen=True)
class DotRow:
    label: str
    y: float
    dots: list[tuple[float, float]]
    median_x: float
    top: float
    bottom: float


@dataclass(frozen=True)
class DotChart:
    """Everything an SVG template needs, in its own units."""

    width: int
    height: int
    left: int
    right: int
    axis_y: int
    tick_y: int
    title: str
    title_y: int
    title_x: float
    rows: list[DotRow]
    ticks: list[tuple[float, str]]
    text: str


def dot_chart(groups: Sequence[tuple[str, Sequence[float]]], title: str, places: int) -> DotChart:
    """Lay out one row of dots for each (label, values)."""
    values = [value for _, group in groups for value in group]
    low, high = min(values), max(values)
    margin = max((high - low) * 0.06, 0.5 * 10**-places)
    low, high = low - margin, high + margin

    def x(value: float) -> float:
        return round(LEFT + (value - low) / (high - low) * (WIDTH - LEFT - RIGHT), 1)

    rows = [_row(label, group, TOP + ROW * (i + 0.5), x) for i, (label, group) in enumerate(groups)]
    axis = TOP + ROW * len(groups)
    return DotChart(
        WIDTH, axis + BOTTOM, LEFT, WIDTH - RIGHT, axis, axis + 16, title, axis + 34, (LEFT + WIDTH - RIGHT) / 2, rows,
        [(x(value), f"{value:.{places}f}") for value in _ticks(low, high, places)],
        "; ".join(f"{label}: {', '.join(f'{v:.{places}f}' for v in group)}" for label, group in groups),
    )


def _row(label: str, values: Sequence[float], y: float, x: Callable[[float], float]) -> DotRow:
    dots: list[tuple[float, float]] = []
    for value in values:
        at = x(value)
        # Dots that would cover each other are set above one another.
        stacked = sum(abs(at - other) < 7 for other, _ in dots)
        dots.append((at, round(y + (-1) ** stacked * 5 * math.ceil(stacked / 2), 1)))
    short = label if len(label) <= LABEL_LETTERS else f"{label[: LABEL_LETTERS - 1]}…"
    return DotRow(short, y, dots, x(statistics.median(values)), y - 13, y + 13)


def _ticks(low: float, high: float, places: int) -> list[float]:
    rough = (high - low) / 5
    power = 10 ** math.floor(math.log10(rough))
    step = next(power * each for each in (1, 2, 5, 10) if power * each >= rough)
    step = max(step, 10**-places)
    first = math.ceil(low / step)
    return [k * step for k in range(first, math.floor(high / step) + 1)]
