"""A Redis server of the tests' own, on a Unix socket, gone with the run."""

from __future__ import annotations

import shutil
import subprocess
import tempfile
import time
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path

import redis

from tests.services.programs import needed


@dataclass
class Redis:
    folder: Path
    process: subprocess.Popen[bytes] | None = None

    @property
    def socket(self) -> Path:
        return self.folder / "socket"

    @property
    def url(self) -> str:
        return f"redis+socket://{self.socket}"

    def client(self) -> redis.Redis:
        return redis.Redis(unix_socket_path=str(self.socket))

    def clear(self) -> None:
        with self.client() as client:
            client.flushall()

    def start(self) -> None:
        command = [needed("redis-server"), "--port", "0", "--unixsocket", self.socket, "--dir", self.folder]
        with (self.folder / "log").open("ab") as log:
            self.process = subprocess.Popen(
                [*command, "--save", "", "--appendonly", "no"], stdout=log, stderr=subprocess.STDOUT
            )
        last = time.monotonic() + 20
        while True:
            try:
                with self.client() as client:
                    client.ping()
                return
            except redis.ConnectionError:
                if self.process.poll() is not None or time.monotonic() > last:
                    raise RuntimeError(f"Redis did not start:\n{(self.folder / 'log').read_text()}") from None
                time.sleep(0.01)

    def kill(self) -> None:
        """At once, with all it held: nothing of it is on a disk."""
        if self.process is not None:
            self.process.kill()
            self.process.wait(10)


@contextmanager
def running_redis() -> Iterator[Redis]:
    server = Redis(Path(tempfile.mkdtemp(prefix="redis-", dir="/tmp")))
    try:
        server.start()
        yield server
    finally:
        server.kill()
        shutil.rmtree(server.folder, ignore_errors=True)
