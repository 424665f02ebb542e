"""The application's settings, with everything that is kept moved into a folder of this test run."""

from __future__ import annotations

import atexit
import os
import shutil
import tempfile
from pathlib import Path

for name in [name for name in os.environ if name.startswith("LEDGER_") and name != "LEDGER_BOOTSTRAP"]:
    del os.environ[name]

KEPT = Path(tempfile.mkdtemp(prefix="ledger-"))
atexit.register(shutil.rmtree, KEPT, ignore_errors=True)

os.environ["LEDGER_DATA_DIR"] = str(KEPT / "var")
os.environ["LEDGER_SECRET_KEY"] = "only-for-tests"
# Compiled solver code outlives the run: compiling it anew each time is the slowest thing tests could do.
os.environ.setdefault("NUMBA_CACHE_DIR", str(Path(__file__).parent / ".out" / "compiled"))

from shop.config.environment import database  # noqa: E402
from shop.config.settings import *  # noqa: E402, F403
from shop.config.settings import DATABASES, STORAGES  # noqa: E402

if os.environ.get("TESTS_DATABASE_URL"):  # the same tests once more, on PostgreSQL (tests/services/test_on_postgres.py)
    DATABASES["default"] = database("TESTS_DATABASE_URL", KEPT / "unused.sqlite3")
else:
    # A file, so that a worker process can be given the tests' own database by its name.
    DATABASES["default"]["TEST"] = {"NAME": str(KEPT / "tests.sqlite3")}
    DATABASES["default"]["OPTIONS"]["init_command"] += "; PRAGMA synchronous=OFF"
STORAGES["staticfiles"] = {"BACKEND": "django.contrib.staticfiles.storage.StaticFilesStorage"}
PASSWORD_HASHERS = ["django.contrib.auth.hashers.MD5PasswordHasher"]
WHITENOISE_USE_FINDERS = True
WHITENOISE_AUTOREFRESH = True
