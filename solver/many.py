"""Many car files at once: what they share becomes a base car, what differs becomes the lanes of `sweep`."""

import json
from collections.abc import Callable, Mapping, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from solver.carfile import car_from_dict
from solver.faults import CarError
from solver.sweeping import sweep, sweepable

File = Mapping[str, Any]
Flat = dict[str, Any]
Files = Sequence[File | None]
Flats = list[Flat]
Lanes = NDArray[np.int64]
Columns = dict[str, NDArray[np.float64]]
Reasons = dict[int, str]
Asked = Callable[[], bool] | None


def sweep_files(
    files: Files, *, progress: Callable[[int, int], None] | None = None, cancelled: Asked = None
) -> tuple[Columns, Reasons]:
    """Solve car files that differ in numbers, as few batches as their differences allow.

    Files that differ only in what `sweep` can vary are lanes of one batch; others (another hit
    shape, a table, a stop more) make batches of their own.

    Parameters
    ----------
    files : sequence of dict or None
        Car files in SI; None is a lane nobody asks for.
    progress : callable(done, lanes), optional
    cancelled : callable() -> bool, optional

    Returns
    -------
    columns : dict of str to float array (lanes,)
        Figures and statics of `solver.figures`; NaN for a lane that was not asked for or not solved.
    reasons : dict of int to str
        Why a lane that was asked for has no figures.
    """
    columns: Columns = {}
    reasons: Reasons = {}
    done = 0
    flat = [{} if file is None else _flat(file) for file in files]
    for lanes in _alike(files, flat):
        if cancelled and cancelled():
            break
        _solve_alike(files, flat, lanes, columns, reasons, cancelled)
        done += len(lanes)
        if progress:
            progress(done, len(files))
    return columns, reasons


def _solve_alike(
    files: Files, flat: Flats, lanes: Lanes, columns: Columns, reasons: Reasons, cancelled: Asked
) -> None:
    try:
        base = car_from_dict(files[lanes[0]])
        able = set(sweepable(base))
    except CarError as error:
        reasons[lanes[0]] = _words(error)
        if len(lanes) > 1:
            _solve_alike(files, flat, lanes[1:], columns, reasons, cancelled)
        return
    shared = sorted(able & set(flat[lanes[0]]))
    changes = {path: np.array([flat[lane][path] for lane in lanes]) for path in shared}
    if "hit.scale" in changes:
        # The base car's own hit is scale 1.
        changes["hit.scale"] = changes["hit.scale"] / changes["hit.scale"][0]
    # What is the same in every lane need not be varied; one path must be, for the lanes to be counted.
    varied = {path: values for path, values in changes.items() if (values != values[0]).any()}
    varied = varied or {"mass": changes["mass"]}
    try:
        solved = sweep(base, varied, cancelled=cancelled)
    except CarError as error:
        _one_by_one(files, flat, lanes, error, columns, reasons, cancelled)
        return
    for name, values in {**solved.statics, **solved.figures}.items():
        columns.setdefault(name, np.full(len(files), np.nan))[lanes[: len(solved)]] = values
    for place in np.flatnonzero(solved.codes):
        reasons[int(lanes[place])] = solved.reason(int(place)) or "it could not be solved"


def _one_by_one(
    files: Files, flat: Flats, lanes: Lanes, error: CarError, columns: Columns, reasons: Reasons, cancelled: Asked
) -> None:
    """A value out of range refuses the whole batch: leave out the lanes whose own file is refused."""
    sound = []
    for lane in lanes:
        try:
            car_from_dict(files[lane])
            sound.append(lane)
        except CarError as fault:
            reasons[lane] = _words(fault)
    if len(sound) == len(lanes):
        reasons.update(dict.fromkeys(lanes, _words(error)))
    elif sound:
        _solve_alike(files, flat, np.array(sound), columns, reasons, cancelled)


def _words(error: CarError) -> str:
    return "; ".join(f"{fault.field}: {fault.message}" for fault in error.faults)


def _alike(files: Files, flattened: Flats) -> list[Lanes]:
    """Lanes that can share a base car: same structure, same tables, same shape of the hit."""
    groups: dict[str, list[int]] = {}
    able: set[str] | None = None
    for lane, file in enumerate(files):
        if file is None:
            continue
        flat = flattened[lane]
        if able is None:
            able = _able(file)
        fixed = {path: value for path, value in flat.items() if path not in able}
        fixed["paths"] = sorted(flat)
        groups.setdefault(json.dumps(fixed, sort_keys=True), []).append(lane)
    return [np.array(lanes) for lanes in groups.values()]


def _able(file: File) -> set[str]:
    try:
        return set(sweepable(car_from_dict(file)))
    except CarError:
        # The first file is at fault: take what any car can vary, and let each batch speak for itself.
        return {"hit.scale", "mass", "cg.x", "cg.z"}


def _flat(file: File) -> Flat:
    """Dotted path to number; the hit as its shape and `hit.scale`, points by ``.x`` and ``.z``."""
    found: Flat = {}
    _walk({key: value for key, value in file.items() if key not in ("name", "hit")}, "", found)
    hit = file["hit"]
    if hit.get("kind") == "force":
        peak = max((abs(force) for _, force in hit["table"]), default=0.0) or 1.0
        found["hit.scale"] = peak
        found["hit.shape"] = json.dumps([[time, round(force / peak, 12)] for time, force in hit["table"]])
    else:
        found["hit.shape"] = json.dumps(hit, sort_keys=True)
    return found


def _walk(value: Any, path: str, found: Flat) -> None:
    if isinstance(value, dict):
        for key, part in value.items():
            _walk(part, f"{path}.{key}" if path else key, found)
    elif isinstance(value, (list, tuple)) and len(value) == 2 and path.rpartition(".")[2] in ("chassis", "housing"):
        found[f"{path}.x"], found[f"{path}.z"] = float(value[0]), float(value[1])
    elif isinstance(value, (list, tuple)) and any(isinstance(part, dict) for part in value):
        for index, part in enumerate(value):
            _walk(part, f"{path}.{index}", found)
    elif isinstance(value, bool) or not isinstance(value, (int, float)):
        found[path] = json.dumps(value)
    else:
        found[path] = float(value)
