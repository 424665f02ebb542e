"""A PostgreSQL server of the tests' own: a Unix socket in a temporary folder, gone with the run."""

from __future__ import annotations

import os
import pwd
import shutil
import subprocess
import tempfile
import time
import uuid
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import psycopg
from psycopg import sql

from tests.services.programs import needed

SETTINGS = {
    "listen_addresses": "",
    "fsync": "off",
    "synchronous_commit": "off",
    "full_page_writes": "off",
    "max_connections": "60",
}


@dataclass(frozen=True)
class Postgres:
    socket: Path
    user: str

    def connect(self, name: str = "postgres") -> psycopg.Connection[Any]:
        return psycopg.connect(host=str(self.socket), user=self.user, dbname=name, autocommit=True)

    def new_database(self) -> str:
        """Make an empty database and give its URL, as the application takes it."""
        name = f"ledger_{uuid.uuid4().hex[:12]}"
        with self.connect() as connection:
            connection.execute(sql.SQL("CREATE DATABASE {}").format(sql.Identifier(name)))
        return f"postgresql://{self.user}@/{name}?host={self.socket}"


def other_user() -> dict[str, Any]:
    """PostgreSQL refuses to run as root: then it runs as `postgres`, or as `nobody`."""
    if os.geteuid() != 0:
        return {}
    for name in ("postgres", "nobody"):
        try:
            entry = pwd.getpwnam(name)
        except KeyError:
            continue
        return {"user": entry.pw_uid, "group": entry.pw_gid, "extra_groups": []}
    raise RuntimeError("PostgreSQL does not run as root, and this machine has no user postgres or nobody")


@contextmanager
def running_postgres() -> Iterator[Postgres]:
    who = other_user()
    # A Unix socket's path may have a hundred characters, so the folder is not made under a deep TMPDIR.
    folder = Path(tempfile.mkdtemp(prefix="pg-", dir="/tmp"))
    if who:
        os.chown(folder, who["user"], who["group"])
    name = pwd.getpwuid(who.get("user", os.geteuid())).pw_name
    quiet = {"cwd": folder, "stdout": subprocess.PIPE, "stderr": subprocess.STDOUT, "text": True, **who}
    server = None
    try:
        made = subprocess.run(
            [needed("initdb"), "-A", "trust", "--no-sync", "-E", "UTF8", "--locale=C", "-U", name, "-D", folder / "data"],
            **quiet,
        )
        assert made.returncode == 0, made.stdout
        options = [part for key, value in SETTINGS.items() for part in ("-c", f"{key}={value}")]
        with (folder / "log").open("w") as log:
            server = subprocess.Popen(
                [needed("postgres"), "-D", folder / "data", "-k", folder, *options],
                **{**quiet, "stdout": log, "stderr": log},
            )
        found = Postgres(folder, name)
        wait_for(found, server, folder / "log")
        yield found
    finally:
        if server is not None:
            server.terminate()  # "smart" shutdown waits for clients; "immediate" does not, and nothing is kept
            try:
                server.wait(2)
            except subprocess.TimeoutExpired:
                server.send_signal(3)
                server.wait(10)
        shutil.rmtree(folder, ignore_errors=True)


def wait_for(server: Postgres, process: subprocess.Popen[Any], log: Path) -> None:
    last = time.monotonic() + 30
    while True:
        try:
            server.connect().close()
            return
        except psycopg.OperationalError:
            if process.poll() is not None or time.monotonic() > last:
                raise RuntimeError(f"PostgreSQL did not start:\n{log.read_text()}") from None
            time.sleep(0.02)
