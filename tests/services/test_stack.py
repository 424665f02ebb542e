"""Both sizes of the application answer alike: as one process tree on SQLite, and as docker-compose.yml runs it."""

from __future__ import annotations

import re
import socket
from pathlib import Path

import pytest

from tests.services.stack import ROOT, Stack, compose, compose_settings, until


def ask(stack: Stack, request: bytes, *, wait: float = 10) -> bytes:
    """Send raw bytes and read until the server closes."""
    host, port = stack.base_url.removeprefix("http://").split(":")
    with socket.create_connection((host, int(port)), timeout=wait) as connection:
        connection.sendall(request)
        answer = b""
        while chunk := connection.recv(65536):
            answer += chunk
    return answer


def upload(length: int, path: str = "/", body: bytes = b"") -> bytes:
    head = f"POST {path} HTTP/1.1\r\nHost: localhost\r\nConnection: close\r\nContent-Type: application/octet-stream\r\n"
    return f"{head}Content-Length: {length}\r\n\r\n".encode() + body


def test_it_is_well(stack: Stack) -> None:
    assert stack.get("/healthz") == (200, '{"well": true}')


def test_it_runs_on_what_it_was_told_to(stack: Stack) -> None:
    vendor, broker = stack.python(
        "from django.db import connection\n"
        "from django.conf import settings\n"
        "answer = [connection.vendor, settings.BROKER_URL]"
    )
    expected = {"embedded": ("sqlite", "folder:"), "hosted": ("postgresql", "redis")}[stack.kind]
    assert (vendor, broker[: len(expected[1])]) == expected


def test_two_gigabytes_are_refused_before_they_are_read(stack: Stack) -> None:
    """The server answers to the announcement; had it waited for the body, this would end in a timeout."""
    answer = ask(stack, upload(2 * 1024**3)).decode()
    assert " 413 " in answer.splitlines()[0]
    assert "64.0 MB accepted at once" in answer
    assert "Nothing was changed" in answer


def test_what_fits_reaches_the_application(stack: Stack) -> None:
    answer = ask(stack, upload(4, "/nowhere", b"abcd"))
    assert b" 413 " not in answer.splitlines()[0]


def test_a_length_that_is_no_number_is_refused(stack: Stack) -> None:
    answer = ask(stack, upload(0).replace(b"Content-Length: 0", b"Content-Length: many"))
    assert answer.splitlines()[0].split()[1] == b"400"


def test_every_answer_carries_the_policy_and_the_safe_headers(stack: Stack) -> None:
    for path in ("/healthz", "/nowhere"):
        head = ask(stack, f"GET {path} HTTP/1.1\r\nHost: localhost\r\nConnection: close\r\n\r\n".encode())
        words = head.partition(b"\r\n\r\n")[0].decode().lower()
        policy = re.search(r"content-security-policy: ([^\r\n]*)", words)[1]
        assert "script-src 'self';" in policy + ";"
        assert "style-src 'self';" in policy + ";"
        assert "unsafe" not in policy
        for header in ("x-content-type-options: nosniff", "x-frame-options: deny", "referrer-policy: same-origin"):
            assert header in words


def test_another_hosts_name_is_refused(stack: Stack) -> None:
    answer = ask(stack, b"GET /healthz HTTP/1.1\r\nHost: elsewhere.example\r\nConnection: close\r\n\r\n")
    assert answer.splitlines()[0].split()[1] == b"400"


def test_scripts_come_compressed_from_the_installed_packages(stack: Stack) -> None:
    get = b"GET /static/vendor/plotly.min.js HTTP/1.1\r\nHost: localhost\r\nAccept-Encoding: br\r\nConnection: close\r\n\r\n"
    head, _, body = ask(stack, get).partition(b"\r\n\r\n")
    assert b" 200 " in head.splitlines()[0]
    assert b"content-encoding: br" in head.lower()
    assert 500_000 < len(body) < 2_000_000


def test_a_message_sent_while_no_worker_runs_is_taken_later(stack: Stack) -> None:
    stack.kill_worker()
    stack.python("from shop.config.celery import app\napp.send_task('nobody.knows.this', args=['mark-of-this-test'])")
    stack.start_worker()
    until(lambda: "nobody.knows.this" in stack.log("worker").read_text(), "the worker to take the message")


# --- what docker-compose.yml says ---


def test_compose_gives_web_worker_and_migration_the_same_settings() -> None:
    services = compose()["services"]
    assert services["web"]["environment"] == services["worker"]["environment"] == services["prepare"]["environment"]
    assert set(services) == {"database", "broker", "prepare", "web", "worker"}


def test_compose_sets_only_settings_that_are_read() -> None:
    read = (ROOT / "shop" / "config" / "settings.py").read_text() + (ROOT / "shop" / "config" / "environment.py").read_text()
    image = re.findall(r"LEDGER_\w+", (ROOT / "Dockerfile").read_text())
    for name in [*compose_settings(), *image]:
        assert f'"{name}"' in read or name == "LEDGER_BOOTSTRAP", name


def test_compose_refuses_to_run_without_its_secrets() -> None:
    settings = compose()["services"]["web"]["environment"]
    for name in ("LEDGER_SECRET_KEY", "LEDGER_DATABASE_URL"):
        assert ":?" in settings[name]


def test_compose_watches_every_long_running_service_and_keeps_its_data() -> None:
    services = compose()["services"]
    for name in ("database", "broker", "web", "worker"):
        assert services[name]["healthcheck"]["test"], name
    for name in ("database", "broker"):
        volume = services[name]["volumes"][0].partition(":")[0]
        assert volume in compose()["volumes"]


def test_compose_health_check_of_the_web_server_asks_what_we_answer() -> None:
    check = " ".join(compose()["services"]["web"]["healthcheck"]["test"])
    assert "/healthz" in check
    assert 'path("healthz"' in (ROOT / "shop" / "config" / "urls.py").read_text()


@pytest.mark.parametrize("name", ["manage.py", "shop", "solver", "templates", "static", "requirements.txt"])
def test_the_image_holds_what_runs(name: str) -> None:
    assert re.search(rf"^COPY {re.escape(name)} ", Path(ROOT / "Dockerfile").read_text(), re.MULTILINE)
