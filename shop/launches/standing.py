"""How a job stands, in words: its place in the queue, how far it is, and whether anybody is at work on it."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime, timedelta

from django.utils import timezone
from django_scopes import scopes_disabled

from shop.launches.models import Job

NOBODY_AFTER = timedelta(seconds=30)


@dataclass(frozen=True)
class Standing:
    words: str
    warning: str = ""


def standing(job: Job, now: datetime | None = None) -> Standing:
    now = now or timezone.now()
    if job.state == Job.WAITING:
        return _waiting(job, now)
    if job.state == Job.RUNNING:
        return _running(job, now)
    took = _took(job)
    return Standing(f"{job.state}{f' after {took}' if took else ''}")


def _waiting(job: Job, now: datetime) -> Standing:
    # The queue is one for all shops: its length is all that is read of the others.
    with scopes_disabled():
        ahead = Job.objects.filter(state=Job.WAITING, pk__lt=job.pk).count()
        at_work = Job.objects.filter(state=Job.RUNNING, lease_until__gte=now).exists()
        lately = Job.objects.filter(finished_at__gte=now - NOBODY_AFTER, attempt__gt=0).exists()
    place = "Next in the queue." if not ahead else f"{ahead} ahead in the queue."
    if job.attempt:
        place += f" The worker that had it was lost; this is attempt {job.attempt + 1}."
    if not at_work and not lately and now - job.created_at > NOBODY_AFTER:
        return Standing(place, "No worker seems to be at work: nothing has been solved for half a minute. It is kept "
                               "and runs as soon as one is back; whoever looks after this machine can start it.")
    return Standing(place)


def _running(job: Job, now: datetime) -> Standing:
    if job.cancel_requested:
        return Standing("It stops at its next step.")
    words = f"{100 * job.progress:.0f} % done"
    if job.attempt > 1:
        words += f", attempt {job.attempt}"
    if job.lease_until is not None and job.lease_until < now:
        return Standing(words, "Its worker has not been heard of for half a minute. It goes back to the queue by itself.")
    return Standing(words)


def _took(job: Job) -> str:
    if job.started_at is None or job.finished_at is None:
        return ""
    seconds = (job.finished_at - job.started_at).total_seconds()
    return f"{seconds:.2f} s" if seconds < 10 else f"{seconds:.0f} s"
