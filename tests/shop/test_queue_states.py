"""A job's row decides: who works on it, who may write its result, and what becomes of it when a worker dies."""

import re
from datetime import timedelta

import pytest
from django.db import IntegrityError, transaction
from django.utils import timezone
from django_scopes import scope, scopes_disabled

from shop.launches import services, sweep, tasks
from shop.launches.models import Job, Result
from shop.people.models import LogEntry
from shop.refusals import Refused
from tests.shop.launch_world import fresh, make_hopeless, make_job, make_solved, set_row, set_running
from tests.shop.setups_world import make_draft, make_issued, make_world

ANSWER = {"statics": {}, "modes": [], "figures": {"peak_rear_load": 1.0}, "events": [], "histories": {"t": [0.0]}}


@pytest.fixture
def world(db):
    world = make_world()
    with scope(shop=world.shop):
        yield world


@pytest.fixture
def sent(monkeypatch):
    """The ids handed to the broker, in place of a broker."""
    ids = []
    monkeypatch.setattr(tasks.run_job, "delay", ids.append)
    return ids


def results(job):
    return Result.objects.filter(job=job).count()


# --- asking ---


def test_a_job_is_sent_only_once_it_is_committed(world, sent, django_capture_on_commit_callbacks):
    with django_capture_on_commit_callbacks(execute=True):
        job = make_job(world)
        assert sent == []
        assert job.state == "waiting" and job.sent_at is None
    assert sent == [job.pk]
    assert fresh(job).sent_at is not None


def test_a_broker_that_is_away_leaves_the_job_unsent(world, monkeypatch, django_capture_on_commit_callbacks):
    def away(job_id):
        raise ConnectionError("nobody answers")

    monkeypatch.setattr(tasks.run_job, "delay", away)
    with django_capture_on_commit_callbacks(execute=True):
        job = make_job(world)
    assert fresh(job).state == "waiting" and fresh(job).sent_at is None


def test_a_draft_is_not_launched(world):
    with pytest.raises(Refused, match="draft"):
        services.request_launch(world.owner, make_draft(world))


def test_equal_inputs_have_equal_hashes_whatever_they_are_called():
    one = {"name": "rev 1", "mass": 1.0, "hit": {"a": 1, "b": 2}}
    assert services.input_hash(one) == services.input_hash({"hit": {"b": 2, "a": 1}, "mass": 1.0, "name": "rev 2"})
    assert services.input_hash(one) != services.input_hash({**one, "mass": 1.1})


def test_what_was_solved_before_is_taken_over(world, sent):
    first = make_solved(world)
    issued = make_issued(world, first.revision, "Back to where it was")
    again = fresh(Job.objects.get(revision=issued))
    assert again.state == "done" and again.attempt == 0 and again.solver_version == first.solver_version
    assert again.result.histories == first.result.histories and again.result.figures == first.result.figures
    assert LogEntry.objects.filter(action="took over the result of", object_id=first.pk).exists()
    assert again.pk not in sent


def test_what_an_older_solver_solved_is_solved_anew(world):
    first = make_solved(world)
    set_row(first, solver_version="0.0.1")
    assert make_job(world, first.revision, reason="Same again").state == "waiting"


# --- claiming and writing ---


def test_only_the_first_claim_gets_it(world):
    job = make_job(world)
    mine = services.claim(job.pk, "one:1")
    assert (mine.state, mine.attempt, mine.worker) == ("running", 1, "one:1")
    assert mine.lease_until > timezone.now()
    assert services.claim(job.pk, "two:2") is None


@pytest.mark.parametrize("state", ["running", "done", "failed", "cancelled"])
def test_only_waiting_work_is_claimed(world, state):
    job = make_job(world)
    set_row(job, state=state, error="why", lease_until=timezone.now())
    assert services.claim(job.pk, "one:1") is None


def test_an_id_of_nothing_is_not_claimed(world):
    tasks.run(987654)
    assert not Result.objects.exists()


def test_a_heartbeat_renews_the_lease_and_shows_progress(world):
    job = services.claim(make_job(world).pk, "one:1")
    set_row(job, lease_until=timezone.now() + timedelta(seconds=1))
    assert services.heartbeat(job, 0.4)
    assert fresh(job).progress == 0.4
    assert fresh(job).lease_until > timezone.now() + timedelta(seconds=20)
    assert services.heartbeat(job, 7.0) and fresh(job).progress == 1.0


def test_a_stale_attempt_writes_nothing(world):
    job = make_job(world)
    late = services.claim(job.pk, "late:1")
    set_row(job, lease_until=timezone.now() - timedelta(seconds=1))
    sweep.return_strays()
    current = services.claim(job.pk, "current:2")
    assert current.attempt == 2
    assert not services.heartbeat(late, 0.9)
    assert not services.finish(late, ANSWER)
    assert not services.fail(late, "too late")
    assert not services.end_cancelled(late)
    assert fresh(job).state == "running" and results(job) == 0
    assert services.finish(current, ANSWER)
    assert fresh(job).result.attempt == 2
    assert not services.finish(late, ANSWER) and results(job) == 1


def test_a_result_is_written_once_and_whole(world):
    job = services.claim(make_job(world).pk, "one:1")
    assert services.finish(job, {**ANSWER, "solver_version": "9"})
    assert not services.finish(job, ANSWER)
    assert results(job) == 1
    done = fresh(job)
    assert (done.state, done.progress, done.lease_until, done.solver_version) == ("done", 1.0, None, "9")


def test_a_result_that_cannot_be_written_leaves_the_job_running(world):
    job = services.claim(make_job(world).pk, "one:1")
    with pytest.raises(TypeError):
        services.finish(job, {**ANSWER, "figures": {"peak_rear_load": object()}})
    assert fresh(job).state == "running" and results(job) == 0


# --- what the worker does ---


def test_the_worker_solves_it(world):
    job = make_solved(world)
    assert job.state == "done" and job.result.attempt == 1
    assert job.result.figures["peak_rear_load"] > job.result.statics["rear_load"] > 0
    assert len(job.result.histories["t"]) == len(job.result.histories["rear_load"]) > 100


def test_what_cannot_be_solved_fails_with_the_time_and_the_reason(world):
    job = make_hopeless(world)
    tasks.run(job.pk)
    failed = fresh(job)
    assert failed.state == "failed" and results(job) == 0
    assert re.fullmatch(r"at 0\.\d{3} s: .*degrees.*", failed.error)  # over it goes, or its axle


def test_an_input_that_is_no_car_fails_with_its_faults(world):
    job = make_job(world)
    set_row(job, input={**job.input, "wheelbase": -1.0})
    tasks.run(job.pk)
    assert fresh(job).state == "failed" and "wheelbase" in fresh(job).error


def test_a_fault_of_the_program_fails_in_words(world, monkeypatch):
    def broken(job, report):
        return 1 / 0

    monkeypatch.setitem(tasks.KINDS, "launch", broken)
    job = make_job(world)
    tasks.run(job.pk)
    assert fresh(job).state == "failed" and "ZeroDivisionError" in fresh(job).error


def test_cancelled_in_the_middle_it_stops_at_its_next_step(world, monkeypatch):
    steps = []

    def slow(job, report):
        for step in range(10):
            if step == 3:
                services.request_cancel(world.owner, job)
            report(step / 10)
            steps.append(step)
        return ANSWER

    monkeypatch.setitem(tasks.KINDS, "launch", slow)
    job = make_job(world)
    tasks.run(job.pk)
    assert steps == [0, 1, 2]
    assert fresh(job).state == "cancelled" and results(job) == 0


def test_work_taken_over_by_another_stops_and_leaves_it_alone(world, monkeypatch):
    def overtaken(job, report):
        set_row(job, attempt=job.attempt + 1, worker="other:2")
        report(0.5)
        raise AssertionError("it went on")

    monkeypatch.setitem(tasks.KINDS, "launch", overtaken)
    job = make_job(world)
    tasks.run(job.pk)
    assert (fresh(job).state, fresh(job).attempt, fresh(job).worker) == ("running", 2, "other:2")


# --- cancelling and trying again ---


def test_waiting_work_is_cancelled_at_once(world):
    job = services.request_cancel(world.owner, make_job(world))
    assert job.state == "cancelled" and services.claim(job.pk, "one:1") is None
    assert LogEntry.objects.filter(action="cancelled", object_id=job.pk).exists()


def test_what_is_settled_is_not_cancelled(world):
    job = make_solved(world)
    with pytest.raises(Refused, match="already done"):
        services.request_cancel(world.owner, job)
    assert fresh(job).state == "done" and not LogEntry.objects.filter(action="cancelled").exists()


def test_failed_work_is_tried_again_as_a_new_job(world):
    job = make_hopeless(world)
    tasks.run(job.pk)
    again = services.retry(world.owner, fresh(job))
    assert again.pk != job.pk and again.state == "waiting" and again.input == fresh(job).input
    assert fresh(job).state == "failed"
    assert services.retry(world.owner, fresh(job)) == again  # the button pressed twice


@pytest.mark.parametrize("state", ["waiting", "running", "done"])
def test_only_failed_or_cancelled_work_is_tried_again(world, state):
    job = make_job(world)
    set_row(job, state=state, lease_until=timezone.now())
    with pytest.raises(Refused, match=state):
        services.retry(world.owner, fresh(job))


# --- the sweep ---


AGO = timedelta(minutes=5)


def test_work_whose_lease_ran_out_is_sent_again(world, sent):
    job = set_running(make_job(world), lease=timezone.now() - AGO)
    assert sweep.return_strays() == 1
    assert sent == [job.pk] and fresh(job).state == "waiting"
    tasks.run(job.pk)
    assert fresh(job).state == "done" and fresh(job).attempt == 2 and results(job) == 1


def test_work_that_is_kept_alive_is_left_alone(world, sent):
    job = set_running(make_job(world))
    assert sweep.return_strays() == 0
    assert sent == [] and fresh(job).state == "running"


@pytest.mark.parametrize(
    ("sent_ago", "created_ago", "again"),
    [(None, AGO, True), (AGO, AGO, True), (timedelta(0), AGO, False), (None, timedelta(0), False)],
)
def test_waiting_work_is_sent_again_when_its_message_must_be_lost(world, sent, sent_ago, created_ago, again):
    job, now = make_job(world), timezone.now()
    set_row(job, sent_at=None if sent_ago is None else now - sent_ago, created_at=now - created_ago)
    sweep.return_strays()
    assert sent == ([job.pk] if again else [])


def test_a_job_that_kills_its_workers_fails_with_words(world, sent):
    job = set_running(make_job(world), attempt=services.MOST_ATTEMPTS, lease=timezone.now() - AGO)
    sweep.return_strays()
    assert fresh(job).state == "failed" and f"died {services.MOST_ATTEMPTS} times" in fresh(job).error
    assert sent == []


def test_one_death_fewer_and_it_is_tried_again(world, sent):
    job = set_running(make_job(world), attempt=services.MOST_ATTEMPTS - 1, lease=timezone.now() - AGO)
    sweep.return_strays()
    assert fresh(job).state == "waiting" and sent == [job.pk]


def test_cancelled_work_of_a_dead_worker_is_not_tried_again(world, sent):
    job = set_running(make_job(world), lease=timezone.now() - AGO, cancel_requested=True)
    sweep.return_strays()
    assert fresh(job).state == "cancelled" and sent == []


def test_cancelled_in_the_moment_of_its_return_it_ends(world, sent):
    job = make_job(world)
    set_row(job, cancel_requested=True)
    sweep.return_strays()
    assert fresh(job).state == "cancelled" and sent == []


def test_the_sweep_looks_after_every_shop(world, sent):
    other = make_world("Night Heron")
    job = set_running(make_job(other), lease=timezone.now() - AGO)
    with scopes_disabled():
        sweep.return_strays()
    assert sent == [job.pk]


# --- what the database itself refuses ---


@pytest.mark.parametrize(
    "row",
    [{"state": "asleep"}, {"state": "failed", "error": ""}, {"state": "running", "lease_until": None}, {"progress": 1.5}],
)
def test_a_row_that_makes_no_sense_is_refused(world, row):
    job = make_job(world)
    with pytest.raises(IntegrityError), transaction.atomic():
        set_row(job, **row)
