"""The shop's own settings, its keys for the API, and what was done in it."""

from __future__ import annotations

from django.contrib import messages
from django.core.paginator import Paginator
from django.db.models import Q
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.people import services
from shop.people.access import action_view, form_view, shop_view
from shop.people.forms import ShopForm, TokenForm
from shop.people.models import AccessToken, LogEntry, Membership
from shop.people.permissions import MANAGE, READ


@form_view(MANAGE)
def shop(request: HttpRequest) -> HttpResponse:
    form = ShopForm(request.POST or None, instance=request.shop)
    if request.method == "POST" and form.is_valid():
        services.change_shop(request.member, **form.cleaned_data)
        messages.success(request, "Kept.")
        return redirect("people:shop")
    context = {
        "form": form,
        "may_manage": request.member.may(MANAGE),
        "tokens": request.member.tokens.order_by("-id"),
        "token_form": TokenForm(),
        "others": Membership.objects.filter(user=request.user).exclude(shop=request.shop).select_related("shop"),
    }
    return render(request, "people/shop.html", context, status=422 if form.is_bound and form.errors else 200)


@action_view(READ)
def make_token(request: HttpRequest) -> HttpResponse:
    """A key carries no more than its member's role, so every member may make one."""
    form = TokenForm(request.POST)
    if not form.is_valid():
        messages.error(request, "Say what the key is for.")
        return redirect("people:shop")
    key = services.issue_token(request.member, form.cleaned_data["name"])
    return render(request, "people/token.html", {"key": key, "name": form.cleaned_data["name"]})


@action_view(READ)
def revoke_token(request: HttpRequest, pk: int) -> HttpResponse:
    token = get_object_or_404(AccessToken, pk=pk, membership=request.member)
    services.revoke_token(request.member, token)
    messages.success(request, f"The key “{token.name}” opens nothing any more.")
    return redirect("people:shop")


@shop_view()
def log(request: HttpRequest) -> HttpResponse:
    """Who did what, newest first; a search looks in names and deeds."""
    words = request.GET.get("q", "").strip()[:80]
    entries = LogEntry.objects.select_related("user")
    for word in words.split():
        found = Q(object_name__icontains=word) | Q(action__icontains=word) | Q(user__name__icontains=word)
        entries = entries.filter(found | Q(object_type__icontains=word))
    page = Paginator(entries, 50).get_page(request.GET.get("page"))
    return render(request, "people/log.html", {"page": page, "words": words})
