"""The embedded web server: waitress, on a socket that the supervisor holds.

The socket stays open while this process is replaced, so a restart costs a visitor a moment and not an error.
"""

from __future__ import annotations

import os
import signal
import socket
import sys
from types import FrameType

from waitress.channel import HTTPChannel
from waitress.server import create_server
from waitress.task import ErrorTask

from shop.config import lifeline

SOCKET_FD = "LEDGER_SOCKET_FD"


class WordedErrorTask(ErrorTask):
    """waitress turns a too large upload away before any code of ours runs; this gives it our page to do so with."""

    def execute(self) -> None:
        if self.request.error.code != 413:
            return super().execute()
        from shop.config.pages import too_large_page

        body = too_large_page().encode()
        self.status = "413 Content Too Large"
        self.response_headers.append(("Content-Type", "text/html; charset=utf-8"))
        self.set_close_on_finish()
        self.content_length = len(body)
        self.write(body)


class WordedChannel(HTTPChannel):
    error_task_class = WordedErrorTask


def leave(signum: int, frame: FrameType | None) -> None:
    raise SystemExit(0)


def serve(sock: socket.socket) -> None:
    from django.conf import settings

    from shop.config.wsgi import application

    server = create_server(
        application,
        sockets=[sock],
        threads=8,
        ident="Launch Ledger",
        max_request_body_size=settings.UPLOAD_LIMIT + 1,
        channel_timeout=60,
        clear_untrusted_proxy_headers=True,
    )
    server.channel_class = WordedChannel
    server.run()


def main() -> None:
    number = os.environ.pop(SOCKET_FD, "")
    if not number:
        sys.exit("This is started by: python3 manage.py start")
    signal.signal(signal.SIGTERM, leave)
    lifeline.hold()
    serve(socket.socket(fileno=int(number)))


if __name__ == "__main__":
    main()
