"""A worker's part in a study: take chunks until none is left. Any number of workers may do this at once."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np

from shop.launches.bridge import SOLVER_VERSION
from shop.launches.models import Job
from shop.studies import services, work
from shop.studies.models import Study


def run(job: Job, report: Callable[[float], None]) -> dict[str, Any] | None:
    """Solve what is left. The worker that keeps the last chunk ends the job; the others just leave."""
    study = Study.objects.get(job=job)
    report(services.share_done(study))
    while (chunk := services.take_chunk(study)) is not None:
        columns, refused = work.solve_choices(job.input, chunk.start, chunk.stop)
        services.keep_chunk(chunk, work.packed(columns), refused)
        report(services.share_done(study))
    if study.chunks.filter(done_at__isnull=True).exists():
        # Another worker still has a chunk; if it died, the sweep brings the job back.
        return None
    return _summary(study)


def _summary(study: Study) -> dict[str, Any]:
    columns, refused = services.columns_so_far(study)
    solved = study.choices - len(refused)
    spans = {}
    for name, values in columns.items():
        known = values[np.isfinite(values)]
        if len(known):
            spans[name] = [float(known.min()), float(known.max())]
    figures = {"solved": solved, "refused": len(refused), "spans": spans}
    return {"figures": figures, "solver_version": SOLVER_VERSION}
