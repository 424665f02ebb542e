"""Blocks of lanes side by side on the machine's cores.

Plain threads, not numba's own: those may neither be entered from two threads at
once nor survive a fork, and a web server does the one, a worker the other.
"""

from __future__ import annotations

import os
from concurrent.futures import ThreadPoolExecutor

import numpy as np

from solver.kernel.lanes import run_block

BLOCK = 25


def cores() -> int:
    """How many blocks to run at once: NUMBA_NUM_THREADS where it is set, else the cores given to us."""
    named = os.environ.get("NUMBA_NUM_THREADS", "")
    if named.isdigit() and int(named) > 0:
        return int(named)
    return len(os.sched_getaffinity(0)) if hasattr(os, "sched_getaffinity") else os.cpu_count() or 1


def run_lanes(p: np.ndarray, n: np.ndarray, longest: float, *results: np.ndarray) -> None:
    """Settle and march every row of `p`, filling `results` row by row.

    Parameters
    ----------
    p : float array (lanes, width)
    n : int array
    longest : float
        Longest step, s.
    *results : arrays (lanes, ...)
        kept, log, codes, times, counts of `solver.kernel.lanes.run_block`.
    """

    def block(start: int) -> None:
        rows = slice(start, start + BLOCK)
        run_block(p[rows], n, longest, *(result[rows] for result in results))

    starts = range(0, len(p), BLOCK)
    workers = min(cores(), len(starts))
    if workers < 2:
        for start in starts:
            block(start)
        return
    with ThreadPoolExecutor(workers) as pool:
        # A list, so that an error in a block is raised here.
        list(pool.map(block, starts))
