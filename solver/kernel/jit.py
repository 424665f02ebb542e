"""How the kernel is compiled, and where the compiled code is kept.

Numba's disk cache looks only at the file a function stands in, not at what it
calls. The cache folder is therefore named after the contents of the whole
kernel: change any line and nothing stale is loaded.
"""

import hashlib
import os
import tempfile
from pathlib import Path

import numba
from numba import prange

__all__ = ["jit", "parallel", "prange"]


def _stamp():
    digest = hashlib.sha256(numba.__version__.encode())
    for source in sorted(Path(__file__).parent.glob("*.py")):
        digest.update(source.read_bytes())
    return digest.hexdigest()[:12]


def _cache_folder():
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


CACHE_FOLDER = _cache_folder()


def _options():
    # Division by zero gives inf, as in numpy: the monitors see it, no lane raises.
    return {"error_model": "numpy", "cache": CACHE_FOLDER is not None, "nogil": True}


def _compiled(function, **more):
    outside = numba.config.CACHE_DIR
    numba.config.CACHE_DIR = CACHE_FOLDER or outside
    try:
        return numba.njit(**_options(), **more)(function)
    finally:
        numba.config.CACHE_DIR = outside


def jit(function):
    """Compile at first call, keep on disk; `function.py_func` stays plain Python."""
    return _compiled(function)


def parallel(function):
    """The same, with `prange` over threads."""
    return _compiled(function, parallel=True)
