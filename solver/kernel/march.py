"""The integrator: fixed steps of the classical Runge-Kutta method, and no physics.

Steps end exactly at the drive table's knots and at every report, so that no step
spans a kink that is known beforehand; a step in which a contact began or ended is
taken again in `SPLIT` parts. The length is bounded by stability. Embedded error
estimate: the last slope of a step against the first of the next (their difference
times h/6 is the method's third-order companion).
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from solver.kernel import layout as L
from solver.kernel.drivetrain import shift, start_up
from solver.kernel.jit import inlined, lean
from solver.kernel.physics import accelerate
from solver.kernel.watch import begin, events, first_peak, kinked, peaks, turns, windows

if TYPE_CHECKING:
    import numpy as np

# Share of 1/|eigenvalue| that a step may take. The method is stable to 2.7; a shock's knee
# under a steep bleed is held to 0.03 % of range at 0.5, and to 0.3 % only at 1.5.
STABLE = 0.5
SPLIT = 16
FURTHEST_DRIFT = 1e-5  # m of link length
LARGEST_ERROR = 0.02  # m/s or rad/s, of one step's embedded estimate
UPRIGHT = 1.2  # rad
LEAST_LEVERAGE = 1e-4


@inlined
def drive(p: np.ndarray, n: np.ndarray, leg: int, t: float) -> float:
    """The drive table on its straight leg `leg`; -1 is before its first point."""
    at, count = n[L.HIT_AT], n[L.HIT_COUNT]
    if leg < 0:
        return 0.0
    t0, f0 = p[at + 2 * leg], p[at + 2 * leg + 1]
    if leg == count - 1:
        return p[L.HIT_SCALE] * f0
    t1, f1 = p[at + 2 * leg + 2], p[at + 2 * leg + 3]
    return p[L.HIT_SCALE] * (f0 + (f1 - f0) * (t - t0) / (t1 - t0))


@inlined
def weigh_slopes(
    y: np.ndarray,
    h: float,
    k1: np.ndarray,
    k2: np.ndarray,
    k3: np.ndarray,
    k4: np.ndarray,
    into: np.ndarray,
    states: np.ndarray,
) -> None:
    for i in range(states):
        into[i] = y[i] + h / 6.0 * (k1[i] + 2.0 * (k2[i] + k3[i]) + k4[i])


@inlined
def ahead(y: np.ndarray, step: float, k: np.ndarray, into: np.ndarray, states: np.ndarray) -> None:
    for i in range(states):
        into[i] = y[i] + step * k[i]


@inlined
def before_shift(out: np.ndarray, after: np.ndarray) -> float:
    """Share of a step that comes before a shift; 1 when there is none."""
    before, now = out[L.O_GATE + L.GATE_SHIFT], after[L.O_GATE + L.GATE_SHIFT]
    return before / (before - now) if before <= 0.0 < now else 1.0


@lean
def take_step(
    p: np.ndarray,
    n: np.ndarray,
    leg: int,
    t: float,
    h: float,
    y: np.ndarray,
    k1: np.ndarray,
    work: np.ndarray,
    after: np.ndarray,
) -> None:
    """One step from `y`: rows 3 and 4 of `work` get the new state and its slope."""
    states = n[L.N_STATES]
    k2, k3, k4, trial, scrap = work[5], work[6], work[7], work[8], work[9]
    middle, last = drive(p, n, leg, t + 0.5 * h), drive(p, n, leg, t + h)
    ahead(y, 0.5 * h, k1, trial, states)
    accelerate(p, n, middle, trial, k2, scrap)
    ahead(y, 0.5 * h, k2, trial, states)
    accelerate(p, n, middle, trial, k3, scrap)
    ahead(y, h, k3, trial, states)
    accelerate(p, n, last, trial, k4, scrap)
    weigh_slopes(y, h, k1, k2, k3, k4, work[3], states)
    accelerate(p, n, last, work[3], work[4], after)


@inlined
def check(kept: np.ndarray, y: np.ndarray, k4: np.ndarray, slope: np.ndarray, h: float, out: np.ndarray) -> int:
    """How the step went: a code of `layout`."""
    total = y[L.Z] + y[L.PITCH] + y[L.HOUSING] + out[L.O_LOWER] + out[L.O_SHOCK_SPEED]
    if not math.isfinite(total):
        return L.NOT_FINITE
    if max(abs(y[L.PITCH]), abs(y[L.HOUSING])) > UPRIGHT:
        folded = abs(y[L.HOUSING] - y[L.PITCH]) > 0.5 * UPRIGHT
        return L.FOLDED if folded else L.TURNED_OVER
    if out[L.O_LEVERAGE] < LEAST_LEVERAGE:
        return L.LOCKED
    kept[L.A_DRIFT] = max(kept[L.A_DRIFT], out[L.O_DRIFT])
    if out[L.O_DRIFT] > FURTHEST_DRIFT:
        return L.DRIFTED
    worst = 0.0
    for i in range(L.COORDINATES, 2 * L.COORDINATES):
        worst = max(worst, abs(k4[i] - slope[i]))
    worst *= h / 6.0
    kept[L.A_ERROR] = max(kept[L.A_ERROR], worst)
    return L.INEXACT if worst > LARGEST_ERROR else L.SOLVED


@lean
def march(
    p: np.ndarray,
    n: np.ndarray,
    longest: float,
    kept: np.ndarray,
    log: np.ndarray,
    record: bool,
    states_record: np.ndarray,
    outputs_record: np.ndarray,
    work: np.ndarray,
) -> tuple:
    """Run one lane from rest to its end.

    Parameters
    ----------
    p, n : float64 and int64 rows
        One lane, settled.
    longest : float
        Longest step allowed, s; stability may shorten it.
    kept : float64 (ACCUMULATORS,)
        Filled with peaks, windows and monitors.
    log : float64 (EVENTS, 2)
        Filled with (kind, time).
    record : bool
        Whether to fill the two records, one row a report.
    work : float64 (WORK_ROWS, WORK_WIDTH)
        Zeros.

    Returns
    -------
    code, time, events : int, float, int
    """
    y, k1 = work[0], work[1]
    before, out, after = work[2], work[10], work[11]
    begin(kept)
    start_up(p, y)
    longest = min(longest, STABLE / p[L.LAMBDA])
    report_step, static = p[L.OUTPUT_STEP], p[L.REAR_STATIC]
    hit_at, legs, states = n[L.HIT_AT], n[L.HIT_COUNT], n[L.N_STATES]
    reports = math.floor(p[L.DURATION] / report_step + 1e-9) + 1
    t, leg, report, count = 0.0, -1, 0, 0
    while leg + 1 < legs and p[hit_at + 2 * leg + 2] <= 0.0:
        leg += 1
    accelerate(p, n, drive(p, n, leg, t), y, k1, out)
    while True:
        if t >= report * report_step - 1e-12:
            if record:
                for i in range(L.STATES):
                    states_record[report, i] = y[i]
                for i in range(L.OUTPUTS):
                    outputs_record[report, i] = out[i]
            report += 1
            if report == reports:
                break
        mark = report * report_step
        if leg + 1 < legs:
            mark = min(mark, p[hit_at + 2 * leg + 2])
        steps = max(1, math.ceil((mark - t) / longest - 1e-9))
        start, part, place, fine = t, (mark - t) / (steps * SPLIT), 0, False
        h_before, within = 0.0, 0.0
        while place < steps * SPLIT:
            size = 1 if fine else SPLIT
            t, h = start + (place + within) * part, (size - within) * part
            take_step(p, n, leg, t, h, y, k1, work, after)
            if not fine and kinked(out, after):
                fine = True
                continue
            share = before_shift(out, after)
            if share < 1.0:
                # A shift changes the gear at once: end the step just past it.
                h = min(h, share * h + 1e-7)
                take_step(p, n, leg, t, h, y, k1, work, after)
                within += h / part
            else:
                place, within = place + size, 0.0
            peaks(kept, t, out)
            if h_before > 0.0:
                turns(kept, t, h_before, h, before, out, after)
            first_peak(kept, t, out[L.O_REAR_LOAD], static)
            windows(kept, t, h, out[L.O_REAR_LOAD], after[L.O_REAR_LOAD])
            kink = kinked(out, after)
            count = events(log, count, t, h, out, after)
            code = check(kept, work[3], work[7], work[4], h, after)
            if code != L.SOLVED:
                return code, t + h, count
            kept[L.A_STEPS] += 1.0
            for i in range(states):
                y[i], k1[i] = work[3, i], work[4, i]
            before, out, after = out, after, before
            if n[L.DRIVE] >= L.CLUTCH_DRIVE and shift(p, n, y):
                accelerate(p, n, drive(p, n, leg, t + h), y, k1, out)
            h_before = 0.0 if kink else h
            if within >= 1.0 - 1e-9:
                place, within = place + 1, 0.0
            fine = fine and (place % SPLIT != 0 or within > 0.0)
        t = mark
        if leg + 1 < legs and t >= p[hit_at + 2 * leg + 2]:
            leg += 1
            # A table that begins above nil jumps: the new leg's slope counts from here.
            accelerate(p, n, drive(p, n, leg, t), y, k1, out)
    peaks(kept, t, out)
    for i in range(L.WATCHED):
        kept[L.A_LAST + i] = out[i]
    return L.SOLVED, t, count
