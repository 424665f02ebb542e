"""Starts the web server and the worker, starts again whichever dies, and ends both together.

Each child leads a session of its own, so that one signal ends it with everything it started, and so that Ctrl-C in
the terminal reaches this process alone, which then ends them in order. Each holds the reading end of a pipe whose
writing end only this process has: if this process is killed, the pipe ends, and they know (see lifeline.py).
"""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path
from types import FrameType

from shop.config import lifeline

LOOK_EVERY = 0.2  # seconds
STEADY = 60.0  # seconds alive after which the next death counts as a first one again
PAUSES = (0.5, 1.0, 2.0, 4.0, 8.0, 16.0, 30.0)

Say = Callable[[str], None]


class Child:
    """One supervised process."""

    def __init__(self, name: str, command: list[str], environment: dict[str, str], fds: tuple[int, ...] = ()) -> None:
        self.name = name
        self.command = command
        self.environment = environment
        self.fds = fds
        self.process: subprocess.Popen[bytes] | None = None
        self.deaths = 0
        self.started = 0.0
        self.due = 0.0  # when to start it; on the monotonic clock

    def start(self, folder: Path, now: float) -> None:
        self.process = subprocess.Popen(
            self.command,
            cwd=folder,
            env=self.environment,
            pass_fds=self.fds,
            stdin=subprocess.DEVNULL,
            start_new_session=True,
        )
        self.started = now

    def signal_group(self, number: int) -> None:
        if self.process is None:
            return
        try:
            os.killpg(self.process.pid, number)
        except ProcessLookupError:
            pass

    def ask_to_end(self) -> None:
        """Only the leader is asked: it ends its own children in its own way."""
        if self.process is not None and self.process.poll() is None:
            self.process.terminate()

    def ended(self) -> bool:
        return self.process is None or self.process.poll() is not None


class Supervisor:
    """Tends children until told to stop."""

    def __init__(self, folder: Path, say: Say, grace: float = lifeline.GRACE) -> None:
        self.folder = folder
        self.say = say
        self.grace = grace
        self.children: list[Child] = []
        self.signals = 0
        self.pipe = os.pipe()

    def add(self, name: str, module: list[str], environment: dict[str, str], fds: tuple[int, ...] = ()) -> None:
        environment = {**os.environ, **environment, lifeline.FD: str(self.pipe[0])}
        self.children.append(Child(name, [sys.executable, "-m", *module], environment, (self.pipe[0], *fds)))

    def run(self) -> None:
        for number in (signal.SIGTERM, signal.SIGINT, signal.SIGHUP):
            signal.signal(number, self._told)
        while not self.signals:
            for child in self.children:
                self._tend(child, time.monotonic())
            time.sleep(LOOK_EVERY)
        self.end()

    def _told(self, signum: int, frame: FrameType | None) -> None:
        self.signals += 1

    def _tend(self, child: Child, now: float) -> None:
        if child.process is None:
            if now >= child.due:
                child.start(self.folder, now)
            return
        status = child.process.poll()
        if status is None:
            return
        child.signal_group(signal.SIGKILL)  # what a killed worker leaves behind must not compute beside the new one
        child.deaths = 1 if now - child.started > STEADY else child.deaths + 1
        pause = PAUSES[min(child.deaths, len(PAUSES)) - 1]
        self.say(f"The {child.name} stopped ({ending(status)}); starting it again in {pause:g} s.")
        child.process, child.due = None, now + pause

    def end(self) -> None:
        """Ask every child to end, and kill what is left after the grace, or at a second signal."""
        self.say(f"Stopping. Work in hand gets up to {self.grace:g} s; what is left is done after the next start.")
        for child in self.children:
            child.ask_to_end()
        last = time.monotonic() + self.grace
        while time.monotonic() < last and self.signals < 2 and not all(child.ended() for child in self.children):
            time.sleep(0.05)
        for child in self.children:
            child.signal_group(signal.SIGKILL)
            if child.process is not None:
                child.process.wait()
        self.say("Stopped.")


def ending(status: int) -> str:
    if status >= 0:
        return f"exit status {status}"
    try:
        return f"killed by {signal.Signals(-status).name}"
    except ValueError:
        return f"killed by signal {-status}"
