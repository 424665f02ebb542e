"""Work in the queue for tests: an issued revision's job, and the same one solved."""

from __future__ import annotations

from datetime import timedelta
from typing import Any

from django.utils import timezone
from django_scopes import scope

from shop.launches.models import Job
from shop.launches.services import input_hash
from shop.launches.tasks import run
from shop.setups.models import Revision
from tests.shop.setups_world import World, make_issued


def make_job(world: World, parent: Revision | None = None, **typed: Any) -> Job:
    """The waiting launch of a newly issued revision."""
    issued = make_issued(world, parent, **typed)
    with scope(shop=world.shop):
        return Job.objects.select_related("revision__car", "shop").get(revision=issued)


def make_solved(world: World, parent: Revision | None = None, **typed: Any) -> Job:
    job = make_job(world, parent, **typed)
    run(job.pk)
    return fresh(job)


def make_hopeless(world: World) -> Job:
    """A launch that cannot be solved: many times its weight at the tyres turns the car over, or its axle."""
    job = make_job(world)
    hit = {"kind": "force", "table": [[0.0, 0.0], [0.01, 120e3]]}
    hopeless = {**job.input, "hit": hit, "wheelie_bar": None}
    set_row(job, input=hopeless, input_hash=input_hash(hopeless))
    return fresh(job)


def fresh(job: Job) -> Job:
    with scope(shop=job.shop):
        return Job.objects.select_related("revision__car", "revision__survey", "shop", "result").get(pk=job.pk)


def set_row(job: Job, **values: Any) -> None:
    """Write the row behind the services' backs, as time and dying workers do."""
    with scope(shop=job.shop):
        Job.objects.filter(pk=job.pk).update(**values)


def set_running(job: Job, attempt: int = 1, lease: Any = None, **values: Any) -> Job:
    now = timezone.now()
    lease = lease or now + timedelta(seconds=30)
    created = now - timedelta(minutes=10)
    set_row(job, state="running", attempt=attempt, lease_until=lease, created_at=created, worker="elsewhere:1", **values)
    return fresh(job)
