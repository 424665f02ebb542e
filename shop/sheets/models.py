"""Links by which somebody outside the shop may look at one sheet."""

from __future__ import annotations

import hashlib
from datetime import datetime

from django.conf import settings
from django.db import models
from django.db.models import F, Q
from django_scopes import ScopedManager

from shop.people.models import Shop
from shop.setups.models import Revision


class SharedSheet(models.Model):
    """One link to one revision's sheet, kept as its token's SHA-256: what is stored opens nothing."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    revision = models.ForeignKey(Revision, on_delete=models.CASCADE, related_name="shared_sheets")
    digest = models.CharField(max_length=64, unique=True)
    created_by = models.ForeignKey(settings.AUTH_USER_MODEL, on_delete=models.SET_NULL, null=True)
    created_at = models.DateTimeField(auto_now_add=True)
    expires_at = models.DateTimeField()
    revoked_at = models.DateTimeField(null=True, blank=True)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["-id"]
        constraints = [models.CheckConstraint(condition=Q(expires_at__gt=F("created_at")), name="shared_sheet_ends_later")]

    def __str__(self) -> str:
        return f"link to the sheet of {self.revision}"

    @staticmethod
    def digest_of(token: str) -> str:
        return hashlib.sha256(token.encode()).hexdigest()

    def opens(self, now: datetime) -> bool:
        return self.revoked_at is None and now < self.expires_at
