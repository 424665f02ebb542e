"""Writing the activity log: called by services, inside the transaction of what it tells of."""

from __future__ import annotations

from typing import Any

from django.db import models

from shop.people.models import LogEntry, Membership


def record(member: Membership, action: str, thing: models.Model, **detail: Any) -> LogEntry:
    """Log that `member` did `action` (plain words, past tense) to `thing`."""
    return LogEntry.objects.create(
        shop=member.shop,
        user=member.user,
        action=action,
        object_type=thing._meta.model_name,
        object_id=thing.pk,
        object_name=str(thing)[:160],
        detail=detail,
    )
