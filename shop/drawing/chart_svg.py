"""Small line charts as SVG for paper: axes with units, a settled value, event marks, up to three curves by dash and name."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from xml.sax.saxutils import escape, quoteattr

from django.utils.safestring import SafeString, mark_safe

# The plot inside the picture, in viewBox units.
_LEFT, _TOP, _RIGHT_MARGIN, _BOTTOM_MARGIN = 52.0, 34.0, 12.0, 34.0
_CURVES_AT_MOST = 3


@dataclass(frozen=True)
class Curve:
    """One line of a chart: its name, and one value a time, None where there is none."""

    name: str
    values: Sequence[float | None]


@dataclass(frozen=True)
class Mark:
    """Something that happened at a time."""

    time: float
    label: str


@dataclass(frozen=True)
class _Frame:
    """Which values the edges of the plot stand for."""

    start: float
    end: float
    low: float
    high: float
    width: float
    height: float

    def x(self, time: float) -> float:
        return _LEFT + (time - self.start) / (self.end - self.start) * (self.width - _LEFT - _RIGHT_MARGIN)

    def y(self, value: float) -> float:
        tall = self.height - _TOP - _BOTTOM_MARGIN
        return _TOP + (self.high - value) / (self.high - self.low) * tall


def line_chart(
    title: str,
    unit: str,
    times: Sequence[float],
    curves: Sequence[Curve],
    *,
    settled: float | None = None,
    events: Sequence[Mark] = (),
    width: float = 360,
    height: float = 200,
) -> SafeString:
    """One chart. Times are seconds; values, and the settled value of the first curve, are in `unit`.

    Raises ValueError for more than three curves, or one whose length is not that of the times.
    """
    if len(curves) > _CURVES_AT_MOST:
        raise ValueError(f"{len(curves)} curves on one chart: at most {_CURVES_AT_MOST} can be told apart in grey")
    for curve in curves:
        if len(curve.values) != len(times):
            raise ValueError(f"curve {curve.name!r} has {len(curve.values)} values for {len(times)} times")
    heading = f"{title}, {unit}" if unit else title
    shown = [value for curve in curves for value in curve.values if value is not None]
    parts = [f'<text class="title" x="4" y="13">{escape(heading)}</text>']
    if shown and len(times) > 1:
        ticks = nice_ticks(min(shown), max(shown))
        frame = _Frame(times[0], times[-1], ticks[0], ticks[-1], width, height)
        parts += [*_axes(frame, ticks), *_marks(frame, events), *_settled(frame, settled)]
        parts += [*_lines(frame, times, curves), *_names(frame, curves)]
    else:
        parts.append(f'<text class="unit" x="{width / 2:.0f}" y="{height / 2:.0f}" text-anchor="middle">no values</text>')
    text = (
        f'<svg class="small-chart" viewBox="0 0 {width:.0f} {height:.0f}" role="img" aria-label={quoteattr(heading)} '
        f'xmlns="http://www.w3.org/2000/svg">{"".join(parts)}</svg>'
    )
    return mark_safe(text)  # noqa: S308  every word in it has been escaped


def nice_ticks(low: float, high: float, wanted: int = 5) -> list[float]:
    """Round values (steps of 1, 2 or 5 times a power of ten) from at or below `low` to at or above `high`."""
    if high - low < 1e-12 * max(abs(low), abs(high), 1e-12):
        half = abs(low) / 2 or 0.5
        low, high = low - half, high + half
    rough = (high - low) / max(wanted - 1, 1)
    power = 10.0 ** math.floor(math.log10(rough))
    step = next(factor * power for factor in (1, 2, 5, 10) if factor * power >= rough * (1 - 1e-9))
    first, last = math.floor(low / step + 1e-9), math.ceil(high / step - 1e-9)
    return [n * step for n in range(first, last + 1)]


def _number(value: float, step: float) -> str:
    places = max(0, -math.floor(math.log10(step) + 1e-9))
    return f"{value + 0.0:,.{places}f}".replace("-", "−")


def _axes(frame: _Frame, ticks: list[float]) -> list[str]:
    right, bottom = frame.x(frame.end), frame.y(frame.low)
    parts = []
    for tick in ticks:
        y = frame.y(tick)
        words = _number(tick, ticks[1] - ticks[0])
        parts.append(f'<line class="grid" x1="{_LEFT:.1f}" y1="{y:.1f}" x2="{right:.1f}" y2="{y:.1f}"/>')
        parts.append(f'<text class="tick" x="{_LEFT - 5:.1f}" y="{y + 4:.1f}" text-anchor="end">{words}</text>')
    moments = [one for one in nice_ticks(frame.start, frame.end) if frame.start <= one <= frame.end * (1 + 1e-9)]
    for moment in moments:
        x = frame.x(moment)
        words = _number(moment, moments[1] - moments[0] if len(moments) > 1 else 1.0)
        parts.append(f'<line class="axis" x1="{x:.1f}" y1="{bottom:.1f}" x2="{x:.1f}" y2="{bottom + 4:.1f}"/>')
        parts.append(f'<text class="tick" x="{x:.1f}" y="{bottom + 15:.1f}" text-anchor="middle">{words}</text>')
    parts.append(f'<path class="axis" fill="none" d="M{_LEFT:.1f} {_TOP:.1f}V{bottom:.1f}H{right:.1f}"/>')
    parts.append(f'<text class="unit" x="{right:.1f}" y="{frame.height - 5:.1f}" text-anchor="end">time, s</text>')
    return parts


def _marks(frame: _Frame, events: Sequence[Mark]) -> list[str]:
    """Dashed uprights; their words stand under each other, on the side where there is room."""
    parts = []
    for row, event in enumerate(one for one in events if frame.start <= one.time <= frame.end):
        x, half = frame.x(event.time), (frame.start + frame.end) / 2
        side, dx = ("start", 3) if event.time < half else ("end", -3)
        parts.append(f'<line class="event" x1="{x:.1f}" y1="{_TOP:.1f}" x2="{x:.1f}" y2="{frame.y(frame.low):.1f}"/>')
        parts.append(
            f'<text class="mark" x="{x + dx:.1f}" y="{_TOP + 9 + 12 * row:.1f}" text-anchor="{side}">'
            f"{escape(event.label)}</text>"
        )
    return parts


def _settled(frame: _Frame, settled: float | None) -> list[str]:
    if settled is None or not frame.low <= settled <= frame.high:
        return []
    y = frame.y(settled)
    return [f'<line class="settled" x1="{_LEFT:.1f}" y1="{y:.1f}" x2="{frame.x(frame.end):.1f}" y2="{y:.1f}"/>']


def _lines(frame: _Frame, times: Sequence[float], curves: Sequence[Curve]) -> list[str]:
    parts = []
    for number, curve in enumerate(curves, 1):
        path, pen = "", "M"
        for time, value in zip(times, curve.values, strict=True):
            if value is None:
                pen = "M"
                continue
            path += f"{pen}{frame.x(time):.1f} {frame.y(value):.1f}"
            pen = "L"
        if path:
            parts.append(f'<path class="curve curve-{number}" d="{path}"/>')
    return parts


def _names(frame: _Frame, curves: Sequence[Curve]) -> list[str]:
    """A short piece of each line with its name, above the plot, from the right."""
    parts, x = [], frame.width - _RIGHT_MARGIN
    for number, curve in reversed(list(enumerate(curves, 1))):
        if not curve.name:
            continue
        parts.append(f'<text class="name" x="{x:.1f}" y="27" text-anchor="end">{escape(curve.name)}</text>')
        x -= 6.4 * len(curve.name) + 6
        parts.append(f'<path class="curve key curve-{number}" d="M{x - 24:.1f} 23H{x:.1f}"/>')
        x -= 38
    return parts
