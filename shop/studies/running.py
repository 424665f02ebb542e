"""A worker's part in a study: take chunks until none is left. Any number of workers may do this at once."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np

from shop.launches.bridge import SOLVER_VERSION, CannotSolve
from shop.launches.models import Job
from shop.launches.services import MOST_ATTEMPTS
from shop.studies import services, work
from shop.studies.models import Study
from shop.studies.plan import read_plan
from shop.studies.robust import share_within
from shop.studies.rows import choice_of, few_changes_first
from shop.studies.yardsticks import limits_of

# As many as fit a short list.
ROBUST_CHOICES = 8


def run(job: Job, report: Callable[[float], None]) -> dict[str, Any] | None:
    """Solve what is left. The worker that keeps the last chunk ends the job; the others just leave."""
    study = Study.objects.get(job=job)
    report(services.share_done(study))
    while (chunk := services.take_chunk(study)) is not None:
        if chunk.attempt > MOST_ATTEMPTS:
            words = f"the worker died {MOST_ATTEMPTS} times on choices {chunk.start + 1} to {chunk.stop}"
            raise CannotSolve(f"{words}; the rows of the others stay")
        columns, refused = work.solve_choices(job.input, chunk.start, chunk.stop)
        services.keep_chunk(chunk, work.packed(columns), refused)
        report(services.share_done(study))
    if study.chunks.filter(done_at__isnull=True).exists():
        # Another worker still has a chunk; if it died, the sweep brings the job back.
        return None
    return _summary(study, job)


def _summary(study: Study, job: Job) -> dict[str, Any]:
    columns, refused = services.columns_so_far(study)
    solved = study.choices - len(refused)
    spans = {}
    for name, values in columns.items():
        known = values[np.isfinite(values)]
        if len(known):
            spans[name] = [float(known.min()), float(known.max())]
    figures = {"solved": solved, "refused": len(refused), "spans": spans}
    if "tolerances" in job.input:
        figures["robust"] = _robustness(study, job)
    return {"figures": figures, "solver_version": SOLVER_VERSION}


def _robustness(study: Study, job: Job) -> dict[str, float]:
    """Share of drawn cars that stay within the limits, for the choices a person will look at first."""
    front = few_changes_first(study)[:ROBUST_CHOICES]
    if not front:
        return {}
    plan = read_plan(study.plan)
    choices = [choice_of(plan, number) for number in front]
    shares = share_within(job.input, choices, limits_of(study.limits))
    return {str(number): share for number, share in zip(front, shares, strict=True)}
