"""How a view asks who may see it: one decorator, so that no view can forget."""

from __future__ import annotations

from collections.abc import Callable
from functools import wraps
from typing import Any

from django.contrib.auth.views import redirect_to_login
from django.core.exceptions import PermissionDenied
from django.http import HttpRequest, HttpResponse, HttpResponseNotAllowed
from django.shortcuts import render

from shop.people.permissions import READ

View = Callable[..., HttpResponse]


def shop_view(
    permission: str = READ, *, methods: tuple[str, ...] = ("GET", "HEAD"), write: str | None = None
) -> Callable[[View], View]:
    """Only members with `permission` get in; with `write`, other methods than GET need that one too."""

    def decorate(view: View) -> View:
        @wraps(view)
        def guarded(request: HttpRequest, *args: Any, **kwargs: Any) -> HttpResponse:
            if not request.user.is_authenticated:
                return redirect_to_login(request.get_full_path())
            if request.member is None:
                return render(request, "people/no_shop.html", status=403)
            if request.method not in methods:
                return HttpResponseNotAllowed(methods)
            needed = permission if request.method in ("GET", "HEAD") or write is None else write
            if not request.member.may(needed):
                raise PermissionDenied(f"A {request.member.role} may not do this; ask the owner of the shop.")
            return view(request, *args, **kwargs)

        return guarded

    return decorate


def form_view(permission: str, *, see: str = READ) -> Callable[[View], View]:
    """A page with a form: `see` to look at it, `permission` to send it."""
    return shop_view(see, methods=("GET", "HEAD", "POST"), write=permission)


def action_view(permission: str) -> Callable[[View], View]:
    """A button: POST only."""
    return shop_view(permission, methods=("POST",))
