"""What there is to draw of one setup, in metres, in the axes of the launch model."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

Point = tuple[float, float]


@dataclass(frozen=True)
class Strut:
    """A spring, a shock or both, between its mounts."""

    chassis: Point
    housing: Point
    label: str


@dataclass(frozen=True)
class Scene:
    """One car at ride height.

    `chosen` are hole numbers from 1; `centre` is None for parallel links; `length` turns metres into
    the text a shop reads; `ghost` is another setup drawn faint behind this one.
    """

    wheelbase: float
    front_radius: float
    rear_radius: float
    cg: Point
    cg_provisional: bool
    brackets: Mapping[str, tuple[Point, ...]]
    chosen: Mapping[str, int]
    centre: Point | None
    slope: float
    length: Callable[[float], str]
    struts: tuple[Strut, ...] = ()
    wheelie_bar: Point | None = None
    title: str = ""
    ghost: Scene | None = None

    def pin(self, place: str) -> Point | None:
        """The chosen hole of a bracket; None where the bracket or the hole is not there."""
        holes = self.brackets.get(place, ())
        number = self.chosen.get(place, 0)
        return holes[number - 1] if 1 <= number <= len(holes) else None

    def links(self) -> list[tuple[str, Point, Point]]:
        """(name, chassis pin, housing pin) of each link that has both its pins."""
        axle = (0.0, self.rear_radius)
        pairs = [
            ("lower", self.pin("lower_chassis"), self.pin("lower_housing")),
            ("upper", self.pin("upper_chassis"), self.pin("upper_housing")),
            ("ladder", self.pin("ladder_chassis"), axle),
        ]
        return [(name, one, two) for name, one, two in pairs if one is not None and two is not None]
