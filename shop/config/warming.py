"""Has the solver compiled before anybody waits for it: once on disk, and then in each process that uses it."""

from __future__ import annotations

import hashlib
import logging
import os
import platform
import subprocess
import sys
import threading
from importlib.metadata import version
from pathlib import Path

from django.conf import settings

log = logging.getLogger(__name__)


def warm() -> None:
    """Make the solver ready in this process. Failing costs the first launch some seconds, and nothing else."""
    try:
        import solver

        solver.warm()
    except Exception:
        log.exception("the solver could not be made ready ahead of its first use")


def warm_aside() -> None:
    """The same beside serving, for a web process: a page that shows statics then finds them compiled."""
    threading.Thread(target=warm, name="warming", daemon=True).start()


def is_compiled() -> bool:
    try:
        return stamp().read_text() == mark()
    except OSError:
        return False


def compile_once() -> None:
    """Fill the folder of compiled code, in a process of its own: what it loads is of no use to the one that waits."""
    program = [sys.executable, "-c", "import solver; solver.warm()"]
    done = subprocess.run(program, cwd=settings.ROOT, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True)
    if done.returncode != 0:
        log.error("the solver could not be compiled ahead of its first use:\n%s", done.stdout)
        return
    stamp().parent.mkdir(parents=True, exist_ok=True)
    stamp().write_text(mark())


def stamp() -> Path:
    return Path(os.environ["NUMBA_CACHE_DIR"]) / "ledger-stamp"


def mark() -> str:
    """Changes whenever the compiled code would."""
    found = hashlib.sha256(f"{settings.ROOT} {sys.version} {platform.machine()} {version('numba')}".encode())
    for file in sorted((settings.ROOT / "solver").rglob("*.py")):
        state = file.stat()
        found.update(f"{file} {state.st_size} {state.st_mtime_ns}\n".encode())
    return found.hexdigest()
