"""The one Celery task: it carries a job's id, and the job's row says the rest."""

from __future__ import annotations

import logging
import os
import socket
from collections.abc import Callable
from typing import Any

from celery import shared_task
from django.db import close_old_connections
from django_scopes import scope, scopes_disabled

from shop.launches import services
from shop.launches.kinds import KINDS, SHARED
from shop.launches.models import Job

log = logging.getLogger(__name__)


class Cancelled(Exception):
    """The work stopped because it was cancelled, or because another attempt has taken it over."""


def reporter(job: Job) -> Callable[[float], None]:
    """What the work calls as it goes on: shows progress, keeps the lease, stops when it must."""

    def report(progress: float) -> None:
        if not services.heartbeat(job, progress):
            raise Cancelled

    return report


@shared_task(name="launches.run_job")
def run_job(job_id: int) -> None:
    # A worker lives for days; a connection that the database has dropped meanwhile must not cost the job an attempt.
    close_old_connections()
    run(job_id)


def run(job_id: int) -> None:
    """Claim a job, or help with one that is shared, and work on it; nothing when another was faster."""
    worker = f"{socket.gethostname()}:{os.getpid()}"
    # The message names a job of any shop; its row says which scope the work runs in.
    with scopes_disabled():
        job = services.claim(job_id, worker) or services.join(job_id, SHARED)
    if job is not None:
        with scope(shop=job.shop):
            work_on(job)


def work_on(job: Job) -> None:
    """Run a claimed job to its end, whatever that is."""
    try:
        answer: dict[str, Any] | None = KINDS[job.kind](job, reporter(job))
    except Cancelled:
        services.end_cancelled(job)
    except services.CannotSolve as error:
        services.fail(job, str(error), services.SOLVER_VERSION)
    except Exception as error:
        log.exception("job %s failed", job.pk)
        services.fail(job, f"a fault in the program: {type(error).__name__}: {error}")
    else:
        if answer is not None:
            services.finish(job, answer)
