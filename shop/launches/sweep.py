"""Brings strays back: jobs whose worker died, and jobs whose message was lost."""

from __future__ import annotations

from datetime import timedelta

from django.db.models import Q
from django.utils import timezone
from django_scopes import scopes_disabled

from shop.launches import services
from shop.launches.models import Job

# A message not picked up within this time is sent again; a second copy does no harm, for only one claim succeeds.
SENT_LONG_AGO = timedelta(seconds=60)
UNSENT = timedelta(seconds=5)


def return_strays() -> int:
    """Return expired jobs to the queue and send what was lost; how many were sent."""
    now = timezone.now()
    # The sweep looks after every shop's jobs, and touches nothing but their state.
    with scopes_disabled():
        expired = Job.objects.filter(state=Job.RUNNING, lease_until__lt=now)
        expired.filter(cancel_requested=True).update(state=Job.CANCELLED, lease_until=None, finished_at=now)
        expired.filter(attempt__gte=services.MOST_ATTEMPTS).exclude(kind="study").update(
            state=Job.FAILED,
            lease_until=None,
            finished_at=now,
            error=f"the worker died {services.MOST_ATTEMPTS} times on this job; it is not tried again by itself",
        )
        expired.update(state=Job.WAITING, lease_until=None, sent_at=None)
        # Cancelled in the very moment in which it was returned: no worker would ever claim it.
        Job.objects.filter(state=Job.WAITING, cancel_requested=True).update(state=Job.CANCELLED, finished_at=now)
        lost = Job.objects.filter(state=Job.WAITING).filter(
            Q(sent_at__isnull=True, created_at__lt=now - UNSENT)
            | Q(sent_at__lt=now - SENT_LONG_AGO)
        )
        strays = list(lost.order_by("id")[:200])
        for job in strays:
            services.send(job)
    return len(strays)
