"""How each kind of job is worked on: `run(job, report) -> result parts`, or None when it ends the job itself."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from shop.launches.kinds import launch
from shop.launches.models import Job

Run = Callable[[Job, Callable[[float], None]], dict[str, Any] | None]

KINDS: dict[str, Run] = {"launch": launch.run}

# Kinds that several workers work on at once: a message that finds such a job running joins in.
SHARED: set[str] = set()
