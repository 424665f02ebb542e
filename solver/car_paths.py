"""Numbers of a car file by their path, such as ``rear.springs[0].spring.rate``."""

import copy
import re

from solver.checks import number

_STEP = re.compile(r"\[(\d+)\]|([^.\[\]]+)")


def number_at(document, path):
    """One number of a car file.

    Parameters
    ----------
    document : dict
        The car file as read from JSON.
    path : str
        Keys joined by dots, list places in square brackets from zero.

    Returns
    -------
    float

    Raises
    ------
    ValueError
        When the car file has no number there.
    """
    place = document
    for step in _steps(path):
        place = _inside(place, step, path)
    if isinstance(place, bool) or not isinstance(place, int | float):
        raise ValueError(f"{path} is not a number of this car file.")
    return number(path, place)


def with_numbers(document, values):
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
        *way, last = _steps(path)
        place = changed
        for step in way:
            place = _inside(place, step, path)
        place[last] = float(value)
    return changed


def number_paths(document, prefix=""):
    """Every path of a car file at which a number stands, in the file's order."""
    if isinstance(document, dict):
        found = []
        for key, value in document.items():
            found += number_paths(value, f"{prefix}.{key}" if prefix else key)
        return found
    if isinstance(document, list):
        return [
            path for place, value in enumerate(document) for path in number_paths(value, f"{prefix}[{place}]")
        ]
    is_number = isinstance(document, int | float) and not isinstance(document, bool)
    return [prefix] if is_number else []


def _steps(path):
    steps = [int(place) if place else key for place, key in _STEP.findall(path)]
    if not steps:
        raise ValueError("a path into the car file is empty.")
    return steps


def _inside(place, step, path):
    try:
        if isinstance(step, int) != isinstance(place, list):
            raise KeyError(step)
        return place[step]
    except (KeyError, IndexError, TypeError):
        raise ValueError(f"{path} is not in this car file.") from None
