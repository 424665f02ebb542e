"""The figures by which passes are compared: times to a mark, times between marks, speeds."""

from __future__ import annotations

from dataclasses import dataclass

from shop.launches import bridge
from shop.track.models import Pass
from shop.track.slip import TIMES
from shop.units import unit_of


@dataclass(frozen=True)
class Figure:
    """`fields` are one column of the slip, or the two marks between which the time is taken."""

    key: str
    label: str
    where: str
    fields: tuple[str, ...]
    speed: bool = False

    @property
    def better(self) -> str:
        return "faster" if self.speed else "quicker"

    @property
    def worse(self) -> str:
        return "slower"

    def unit(self, system: str) -> str:
        return ("km/h" if system == "metric" else "mph") if self.speed else "s"

    def text(self, value: float, system: str, *, signed: bool = False) -> str:
        number = f"{value:+.2f}" if self.speed else f"{value:+.3f}"
        return f"{(number if signed else number.lstrip('+')).replace('-', '−')} {self.unit(system)}"

    def value(self, run: Pass, system: str, factor: float | None = None) -> float | None:
        """In seconds or the shop's speed unit; with `factor`, as in standard air."""
        found = [getattr(run, name) for name in self.fields]
        if any(value is None for value in found):
            return None
        if factor is not None:
            found = [bridge.corrected(float(value), factor, speed=self.speed) for value in found]
        if self.speed:
            metres = unit_of("speed", run.speed_unit).to_si(float(found[0]))
            return unit_of("speed", self.unit(system)).from_si(metres)
        return float(found[-1] - found[0]) if len(found) == 2 else float(found[0])


def _between(first: int, last: int) -> Figure:
    return Figure(
        f"from_{first}_to_{last}", f"{first} to {last} ft", f"from {first} to {last} ft", (f"time_{first}", f"time_{last}")
    )


FIGURES: tuple[Figure, ...] = (
    *(Figure(column.field, column.label, f"to {column.mark}", (column.field,)) for column in TIMES),
    _between(60, 330), _between(330, 660), _between(660, 1320),
    Figure("speed_660", "Speed at 660 ft", "at 660 ft", ("speed_660",), speed=True),
    Figure("speed_1000", "Speed at 1000 ft", "at 1000 ft", ("speed_1000",), speed=True),
    Figure("speed_1320", "Speed at 1320 ft", "at 1320 ft", ("speed_1320",), speed=True),
)
BY_KEY = {figure.key: figure for figure in FIGURES}
