"""`python3 manage.py start`: everything a shop needs, from nothing, in one terminal."""

from __future__ import annotations

import os
import threading
import time
import urllib.error
import urllib.request
from typing import Any

from django.conf import settings
from django.core.management.base import BaseCommand, CommandParser, OutputWrapper
from django.db import connections

from shop.config import address, preparing, web
from shop.config.supervisor import Supervisor

WORKER = [
    "celery",
    "--quiet",
    "--app",
    "shop.config.celery",
    "worker",
    "--loglevel",
    "WARNING",
    "--without-gossip",
    "--without-mingle",
    "--without-heartbeat",
]


class Command(BaseCommand):
    help = "Prepare what is not ready yet, then run the web server and the worker until Ctrl-C."
    requires_system_checks: list[str] = []

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("--empty", action="store_true", help="begin with an empty shop instead of the demo")
        parser.add_argument("--port", type=int, default=8000, help="the port to listen on (8000)")
        parser.add_argument(
            "--host", default="127.0.0.1", help="the address to listen on; 0.0.0.0 lets tablets in the shop in"
        )

    def handle(self, *, empty: bool, port: int, host: str, **options: Any) -> None:
        sock = address.listen(host, port)
        preparing.prepare(self.say, empty=empty)
        sign_in = preparing.demo_sign_in()
        connections.close_all()

        supervisor = Supervisor(settings.ROOT, self.say)
        environment = {
            # The solver's matrices are small: threads inside one launch only get in the way of the next.
            "OPENBLAS_NUM_THREADS": "1",
            "OMP_NUM_THREADS": "1",
            "LEDGER_ALLOWED_HOSTS": ",".join([*settings.ALLOWED_HOSTS, *address.names(host)]),
        }
        web_environment = {**environment, web.SOCKET_FD: str(sock.fileno())}
        supervisor.add("web server", ["shop.config.web"], web_environment, (sock.fileno(),))
        supervisor.add("worker", WORKER, environment)
        threading.Thread(target=self.announce, args=(host, port, sign_in), daemon=True).start()
        supervisor.run()

    def announce(self, host: str, port: int, sign_in: tuple[str, str] | None) -> None:
        """Say where it is, once it answers there."""
        place = address.url(host, port)
        while not answers(place):
            time.sleep(0.1)
        lines = [f"Launch Ledger is at {place}"]
        if host in address.EVERYWHERE:
            lines += [f"    and, from the shop's network, at http://{name}:{port}/" for name in address.names(host)]
        if sign_in:
            lines.append(f"Sign in to the demo as {sign_in[0]} with the password {sign_in[1]}")
        lines.append("Ctrl-C stops it.")
        self.say("\n".join(lines))

    def say(self, words: str) -> None:
        try:
            self.stdout.write(words)
            self.stdout.flush()
        except BrokenPipeError:  # nobody listens any more; the work goes on
            self.stdout = OutputWrapper(open(os.devnull, "w"))


def answers(place: str) -> bool:
    opener = urllib.request.build_opener(urllib.request.ProxyHandler({}))  # never ask a proxy for ourselves
    try:
        with opener.open(f"{place}healthz", timeout=5):
            return True
    except urllib.error.HTTPError:
        return True
    except OSError:
        return False
