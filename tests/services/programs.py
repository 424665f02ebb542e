"""Finding the programs that tests need, and installing them where that is possible."""

from __future__ import annotations

import functools
import os
import shutil
import subprocess
from pathlib import Path

import pytest

PACKAGES = {
    "postgres": "postgresql",
    "initdb": "postgresql",
    "redis-server": "redis-server",
    "chromium": "chromium",
    "pdfinfo": "poppler-utils",
    "pdftotext": "poppler-utils",
    "pdftoppm": "poppler-utils",
}
OTHER_NAMES = {"chromium": ("chromium", "chromium-browser", "google-chrome")}


def find(program: str) -> Path | None:
    for name in OTHER_NAMES.get(program, (program,)):
        found = shutil.which(name)
        if found:
            return Path(found)
    # Debian keeps PostgreSQL's server programs off the PATH; the newest one will do.
    beside = sorted(Path("/usr/lib/postgresql").glob(f"*/bin/{program}"), key=lambda file: int(file.parts[-3]))
    return beside[-1] if beside else None


@functools.cache
def needed(program: str) -> Path:
    """Where `program` is, after installing it if this is Debian and we may; a test that cannot have it fails."""
    found = find(program)
    if found:
        return found
    install = ["apt-get", "install", "--yes", "--quiet", "--no-install-recommends", PACKAGES[program]]
    if os.geteuid() == 0 and shutil.which("apt-get"):
        quiet = {**os.environ, "DEBIAN_FRONTEND": "noninteractive"}
        done = subprocess.run(install, capture_output=True, text=True, env=quiet)
        if done.returncode != 0:  # an old list of packages is the usual reason
            subprocess.run(["apt-get", "update", "--quiet"], capture_output=True, env=quiet)
            done = subprocess.run(install, capture_output=True, text=True, env=quiet)
        found = find(program)
        if found:
            return found
        print(done.stdout, done.stderr)
    pytest.fail(f"The tests need {program}. On Debian and Ubuntu: sudo {' '.join(install)}", pytrace=False)
