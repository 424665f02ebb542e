"""Shops, the people who work in them, what they may do, and what was done."""

from __future__ import annotations

import hashlib
import secrets

from django.contrib.auth.models import AbstractBaseUser, BaseUserManager, PermissionsMixin
from django.db import models
from django.db.models.functions import Lower
from django_scopes import ScopedManager

from shop.people.permissions import ROLES, may


class Shop(models.Model):
    """One chassis shop: everything but a user belongs to exactly one."""

    name = models.CharField(max_length=80)
    UNITS = [("us", "inches and pounds"), ("metric", "millimetres and kilograms")]

    units = models.CharField(max_length=6, choices=UNITS, default="us")
    paper = models.CharField(max_length=6, choices=[("letter", "US Letter"), ("a4", "A4")], default="letter")
    address = models.CharField(max_length=200, blank=True)
    created_at = models.DateTimeField(auto_now_add=True)

    class Meta:
        constraints = [
            models.CheckConstraint(condition=models.Q(units__in=["us", "metric"]), name="shop_units_known"),
            models.CheckConstraint(condition=models.Q(paper__in=["letter", "a4"]), name="shop_paper_known"),
        ]

    def __str__(self) -> str:
        return self.name


class UserManager(BaseUserManager["User"]):
    def create_user(self, email: str, name: str, password: str | None = None) -> User:
        user = self.model(email=email.strip().lower(), name=name)
        user.set_password(password)
        user.save(using=self._db)
        return user

    def get_by_natural_key(self, email: str | None) -> User:
        return self.get(email__iexact=email)


class User(AbstractBaseUser, PermissionsMixin):
    """A person who signs in by e-mail address; what they may do hangs on their membership."""

    email = models.EmailField(unique=True)
    name = models.CharField(max_length=80)
    is_active = models.BooleanField(default=True)
    created_at = models.DateTimeField(auto_now_add=True)

    objects = UserManager()
    USERNAME_FIELD = "email"
    REQUIRED_FIELDS = ["name"]

    class Meta:
        constraints = [models.UniqueConstraint(Lower("email"), name="user_email_once")]

    def __str__(self) -> str:
        return self.name


class Membership(models.Model):
    """Who works in which shop, and as what."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE, related_name="memberships")
    user = models.ForeignKey(User, on_delete=models.CASCADE, related_name="memberships")
    role = models.CharField(max_length=10, choices=[(role, role) for role in ROLES])
    created_at = models.DateTimeField(auto_now_add=True)

    class Meta:
        constraints = [
            models.UniqueConstraint(fields=["shop", "user"], name="member_once_per_shop"),
            models.CheckConstraint(condition=models.Q(role__in=list(ROLES)), name="member_role_known"),
        ]

    def __str__(self) -> str:
        return f"{self.user} ({self.role})"

    def may(self, permission: str) -> bool:
        return may(self.role, permission)


class AccessToken(models.Model):
    """A key for the API, kept as its SHA-256: what is stored opens nothing."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    membership = models.ForeignKey(Membership, on_delete=models.CASCADE, related_name="tokens")
    name = models.CharField(max_length=80)
    digest = models.CharField(max_length=64, unique=True)
    created_at = models.DateTimeField(auto_now_add=True)
    last_used_at = models.DateTimeField(null=True, blank=True)

    objects = ScopedManager(shop="shop")

    def __str__(self) -> str:
        return f"key for {self.name}"

    @staticmethod
    def digest_of(key: str) -> str:
        return hashlib.sha256(key.encode()).hexdigest()

    @classmethod
    def issue(cls, membership: Membership, name: str) -> tuple[AccessToken, str]:
        """The stored row and the key itself, which is shown once and never again."""
        key = secrets.token_urlsafe(32)
        token = cls.objects.create(
            shop=membership.shop, membership=membership, name=name, digest=cls.digest_of(key)
        )
        return token, key


class LogEntry(models.Model):
    """One thing somebody did, in words, with what it was done to."""

    shop = models.ForeignKey(Shop, on_delete=models.CASCADE)
    user = models.ForeignKey(User, on_delete=models.SET_NULL, null=True)
    at = models.DateTimeField(auto_now_add=True)
    action = models.CharField(max_length=40)
    object_type = models.CharField(max_length=30)
    object_id = models.BigIntegerField()
    object_name = models.CharField(max_length=160)
    detail = models.JSONField(default=dict)

    objects = ScopedManager(shop="shop")

    class Meta:
        ordering = ["-at", "-id"]
        indexes = [
            models.Index(fields=["shop", "-at"]),
            models.Index(fields=["shop", "object_type", "object_id"]),
        ]

    def __str__(self) -> str:
        return f"{self.action} {self.object_name}"
