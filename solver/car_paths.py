"""Numbers of a car file by their path, such as ``rear.springs.0.spring.rate``."""

from __future__ import annotations

import copy
from collections.abc import Mapping
from typing import Any

from solver.checks import number


def number_at(document: dict[str, Any], path: str) -> float:
    """One number of a car file.

    Parameters
    ----------
    document : dict
        The car file as read from JSON.
    path : str
        Keys and list places (from zero) joined by dots; the two numbers of a point
        may be called ``x`` and ``z``, as in the faults of a car file.

    Returns
    -------
    float

    Raises
    ------
    ValueError
        When the car file has no number there.
    """
    place = document
    for step in path.split("."):
        place = _inside(place, step, path)
    if isinstance(place, bool) or not isinstance(place, int | float):
        raise ValueError(f"{path} is not a number of this car file.")
    return number(path, place)


def with_numbers(document: dict[str, Any], values: Mapping[str, float]) -> dict[str, Any]:
    """A copy of a car file with other numbers in some places.

    Parameters
    ----------
    document : dict
    values : dict of str to float
        New numbers by path; each must stand in the car file already.

    Returns
    -------
    dict
        The document given is left as it was.

    Raises
    ------
    ValueError
        When the car file has no number at a path.
    """
    changed = copy.deepcopy(document)
    for path, value in values.items():
        number_at(changed, path)
        *way, last = path.split(".")
        place = changed
        for step in way:
            place = _inside(place, step, path)
        place[_key(place, last)] = float(value)
    return changed


def number_paths(document: Any, prefix: str = "") -> list[str]:
    """Every path of a car file at which a number stands, in the file's order."""
    if isinstance(document, dict):
        found = []
        for key, value in document.items():
            found += number_paths(value, f"{prefix}.{key}" if prefix else key)
        return found
    if isinstance(document, list):
        return [
            path for place, value in enumerate(document) for path in number_paths(value, f"{prefix}.{place}")
        ]
    is_number = isinstance(document, int | float) and not isinstance(document, bool)
    return [prefix] if is_number else []


def _inside(place: Any, step: str, path: str) -> Any:
    try:
        return place[_key(place, step)]
    except (KeyError, IndexError, TypeError, ValueError):
        raise ValueError(f"{path!r} is not in this car file.") from None


def _key(place: Any, step: str) -> Any:
    if not isinstance(place, list):
        return step
    if len(place) == 2 and step in ("x", "z"):
        return "xz".index(step)
    # Not int(step) alone: "-1" and "+1" would count from the end or pass for 1.
    if not step.isdecimal():
        raise ValueError(step)
    return int(step)
