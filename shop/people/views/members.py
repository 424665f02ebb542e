"""Who works here."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.people import services
from shop.people.access import action_view, form_view
from shop.people.forms import MemberForm, RoleForm
from shop.people.models import Membership
from shop.people.permissions import MANAGE
from shop.refusals import Refused


def _of_this_shop(request: HttpRequest, pk: int) -> Membership:
    return get_object_or_404(Membership.objects.select_related("user", "shop"), pk=pk, shop=request.shop)


def _page(request: HttpRequest, form: MemberForm, *, link: str = "", status: int = 200) -> HttpResponse:
    members = Membership.objects.filter(shop=request.shop).select_related("user").order_by("user__name")
    context = {"members": members, "form": form, "link": link, "may_manage": request.member.may(MANAGE)}
    return render(request, "people/members.html", context, status=status)


@form_view(MANAGE)
def members(request: HttpRequest) -> HttpResponse:
    if request.method != "POST":
        return _page(request, MemberForm())
    form = MemberForm(request.POST)
    if not form.is_valid():
        return _page(request, form, status=422)
    try:
        added, path = services.add_member(request.member, **form.cleaned_data)
    except Refused as refused:
        for field, words in refused.faults.items():
            form.add_error(field or None, words)
        return _page(request, form, status=422)
    messages.success(request, f"{added.user.name} now works here as {added.role}.")
    if path is None:
        return redirect("people:members")
    return _page(request, MemberForm(), link=request.build_absolute_uri(path))


@action_view(MANAGE)
def role(request: HttpRequest, pk: int) -> HttpResponse:
    member = _of_this_shop(request, pk)
    form = RoleForm(request.POST)
    if form.is_valid():
        try:
            services.change_role(request.member, member, form.cleaned_data["role"])
            messages.success(request, f"{member.user.name} is now {form.cleaned_data['role']}.")
        except Refused as refused:
            messages.error(request, str(refused))
    else:
        messages.error(request, "That is not a role.")
    return redirect("people:members")


@action_view(MANAGE)
def remove(request: HttpRequest, pk: int) -> HttpResponse:
    member = _of_this_shop(request, pk)
    try:
        services.remove_member(request.member, member)
        messages.success(request, f"{member.user.name} no longer works here. What they did stays on record.")
    except Refused as refused:
        messages.error(request, str(refused))
    return redirect("people:members")
