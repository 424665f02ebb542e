"""Makes `.venv` beside manage.py, puts the requirements into it, and goes on inside it.

Standard library only: this runs before anything is installed. Every way it can fail ends in one line of words.
"""

from __future__ import annotations

import fcntl
import hashlib
import importlib.util
import json
import os
import subprocess
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import NoReturn

# pip would install elsewhere, and the interpreter would look elsewhere, if these came through.
MISLEADING = ("PIP_USER", "PIP_TARGET", "PIP_PREFIX", "PIP_ROOT", "PYTHONHOME")

NO_NETWORK = (
    "name resolution",
    "newconnectionerror",
    "failed to establish a new connection",
    "max retries exceeded",
    "network is unreachable",
    "connection refused",
    "read timed out",
    "connecttimeout",
    "proxyerror",
    "from versions: none",  # every requirement of ours exists: an index that knows no version of it was not heard
)


def ready(root: str, arguments: list[str]) -> None:
    """Return only inside an interpreter that has what `arguments` need; else install it and start over there."""
    if os.environ.get("LEDGER_BOOTSTRAP") == "off":  # an image that already holds the packages
        return
    for name in MISLEADING:
        os.environ.pop(name, None)
    home = Venv(Path(root), testing=arguments[:1] == ["test"])
    try:
        if not home.is_current():
            with home.locked():
                if not home.is_current():  # another start may have done it while this one waited
                    home.build()
    except KeyboardInterrupt:
        stop("Stopped before everything was installed; the next start goes on from here.")
    except OSError as fault:
        stop(f"Launch Ledger needs to write into its own folder {root}, and cannot: {fault.strerror or fault}.")
    if Path(sys.prefix).resolve() != home.folder.resolve():
        sys.stdout.flush()
        os.execv(home.python, [str(home.python), str(Path(root) / "manage.py"), *arguments])  # noqa: S606


def say(words: str) -> None:
    print(words, flush=True)


def stop(words: str) -> NoReturn:
    sys.exit(words)


class Venv:
    """The project's own interpreter and the stamp that says what is in it."""

    def __init__(self, root: Path, testing: bool) -> None:
        self.root = root
        self.testing = testing
        self.folder = root / ".venv"
        self.python = self.folder / "bin" / "python"
        self.stamp = self.folder / "ledger-stamp.json"

    @property
    def requirements(self) -> Path:
        return self.root / "tests" / "requirements.txt" if self.testing else self.root / "requirements.txt"

    def wanted(self) -> dict[str, str]:
        """What the stamp must say: one mark for running, one more for testing."""
        base = (self.root / "requirements.txt").read_bytes()
        where = f"{sys.version_info[:2]} {self.root}".encode()
        marks = {"run": hashlib.sha256(base + where).hexdigest()}
        if self.testing:
            marks["test"] = hashlib.sha256(base + where + self.requirements.read_bytes()).hexdigest()
        return marks

    def found(self) -> dict[str, str]:
        try:
            marks = json.loads(self.stamp.read_text())
        except (OSError, ValueError):
            return {}
        return marks if isinstance(marks, dict) else {}

    def is_current(self) -> bool:
        found = self.found()
        return self.python.exists() and all(found.get(name) == mark for name, mark in self.wanted().items())

    @contextmanager
    def locked(self) -> Iterator[None]:
        """Two first starts at once would install over each other: the second waits."""
        with (self.root / ".venv.lock").open("w") as handle:
            try:
                fcntl.flock(handle, fcntl.LOCK_EX | fcntl.LOCK_NB)
            except BlockingIOError:
                say("Another start is installing what Launch Ledger needs; waiting for it to finish.")
                fcntl.flock(handle, fcntl.LOCK_EX)
            yield

    def build(self) -> None:
        if not self.is_usable():
            for module in ("venv", "ensurepip"):
                if importlib.util.find_spec(module) is None:
                    stop(missing_venv())
            say(f"Making a Python of its own for Launch Ledger in {self.folder} (a few seconds).")
            self.run([sys.executable, "-m", "venv", "--clear", str(self.folder)], "make its own Python")
        what = "what Launch Ledger and its tests need" if self.testing else "what Launch Ledger needs"
        say(f"Installing {what}; from nothing this usually takes half a minute to two minutes.")
        self.run(
            [
                str(self.python),
                "-m",
                "pip",
                "install",
                "--quiet",
                "--disable-pip-version-check",
                "--no-input",
                "-r",
                str(self.requirements),
            ],
            f"install {what}",
        )
        self.stamp.write_text(json.dumps({**self.found(), **self.wanted()}))
        say("Installed.")

    def is_usable(self) -> bool:
        """Whether a virtual environment is there, whole, in this place and of this Python."""
        probe = "import sys, pip; print(*sys.version_info[:2], sys.prefix)"
        try:
            answer = subprocess.run([self.python, "-c", probe], capture_output=True, text=True, check=True)
        except (OSError, subprocess.CalledProcessError):
            return False
        return answer.stdout.strip() == f"{sys.version_info[0]} {sys.version_info[1]} {self.folder}"

    def run(self, command: list[str], purpose: str) -> None:
        """Run `command` in silence; show its output only when it fails."""
        done = subprocess.run(command, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True)
        if done.returncode == 0:
            return
        if any(mark in done.stdout.lower() for mark in NO_NETWORK):
            stop(
                f"Launch Ledger could not {purpose}: no package index could be reached. The first start needs the "
                "network once; later ones do not."
            )
        if "ensurepip" in done.stdout:
            stop(missing_venv())
        sys.stderr.write(done.stdout)
        stop(f"Launch Ledger could not {purpose}; the lines above say why.")


def missing_venv() -> str:
    version = f"{sys.version_info[0]}.{sys.version_info[1]}"
    return (
        "This Python cannot make a virtual environment: its venv module is not installed. "
        f"On Debian and Ubuntu: sudo apt install python{version}-venv"
    )
