"""One launch, from a car to its figures, histories and events."""

from __future__ import annotations

import math
from dataclasses import asdict, dataclass
from typing import TYPE_CHECKING, Any

import numpy as np

from solver.carfile import ensure_sound
from solver.faults import LaunchFailed
from solver.kernel import layout as L
from solver.kernel.lanes import run_one, settle_one
from solver.kernel.march import STABLE
from solver.modes import Mode, modes_of_row
from solver.packing import pack
from solver.reduction import reduce
from solver.statics import Statics, statics_of_row
from solver.tracing import event_list, histories_of
from solver.version import SOLVER_VERSION

if TYPE_CHECKING:
    from solver.car import Car

LONGEST_STEP = 2.5e-3

REASONS = {
    L.NOT_FINITE: "the forces ran out of all bounds; the stiffest spring, shock or stop is too "
    "stiff for the weight it moves",
    L.LOCKED: "the rear linkage locked: its bars came into one line",
    L.TURNED_OVER: "the car turned over: pitch passed 69 degrees, where the model ends",
    L.FOLDED: "the rear axle folded up on its bars: the housing turned past 69 degrees",
    L.DRIFTED: "the bars' lengths could not be held",
    L.INEXACT: "the accuracy could not be held, even in steps sixteen times shorter",
}


@dataclass(frozen=True)
class Launch:
    """What one launch did.

    Attributes
    ----------
    statics : Statics
    modes : tuple of Mode
    figures : dict of str to float or None
        SI; names and meanings in `solver.figures.FIGURES`. None: it did not happen.
    histories : dict of str to float array (reports,)
        SI; names in `solver.figures.HISTORIES`, ``t`` first.
    events : tuple of Event
        Contacts that began or ended, in time order, within 0.1 ms.
    settled : bool
        Whether the body had come to rest on its springs at the end of the run.
    quality : dict of str to float
        ``steps``, ``longest_step`` (s), ``link_drift`` (m), ``step_error`` (m/s or
        rad/s, greatest embedded estimate of one step).
    """

    statics: Statics
    modes: tuple[Mode, ...]
    figures: dict
    histories: dict
    events: tuple
    settled: bool
    quality: dict

    def to_dict(self) -> dict[str, Any]:
        """The result as JSON-ready plain values: lists for arrays, None for not-a-number."""
        return {
            "solver_version": SOLVER_VERSION,
            "statics": plain(asdict(self.statics)),
            "modes": [plain(asdict(mode)) for mode in self.modes],
            "figures": plain(self.figures),
            "histories": {name: plain(values.tolist()) for name, values in self.histories.items()},
            "events": [plain(asdict(event)) for event in self.events],
            "settled": self.settled,
            "quality": plain(self.quality),
        }


def launch(car: Car, longest_step: float = LONGEST_STEP) -> Launch:
    """Solve a launch.

    Parameters
    ----------
    car : Car
    longest_step : float, optional
        Longest integration step, s; shortened where stability or accuracy asks.

    Returns
    -------
    Launch

    Raises
    ------
    CarError
        When the car cannot be solved as described; before any integration.
    LaunchFailed
        When the run cannot be carried on: with the time and the reason.
    """
    ensure_sound(car)
    row = pack(car)
    settle_one(row.p, row.n)
    at_rest = statics_of_row(car, row)
    kept, log = np.zeros(L.ACCUMULATORS), np.zeros((L.EVENTS, 2))
    reports = math.floor(car.run.duration / car.run.output_step + 1e-9) + 1
    states, outputs = np.zeros((reports, L.STATES)), np.zeros((reports, L.OUTPUTS))
    code, time, count, step = run_one(row.p, row.n, longest_step, kept, log, True, states, outputs)
    if code != L.SOLVED:
        raise LaunchFailed(time, REASONS[code])
    figures = reduce(car, row.p[None], kept[None], log[None], np.array([count]))
    histories = histories_of(car, row.p, states, outputs)
    return Launch(
        statics=at_rest,
        modes=modes_of_row(row),
        figures={name: told(value.item()) for name, value in figures.items()},
        histories=histories,
        events=event_list(log, count),
        settled=bool(np.abs(states[-1, [7 + L.Z, 7 + L.PITCH, 7 + L.SLIDE]]).max() < 0.02),
        quality={
            "steps": float(kept[L.A_STEPS]),
            "longest_step": float(min(step, STABLE / row.p[L.LAMBDA])),
            "link_drift": float(kept[L.A_DRIFT]),
            "step_error": float(kept[L.A_ERROR]),
        },
    )


def told(value: float) -> float | None:
    """A figure, or None where there is nothing to tell."""
    return value if math.isfinite(value) else None


def plain(value: Any) -> Any:
    """The value with every not-a-number and infinity as None, tuples as lists."""
    if isinstance(value, dict):
        return {key: plain(part) for key, part in value.items()}
    if isinstance(value, list | tuple):
        return [plain(part) for part in value]
    if isinstance(value, float) and not math.isfinite(value):
        return None
    return value
