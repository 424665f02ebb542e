"""Many lanes: settle and march each, over threads. A lane never sees its neighbours."""

import numpy as np

from solver.kernel.jit import jit, parallel, prange
from solver.kernel.march import march
from solver.kernel.rest import settle


@jit
def settle_one(p, n):
    """Work out ride height of one lane, in place."""
    settle(p, n)


@jit
def run_one(p, n, longest, kept, log, y_record, out_record):
    """Solve one settled lane with its histories."""
    return march(p, n, longest, kept, log, True, y_record, out_record)


@parallel
def run_many(p, n, longest, kept, log, codes, times, counts):
    """Settle and solve every row of `p` (lanes, width), figures only."""
    for lane in prange(p.shape[0]):
        nothing = np.zeros((1, 1))
        settle(p[lane], n)
        code, time, _, count = march(
            p[lane], n, longest, kept[lane], log[lane], False, nothing, nothing
        )
        codes[lane], times[lane], counts[lane] = code, time, count
