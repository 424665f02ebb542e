"""One launch of one revision."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from shop.launches import bridge
from shop.launches.models import Job


def run(job: Job, report: Callable[[float], None]) -> dict[str, Any]:
    report(0.05)
    answer = bridge.solve(job.input)
    report(0.95)
    return answer
