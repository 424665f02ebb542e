"""Fixtures that start the real thing: servers, a browser, a worker, the whole application.

`redis_server`, `postgres_server`  private servers, one each for the run
`stack`                            the whole application as processes, in both sizes (tests/services/stack.py)
`chromium`, `pages`, `page`        a real browser; a page's errors and refusals by its policy fail the test
`worker`                           a real Celery worker on the tests' own database, beside pytest-django's `live_server`
`sign_in`                          opens a page as a given person
"""

from __future__ import annotations

import os
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest
from django.conf import settings
from playwright.sync_api import Browser, Page

from tests.services.chromium import Complaints, Pages, running_chromium
from tests.services.own_worker import OwnWorker
from tests.services.postgres import Postgres, running_postgres
from tests.services.redis_server import Redis, running_redis
from tests.services.stack import KINDS, Stack, running_stack, servers_for

BROWSER = {"chromium", "pages", "page"}
SERVICES = {"stack", "worker", "redis_server", "postgres_server"}


def pytest_collection_modifyitems(items: list[pytest.Item]) -> None:
    for item in items:
        fixtures = set(getattr(item, "fixturenames", ()))
        if fixtures & BROWSER:
            item.add_marker("browser")
        if fixtures & SERVICES or "services" in Path(item.fspath).parts:
            item.add_marker("services")


@pytest.fixture(scope="session")
def redis_server() -> Iterator[Redis]:
    with running_redis() as server:
        yield server


@pytest.fixture(scope="session")
def postgres_server() -> Iterator[Postgres]:
    with running_postgres() as server:
        yield server


@pytest.fixture(scope="module", params=KINDS)
def stack(request: pytest.FixtureRequest) -> Iterator[Stack]:
    """The whole application, once on SQLite and a folder, once on PostgreSQL and Redis; one of each for a module."""
    with running_stack(request.param, *servers_for(request.param, request)) as running:
        yield running


@pytest.fixture(scope="session")
def chromium() -> Iterator[Browser]:
    # Playwright's own event loop lives in this thread, which is all that Django's check against it would find.
    os.environ["DJANGO_ALLOW_ASYNC_UNSAFE"] = "1"
    with running_chromium() as browser:
        yield browser


@pytest.fixture
def complaints() -> Complaints:
    """What the pages of this test complained of; `complaints.expect("status of 404")` allows one."""
    return Complaints()


@pytest.fixture
def pages(request: pytest.FixtureRequest, chromium: Browser, complaints: Complaints) -> Iterator[Pages]:
    """`pages.open(width=820)` opens a page; addresses are relative to `live_server` or `stack` if the test has one."""
    base_url = None
    if "live_server" in request.fixturenames:
        base_url = request.getfixturevalue("live_server").url
    elif "stack" in request.fixturenames:
        base_url = request.getfixturevalue("stack").base_url
    opened = Pages(chromium, complaints, base_url)
    yield opened
    opened.close()
    assert not complaints.unexpected(), "\n".join(complaints.unexpected())


@pytest.fixture
def page(pages: Pages) -> Page:
    return pages.open()


@pytest.fixture
def sign_in(live_server: Any, client: Any) -> Callable[[Page, Any], None]:
    """`sign_in(page, user)`: the page's context is that person's from here on, without the sign-in form."""

    def signed_in(page: Page, user: Any) -> None:
        client.force_login(user, backend="django.contrib.auth.backends.ModelBackend")
        name = settings.SESSION_COOKIE_NAME
        page.context.add_cookies([{"name": name, "value": client.cookies[name].value, "url": live_server.url}])

    return signed_in


@pytest.fixture(scope="session")
def session_worker(django_db_setup: None) -> Iterator[OwnWorker]:
    running = OwnWorker()
    yield running
    running.stop()


@pytest.fixture
def worker(transactional_db: None, session_worker: OwnWorker) -> OwnWorker:
    """A real worker that takes what this test sends; started once, and again after a test has killed it."""
    session_worker.ensure()
    return session_worker
