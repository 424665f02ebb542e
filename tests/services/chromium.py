"""A real browser for tests: Debian's Chromium, driven by Playwright, with every complaint of a page kept."""

from __future__ import annotations

import re
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field
from typing import Any

from playwright.sync_api import Browser, BrowserContext, ConsoleMessage, Page, sync_playwright

from tests.services.programs import needed

FLAGS = [
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--disable-dev-shm-usage",
    # Nothing from outside: a page that asks for a script, font or picture elsewhere fails here as it would in a shop.
    "--host-resolver-rules=MAP * ~NOTFOUND, EXCLUDE localhost, EXCLUDE 127.0.0.1",
]


@contextmanager
def running_chromium() -> Iterator[Browser]:
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=str(needed("chromium")), headless=True, args=FLAGS)
        yield browser
        browser.close()


CUT_OFF = re.compile(r"htmx:(sendAbort|afterRequest)\b")


@dataclass
class Complaints:
    """What pages complained of: script errors, refusals by the content security policy, failed loads.

    A test that means to provoke one says so beforehand with `expect`.
    """

    found: list[str] = field(default_factory=list)
    expected: list[re.Pattern[str]] = field(default_factory=list)

    def expect(self, pattern: str) -> None:
        self.expected.append(re.compile(pattern))

    def watch(self, page: Page) -> None:
        page.on("console", self._console)
        page.on("pageerror", lambda fault: self.found.append(f"{page.url}: {fault}"))

    def _console(self, message: ConsoleMessage) -> None:
        if message.type == "error":
            self.found.append(f"{message.location.get('url', '')}: {message.text}")

    def unexpected(self) -> list[str]:
        """What nobody announced. A request that was cut off because the page was left is nobody's fault."""
        left = [CUT_OFF] if any("htmx:sendAbort" in words for words in self.found) else []
        return [words for words in self.found if not any(pattern.search(words) for pattern in [*self.expected, *left])]


class Pages:
    """Opens pages, each in a context of its own or in a given one, and watches all of them."""

    def __init__(self, browser: Browser, complaints: Complaints, base_url: str | None) -> None:
        self.browser = browser
        self.complaints = complaints
        self.base_url = base_url
        self.contexts: list[BrowserContext] = []

    def context(self, width: int = 1280, height: int = 900, **options: Any) -> BrowserContext:
        context = self.browser.new_context(viewport={"width": width, "height": height}, base_url=self.base_url, **options)
        context.set_default_timeout(10_000)
        context.on("page", self.complaints.watch)
        self.contexts.append(context)
        return context

    def open(self, width: int = 1280, height: int = 900, **options: Any) -> Page:
        return self.context(width, height, **options).new_page()

    def close(self) -> None:
        for context in self.contexts:
            context.close()
