"""What is kept while a lane runs: greatest and least values, windows, dated events."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.jit import inlined

if TYPE_CHECKING:
    import numpy as np


@inlined
def begin(kept: np.ndarray) -> None:
    """Empty accumulators."""
    for i in range(L.WATCHED):
        kept[4 * i], kept[4 * i + 1] = -math.inf, 0.0
        kept[4 * i + 2], kept[4 * i + 3] = math.inf, 0.0
    for i in range(L.A_WINDOWS, L.ACCUMULATORS):
        kept[i] = 0.0
    kept[L.A_FIRST_PEAK] = -math.inf
    kept[L.A_DIP] = math.inf
    kept[L.A_DIP_TIME] = -1.0


@inlined
def peaks(kept: np.ndarray, t: float, out: np.ndarray) -> None:
    """Note the outputs at one instant as they stand."""
    for i in range(L.WATCHED):
        value = out[i]
        if value > kept[4 * i]:
            kept[4 * i], kept[4 * i + 1] = value, t
        if value < kept[4 * i + 2]:
            kept[4 * i + 2], kept[4 * i + 3] = value, t


@inlined
def turns(
    kept: np.ndarray, t: float, h_before: float, h_after: float, before: np.ndarray, out: np.ndarray, after: np.ndarray
) -> None:
    """Note where an output turned between steps: the top of the parabola through three instants.

    Only where it would be a new extreme. At a kink the three are not on one curve;
    the caller leaves those out.
    """
    for i in range(L.WATCHED):
        rise, fall = out[i] - before[i], after[i] - out[i]
        if rise * fall < 0.0 and (out[i] >= kept[4 * i] or out[i] <= kept[4 * i + 2]):
            first, second = rise / h_before, fall / h_after
            bend = (second - first) / (h_before + h_after)
            slope = first + bend * h_before
            shift = -0.5 * slope / bend
            value = out[i] + 0.5 * slope * shift
            if value > kept[4 * i]:
                kept[4 * i], kept[4 * i + 1] = value, t + shift
            if value < kept[4 * i + 2]:
                kept[4 * i + 2], kept[4 * i + 3] = value, t + shift


@inlined
def kinked(out: np.ndarray, after: np.ndarray) -> bool:
    """Whether a contact began or ended, or a gear changed, within the step."""
    for i in range(L.N_KINKS):
        if (out[L.O_GATE + i] > 0.0) != (after[L.O_GATE + i] > 0.0):
            return True
    return False


@inlined
def first_peak(kept: np.ndarray, t: float, load: float, static: float) -> None:
    """The rear tyres' first peak, and the lowest load after it, to the step.

    A fall of half a percent of the static load ends the first peak, so that
    a ripple on the way up is not taken for it.
    """
    if kept[L.A_DIP_TIME] < 0.0:
        if load > kept[L.A_FIRST_PEAK]:
            kept[L.A_FIRST_PEAK], kept[L.A_FIRST_PEAK_TIME] = load, t
        elif load < kept[L.A_FIRST_PEAK] - 0.005 * static:
            kept[L.A_DIP], kept[L.A_DIP_TIME] = load, t
    elif load < kept[L.A_DIP]:
        kept[L.A_DIP], kept[L.A_DIP_TIME] = load, t


@inlined
def windows(kept: np.ndarray, t: float, h: float, load: float, next_load: float) -> None:
    """Add a step to the time integrals of the rear load over the first instants."""
    for i in range(3):
        end = L.WINDOWS[i]
        if t < end:
            part = min(1.0, (end - t) / h)
            at_end = load + part * (next_load - load)
            kept[L.A_WINDOWS + i] += 0.5 * part * h * (load + at_end)


@inlined
def events(log: np.ndarray, count: int, t: float, h: float, out: np.ndarray, after: np.ndarray) -> int:
    """Date every contact that began or ended within the step; returns the new count."""
    for i in range(L.N_GATES):
        before, now = out[L.O_GATE + i], after[L.O_GATE + i]
        if (before > 0.0) != (now > 0.0):
            if count < L.EVENTS:
                log[count, 0] = 2 * i + (1 if now > 0.0 else 0)
                log[count, 1] = t + h * before / (before - now)
            count += 1
    return count
