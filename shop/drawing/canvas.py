"""A window on the drawing plane (x forward, z up, metres) as an SVG viewBox, and the marks one puts in it."""

from __future__ import annotations

from dataclasses import dataclass, field
from xml.sax.saxutils import escape, quoteattr

Point = tuple[float, float]


@dataclass
class Canvas:
    """Metres in, viewBox units out; forward is to the right and up is up."""

    left: float
    right: float
    bottom: float
    top: float
    width: float = 1000.0
    marks: list[str] = field(default_factory=list)

    @property
    def scale(self) -> float:
        return self.width / (self.right - self.left)

    @property
    def height(self) -> float:
        return (self.top - self.bottom) * self.scale

    def at(self, point: Point) -> Point:
        return ((point[0] - self.left) * self.scale, (self.top - point[1]) * self.scale)

    def holds(self, point: Point) -> bool:
        return self.left <= point[0] <= self.right and self.bottom <= point[1] <= self.top

    def add(self, mark: str) -> None:
        self.marks.append(mark)

    def line(self, start: Point, end: Point, css: str) -> None:
        (x1, y1), (x2, y2) = self.at(start), self.at(end)
        self.add(f'<line class="{css}" x1="{x1:.1f}" y1="{y1:.1f}" x2="{x2:.1f}" y2="{y2:.1f}"/>')

    def circle(self, centre: Point, radius: float, css: str) -> None:
        """A circle of a radius in metres."""
        x, y = self.at(centre)
        self.add(f'<circle class="{css}" cx="{x:.1f}" cy="{y:.1f}" r="{radius * self.scale:.1f}"/>')

    def dot(self, centre: Point, size: float, css: str) -> None:
        """A dot of a size in viewBox units, whatever the scale."""
        x, y = self.at(centre)
        self.add(f'<circle class="{css}" cx="{x:.1f}" cy="{y:.1f}" r="{size:.1f}"/>')

    def text(self, point: Point, words: str, css: str = "", *, dx: float = 0, dy: float = 0, anchor: str = "start") -> None:
        x, y = self.at(point)
        self.add(
            f'<text class="{css}" x="{x + dx:.1f}" y="{y + dy:.1f}" text-anchor="{anchor}">{escape(words)}</text>'
        )

    def clip(self, start: Point, direction: Point) -> Point:
        """Where a ray from `start` leaves the window; `start` itself when it points nowhere inside."""
        reach = []
        for origin, step, low, high in (
            (start[0], direction[0], self.left, self.right),
            (start[1], direction[1], self.bottom, self.top),
        ):
            if step:
                reach.append(max((low - origin) / step, (high - origin) / step))
        share = max(min(reach, default=0.0), 0.0)
        return (start[0] + share * direction[0], start[1] + share * direction[1])

    def svg(self, title: str, css: str) -> str:
        return (
            f'<svg class="{css}" viewBox="0 0 {self.width:.0f} {self.height:.0f}" role="img" '
            f'aria-label={quoteattr(title)} xmlns="http://www.w3.org/2000/svg">{"".join(self.marks)}</svg>'
        )
