"""`python3 manage.py start` as a process of the tests, and what runs under it."""

from __future__ import annotations

import os
import signal
import socket
import subprocess
import sys
import urllib.error
import urllib.request
from pathlib import Path

from tests.services.stack import OUT, ROOT, clean_environment, until


def free_port() -> int:
    with socket.create_server(("127.0.0.1", 0)) as probe:
        return int(probe.getsockname()[1])


def processes() -> dict[int, tuple[int, int, str]]:
    """Every live process: its parent, its group and its command line."""
    lines = subprocess.run(["ps", "-A", "-o", "pid=,ppid=,pgid=,stat=,args="], capture_output=True, text=True).stdout
    rows = [line.split(None, 4) for line in lines.splitlines()]
    return {int(row[0]): (int(row[1]), int(row[2]), row[4]) for row in rows if len(row) == 5 and row[3][0] != "Z"}


class Started:
    """One `manage.py start`, with the command line it was given and everything it said."""

    def __init__(
        self,
        folder: Path,
        *arguments: str,
        port: int | None = None,
        root: Path = ROOT,
        python: str = sys.executable,
        **extra: str,
    ) -> None:
        self.port = port or free_port()
        self.log = folder / f"start-{self.port}.log"
        environment = clean_environment(LEDGER_DATA_DIR=str(folder / "var"), LEDGER_STATIC_DIR=str(OUT / "static"), **extra)
        with self.log.open("wb") as log:
            self.process = subprocess.Popen(
                [python, "manage.py", "start", "--port", str(self.port), *arguments],
                cwd=root,
                env=environment,
                stdin=subprocess.DEVNULL,
                stdout=log,
                stderr=subprocess.STDOUT,
                start_new_session=True,
            )

    def words(self) -> str:
        return self.log.read_text(errors="replace")

    def serves(self) -> bool:
        assert self.process.poll() is None, self.words()
        try:
            with urllib.request.urlopen(f"http://127.0.0.1:{self.port}/healthz", timeout=5) as answer:
                return bool(answer.status == 200)
        except urllib.error.HTTPError as fault:
            raise AssertionError(fault.read().decode()) from fault
        except OSError:
            return False

    def wait_until_up(self, seconds: float = 180) -> None:
        """Serving, announced, and with its worker's pool. A busy machine may have to compile and collect first."""
        try:
            until(lambda: self.serves() and "Ctrl-C stops it." in self.words(), "the start to be through", seconds)
            until(lambda: len(self.pool()) == 2, "the worker's two processes", seconds)
        except AssertionError as fault:
            raise AssertionError(f"{fault}\n{self.words()}") from None

    def child(self, module: str) -> int | None:
        """The process id of the child that runs `module`."""
        found = [
            pid for pid, (parent, _, command) in processes().items() if parent == self.process.pid and module in command
        ]
        return found[0] if found else None

    def web(self) -> int | None:
        return self.child("shop.config.web")

    def worker(self) -> int | None:
        return self.child("celery")

    def pool(self) -> list[int]:
        worker = self.worker()
        return [pid for pid, (parent, _, _) in processes().items() if worker and parent == worker]

    def family(self) -> set[int]:
        """Everything that runs under this start."""
        return {pid for pid in (self.web(), self.worker()) if pid} | set(self.pool())

    def stop(self) -> None:
        """At once, whatever state it is in."""
        family = self.family()
        self.process.kill()
        self.process.wait()
        for pid in family & set(processes()):
            os.kill(pid, signal.SIGKILL)


def gone(pids: set[int]) -> bool:
    return not pids & set(processes())
