"""A study: thousands of cars that differ in a few numbers, figures only."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any

import numpy as np

from solver.carfile import car_from_dict, car_to_dict, ensure_sound
from solver.faults import CarError, Fault
from solver.kernel import layout as L
from solver.launching import LONGEST_STEP, REASONS
from solver.packing import pack
from solver.reduction import reduce
from solver.rest_figures import plan_angles, rest_figures
from solver.threads import run_lanes

if TYPE_CHECKING:
    from solver.car import Car
    from solver.packing import Row

CHUNK = 500

REFUSALS = {
    L.BAD_WEIGHTS: "the weights do not stand together: CG, axle weights and radii",
    L.BAD_LINKS: "the bars are crossed, share a pin, are too short or do not run forward",
    L.LINKS_LOCK: "the bars lock before the axle has gone through its travel",
    L.NO_REST: "the springs and bars cannot hold the car at ride height",
    L.NOT_RUN: "not solved: the study was stopped",
}


@dataclass(frozen=True)
class Sweep:
    """What every lane of a study did.

    Attributes
    ----------
    figures : dict of str to float array (lanes,)
        Names of `solver.figures.FIGURES`; NaN where there is nothing to tell.
    statics : dict of str to float array (lanes,)
        Names of `solver.figures.STATIC_FIGURES`.
    codes : int array (lanes,)
        0 for a lane that was solved.
    times : float array (lanes,)
        When each lane ended, s.
    """

    figures: dict
    statics: dict
    codes: np.ndarray
    times: np.ndarray
    complete: bool = field(default=True)

    def __len__(self) -> int:
        return len(self.codes)

    def reason(self, lane: int) -> str | None:
        """Why a lane has no figures, in words; None when it was solved."""
        code = int(self.codes[lane])
        if code == L.SOLVED:
            return None
        words = {**REASONS, **REFUSALS}[code]
        return words if code in REFUSALS else f"at {self.times[lane]:.4f} s: {words}"

    def to_dict(self) -> dict:
        """JSON-ready: one list a figure, null where there is nothing to tell."""
        return {
            "lanes": len(self),
            "complete": self.complete,
            "figures": {name: _plain(values) for name, values in self.figures.items()},
            "statics": {name: _plain(values) for name, values in self.statics.items()},
            "refused": {str(i): self.reason(int(i)) for i in np.flatnonzero(self.codes)},
        }


def sweep(
    car: Car,
    changes: Mapping,
    *,
    longest_step: float = LONGEST_STEP,
    chunk: int = CHUNK,
    progress: Any = None,
    cancelled: Any = None,
) -> Sweep:
    """Solve one car in many variations.

    Each lane gives the very figures `solver.launch` gives for that car.

    Parameters
    ----------
    car : Car
        What all lanes share.
    changes : mapping of str to float array (lanes,)
        Car-file paths that vary, in SI, such as ``rear.linkage.upper.chassis.z``,
        ``rear.springs.0.spring.rate`` or ``hit.scale``; `sweepable` lists them.
    longest_step : float, optional
        As for `launch`.
    chunk : int, optional
        Lanes solved between two calls of `progress` and `cancelled`.
    progress : callable(done, lanes), optional
    cancelled : callable() -> bool, optional
        Asked before each chunk; True ends the study with what there is.

    Returns
    -------
    Sweep

    Raises
    ------
    CarError
        When the base car is refused, a path cannot vary or a value is out of the
        range that the car file allows. A lane whose numbers do not stand together
        is refused by itself, with a reason.
    """
    ensure_sound(car)
    row = pack(car)
    changes = _checked(car, row, changes)
    lanes = len(next(iter(changes.values())))
    parts, done = [], 0
    while done < lanes and not (cancelled and cancelled()):
        size = min(chunk, lanes - done)
        p = np.repeat(row.p[None], size, axis=0)
        for path, values in changes.items():
            column, factor = row.columns[path]
            p[:, column] = factor * values[done : done + size]
        parts.append(_solve(car, p, row.n, longest_step))
        done += size
        if progress:
            progress(done, lanes)
    return _joined(parts, lanes, done)


def sweep_cars(
    cars: Sequence[Car],
    *,
    longest_step: float = LONGEST_STEP,
    chunk: int = CHUNK,
    progress: Any = None,
    cancelled: Any = None,
) -> Sweep:
    """Solve many cars that may differ in anything: shock clicks, tables, stops.

    Cars of one make-up (the same parts, the same number of points in each table) are
    solved together. Each car costs some 20 microseconds of packing more than a lane
    of `sweep`.

    Parameters
    ----------
    cars : sequence of Car
    longest_step, chunk, progress, cancelled
        As for `sweep`.

    Returns
    -------
    Sweep
        Lanes in the order of `cars`.

    Raises
    ------
    CarError
        When a car is refused; its faults name ``cars.<number>.<field>``.
    """
    groups: dict[tuple, list] = {}
    for i, car in enumerate(cars):
        row = pack(_sound(i, car))
        groups.setdefault((row.n.tobytes(), len(row.p), _options(car)), []).append((i, car, row))
    batches = [g[at : at + chunk] for g in groups.values() for at in range(0, len(g), chunk)]
    parts, order = [], []
    for batch in batches:
        if cancelled and cancelled():
            break
        p = np.array([row.p for _, _, row in batch])
        parts.append(_solve(batch[0][1], p, batch[0][2].n, longest_step))
        order += [i for i, _, _ in batch]
        if progress:
            progress(len(order), len(cars))
    order += sorted(set(range(len(cars))) - set(order))
    joined = _joined(parts, len(cars), sum(len(part[2]) for part in parts))
    back = np.argsort(order)
    return Sweep(
        {name: values[back] for name, values in joined.figures.items()},
        {name: values[back] for name, values in joined.statics.items()},
        joined.codes[back],
        joined.times[back],
        joined.complete,
    )


def _sound(i: int, car: Car) -> Car:
    try:
        ensure_sound(car)
    except CarError as error:
        faults = [Fault(f"cars.{i}.{f.field}", f.value, f.message) for f in error.faults]
        raise CarError(faults) from None
    return car


def _options(car: Car) -> tuple:
    """What `reduce` reads from the car itself rather than from its row."""
    return bool(car.rear.tyre.grip), plan_angles(car)


def sweepable(car: Car) -> list[str]:
    """The car-file paths that `sweep` can vary on this car, sorted."""
    ensure_sound(car)
    return sorted(pack(car).columns)


def _checked(car: Car, row: Row, changes: Mapping) -> dict[str, np.ndarray]:
    faults, arrays, data = [], {}, car_to_dict(car)
    for path, values in changes.items():
        values = np.asarray(values, dtype=float)
        if path not in row.columns:
            faults.append(Fault(path, None, "cannot vary in a study of this car"))
        elif values.ndim != 1 or len(values) == 0:
            faults.append(Fault(path, None, "must be a list of one value a lane"))
        else:
            arrays[path] = values
            faults += _range_faults(data, path, values)
    if not changes:
        faults.append(Fault("", None, "nothing varies: give at least one path with its values"))
    if len({len(values) for values in arrays.values()}) > 1:
        faults.append(Fault("", None, "every path must have the same number of values"))
    if faults:
        raise CarError(faults)
    return arrays


def _range_faults(data: Any, path: str, values: np.ndarray) -> list[Fault]:
    """The car file's own range, asked at the extremes of what is wanted."""
    if path == "hit.scale":
        good = np.isfinite(values) & (np.abs(values) <= 100.0)
        return [] if good.all() else [Fault(path, None, "must be numbers from -100 to 100")]
    for value in {float(np.min(values)), float(np.max(values))}:
        try:
            car_from_dict(changed(data, path, value))
        except CarError as error:
            found = [fault for fault in error.faults if path.startswith(fault.field)]
            # What does not stand together is judged lane by lane.
            found = [fault for fault in found if fault.message.startswith("must be a number")]
            if found:
                return [Fault(path, value, found[0].message)]
    return []


def changed(data: Any, path: str, value: Any) -> Any:
    """A copy of a car file's dict with one dotted path changed; ``.x`` and ``.z`` reach into points."""
    head, _, rest = path.partition(".")
    if isinstance(data, dict):
        return {**data, head: changed(data[head], rest, value) if rest else value}
    at = {"x": 0, "z": 1}[head] if head in ("x", "z") else int(head)
    part = changed(data[at], rest, value) if rest else value
    return [*data[:at], part, *data[at + 1 :]]


def _solve(car: Car, p: np.ndarray, n: np.ndarray, longest_step: float) -> tuple:
    lanes = len(p)
    kept = np.full((lanes, L.ACCUMULATORS), np.nan)
    log = np.zeros((lanes, L.EVENTS, 2))
    codes, counts = np.zeros(lanes, dtype=np.int64), np.zeros(lanes, dtype=np.int64)
    times = np.zeros(lanes)
    run_lanes(p, n, longest_step, kept, log, codes, times, counts)
    figures, statics = reduce(car, p, kept, log, counts), rest_figures(car, p)
    failed = codes != L.SOLVED
    for values in figures.values():
        values[failed] = np.nan
    for values in statics.values():
        values[codes > L.FOLDED] = np.nan
    return figures, statics, codes, times


def _joined(parts: list, lanes: int, done: int) -> Sweep:
    missing = lanes - done

    def join(pieces: Any) -> Any:
        return np.concatenate([*pieces, np.full(missing, np.nan)])

    figures = {name: join([part[0][name] for part in parts]) for name in parts[0][0]} if parts else {}
    statics = {name: join([part[1][name] for part in parts]) for name in parts[0][1]} if parts else {}
    codes = np.concatenate([*(part[2] for part in parts), np.full(missing, L.NOT_RUN, dtype=np.int64)])
    return Sweep(figures, statics, codes, join([part[3] for part in parts]), missing == 0)


def _plain(values: np.ndarray) -> list:
    return [value if np.isfinite(value) else None for value in values.tolist()]
