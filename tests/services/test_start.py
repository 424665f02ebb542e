"""`python3 manage.py start` watches what it starts, and ends without leaving anything behind."""

from __future__ import annotations

import os
import re
import signal
import socket
import stat
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest

from tests.services.stack import ROOT, clean_environment, until
from tests.services.started import Started, gone, processes


@pytest.fixture(scope="module")
def shared(tmp_path_factory: pytest.TempPathFactory) -> Iterator[Started]:
    """A start that several tests look at and harm, each leaving it as it should be again."""
    running = Started(tmp_path_factory.mktemp("start"), "--empty")
    running.wait_until_up()
    yield running
    running.stop()


@pytest.fixture
def start(shared: Started) -> Iterator[Any]:
    """Further starts on the same data, which is prepared already; each test may end its own as it likes."""
    running: list[Started] = []

    def begin(*arguments: str, **options: Any) -> Started:
        running.append(Started(shared.log.parent, "--empty", *arguments, **options))
        return running[-1]

    yield begin
    for each in running:
        each.stop()


def refusal(*arguments: str, **environment: str) -> str:
    """What a start says that ends at once; it must fail, in one line, without a traceback."""
    done = subprocess.run(
        [sys.executable, "manage.py", "start", *arguments],
        cwd=ROOT,
        env=clean_environment(**environment),
        capture_output=True,
        text=True,
        timeout=60,
    )
    said = (done.stdout + done.stderr).strip()
    assert done.returncode != 0
    assert "Traceback" not in said
    assert len(said.splitlines()) == 1, said
    return said


def test_says_where_it_is_and_how_the_owner_signs_in(shared: Started) -> None:
    assert f"Launch Ledger is at http://127.0.0.1:{shared.port}/" in shared.words()
    email, password = re.search(r"signs in as\n\s+(\S+)\n\s+(\S+)\n", shared.words()).groups()
    program = (
        "import django; django.setup()\n"
        "from shop.people.models import User, Membership\n"
        f"user = User.objects.get(email={email!r})\n"
        f"assert user.check_password({password!r})\n"
        "assert Membership.objects.get(user=user).role == 'owner'\n"
    )
    environment = clean_environment(
        LEDGER_DATA_DIR=str(shared.log.parent / "var"), DJANGO_SETTINGS_MODULE="shop.config.settings"
    )
    subprocess.run([sys.executable, "-c", program], cwd=ROOT, env=environment, check=True)


def test_the_secret_key_is_its_owners_alone(shared: Started) -> None:
    key = shared.log.parent / "var" / "secret-key"
    assert stat.S_IMODE(key.stat().st_mode) == 0o600
    assert len(key.read_text()) > 60


def test_a_killed_web_server_is_started_again(shared: Started) -> None:
    before = shared.web()
    os.kill(before, signal.SIGKILL)
    until(lambda: shared.web() not in (None, before), "a new web server", 60)
    until(shared.serves, "the new web server to serve", 90)
    assert "The web server stopped (killed by SIGKILL); starting it again" in shared.words()


def test_a_killed_worker_is_started_again_and_its_pool_does_not_linger(shared: Started) -> None:
    before, pool = shared.worker(), set(shared.pool())
    os.kill(before, signal.SIGKILL)
    until(lambda: shared.worker() not in (None, before), "a new worker", 60)
    assert gone(pool), "the killed worker's pool would compute beside the new one's"
    until(lambda: len(shared.pool()) == 2, "the new worker's pool", 180)


def test_a_killed_process_of_the_pool_is_replaced_by_the_worker(shared: Started) -> None:
    worker, pool = shared.worker(), set(shared.pool())
    killed = min(pool)
    os.kill(killed, signal.SIGKILL)
    until(lambda: len(shared.pool()) == 2 and killed not in shared.pool(), "a new process in the pool", 180)
    assert shared.worker() == worker


def test_a_taken_port_is_named_with_the_option(shared: Started) -> None:
    said = refusal("--port", str(shared.port), LEDGER_DATA_DIR=str(shared.log.parent / "var"))
    assert f"Port {shared.port} is taken" in said
    assert f"--port {shared.port + 1}" in said


@pytest.mark.parametrize("port", ["0", "-1", "65536", "1000000000"])
def test_a_port_that_cannot_be_is_refused(tmp_path: Path, port: str) -> None:
    said = refusal(f"--port={port}", LEDGER_DATA_DIR=str(tmp_path))
    assert port in said
    assert "1 to 65535" in said


def test_an_address_of_another_machine_is_refused(tmp_path: Path) -> None:
    assert "no address of this machine" in refusal("--host", "192.0.2.1", LEDGER_DATA_DIR=str(tmp_path))


@pytest.mark.parametrize(
    "settings, words",
    [
        ({"LEDGER_DATABASE_URL": "mysql://somewhere/x"}, "'mysql'"),
        ({"LEDGER_DATABASE_URL": "postgresql://h:many/x"}, "port"),
        ({"LEDGER_DEBUG": "perhaps"}, "'perhaps'"),
        ({"LEDGER_UPLOAD_LIMIT_MB": "1e9"}, "1 to 2000"),
        ({"LEDGER_DATA_DIR": "/proc/nowhere"}, "/proc/nowhere"),
        ({"LEDGER_DATABASE_URL": "sqlite:////proc/nowhere.sqlite3"}, "database"),
    ],
)
def test_a_setting_that_cannot_be_read_is_named(tmp_path: Path, settings: dict[str, str], words: str) -> None:
    assert words in refusal("--port", "18999", **{"LEDGER_DATA_DIR": str(tmp_path), **settings})


@pytest.mark.parametrize("number", [signal.SIGTERM, signal.SIGINT])
def test_told_to_stop_it_ends_everything_it_started(start: Any, number: signal.Signals) -> None:
    running = start()
    running.wait_until_up()
    family = running.family()
    assert len(family) == 4
    running.process.send_signal(number)
    assert running.process.wait(30) == 0
    assert gone(family)
    assert "Traceback" not in running.words()
    assert running.words().rstrip().endswith("Stopped.")
    with socket.create_server(("127.0.0.1", running.port)):
        pass  # and the port is free again


def test_when_it_is_killed_its_children_end_too(start: Any) -> None:
    running = start()
    running.wait_until_up()
    family = running.family()
    assert len(family) == 4
    running.process.kill()
    running.process.wait()
    until(lambda: gone(family), f"{family} to end: {[processes().get(pid) for pid in family]}", 25)


def test_a_second_start_makes_nothing_anew(shared: Started, start: Any) -> None:
    second = start()
    second.wait_until_up()
    for said in ("Bringing the database", "Made an empty shop", "Collecting", "Compiling", "Installing"):
        assert said not in second.words()
    assert "Bringing the database" in shared.words()
    assert "Made an empty shop" in shared.words()
