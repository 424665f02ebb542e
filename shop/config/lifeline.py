"""How a child learns that its supervisor died: the pipe it holds the reading end of comes to its end."""

from __future__ import annotations

import os
import signal
import threading
import time

FD = "LEDGER_LIFELINE_FD"
GRACE = 10.0  # seconds between asking and killing


def hold() -> None:
    """Watch the supervisor, if there is one; when it is gone, end this process and its group."""
    number = os.environ.pop(FD, "")
    if number:
        threading.Thread(target=_watch, args=(int(number),), name="lifeline", daemon=True).start()


def _watch(fd: int) -> None:
    while os.read(fd, 1):  # nothing is ever written; it returns when the other end is closed
        pass
    os.kill(os.getpid(), signal.SIGTERM)
    time.sleep(GRACE)
    if os.getpgrp() == os.getpid():
        os.killpg(os.getpid(), signal.SIGKILL)
    os.kill(os.getpid(), signal.SIGKILL)
