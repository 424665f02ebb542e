"""Many lanes: settle and march each. A lane never sees its neighbours."""

from __future__ import annotations

import numpy as np

from solver.kernel import layout as L
from solver.kernel.jit import jit
from solver.kernel.march import march
from solver.kernel.rest import settle
from solver.kernel.soundness import unsound

HALVINGS = 4


@jit
def settle_one(p: np.ndarray, n: np.ndarray) -> None:
    """Work out ride height of one lane, in place."""
    settle(p, n)


@jit
def run_one(
    p: np.ndarray,
    n: np.ndarray,
    longest: float,
    kept: np.ndarray,
    log: np.ndarray,
    record: bool,
    states: np.ndarray,
    outputs: np.ndarray,
) -> tuple:
    """March one settled lane; where the accuracy is not held, again in shorter steps."""
    work = np.zeros((L.WORK_ROWS, L.WORK_WIDTH))
    code, time, count = march(p, n, longest, kept, log, record, states, outputs, work)
    for _ in range(HALVINGS):
        if code not in (L.NOT_FINITE, L.DRIFTED, L.INEXACT):
            break
        longest *= 0.5
        work[:] = 0.0
        code, time, count = march(p, n, longest, kept, log, record, states, outputs, work)
    return code, time, count, longest


@jit
def run_block(
    p: np.ndarray,
    n: np.ndarray,
    longest: float,
    kept: np.ndarray,
    log: np.ndarray,
    codes: np.ndarray,
    times: np.ndarray,
    counts: np.ndarray,
) -> None:
    """Settle and march every row of `p` (lanes, width) that can be, figures only.

    Holds no lock of the interpreter: `solver.threads` runs blocks side by side.
    """
    nothing = np.zeros((1, 1))
    for lane in range(p.shape[0]):
        settle(p[lane], n)
        code, time, count = unsound(p[lane], n), 0.0, 0
        if code == L.SOLVED:
            code, time, count, _ = run_one(p[lane], n, longest, kept[lane], log[lane], False, nothing, nothing)
        codes[lane], times[lane], counts[lane] = code, time, count
