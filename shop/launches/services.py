"""What happens to a job, each step one conditional write: the row decides, whatever the broker delivers."""

from __future__ import annotations

import hashlib
import json
import logging
from collections.abc import Collection, Mapping
from datetime import datetime, timedelta
from typing import Any

from django.db import transaction
from django.db.models import F, QuerySet
from django.utils import timezone

from shop.launches.bridge import SOLVER_VERSION, CannotSolve
from shop.launches.models import Job, Result
from shop.people.log import record
from shop.people.models import Membership
from shop.refusals import Refused
from shop.setups.models import Revision

log = logging.getLogger(__name__)

LEASE = timedelta(seconds=30)
MOST_ATTEMPTS = 3
__all__ = ["SOLVER_VERSION", "CannotSolve"]
RESULT_PARTS = ("statics", "modes", "figures", "events", "histories")


def input_hash(data: Mapping[str, Any]) -> str:
    """SHA-256 of the input's canonical JSON, its name left out: what solves alike has the same hash."""
    named = {key: value for key, value in data.items() if key != "name"}
    return hashlib.sha256(json.dumps(named, sort_keys=True, separators=(",", ":")).encode()).hexdigest()


def send(job: Job) -> None:
    """Hand the job's id to the broker. A broker that is away costs seconds, not the job: the sweep sends again."""
    from shop.launches.tasks import run_job

    try:
        run_job.delay(job.pk)
    except Exception as fault:  # any broker fault: connection refused, disk full, folder gone
        log.warning("job %s could not be sent and waits for the sweep: %s", job.pk, fault)
        return
    Job.objects.filter(pk=job.pk).update(sent_at=timezone.now())


def queue(member: Membership, revision: Revision, kind: str, data: Mapping[str, Any]) -> Job:
    """A waiting job, sent once the caller's transaction is committed."""
    job = Job.objects.create(
        shop=member.shop, kind=kind, revision=revision, requested_by=member.user, input=data, input_hash=input_hash(data)
    )
    transaction.on_commit(lambda: send(job))
    return job


def request_launch(member: Membership, revision: Revision) -> Job:
    """The launch of an issued revision, from the car file frozen with it: queued, or taken over where solved before."""
    if not revision.issued or revision.car_file is None:
        raise Refused(f"{revision} is a draft; its launch is solved once it is issued")
    solved = solved_before(revision.car_file)
    if solved is not None:
        return take_over(member, revision, solved)
    return queue(member, revision, "launch", revision.car_file)


def solved_before(data: Mapping[str, Any]) -> Job | None:
    """A launch of this shop that was solved from the same input by the same solver: its answer is the same to the bit."""
    alike = Job.objects.filter(kind="launch", state=Job.DONE, input_hash=input_hash(data), solver_version=SOLVER_VERSION)
    return alike.filter(result__isnull=False).select_related("result", "revision__car").order_by("id").first()


def take_over(member: Membership, revision: Revision, solved: Job) -> Job:
    """A job that is done from the start, with a copy of the result of one solved from the same input."""
    now = timezone.now()
    with transaction.atomic():
        job = Job.objects.create(
            shop=member.shop, kind="launch", revision=revision, requested_by=member.user, input=revision.car_file,
            input_hash=solved.input_hash, state=Job.DONE, progress=1.0, started_at=now, finished_at=now,
            solver_version=solved.solver_version,
        )
        parts = {name: getattr(solved.result, name) for name in RESULT_PARTS}
        Result.objects.create(shop=member.shop, job=job, attempt=0, **parts)
        record(member, "took over the result of", solved, job=job.pk, revision=str(revision))
    return job


def claim(job_id: int, worker: str, now: datetime | None = None) -> Job | None:
    """Take a waiting job: one UPDATE sets state, lease and attempt, so that of two workers one gets it."""
    now = now or timezone.now()
    taken = Job.objects.filter(pk=job_id, state=Job.WAITING, cancel_requested=False).update(
        state=Job.RUNNING,
        attempt=F("attempt") + 1,
        lease_until=now + LEASE,
        worker=worker[:120],
        started_at=now,
        progress=0.0,
        error="",
    )
    return Job.objects.select_related("shop", "revision__car").get(pk=job_id) if taken else None


def join(job_id: int, shared: Collection[str]) -> Job | None:
    """A running job that others may help with, under the attempt that is on it."""
    helped = Job.objects.filter(pk=job_id, kind__in=list(shared), state=Job.RUNNING, cancel_requested=False)
    return helped.select_related("shop", "revision__car").first()


def _mine(job: Job) -> QuerySet[Job]:
    return Job.objects.filter(pk=job.pk, attempt=job.attempt, state=Job.RUNNING)


def heartbeat(job: Job, progress: float) -> bool:
    """Renew the lease and show progress. False when the job is no longer this attempt's, or is to be cancelled."""
    kept = _mine(job).filter(cancel_requested=False).update(
        progress=min(max(progress, 0.0), 1.0), lease_until=timezone.now() + LEASE
    )
    return bool(kept)


def finish(job: Job, answer: Mapping[str, Any]) -> bool:
    """Write the result, once: a stale attempt changes nothing and is told so."""
    with transaction.atomic():
        done = _mine(job).update(
            state=Job.DONE,
            progress=1.0,
            lease_until=None,
            finished_at=timezone.now(),
            solver_version=answer.get("solver_version", ""),
        )
        if not done:
            return False
        parts = {name: answer[name] for name in RESULT_PARTS if name in answer}
        Result.objects.create(shop_id=job.shop_id, job=job, attempt=job.attempt, **parts)
    return True


def fail(job: Job, words: str, solver_version: str = "") -> bool:
    """End the job as failed, with the reason in words."""
    changed = _mine(job).update(
        state=Job.FAILED,
        error=words or "the work ended without saying why",
        lease_until=None,
        finished_at=timezone.now(),
        solver_version=solver_version,
    )
    return bool(changed)


def end_cancelled(job: Job) -> bool:
    """The worker's side of a cancel: it has stopped."""
    changed = _mine(job).update(state=Job.CANCELLED, lease_until=None, finished_at=timezone.now())
    return bool(changed)


def request_cancel(member: Membership, job: Job) -> Job:
    """A waiting job ends at once; a running one is told at its next heartbeat."""
    with transaction.atomic():
        ended = Job.objects.filter(pk=job.pk, state=Job.WAITING).update(
            state=Job.CANCELLED, cancel_requested=True, finished_at=timezone.now()
        )
        if not ended and not Job.objects.filter(pk=job.pk, state=Job.RUNNING).update(cancel_requested=True):
            job.refresh_from_db()
            raise Refused(f"this job is already {job.state}")
        record(member, "cancelled", job)
    job.refresh_from_db()
    return job


def retry(member: Membership, job: Job) -> Job:
    """The same work again as a new job; the failed or cancelled one stays on record.

    Work already under way for it is given instead of a second one: a button may be pressed twice.
    """
    if job.kind == "study":
        raise Refused("a study is asked anew from its own page")
    if job.state not in (Job.FAILED, Job.CANCELLED):
        raise Refused(f"this job is {job.state}; only failed or cancelled work is tried again")
    with transaction.atomic():
        alike = Job.objects.filter(revision_id=job.revision_id, kind=job.kind, input_hash=job.input_hash)
        under_way = alike.filter(state__in=[Job.WAITING, Job.RUNNING]).order_by("id").first()
        if under_way is not None:
            return under_way
        again = queue(member, job.revision, job.kind, job.input)
        record(member, "tried again", again, after=job.pk)
    return again
