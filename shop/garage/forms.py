"""Forms for customers and cars; the survey's form is generated from its quantities (survey_form.py)."""

from __future__ import annotations

from typing import Any

from django import forms
from django_scopes.forms import SafeModelChoiceField

from shop.garage.models import Car, Customer


class CustomerForm(forms.ModelForm):
    version = forms.IntegerField(required=False, widget=forms.HiddenInput)

    class Meta:
        model = Customer
        fields = ["name", "phone", "email", "notes"]


class CarForm(forms.ModelForm):
    version = forms.IntegerField(required=False, widget=forms.HiddenInput)

    class Meta:
        model = Car
        fields = ["customer", "name", "racing_number", "race_class", "chassis", "notes"]
        # The class is made when the module is read, before any shop is in scope.
        field_classes = {"customer": SafeModelChoiceField}

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        known = Customer.objects.filter(archived_at__isnull=True)
        if self.instance.pk:
            known = known | Customer.objects.filter(pk=self.instance.customer_id)
        self.fields["customer"] = forms.ModelChoiceField(known, empty_label="choose the customer")
