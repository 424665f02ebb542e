"""Senders and takers of messages, each run as a process of its own (so they live where a new process can import them)."""

from __future__ import annotations

import base64
import json
import time
from pathlib import Path
from queue import Empty
from typing import Any

from kombu import Connection, Queue
from kombu.transport import TRANSPORT_ALIASES

from shop.config import folder_broker

EACH = 200


def connect(folder: Path) -> Connection:
    return Connection("folder://localhost", transport_options=folder_broker.options(folder))


def produce(folder: Path, who: int) -> None:
    TRANSPORT_ALIASES["folder"] = "shop.config.folder_broker:Transport"
    with connect(folder) as connection:
        queue = Queue("work", routing_key="work")
        with connection.Producer() as producer:
            for number in range(EACH):
                producer.publish({"job": who * EACH + number}, routing_key="work", declare=[queue])


def consume(folder: Path, taken: Path) -> None:
    TRANSPORT_ALIASES["folder"] = "shop.config.folder_broker:Transport"
    with connect(folder) as connection, taken.open("w") as out:
        channel = connection.channel()
        Queue("work", routing_key="work")(channel).declare()
        quiet_since = time.monotonic()
        while time.monotonic() - quiet_since < 3:
            try:
                message = channel._get("work")
            except Empty:
                time.sleep(0.001)
                continue
            out.write(f"{body_of(message)}\n")
            quiet_since = time.monotonic()


def body_of(message: dict[str, Any]) -> int:
    return int(json.loads(base64.b64decode(message["body"]))["job"])
