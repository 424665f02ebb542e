"""Refusals in the words of the trade, for the modules that take typed numbers.

Every one raises ValueError naming the field, the value and what is allowed, so
that a page can show the sentence as it stands.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any


def number(name: str, value: Any, unit: str = "") -> float:
    """Return `value` as a float, or refuse what is not a finite number."""
    try:
        result = float(value)
    except (TypeError, ValueError):
        raise ValueError(f"{name} is {value!r}: a number{_in(unit)} is needed.") from None
    if not math.isfinite(result):
        raise ValueError(f"{name} is {value!r}: a finite number{_in(unit)} is needed.")
    return result


def positive(name: str, value: Any, unit: str = "") -> float:
    """Return `value` as a float, or refuse what is not above zero."""
    result = number(name, value, unit)
    if result <= 0.0:
        raise ValueError(f"{name} is {result:g}{_after(unit)}: it must be above zero.")
    return result


def not_negative(name: str, value: Any, unit: str = "") -> float:
    """Return `value` as a float, or refuse what is below zero."""
    result = number(name, value, unit)
    if result < 0.0:
        raise ValueError(f"{name} is {result:g}{_after(unit)}: it must not be below zero.")
    return result


def between(name: str, value: Any, low: float, high: float, unit: str = "") -> float:
    """Return `value` as a float, or refuse what is outside `low` to `high`."""
    result = number(name, value, unit)
    if not low <= result <= high:
        raise ValueError(
            f"{name} is {result:g}{_after(unit)}: it must be from {low:g} to {high:g}{_after(unit)}."
        )
    return result


def one_of(name: str, value: Any, allowed: Sequence[str]) -> str:
    """Return `value`, or refuse what is not among the words `allowed`."""
    if value not in allowed:
        raise ValueError(f"{name} is {value!r}: it must be one of {', '.join(allowed)}.")
    return value


def _in(unit: str) -> str:
    return f" in {unit}" if unit else ""


def _after(unit: str) -> str:
    return f" {unit}" if unit else ""
