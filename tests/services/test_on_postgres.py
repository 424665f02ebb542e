"""What the database itself promises, once more on PostgreSQL: the tests that prove it on SQLite are run there."""

import os
import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).parents[2]
PROMISES = [
    "tests/shop/test_issued_revision_never_changes.py",
    "tests/shop/test_issue_at_once.py",
    "tests/shop/test_queue_races.py",
    "tests/shop/test_pass_constraints.py",
    "tests/shop/test_enter_at_once.py",
]


def test_the_database_keeps_its_promises_there_too(postgres_server):
    environment = {**os.environ, "TESTS_DATABASE_URL": postgres_server.new_database()}
    command = [sys.executable, "-m", "pytest", "-q", "-p", "no:cacheprovider", *PROMISES]
    run = subprocess.run(command, cwd=ROOT, env=environment, capture_output=True, text=True, timeout=300)
    assert run.returncode == 0, run.stdout[-6000:] + run.stderr[-2000:]
