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


@dataclass(frozen=True)
class Redis:
    socket: Path

    @property
    def url(self) -> str:
        return f"redis+socket://{self.socket}"

    def client(self) -> redis.Redis:
        return redis.Redis(unix_socket_path=str(self.socket))

    def clear(self) -> None:
        with self.client() as client:
            client.flushall()


@contextmanager
def running_redis() -> Iterator[Redis]:
    folder = Path(tempfile.mkdtemp(prefix="redis-", dir="/tmp"))
    found = Redis(folder / "socket")
    process = subprocess.Popen(
        [
            needed("redis-server"),
            "--port",
            "0",
            "--unixsocket",
            found.socket,
            "--save",
            "",
            "--appendonly",
            "no",
            "--dir",
            folder,
        ],
        stdout=(folder / "log").open("w"),
        stderr=subprocess.STDOUT,
    )
    try:
        last = time.monotonic() + 20
        while True:
            try:
                with found.client() as client:
                    client.ping()
                break
            except redis.ConnectionError:
                if process.poll() is not None or time.monotonic() > last:
                    raise RuntimeError(f"Redis did not start:\n{(folder / 'log').read_text()}") from None
                time.sleep(0.01)
        yield found
    finally:
        process.terminate()
        process.wait(10)
        shutil.rmtree(folder, ignore_errors=True)
