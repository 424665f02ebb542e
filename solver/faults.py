"""What is wrong with a car, and why a launch could not be solved."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any


@dataclass(frozen=True)
class Fault:
    """One thing that is wrong with a car.

    Attributes
    ----------
    field : str
        Dotted path in the car file, such as ``rear.linkage.upper.chassis``.
    value : object
        What stands there.
    message : str
        What is allowed, in the words of the trade.
    """

    field: str
    value: object
    message: str

    def __str__(self) -> str:
        where = self.field or "the car file"
        if self.value is None:
            return f"{where}: {self.message}"
        return f"{where} = {_short(self.value)}: {self.message}"


class CarError(ValueError):
    """A car that cannot be solved as it is described; carries every fault found."""

    def __init__(self, faults: Sequence[Fault]) -> None:
        self.faults = tuple(faults)
        super().__init__("; ".join(str(fault) for fault in self.faults))

    def __reduce__(self) -> tuple:
        return CarError, (self.faults,)


class LaunchFailed(RuntimeError):
    """A launch that began and could not be carried to its end.

    Attributes
    ----------
    time : float
        When it failed, s from the start of the run.
    reason : str
        Why, in words.
    """

    def __init__(self, time: float, reason: str) -> None:
        self.time = float(time)
        self.reason = reason
        super().__init__(f"at {self.time:.4f} s: {reason}")

    def __reduce__(self) -> tuple:
        return LaunchFailed, (self.time, self.reason)


def _short(value: Any) -> str:
    text = repr(value)
    return text if len(text) <= 60 else text[:57] + "..."
