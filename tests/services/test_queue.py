"""Whatever dies, every job gets exactly one result: on SQLite with the folder, and on PostgreSQL with Redis.

Jobs are real launches of the demo's revisions. Waiting for a lease to run out is not the subject, so rows are aged.
"""

from __future__ import annotations

import os
import shutil
import signal
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

import pytest

from tests.services.queue_rows import Rows
from tests.services.stack import KINDS, Stack, prepared_stack, servers_for, until

REQUEST = """
from shop.people.models import Membership
from shop.setups.models import Revision
from shop.launches import services
member = Membership.objects.get(role="owner")
issued = Revision.objects.filter(number__isnull=False)
answer = [services.queue(member, revision, "launch", revision.car_file).pk for revision in issued]
"""


@pytest.fixture(scope="module", params=KINDS)
def filled(request: pytest.FixtureRequest) -> Iterator[Stack]:
    """The demo shop loaded: its revisions are issued, so their launches wait in the queue, with no worker yet."""
    servers = servers_for(request.param, request)
    with prepared_stack(request.param, *servers) as stack:
        stack.manage("demo")
        yield stack


@pytest.fixture
def rows(filled: Stack) -> Iterator[Rows]:
    """Rows of which every one is settled when the test begins, and again when it ends."""
    rows = Rows(filled)
    yield rows
    rows.connection.close()


def check_one_result_each(rows: Rows, tried_twice: set[int], new: set[int] | None = None) -> None:
    settled = rows.until_settled()
    assert {job.state for job in settled} == {"done"}, settled
    assert {job.results for job in settled} == {1}, settled
    for job in settled:
        if new is None or job.id in new:
            assert job.attempt == job.result_attempt == (2 if job.id in tried_twice else 1), job


def test_a_worker_killed_in_the_middle_of_jobs(filled: Stack, rows: Rows) -> None:
    waiting = rows.jobs()
    assert len(waiting) >= 8
    assert {job.state for job in waiting} == {"waiting"}
    killed = kill_in_the_middle(filled, rows)
    assert killed
    assert all(job.results == 0 for job in rows.jobs() if job.id in killed)
    rows.an_hour_passes()
    filled.start_worker()
    check_one_result_each(rows, tried_twice=killed)


def kill_in_the_middle(stack: Stack, rows: Rows) -> set[int]:
    stack.start_worker(wait=False)
    with rows.worker_held() as held:
        stack.kill_worker()
    return {job.id for job in held}


def test_a_killed_process_of_the_pool_takes_only_its_own_job_along(filled: Stack, rows: Rows) -> None:
    filled.kill_worker()
    new = set(filled.python(REQUEST))
    filled.start_worker(wait=False)
    with rows.worker_held() as held:
        for job in held:
            os.kill(int(job.worker.rpartition(":")[2]), signal.SIGKILL)
    killed = {job.id for job in held}
    until(lambda: {job.id for job in rows.running()} <= killed, "the others to be done")
    rows.an_hour_passes()
    check_one_result_each(rows, tried_twice=killed, new=new)  # by the same worker, at its next sweep
    assert filled.worker.poll() is None


def test_a_worker_that_comes_back_late_writes_no_second_result(filled: Stack, rows: Rows) -> None:
    filled.kill_worker()
    new = set(filled.python(REQUEST) + filled.python(REQUEST))
    filled.start_worker(wait=False)
    late = filled.worker
    with rows.worker_frozen() as frozen:
        rows.an_hour_passes()
        filled.start_worker()
        rows.until_settled()
        before = {job.id: job for job in rows.jobs()}
        ended = filled.log("worker").read_text().count(" succeeded in ")
    taken_over = {job.id for job in frozen}
    check_one_result_each(rows, tried_twice=taken_over, new=new)
    # The late one goes on and ends its attempts, and nothing changes.
    until(lambda: filled.log("worker").read_text().count(" succeeded in ") >= ended + len(taken_over), "the late worker")
    assert {job.id: job for job in rows.jobs()} == before
    os.killpg(late.pid, signal.SIGKILL)
    late.wait(10)


def test_jobs_whose_messages_are_lost_are_sent_again(filled: Stack, rows: Rows, request: Any) -> None:
    filled.kill_worker()
    new = set(filled.python(REQUEST))
    if filled.kind == "embedded":
        shutil.rmtree(Path(filled.environment["LEDGER_DATA_DIR"]) / "queue")
    else:
        request.getfixturevalue("redis_server").clear()
    rows.an_hour_passes()
    filled.start_worker()
    check_one_result_each(rows, tried_twice=set(), new=new)


def test_a_broker_that_is_away_for_a_while_costs_no_job(filled: Stack, rows: Rows, request: Any) -> None:
    before = filled.worker
    with broker_away(filled, request):
        new = set(filled.python(REQUEST))
        assert len(new) >= 8
        assert all(job.state == "waiting" for job in rows.jobs() if job.id in new)
    rows.an_hour_passes()
    check_one_result_each(rows, tried_twice=set(), new=new)
    assert filled.worker is before, "the same worker did it, without being started again"
    assert before.poll() is None


@contextmanager
def broker_away(stack: Stack, request: Any) -> Iterator[None]:
    if stack.kind == "hosted":
        redis = request.getfixturevalue("redis_server")
        redis.kill()
        yield
        redis.start()
        return
    messages = Path(stack.environment["LEDGER_DATA_DIR"]) / "queue" / "messages"
    shutil.rmtree(messages)
    messages.write_text("")  # a folder that is no folder can neither be read nor written, even by root
    yield
    messages.unlink()
