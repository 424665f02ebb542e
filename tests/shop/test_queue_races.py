"""Many workers at one row at the same time: one gets the job, one result is written."""

from __future__ import annotations

import threading
from collections.abc import Callable
from datetime import timedelta
from typing import Any

import pytest
from django.db import connection
from django.utils import timezone
from django_scopes import scope

from shop.launches import services, sweep
from shop.launches.models import Job, Result
from tests.shop.launch_world import fresh, make_job, set_running
from tests.shop.setups_world import make_world

AT_ONCE = 6
ANSWER = {"statics": {}, "modes": [], "figures": {}, "events": [], "histories": {}}

pytestmark = pytest.mark.django_db(transaction=True)


def at_once(do: Callable[[int], Any], shop: Any) -> list[Any]:
    """What `do` gave in each of several threads, every one with a connection of its own, started together."""
    together, answers = threading.Barrier(AT_ONCE), [None] * AT_ONCE

    def run(number: int) -> None:
        with scope(shop=shop):
            together.wait(10)
            try:
                answers[number] = do(number)
            except Exception as fault:
                answers[number] = fault
            finally:
                connection.close()

    threads = [threading.Thread(target=run, args=(number,)) for number in range(AT_ONCE)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join(30)
    return answers


def test_one_of_many_claims_gets_the_job():
    world = make_world()
    for _ in range(3):
        job = make_job(world)
        answers = at_once(lambda number, pk=job.pk: services.claim(pk, f"worker:{number}"), world.shop)
        got = [answer for answer in answers if answer is not None]
        assert len(got) == 1 and isinstance(got[0], Job), answers
        assert fresh(job).attempt == 1 and fresh(job).worker == got[0].worker


def test_one_of_many_finishes_writes_the_result():
    world = make_world()
    job = services_claim(world)
    answers = at_once(lambda number: services.finish(job, {**ANSWER, "figures": {"by": number}}), world.shop)
    assert sorted(answers) == [False] * (AT_ONCE - 1) + [True]
    with scope(shop=world.shop):
        assert Result.objects.get(job=job).figures == {"by": answers.index(True)}


def services_claim(world):
    with scope(shop=world.shop):
        return services.claim(make_job(world).pk, "one:1")


def test_cancel_against_claim_never_leaves_a_job_that_nobody_ends():
    world = make_world()
    job = make_job(world)

    def do(number: int) -> Any:
        return services.claim(job.pk, "worker") if number % 2 else services.request_cancel(world.owner, fresh(job)).state

    at_once(do, world.shop)
    row = fresh(job)
    assert row.cancel_requested
    assert row.state == "cancelled" or (row.state == "running" and not heard(world, row))


def heard(world, row):
    with scope(shop=world.shop):
        return services.heartbeat(row, 0.5)


def test_many_sweeps_at_once_return_a_stray_to_one_worker():
    world = make_world()
    job = set_running(make_job(world), lease=timezone.now() - timedelta(minutes=1))
    answers = at_once(lambda number: sweep.return_strays(), world.shop)
    assert all(isinstance(answer, int) for answer in answers), answers
    got = [answer for answer in at_once(lambda number: services.claim(job.pk, f"w:{number}"), world.shop) if answer]
    assert len(got) == 1 and fresh(job).attempt == 2
