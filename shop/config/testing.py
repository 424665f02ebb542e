"""`python3 manage.py test [paths]` runs pytest, in a process of its own that starts from the tests' settings."""

from __future__ import annotations

import argparse
import os
import subprocess
import sys
from typing import Any

from django.conf import settings


class PytestRunner:
    """What Django's test command asks for, handed on to pytest."""

    def __init__(self, verbosity: int = 1, failfast: bool = False, **options: Any) -> None:
        self.verbosity = verbosity
        self.failfast = failfast
        self.match: str | None = options.get("match")
        self.slowest: int = options.get("slowest") or 0

    @classmethod
    def add_arguments(cls, parser: argparse.ArgumentParser) -> None:
        parser.add_argument("-k", dest="match", help="only tests whose names match this expression")
        parser.add_argument("--slowest", type=int, help="list so many of the slowest tests")

    def run_tests(self, test_labels: list[str], **options: Any) -> int:
        command = [sys.executable, "-m", "pytest"]
        command += ["-q"] if self.verbosity == 0 else ["-v"] * (self.verbosity - 1)
        command += ["-x"] if self.failfast else []
        command += ["-k", self.match] if self.match else []
        command += [f"--durations={self.slowest}"] if self.slowest else []
        # Much of the suite waits for processes, so two at a time are quicker even on two processors; the stacks of one
        # file are shared, so a file stays on one.
        command += [] if test_labels else ["-n", "2", "--dist", "loadfile"]
        # The tests bring their own services: nothing of a real installation may reach them.
        environment = {name: value for name, value in os.environ.items() if not name.startswith("LEDGER_")}
        environment.pop("DJANGO_SETTINGS_MODULE", None)
        try:
            return subprocess.call([*command, *test_labels], cwd=settings.ROOT, env=environment)
        except KeyboardInterrupt:
            return 130
