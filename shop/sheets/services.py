"""Giving out a link to a sheet, and taking it back."""

from __future__ import annotations

import secrets
from datetime import timedelta

from django.db import transaction
from django.utils import timezone

from shop.people.log import record
from shop.people.models import Membership
from shop.refusals import Refused
from shop.setups.models import Revision
from shop.sheets.models import SharedSheet

# How long a link may open: a weekend, a month, a season.
DAYS = (7, 30, 120)


def share(member: Membership, revision: Revision, days: int) -> tuple[SharedSheet, str]:
    """The link's row and its token, which is shown once and never again."""
    if not revision.issued:
        raise Refused(f"{revision} is a draft; a sheet is of an issued revision")
    if days not in DAYS:
        raise Refused({"days": f"a link opens for {', '.join(map(str, DAYS))} days; “{days}” is none of them"})
    token = secrets.token_urlsafe(24)
    with transaction.atomic():
        shared = SharedSheet.objects.create(
            shop=member.shop,
            revision=revision,
            digest=SharedSheet.digest_of(token),
            created_by=member.user,
            expires_at=timezone.now() + timedelta(days=days),
        )
        record(member, "shared the sheet of", revision, days=days)
    return shared, token


def revoke(member: Membership, shared: SharedSheet) -> None:
    """The link opens nothing from now on; revoking it twice changes nothing more."""
    with transaction.atomic():
        if SharedSheet.objects.filter(pk=shared.pk, revoked_at__isnull=True).update(revoked_at=timezone.now()):
            record(member, "took back a link to the sheet of", shared.revision)
