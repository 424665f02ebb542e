"""Who asks the API, and what they may do in their shop."""

from __future__ import annotations

from django.http import HttpRequest
from rest_framework.authentication import BaseAuthentication
from rest_framework.exceptions import AuthenticationFailed
from rest_framework.permissions import SAFE_METHODS, BasePermission
from rest_framework.request import Request
from rest_framework.views import APIView

from shop.people.models import Membership, User
from shop.people.permissions import READ, WRITE


class TokenAuthentication(BaseAuthentication):
    """`Authorization: Token KEY`. The middleware has looked the key up, since it decides the shop's scope."""

    def authenticate(self, request: Request) -> tuple[User, Membership] | None:
        plain: HttpRequest = request._request
        if not plain.headers.get("Authorization", "").startswith("Token "):
            return None
        member = plain.token_member
        if member is None:
            raise AuthenticationFailed("This token is not known, or has been withdrawn.")
        return member.user, member

    def authenticate_header(self, request: Request) -> str:
        return "Token"


class MayInShop(BasePermission):
    """A member of a shop reads; writing needs `write`, or what a view names as `needs`."""

    message = "Your role in this shop may not do this; ask the owner of the shop."

    def has_permission(self, request: Request, view: APIView) -> bool:
        member: Membership | None = request._request.member
        if member is None:
            return False
        if request.method in SAFE_METHODS:
            return member.may(READ)
        return member.may(getattr(view, "needs", WRITE))
