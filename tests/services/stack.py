"""The whole application as processes on loopback: a fresh database, a queue, a web server and a worker.

Two kinds, as people run it: `embedded` is what `manage.py start` runs (SQLite, queue in a folder, waitress), and
`hosted` is what docker-compose.yml runs (PostgreSQL, Redis, gunicorn), with that file's own settings and commands.
"""

from __future__ import annotations

import fcntl
import json
import os
import re
import shutil
import signal
import socket
import subprocess
import sys
import tempfile
import time
import urllib.error
import urllib.request
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

import pytest
import yaml

from shop.config import web
from shop.config.management.commands.start import WORKER
from tests.services.postgres import Postgres
from tests.services.redis_server import Redis

ROOT = Path(__file__).resolve().parent.parent.parent
OUT = ROOT / "tests" / ".out"
KINDS = ("embedded", "hosted")


def clean_environment(**settings: str) -> dict[str, str]:
    """This process's environment without any setting of the application, and with these."""
    kept = {name: value for name, value in os.environ.items() if not name.startswith("LEDGER_")}
    kept.pop("DJANGO_SETTINGS_MODULE", None)
    kept.setdefault("NUMBA_CACHE_DIR", str(OUT / "compiled"))
    return {**kept, "OPENBLAS_NUM_THREADS": "1", "OMP_NUM_THREADS": "1", **settings}


def compose() -> dict[str, Any]:
    found: dict[str, Any] = yaml.safe_load((ROOT / "docker-compose.yml").read_text())
    return found


def compose_settings(**given: str) -> dict[str, str]:
    """The settings that docker-compose.yml gives the application, with its ${NAME:-default} filled in."""
    settings = compose()["services"]["web"]["environment"]
    filled = {
        name: re.sub(r"\$\{\w+:([-?])([^}]*)\}", lambda found: found[2] if found[1] == "-" else "unset", str(value))
        for name, value in settings.items()
    }
    unknown = set(given) - set(filled) - {"LEDGER_DATA_DIR", "LEDGER_STATIC_DIR", "LEDGER_SWEEP_SECONDS"}
    assert not unknown, f"docker-compose.yml does not set {unknown}"
    return {**filled, **given}


def until(ask: Any, what: str, seconds: float = 30.0) -> Any:
    """Wait for `ask()` to give something true, and give that."""
    last = time.monotonic() + seconds
    while True:
        answer = ask()
        if answer:
            return answer
        if time.monotonic() > last:
            raise AssertionError(f"waited {seconds:g} s in vain for {what}")
        time.sleep(0.05)


class Stack:
    """One running application. Its processes lead their own groups; `kill_worker` takes all of the worker's at once."""

    def __init__(self, kind: str, settings: dict[str, str], folder: Path) -> None:
        self.kind = kind
        self.folder = folder
        self.environment = clean_environment(**settings)
        self.socket = socket.create_server(("127.0.0.1", 0))
        self.base_url = f"http://127.0.0.1:{self.socket.getsockname()[1]}"
        self.web: subprocess.Popen[bytes] | None = None
        self.worker: subprocess.Popen[bytes] | None = None

    # --- commands and rows ---

    def manage(self, *arguments: str, check: bool = True) -> subprocess.CompletedProcess[str]:
        done = subprocess.run(
            [sys.executable, "manage.py", *arguments], cwd=ROOT, env=self.environment, capture_output=True, text=True
        )
        assert done.returncode == 0 or not check, f"manage.py {' '.join(arguments)}:\n{done.stdout}{done.stderr}"
        return done

    def python(self, source: str, **extra: str) -> Any:
        """Run `source` inside the application, every shop's rows in reach; give what it assigns to `answer`."""
        program = (
            "import json, django; django.setup()\n"
            "from django_scopes import scopes_disabled\nanswer = None\n"
            "with scopes_disabled():\n"
            + "".join(f"    {line}\n" for line in source.strip().splitlines())
            + "print('\\x1e' + json.dumps(answer, default=str))\n"
        )
        environment = {**self.environment, "DJANGO_SETTINGS_MODULE": "shop.config.settings", **extra}
        done = subprocess.run([sys.executable, "-c", program], cwd=ROOT, env=environment, capture_output=True, text=True)
        assert done.returncode == 0, done.stderr
        return json.loads(done.stdout.rpartition("\x1e")[2])

    # --- processes ---

    def log(self, name: str) -> Path:
        return self.folder / f"{name}.log"

    def spawn(self, name: str, module: list[str], fds: tuple[int, ...] = (), **extra: str) -> subprocess.Popen[bytes]:
        with self.log(name).open("ab") as log:
            return subprocess.Popen(
                [sys.executable, "-m", *module],
                cwd=ROOT,
                env={**self.environment, **extra},
                pass_fds=fds,
                stdin=subprocess.DEVNULL,
                stdout=log,
                stderr=subprocess.STDOUT,
                start_new_session=True,
            )

    def start_web(self) -> None:
        fd = self.socket.fileno()
        if self.kind == "embedded":
            self.web = self.spawn("web", ["shop.config.web"], (fd,), **{web.SOCKET_FD: str(fd)})
        else:
            module = [part.replace("0.0.0.0:8000", f"fd://{fd}") for part in compose()["services"]["web"]["command"][2:]]
            self.web = self.spawn("web", module, (fd,))
        until(self.answers, "the web server", 90)

    def answers(self) -> bool:
        assert self.web is not None
        assert self.web.poll() is None, self.log("web").read_text()
        try:
            status, words = self.get("/healthz")
        except OSError:
            return False
        assert status == 200, f"{status}: {words}\n{self.log('web').read_text()}"
        return True

    def start_worker(self, wait: bool = True) -> None:
        """Start a worker and, unless told otherwise, wait until it takes work."""
        command = list(WORKER) if self.kind == "embedded" else compose()["services"]["worker"]["command"][2:]
        command[command.index("WARNING")] = "INFO"
        before = self.log("worker").stat().st_size if self.log("worker").exists() else 0
        self.worker = self.spawn("worker", command)
        if wait:
            until(lambda: self.worker_ready(before), "the worker", 180)

    def worker_ready(self, since: int) -> bool:
        assert self.worker is not None
        words = self.log("worker").read_bytes()[since:].decode(errors="replace")
        assert self.worker.poll() is None, words
        return " ready." in words

    def kill_worker(self) -> None:
        """SIGKILL for the worker and the processes of its pool, all at once, as when the power goes."""
        if self.worker is not None:
            os.killpg(self.worker.pid, signal.SIGKILL)
            self.worker.wait(10)
            self.worker = None

    def stop(self) -> None:
        """At once: how it stops when asked is the subject of test_start, and takes Celery six seconds."""
        for process in (self.web, self.worker):
            if process is not None:
                try:
                    os.killpg(process.pid, signal.SIGKILL)
                except ProcessLookupError:
                    pass
                process.wait(10)
        self.socket.close()

    # --- as a visitor ---

    def get(self, path: str) -> tuple[int, str]:
        try:
            with urllib.request.urlopen(self.base_url + path, timeout=10) as answer:
                return answer.status, answer.read().decode()
        except urllib.error.HTTPError as fault:
            return fault.code, fault.read().decode()


def servers_for(kind: str, request: pytest.FixtureRequest) -> list[Any]:
    """The servers that a stack of this kind needs, started if they are not."""
    return [request.getfixturevalue(name) for name in ("postgres_server", "redis_server")] if kind == "hosted" else []


@contextmanager
def prepared_stack(
    kind: str, postgres: Postgres | None = None, redis: Redis | None = None, *, pages: bool = False
) -> Iterator[Stack]:
    """A stack with its database migrated, its files collected if it shows pages, and nothing running yet."""
    folder = Path(tempfile.mkdtemp(prefix="stack-", dir="/tmp"))
    settings = {
        "LEDGER_DATA_DIR": str(folder / "var"),
        "LEDGER_STATIC_DIR": str(OUT / "static"),
        "LEDGER_SECRET_KEY": "only-for-tests",
        "LEDGER_SWEEP_SECONDS": "1",
    }
    if kind == "hosted":
        assert postgres and redis
        redis.clear()
        settings = compose_settings(**settings, LEDGER_DATABASE_URL=postgres.new_database(), LEDGER_BROKER_URL=redis.url)
    OUT.mkdir(exist_ok=True)
    stack = Stack(kind, settings, folder)
    try:
        stack.python("from shop.config import preparing\nwith preparing.alone():\n    preparing.migrate(str)\n")
        if pages:
            collect_once(stack)
        yield stack
    finally:
        stack.stop()
        shutil.rmtree(folder, ignore_errors=True)


def collect_once(stack: Stack) -> None:
    """Collected files are the same for every stack of every run, until a source of theirs changes."""
    with (OUT / "static.lock").open("w") as lock:
        fcntl.flock(lock, fcntl.LOCK_EX)
        stack.python("from shop.config import preparing\npreparing.collect(str)")


@contextmanager
def running_stack(kind: str, postgres: Postgres | None = None, redis: Redis | None = None) -> Iterator[Stack]:
    with prepared_stack(kind, postgres, redis, pages=True) as stack:
        stack.start_web()
        stack.start_worker()
        yield stack
