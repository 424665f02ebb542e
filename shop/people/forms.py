"""Forms about people and the shop itself."""

from __future__ import annotations

from django import forms
from django.contrib.auth.forms import AuthenticationForm, UsernameField

from shop.people.models import Shop
from shop.people.permissions import ROLES


class SignInForm(AuthenticationForm):
    username = UsernameField(
        label="E-mail address", widget=forms.EmailInput(attrs={"autofocus": True, "autocomplete": "username"})
    )


class MemberForm(forms.Form):
    email = forms.EmailField(label="E-mail address")
    name = forms.CharField(label="Name", max_length=80, required=False, help_text="Needed for somebody new here.")
    role = forms.ChoiceField(
        choices=[
            ("owner", "owner: everything, members too"),
            ("technician", "technician: measures, sets up and issues"),
            ("reader", "reader: looks, changes nothing"),
        ],
        initial="technician",
    )


class RoleForm(forms.Form):
    role = forms.ChoiceField(choices=[(role, role) for role in ROLES])


class ShopForm(forms.ModelForm):
    class Meta:
        model = Shop
        fields = ["name", "address", "units", "paper"]


class TokenForm(forms.Form):
    name = forms.CharField(label="What the key is for", max_length=80)
