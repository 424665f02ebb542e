"""Numbers of a car file by their path, such as ``rear.springs.0.spring.rate``."""

from __future__ import annotations

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
