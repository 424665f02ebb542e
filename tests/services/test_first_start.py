"""From a fresh copy to a page, with everything installed: what a new user does, and what two of them do at once."""

from __future__ import annotations

import shutil
import sys
from pathlib import Path

from tests.services.stack import ROOT, until
from tests.services.started import Started

PARTS = ("manage.py", "requirements.txt", "shop", "solver", "templates", "static")
BASE = getattr(sys, "_base_executable", sys.executable)
NOWHERE = {"PIP_INDEX_URL": "http://127.0.0.1:9/", "PIP_RETRIES": "0"}


def fresh_copy(root: Path) -> Path:
    root.mkdir()
    for name in PARTS:
        source = ROOT / name
        if source.is_dir():
            shutil.copytree(source, root / name, ignore=shutil.ignore_patterns("__pycache__"))
        else:
            shutil.copy2(source, root / name)
    return root


def test_two_first_starts_from_nothing_both_serve_and_the_next_needs_no_network(tmp_path: Path) -> None:
    root = fresh_copy(tmp_path / "ledger")
    both = [Started(tmp_path, "--empty", root=root, python=BASE) for _ in range(2)]
    try:
        for started in both:
            until(started.serves, "the first page", 420)
            until(lambda started=started: "Ctrl-C stops it." in started.words(), "the address")
        words = [started.words() for started in both]
        for once in ("Installing what Launch Ledger needs", "Made an empty shop", "Bringing the database up to date"):
            assert sorted(once in said for said in words) == [False, True], words
        assert any("waiting for it to finish" in said for said in words)
        assert (root / ".venv" / "bin" / "python").exists()
    finally:
        for started in both:
            started.stop()

    again = Started(tmp_path, root=root, python=BASE, **NOWHERE)
    try:
        until(again.serves, "the second start's page", 60)
        assert "Installing" not in again.words()
    finally:
        again.stop()
        shutil.rmtree(root)  # half a gigabyte
