"""The Celery application. Tasks are `@shared_task` in an app's `tasks.py`, and found from there.

A message carries a job's id and nothing else. Whatever a broker or a dying worker does to messages, the job row
decides: a worker claims it, and the sweep below sends strays again.
"""

from __future__ import annotations

import logging
import os
import threading
import time
import warnings
from typing import Any

os.environ.setdefault("DJANGO_SETTINGS_MODULE", "shop.config.settings")

from celery import Celery, signals
from celery.platforms import SecurityWarning
from django.conf import settings
from kombu.transport import TRANSPORT_ALIASES

from shop.config import folder_broker, lifeline, warming

log = logging.getLogger(__name__)

# Celery warns root of messages that carry code; ours are JSON and can carry none.
warnings.filterwarnings("ignore", category=SecurityWarning)

TRANSPORT_ALIASES["folder"] = "shop.config.folder_broker:Transport"


def broker_options(url: str) -> dict[str, Any]:
    if url.startswith("folder:"):
        return folder_broker.options(settings.QUEUE_DIR)
    # What a dead worker held goes back after ten minutes, looked for every ten seconds; the sweep is far sooner.
    return {
        "visibility_timeout": 600,
        "unacked_restore_interval": 10,
        "unacked_restore_throttle": 1,
        "socket_connect_timeout": 3,
    }


app = Celery("launch-ledger")
app.conf.update(
    broker_url=settings.BROKER_URL,
    broker_transport_options=broker_options(settings.BROKER_URL),
    broker_connection_retry_on_startup=True,
    broker_connection_max_retries=None,  # a broker may be away for a night; its workers wait
    broker_channel_error_retry=True,
    task_ignore_result=True,
    task_serializer="json",
    accept_content=["json"],
    task_acks_late=True,
    task_reject_on_worker_lost=True,
    worker_prefetch_multiplier=1,
    worker_concurrency=2,
    worker_max_tasks_per_child=500,
    worker_lost_wait=1.0,
    worker_proc_alive_timeout=120.0,
    worker_enable_remote_control=False,  # cancelling goes through the job row
    worker_send_task_events=False,
    worker_hijack_root_logger=False,
    task_publish_retry_policy={"max_retries": 2, "interval_start": 0, "interval_step": 0.2, "interval_max": 0.5},
)
app.autodiscover_tasks()


@signals.worker_init.connect
def prepare(**_: Any) -> None:
    """Have the solver compiled on disk before the pool forks. It must not run in here: GNU OpenMP, which numba's
    parallel loops stand on, ends every child of a process that has used it."""
    lifeline.hold()
    if not warming.is_compiled():
        warming.compile_once()


@signals.worker_process_init.connect
def prepare_child(**_: Any) -> None:
    """Load the compiled solver, so that no launch waits for it. The pool's processes share the cores among them."""
    os.environ.setdefault("NUMBA_NUM_THREADS", "1")
    warming.warm()


@signals.worker_ready.connect
def begin_sweeping(**_: Any) -> None:
    """Sweep now and then for good, on a thread of its own: a worker's timer is emptied when it loses its broker."""

    def keep_sweeping() -> None:
        while True:
            sweep()
            time.sleep(settings.SWEEP_SECONDS)

    threading.Thread(target=keep_sweeping, name="sweeping", daemon=True).start()


def sweep() -> None:
    """Send stray jobs again. Whatever goes wrong is logged: the next sweep is seconds away."""
    from django.db import connections

    try:
        from shop.launches.sweep import return_strays

        returned = return_strays()
        if returned:
            log.warning("%s stray jobs were sent again", returned)
    except Exception:
        log.exception("the sweep for stray jobs failed")
    finally:
        connections.close_all()  # no connection of this process may be open when the pool forks
