"""The job rows of a running stack, read and aged from outside, and its worker caught in the middle of one."""

from __future__ import annotations

import os
import signal
import sqlite3
import time
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from typing import Any

import psycopg

from tests.services.stack import Stack, until

JOBS = """
    SELECT j.id, j.state, j.attempt, j.worker, j.error, (SELECT count(*) FROM launches_result r WHERE r.job_id = j.id),
           (SELECT max(r.attempt) FROM launches_result r WHERE r.job_id = j.id)
    FROM launches_job j ORDER BY j.id
"""
SETTLED = ("done", "failed", "cancelled")


@dataclass(frozen=True)
class Row:
    id: int
    state: str
    attempt: int
    worker: str
    error: str
    results: int
    result_attempt: int | None


class Rows:
    """A connection of the tests' own to the database of `stack`."""

    def __init__(self, stack: Stack) -> None:
        self.stack = stack
        self.embedded = stack.kind == "embedded"
        self.connection: Any
        if self.embedded:
            file = f"{stack.environment['LEDGER_DATA_DIR']}/ledger.sqlite3"
            self.connection = sqlite3.connect(file, isolation_level=None, timeout=20)
        else:
            self.connection = psycopg.connect(stack.environment["LEDGER_DATABASE_URL"], autocommit=True)

    def jobs(self) -> list[Row]:
        return [Row(*row) for row in self.connection.execute(JOBS).fetchall()]

    def running(self) -> list[Row]:
        return [job for job in self.jobs() if job.state == "running"]

    def an_hour_passes(self) -> None:
        """For the queue: leases run out, and messages that nobody took were sent long ago."""
        for column in ("lease_until", "sent_at", "created_at"):
            ago = f"datetime({column}, '-1 hour')" if self.embedded else f"{column} - interval '1 hour'"
            self.connection.execute(
                f"UPDATE launches_job SET {column} = {ago} WHERE state IN ('running', 'waiting')"  # noqa: S608
            )

    def until_settled(self, seconds: float = 60) -> list[Row]:
        until(lambda: all(job.state in SETTLED for job in self.jobs()), f"every job to settle: {self.jobs()}", seconds)
        return self.jobs()

    @contextmanager
    def worker_held(self) -> Iterator[list[Row]]:
        """Keep the worker from writing its next result; gives the jobs it is in the middle of.

        PostgreSQL can lock the table of results. SQLite has one lock for everything, which is taken at a moment when
        a job is claimed and not finished.
        """
        if self.embedded:
            last = time.monotonic() + 60
            while True:
                self.connection.execute("BEGIN IMMEDIATE")
                held = self.running()
                if held:
                    break
                self.connection.execute("ROLLBACK")
                assert time.monotonic() < last, f"no job was ever running: {self.jobs()}"
                time.sleep(0.0005)
            yield held
            self.connection.execute("ROLLBACK")
            return
        with psycopg.connect(self.stack.environment["LEDGER_DATABASE_URL"]) as other:
            other.execute("LOCK TABLE launches_result IN SHARE MODE")
            until(self.running, "a running job")
            time.sleep(0.3)  # long enough for the solving to end: the worker now waits to write
            yield self.running()
            other.rollback()

    @contextmanager
    def worker_frozen(self) -> Iterator[list[Row]]:
        """Stop the worker's processes while a job is claimed and nothing is locked; let them go on at the end."""
        group = self.stack.worker.pid
        last = time.monotonic() + 60
        while True:
            os.killpg(group, signal.SIGSTOP)
            time.sleep(0.001)
            frozen = self.running()
            if frozen and self._free():
                break
            os.killpg(group, signal.SIGCONT)
            assert time.monotonic() < last, f"no job could be frozen: {self.jobs()}"
            time.sleep(0.003)
        try:
            yield frozen
        finally:
            os.killpg(group, signal.SIGCONT)

    def _free(self) -> bool:
        """Whether no process holds a lock in a transaction of its own."""
        if not self.embedded:
            open_ones = "SELECT count(*) FROM pg_stat_activity WHERE state LIKE 'idle in transaction%'"
            return not self.connection.execute(open_ones).fetchone()[0]
        try:
            self.connection.execute("PRAGMA busy_timeout = 50")
            self.connection.execute("BEGIN IMMEDIATE")
            self.connection.execute("ROLLBACK")
        except sqlite3.OperationalError:
            return False
        finally:
            self.connection.execute("PRAGMA busy_timeout = 20000")
        return True
