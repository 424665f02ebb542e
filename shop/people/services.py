"""Writing who works in a shop, and with which keys."""

from __future__ import annotations

from django.contrib.auth.tokens import default_token_generator
from django.db import IntegrityError, transaction
from django.utils.encoding import force_bytes
from django.utils.http import urlsafe_base64_encode

from shop.people.log import record
from shop.people.models import AccessToken, Membership, Shop, User
from shop.people.permissions import ROLES
from shop.refusals import Refused


def set_password_path(user: User) -> str:
    """The one-time address at which a new member sets a password; it dies with its first use."""
    return f"/welcome/{urlsafe_base64_encode(force_bytes(user.pk))}/{default_token_generator.make_token(user)}/"


def add_member(member: Membership, email: str, name: str, role: str) -> tuple[Membership, str | None]:
    """The new membership, and the set-password address where the person is new here."""
    if role not in ROLES:
        raise Refused({"role": f"“{role}” is not a role; choose {', '.join(ROLES)}"})
    with transaction.atomic():
        user = User.objects.filter(email__iexact=email.strip()).first()
        is_new = user is None
        if user is None:
            if not name.strip():
                raise Refused({"name": "give the new member's name"})
            user = User.objects.create_user(email, name.strip())
        try:
            with transaction.atomic():
                added = Membership.objects.create(shop=member.shop, user=user, role=role)
        except IntegrityError as error:
            raise Refused({"email": f"{user.name} already works in {member.shop}"}) from error
        record(member, "added", added, role=role)
    # Whoever holds the address becomes that person, in every shop they work in: none is shown for somebody
    # who works elsewhere, or another shop's owner could come in as them.
    elsewhere = Membership.objects.filter(user=user).exclude(shop=member.shop).exists()
    needs_one = is_new or (not user.has_usable_password() and not elsewhere)
    return added, set_password_path(user) if needs_one else None


def _keep_an_owner(changed: Membership) -> None:
    # Locked, so that two owners who demote each other at once do not leave the shop without one.
    Shop.objects.select_for_update().get(pk=changed.shop_id)
    others = Membership.objects.filter(shop=changed.shop_id, role="owner").exclude(pk=changed.pk)
    if changed.role == "owner" and not others.exists():
        raise Refused("a shop needs an owner; make somebody else one first")


def change_role(member: Membership, changed: Membership, role: str) -> None:
    if role not in ROLES:
        raise Refused({"role": f"“{role}” is not a role; choose {', '.join(ROLES)}"})
    with transaction.atomic():
        if role != "owner":
            _keep_an_owner(changed)
        Membership.objects.filter(pk=changed.pk).update(role=role)
        record(member, "made", changed, role=role, before=changed.role)


def remove_member(member: Membership, removed: Membership) -> None:
    """Ends the membership and its keys; what the person did stays on record under their name."""
    with transaction.atomic():
        _keep_an_owner(removed)
        record(member, "removed", removed, role=removed.role)
        removed.delete()


def change_shop(member: Membership, **fields: str) -> None:
    with transaction.atomic():
        # From the database: a form has already put the new values on the instance.
        before = Shop.objects.values(*fields).get(pk=member.shop.pk)
        for name, value in fields.items():
            setattr(member.shop, name, value)
        member.shop.save(update_fields=list(fields))
        record(member, "changed", member.shop, before=before, after=fields)


def issue_token(member: Membership, name: str) -> str:
    with transaction.atomic():
        token, key = AccessToken.issue(member, name.strip() or "key")
        record(member, "made", token)
    return key


def revoke_token(member: Membership, token: AccessToken) -> None:
    with transaction.atomic():
        record(member, "revoked", token)
        token.delete()
