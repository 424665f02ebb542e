"""The queue in a folder: nothing is lost or doubled when several processes take from it and put into it at once."""

from __future__ import annotations

import multiprocessing
import os
import shutil
import time
from pathlib import Path
from queue import Empty
from typing import Any

import pytest
from kombu.exceptions import ChannelError

import shop.config.celery  # noqa: F401  (registers folder://)
from shop.config import folder_broker
from tests.services.traffic import EACH, connect, consume, produce

START = multiprocessing.get_context("spawn")


def test_two_consumers_and_two_producers_lose_and_double_nothing(tmp_path: Path) -> None:
    takers = [START.Process(target=consume, args=(tmp_path / "q", tmp_path / f"taken{who}")) for who in range(2)]
    makers = [START.Process(target=produce, args=(tmp_path / "q", who)) for who in range(2)]
    for process in takers + makers:
        process.start()
    for process in takers + makers:
        process.join(60)
        assert process.exitcode == 0
    shares = [[int(line) for line in (tmp_path / f"taken{who}").read_text().split()] for who in range(2)]
    assert sorted(shares[0] + shares[1]) == list(range(2 * EACH))
    assert all(shares), "both consumers had a share, so they did compete"


@pytest.fixture
def channel(tmp_path: Path) -> Any:
    with connect(tmp_path / "q") as connection:
        yield connection.channel()


def test_a_message_is_never_seen_half_written(tmp_path: Path, channel: Any, monkeypatch: pytest.MonkeyPatch) -> None:
    messages = tmp_path / "q" / "messages"
    seen: list[int] = []
    replace = os.replace

    def watched(source: Path, target: Path) -> None:
        with pytest.raises(Empty):  # what is written so far is no message to anybody
            channel._get("work")
        replace(source, target)
        seen.append((messages / target.name).stat().st_size)

    monkeypatch.setattr(folder_broker.os, "replace", watched)
    channel._put("work", {"body": "x" * 100_000})
    assert seen[0] > 100_000
    assert channel._get("work") == {"body": "x" * 100_000}


def test_messages_come_in_the_order_they_were_put(channel: Any) -> None:
    for number in range(20):
        channel._put("work", {"n": number})
    assert [channel._get("work")["n"] for _ in range(20)] == list(range(20))


def test_a_damaged_message_is_dropped_and_the_next_one_taken(tmp_path: Path, channel: Any) -> None:
    (tmp_path / "q" / "messages" / "00000000000000000001_a.work.msg").write_text("")
    channel._put("work", {"n": 1})
    assert channel._get("work") == {"n": 1}


def test_another_queues_messages_are_left_alone(channel: Any) -> None:
    channel._put("other", {"n": 1})
    with pytest.raises(Empty):
        channel._get("work")
    assert channel._get("other") == {"n": 1}


def test_taking_leaves_nothing_behind(tmp_path: Path, channel: Any) -> None:
    channel._put("work", {"n": 1})
    channel._get("work")
    assert not list((tmp_path / "q").rglob("*.msg"))
    assert not list((tmp_path / "q").rglob("*.aside"))


def test_what_a_dead_process_left_while_taking_is_pruned(tmp_path: Path, channel: Any) -> None:
    old, new = (tmp_path / "q" / "taken" / f"{name}.work.msg" for name in ("old", "new"))
    for file in (old, new):
        file.write_text("{}")
    long_ago = time.time() - folder_broker.FORGOTTEN_AFTER - 60
    os.utime(old, (long_ago, long_ago))
    channel._sweep_taken()
    assert (old.exists(), new.exists()) == (False, True)


def test_binding_twice_keeps_one_binding_and_every_other(channel: Any) -> None:
    for queue in ("a", "b", "a"):
        channel._queue_bind("exchange", "key", "", queue)
    assert sorted(row.queue for row in channel.get_table("exchange")) == ["a", "b"]


def test_a_queue_that_cannot_be_written_says_so(tmp_path: Path, channel: Any) -> None:
    (tmp_path / "q" / "messages").rmdir()
    with pytest.raises(ChannelError, match="the queue cannot be written"):
        channel._put("work", {})


def test_a_folder_cleared_under_a_running_worker_is_made_again(tmp_path: Path, channel: Any) -> None:
    shutil.rmtree(tmp_path / "q")
    with pytest.raises(Empty):
        channel._get("work")
    channel._put("work", {"n": 1})
    assert channel._get("work") == {"n": 1}


def test_a_folder_that_cannot_be_read_counts_as_a_lost_connection(tmp_path: Path, channel: Any) -> None:
    messages = tmp_path / "q" / "messages"
    messages.rmdir()
    messages.write_text("")
    with pytest.raises(ConnectionError, match="cannot be read"):
        channel._get("work")
