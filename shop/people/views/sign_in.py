"""Coming in and going out."""

from __future__ import annotations

from django.contrib.auth import views as auth
from django.contrib.auth.decorators import login_required
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import redirect
from django.urls import reverse_lazy

from shop.people.forms import SignInForm
from shop.people.models import Membership

sign_in = auth.LoginView.as_view(
    template_name="people/sign_in.html", authentication_form=SignInForm, redirect_authenticated_user=True
)
sign_out = auth.LogoutView.as_view()
change_password = auth.PasswordChangeView.as_view(
    template_name="people/change_password.html", success_url=reverse_lazy("people:shop")
)
welcome = auth.PasswordResetConfirmView.as_view(
    template_name="people/welcome.html",
    success_url=reverse_lazy("people:sign-in"),
    reset_url_token="choose",  # noqa: S106  the word that stands in the address while the real one is in the session
)


@login_required
def choose_shop(request: HttpRequest, pk: int) -> HttpResponse:
    """Somebody who works in several shops says in which one they are today."""
    # Their own few are looked through here: a database refuses to compare with a number it cannot hold.
    membership = next((m for m in Membership.objects.filter(user=request.user) if m.shop_id == pk), None)
    if membership is None:
        raise Http404
    if request.method == "POST":
        request.session["shop"] = membership.shop_id
    return redirect("/")
