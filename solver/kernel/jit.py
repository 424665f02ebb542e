"""How the kernel is compiled, and where the compiled code is kept.

Numba's disk cache looks only at the file a function stands in, not at what it
calls. The cache folder is therefore named after the contents of the whole
kernel: change any line and nothing stale is loaded.
"""

from __future__ import annotations

import hashlib
import os
import shutil
import tempfile
import time
from collections.abc import Callable
from pathlib import Path
from typing import Any

import numba

__all__ = ["inlined", "jit", "lean"]


def _stamp() -> str:
    digest = hashlib.sha256(numba.__version__.encode())
    for source in sorted(Path(__file__).parent.glob("*.py")):
        digest.update(source.read_bytes())
    return digest.hexdigest()[:12]


def _cache_folder() -> str | None:
    """The first place that can be written: named by the user, beside the code, home, temp."""
    named = os.environ.get("NUMBA_CACHE_DIR")
    uid = os.getuid() if hasattr(os, "getuid") else 0
    places = [
        Path(named) if named else None,
        Path(__file__).parent / "__pycache__",
        Path(os.environ.get("XDG_CACHE_HOME") or "~/.cache").expanduser() / "launch-ledger",
        Path(tempfile.gettempdir()) / f"launch-ledger-{uid}",
    ]
    for place in filter(None, places):
        folder = place / f"kernel-{_stamp()}"
        try:
            folder.mkdir(parents=True, exist_ok=True)
            with tempfile.TemporaryFile(dir=folder):
                return str(folder)
        except OSError:
            continue
    return None


def _forget_old(folder: Path, days: float = 14) -> None:
    """Remove what earlier kernels left beside this one."""
    for other in folder.parent.glob("kernel-*"):
        if other != folder and time.time() - other.stat().st_mtime > days * 86400:
            shutil.rmtree(other, ignore_errors=True)


CACHE_FOLDER = _cache_folder()
if CACHE_FOLDER:
    _forget_old(Path(CACHE_FOLDER))


def _options() -> dict:
    # Division by zero gives inf, as in numpy: the monitors see it, no lane raises.
    return {"error_model": "numpy", "cache": CACHE_FOLDER is not None, "nogil": True}


def _compiled(function: Callable, **more: Any) -> Any:
    outside = numba.config.CACHE_DIR
    numba.config.CACHE_DIR = CACHE_FOLDER or outside
    try:
        return numba.njit(**_options(), **more)(function)
    finally:
        numba.config.CACHE_DIR = outside


def jit(function: Callable) -> Any:
    """Compile at first call, keep on disk; `function.py_func` stays plain Python."""
    return _compiled(function)


def inlined(function: Callable) -> Any:
    """The same for what allocates nothing, laid into its caller.

    Without numba's reference counting: it would touch shared counters for every
    array at every call, which costs more than the physics and more so over threads.
    """
    return _compiled(function, forceinline=True, _nrt=False)


def lean(function: Callable) -> Any:
    """The same, but called rather than laid in."""
    return _compiled(function, _nrt=False)
