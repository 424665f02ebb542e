"""The integrator: fixed steps of the classical Runge-Kutta method, and no physics.

Steps end exactly at the drive table's knots and at every report, so that no step
spans a kink that is known beforehand. The length is bounded by stability.
Embedded error estimate: the last slope of a step against the first of the next
(their difference times h/6 is the method's third-order companion).
"""

import math

import numpy as np

from solver.kernel import layout as L
from solver.kernel.drivetrain import shift, start_up
from solver.kernel.jit import jit
from solver.kernel.physics import accelerate
from solver.kernel.watch import begin, events, first_peak, peaks, windows

STABLE = 1.5  # share of 1/|eigenvalue| that a step may take
FURTHEST_DRIFT = 1e-5  # m of link length
LARGEST_ERROR = 0.02  # m/s or rad/s, of one step's embedded estimate
UPRIGHT = 1.2  # rad
LEAST_LEVERAGE = 1e-4


@jit
def drive(p, n, leg, t):
    """The drive table on its straight leg `leg`; -1 is before its first point."""
    at, count = n[L.HIT_AT], n[L.HIT_COUNT]
    if leg < 0:
        return 0.0
    t0, f0 = p[at + 2 * leg], p[at + 2 * leg + 1]
    if leg == count - 1:
        return p[L.HIT_SCALE] * f0
    t1, f1 = p[at + 2 * leg + 2], p[at + 2 * leg + 3]
    return p[L.HIT_SCALE] * (f0 + (f1 - f0) * (t - t0) / (t1 - t0))


@jit
def stage(y, k, step, into, states):
    for i in range(states):
        into[i] = y[i] + step * k[i]


@jit
def check(kept, y, k4, after_k, h, out):
    """How the step went: a code of `layout`."""
    if not math.isfinite(y[L.Z] + y[L.PITCH] + y[L.HOUSING] + out[L.O_LOWER] + out[L.O_SHOCK_SPEED]):
        return L.NOT_FINITE
    if abs(y[L.PITCH]) > UPRIGHT or abs(y[L.HOUSING]) > UPRIGHT:
        return L.TURNED_OVER
    if out[L.O_LEVERAGE] < LEAST_LEVERAGE:
        return L.LOCKED
    if out[L.O_DRIFT] > FURTHEST_DRIFT:
        return L.DRIFTED
    worst = 0.0
    for i in range(L.COORDINATES, L.STATES):
        worst = max(worst, abs(k4[i] - after_k[i]))
    worst *= h / 6.0
    if worst > kept[L.A_ERROR]:
        kept[L.A_ERROR] = worst
    return L.INEXACT if worst > LARGEST_ERROR else L.SOLVED


@jit
def march(p, n, longest, kept, log, record, y_record, out_record):
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

    Returns
    -------
    code, time, reports, events : int, float, int, int
    """
    y, trial = np.zeros(L.STATES), np.zeros(L.STATES)
    k1, k2, k3, k4 = (np.zeros(L.STATES), np.zeros(L.STATES), np.zeros(L.STATES), np.zeros(L.STATES))
    out, after, scrap = np.zeros(L.OUTPUTS), np.zeros(L.OUTPUTS), np.zeros(L.OUTPUTS)
    begin(kept)
    longest = min(longest, STABLE / p[L.LAMBDA])
    duration, report_step, static = p[L.DURATION], p[L.OUTPUT_STEP], p[L.REAR_STATIC]
    hit_at, legs, states = n[L.HIT_AT], n[L.HIT_COUNT], n[L.N_STATES]
    start_up(p, y)
    reports = math.floor(duration / report_step + 1e-9) + 1
    t, leg, report, count, code = 0.0, -1, 0, 0, L.SOLVED
    while leg + 1 < legs and p[hit_at + 2 * leg + 2] <= 0.0:
        leg += 1
    accelerate(p, n, drive(p, n, leg, t), y, k1, out)
    while True:
        if report < reports and t >= report * report_step - 1e-12:
            if record:
                y_record[report, :] = y
                out_record[report, :] = out
            report += 1
        if report == reports:
            break
        mark = min(report * report_step, duration)
        if leg + 1 < legs:
            mark = min(mark, p[hit_at + 2 * leg + 2])
        steps = max(1, math.ceil((mark - t) / longest - 1e-9))
        start, h = t, (mark - t) / steps
        for i in range(steps):
            t = start + i * h
            end = mark if i == steps - 1 else start + (i + 1) * h
            middle = drive(p, n, leg, t + 0.5 * h)
            stage(y, k1, 0.5 * h, trial, states)
            accelerate(p, n, middle, trial, k2, scrap)
            stage(y, k2, 0.5 * h, trial, states)
            accelerate(p, n, middle, trial, k3, scrap)
            stage(y, k3, h, trial, states)
            last = drive(p, n, leg, end)
            accelerate(p, n, last, trial, k4, scrap)
            peaks(kept, t, out)
            first_peak(kept, t, out[L.O_REAR_LOAD], static)
            for j in range(states):
                y[j] += h / 6.0 * (k1[j] + 2.0 * (k2[j] + k3[j]) + k4[j])
            accelerate(p, n, last, y, k1, after)
            code = check(kept, y, k4, k1, h, after)
            windows(kept, t, h, out[L.O_REAR_LOAD], after[L.O_REAR_LOAD])
            count = events(log, count, t, h, out, after)
            out, after = after, out
            if code != L.SOLVED:
                return code, end, report, count
            kept[L.A_STEPS] += 1.0
            if n[L.DRIVE] >= L.CLUTCH_DRIVE and shift(p, n, y):
                accelerate(p, n, last, y, k1, out)
        t = mark
        if leg + 1 < legs and t >= p[hit_at + 2 * leg + 2]:
            leg += 1
            # A table that begins above nil jumps: the new leg's slope counts from here.
            accelerate(p, n, drive(p, n, leg, t), y, k1, out)
    peaks(kept, t, out)
    for i in range(L.WATCHED):
        kept[L.A_LAST + i] = out[i]
    return code, t, report, count
