"""Puts every request into the scope of one shop, so that no query can see another's rows."""

from __future__ import annotations

from collections.abc import Callable

from django.http import HttpRequest, HttpResponse
from django.utils import timezone
from django_scopes import scope, scopes_disabled

from shop.people.models import AccessToken, Membership

Respond = Callable[[HttpRequest], HttpResponse]


def _member_by_token(request: HttpRequest) -> Membership | None:
    header = request.headers.get("Authorization", "")
    if not header.startswith("Token "):
        return None
    # The token itself says which shop, so this one look-up precedes any scope.
    with scopes_disabled():
        token = (
            AccessToken.objects.select_related("membership__shop", "membership__user")
            .filter(digest=AccessToken.digest_of(header[6:].strip()), membership__user__is_active=True)
            .first()
        )
        if token is None:
            return None
        AccessToken.objects.filter(pk=token.pk).update(last_used_at=timezone.now())
        return token.membership


def _member_by_session(request: HttpRequest) -> Membership | None:
    if not request.user.is_authenticated:
        return None
    memberships = Membership.objects.select_related("shop", "user").filter(user=request.user)
    chosen = memberships.filter(shop_id=request.session.get("shop")).first()
    return chosen or memberships.order_by("id").first()


class ShopMiddleware:
    """Sets `request.member` and `request.shop`; without a shop, scoped queries refuse to run."""

    def __init__(self, get_response: Respond) -> None:
        self.get_response = get_response

    def __call__(self, request: HttpRequest) -> HttpResponse:
        request.token_member = _member_by_token(request)
        request.member = request.token_member or _member_by_session(request)
        request.shop = request.member.shop if request.member else None
        if request.shop is None:
            return self.get_response(request)
        with scope(shop=request.shop):
            return self.get_response(request)
