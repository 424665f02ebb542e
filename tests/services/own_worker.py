"""A real Celery worker on the tests' own database, for tests that read and write through the models."""

from __future__ import annotations

import os
import shutil
import signal
import subprocess
import sys
import tempfile
from pathlib import Path

from django.conf import settings
from django.db import connection

from shop.config.management.commands.start import WORKER
from tests.services.stack import ROOT, clean_environment, until


class OwnWorker:
    """Shares the tests' database file and queue folder; sees only what is committed (`transaction=True`)."""

    def __init__(self) -> None:
        self.process: subprocess.Popen[bytes] | None = None
        self.folder = Path(tempfile.mkdtemp(prefix="worker-", dir="/tmp"))
        self.log = self.folder / "log"

    def ensure(self) -> None:
        if self.process is not None and self.process.poll() is None:
            return
        environment = clean_environment(
            LEDGER_DATABASE_URL=f"sqlite:///{connection.settings_dict['NAME']}",
            LEDGER_DATA_DIR=str(settings.DATA_DIR),
            LEDGER_SECRET_KEY=settings.SECRET_KEY,
            LEDGER_SWEEP_SECONDS="1",
        )
        command = list(WORKER)
        command[command.index("WARNING")] = "INFO"
        with self.log.open("wb") as log:
            self.process = subprocess.Popen(
                [sys.executable, "-m", *command],
                cwd=ROOT,
                env=environment,
                stdin=subprocess.DEVNULL,
                stdout=log,
                stderr=subprocess.STDOUT,
                start_new_session=True,
            )
        until(self.is_ready, "the worker", 180)

    def is_ready(self) -> bool:
        assert self.process is not None
        words = self.log.read_text(errors="replace")
        assert self.process.poll() is None, words
        return " ready." in words

    def kill(self) -> None:
        """SIGKILL for the worker and its pool at once."""
        if self.process is not None:
            os.killpg(self.process.pid, signal.SIGKILL)
            self.process.wait(10)
            self.process = None

    def stop(self) -> None:
        self.kill()
        shutil.rmtree(self.folder, ignore_errors=True)
