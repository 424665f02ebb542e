"""Who calls the API: a signed-in browser, or a token that belongs to one member of one shop."""

from __future__ import annotations

from typing import Any

from drf_spectacular.extensions import OpenApiAuthenticationExtension
from rest_framework.authentication import BaseAuthentication
from rest_framework.exceptions import AuthenticationFailed
from rest_framework.permissions import SAFE_METHODS, BasePermission
from rest_framework.request import Request

from shop.people.permissions import READ, WRITE


class TokenAuthentication(BaseAuthentication):
    """`Authorization: Token <key>`; ShopMiddleware has looked the key up, for it also opens the shop's scope."""

    def authenticate(self, request: Request) -> tuple[Any, Any] | None:
        if not request.headers.get("Authorization", "").startswith("Token "):
            return None
        member = request._request.token_member
        if member is None:
            raise AuthenticationFailed("This token is not known, or has been revoked.")
        return member.user, member

    def authenticate_header(self, request: Request) -> str:
        return "Token"


class TokenScheme(OpenApiAuthenticationExtension):
    target_class = "shop.api.authentication.TokenAuthentication"
    name = "token"

    def get_security_definition(self, auto_schema: Any) -> dict[str, Any]:
        return {"type": "apiKey", "in": "header", "name": "Authorization", "description": "Token <key>"}


class MayInShop(BasePermission):
    """Reading needs a membership; other methods the view's `write_permission`, WRITE unless it says more."""

    message = "Your role in this shop does not allow this."

    def has_permission(self, request: Request, view: Any) -> bool:
        member = getattr(request._request, "member", None)
        if member is None or not request.user.is_authenticated:
            return False
        needed = READ if request.method in SAFE_METHODS else getattr(view, "write_permission", WRITE)
        return member.may(needed)
