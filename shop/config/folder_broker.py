"""The embedded queue: messages as files in a folder, for a shop that runs no broker.

kombu's filesystem transport does the work; three of its steps are replaced because two processes can meet in them:

- it opens a message under its final name and then writes it, so another worker can take it empty, lose it and die;
- it names messages by the time since the machine booted, so that after a restart new ones overtake old ones;
- it writes the table of bindings in place, so that a sender can read half of one.

Everything here is written aside and renamed: a file is whole or it is not there.
"""

from __future__ import annotations

import logging
import os
import time
import uuid
from pathlib import Path
from queue import Empty
from typing import Any

from kombu.exceptions import ChannelError
from kombu.transport import filesystem
from kombu.utils.json import dumps, loads

log = logging.getLogger(__name__)

FORGOTTEN_AFTER = 24 * 3600  # seconds; a taken message that old belongs to a process that died while reading it


def options(folder: Path) -> dict[str, Any]:
    """The transport's options for a queue in `folder`, whose parts are made here."""
    parts = {name: folder / name for name in ("messages", "taken", "bindings")}
    try:
        for part in parts.values():
            part.mkdir(mode=0o700, parents=True, exist_ok=True)
    except OSError as fault:  # jobs are rows: they are kept all the same, and sent once the folder is back
        log.error("the queue's folder %s cannot be made: %s", folder, fault.strerror)
    return {
        "data_folder_in": str(parts["messages"]),
        "data_folder_out": str(parts["messages"]),
        "processed_folder": str(parts["taken"]),
        "control_folder": str(parts["bindings"]),
        "polling_interval": 0.2,
    }


def write_whole(file: Path, text: str) -> None:
    """Put `text` at `file` in one step. The name used meanwhile matches no queue."""
    aside = file.with_name(f".{uuid.uuid4().hex}.aside")
    try:
        aside.write_text(text, encoding="utf-8")
        os.replace(aside, file)
    except OSError as fault:
        aside.unlink(missing_ok=True)
        raise ChannelError(f"the queue cannot be written in {file.parent}: {fault.strerror}") from fault


def names_in(folder: Path) -> list[str]:
    """The names in `folder`, oldest first. A folder that is gone is made again, with those beside it."""
    try:
        return sorted(os.listdir(folder))
    except FileNotFoundError:  # somebody cleared the data folder under a running worker
        options(folder.parent)
        return []
    except OSError as fault:  # a lost connection is what a worker knows how to wait out
        raise ConnectionError(f"the queue's folder {folder} cannot be read: {fault.strerror}") from fault


class Channel(filesystem.Channel):
    """A channel whose every write is whole and whose every take is one rename."""

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self._sweep_taken()

    def _put(self, queue: str, payload: Any, **kwargs: Any) -> None:
        name = f"{time.time_ns():020d}_{uuid.uuid4().hex}.{queue}.msg"
        write_whole(Path(self.data_folder_out) / name, dumps(payload))

    def _get(self, queue: str) -> Any:
        folder = Path(self.data_folder_in)
        for name in names_in(folder):
            if name.partition(".")[2] != f"{queue}.msg":
                continue
            taken = Path(self.processed_folder) / name
            try:
                os.rename(folder / name, taken)
            except FileNotFoundError:
                continue  # another worker was faster
            text = taken.read_text(encoding="utf-8")
            taken.unlink()
            try:
                return loads(text)
            except ValueError:  # a damaged disk; the job row behind it is returned by the sweep
                log.error("the queue held a message that cannot be read, %s; it was dropped", name)
        raise Empty

    def _size(self, queue: str) -> int:
        return sum(name.partition(".")[2] == f"{queue}.msg" for name in names_in(Path(self.data_folder_in)))

    def _queue_bind(self, exchange: str, routing_key: str, pattern: str, queue: str) -> None:
        binding = (routing_key or "", pattern or "", queue or "")
        guard = Path(self.control_folder) / ".guard"
        with guard.open("w") as handle:
            filesystem.lock(handle, filesystem.LOCK_EX)
            table = [tuple(row) for row in self.get_table(exchange)]
            if binding not in table:
                write_whole(self._exchange_file(exchange), dumps([binding, *table]))

    def _sweep_taken(self) -> None:
        oldest = time.time() - FORGOTTEN_AFTER
        for file in Path(self.processed_folder).glob("*.msg"):
            try:
                if file.stat().st_mtime < oldest:
                    file.unlink()
            except FileNotFoundError:
                pass


class Transport(filesystem.Transport):
    """`folder://`: the queue in a folder."""

    Channel = Channel
    connection_errors = (*filesystem.Transport.connection_errors, ConnectionError)

    def establish_connection(self) -> Any:
        names_in(Path(self.client.transport_options["data_folder_in"]))
        return super().establish_connection()
