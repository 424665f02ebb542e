"""A window on the drawing plane (x forward, z up, metres) as an SVG viewBox, and the marks one puts in it."""

from __future__ import annotations

from dataclasses import dataclass, field
from xml.sax.saxutils import escape, quoteattr

Point = tuple[float, float]
Box = tuple[float, float, float, float]

# Width of a letter and height of a line of a label, in viewBox units, at the size the stylesheet gives it (17).
LETTER, _LINE = 8.6, 17.0
# Where a label may stand beside its point, best first: (dx, dy, anchor).
_PLACES = (
    (16, -10, "start"),
    (16, 26, "start"),
    (-16, -10, "end"),
    (-16, 26, "end"),
    (0, -24, "middle"),
    (0, 40, "middle"),
    (16, -34, "start"),
    (-16, -34, "end"),
)


@dataclass
class Canvas:
    """Metres in, viewBox units out; forward is to the right and up is up."""

    left: float
    right: float
    bottom: float
    top: float
    width: float = 1000.0
    marks: list[str] = field(default_factory=list)
    taken: list[Box] = field(default_factory=list)

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
        """Words at a fixed offset (viewBox units) from a point; later labels keep clear of them."""
        x, y = self.at(point)
        x, y = x + dx, y + dy
        self.taken.append(_box(x, y, words, anchor))
        self.add(f'<text class="{css}" x="{x:.1f}" y="{y:.1f}" text-anchor="{anchor}">{escape(words)}</text>')

    def label(self, point: Point, words: str) -> None:
        """Words beside a point, where they are inside the window and cover no other words."""
        x, y = self.at(point)
        best = min(_PLACES, key=lambda place: self._in_the_way(_box(x + place[0], y + place[1], words, place[2])))
        self.text(point, words, "label", dx=best[0], dy=best[1], anchor=best[2])

    def avoid(self, start: Point, end: Point) -> None:
        """Labels placed from now on keep clear of this line."""
        (x1, y1), (x2, y2) = self.at(start), self.at(end)
        steps = max(int(max(abs(x2 - x1), abs(y2 - y1)) / 10), 1)
        for step in range(steps + 1):
            x, y = x1 + (x2 - x1) * step / steps, y1 + (y2 - y1) * step / steps
            self.taken.append((x - 5, y - 5, x + 5, y + 5))

    def _in_the_way(self, box: Box) -> float:
        """How much of a box is outside the window or on words that are there already."""
        left, top, right, bottom = box
        inside = _overlap(box, (0.0, 0.0, self.width, self.height))
        return (right - left) * (bottom - top) - inside + sum(_overlap(box, other) for other in self.taken)

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

    def svg(self, title: str, css: str, role: str = "img") -> str:
        return (
            f'<svg class="{css}" viewBox="0 0 {self.width:.0f} {self.height:.0f}" role="{role}" '
            f'aria-label={quoteattr(title)} xmlns="http://www.w3.org/2000/svg">{"".join(self.marks)}</svg>'
        )


def _box(x: float, y: float, words: str, anchor: str) -> Box:
    """Left, top, right, bottom of words that stand on the line y."""
    long = len(words) * LETTER
    left = x - {"start": 0.0, "middle": 0.5, "end": 1.0}[anchor] * long
    return (left, y - _LINE, left + long, y + 4)


def _overlap(one: Box, other: Box) -> float:
    across = min(one[2], other[2]) - max(one[0], other[0])
    down = min(one[3], other[3]) - max(one[1], other[1])
    return across * down if across > 0 and down > 0 else 0.0
