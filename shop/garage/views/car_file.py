"""A car from a car file: its survey and first draft, in one step."""

from __future__ import annotations

from dataclasses import replace

from django import forms
from django.contrib import messages
from django.db import transaction
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.utils import timezone
from django_scopes.forms import SafeModelChoiceField

from shop.garage import services
from shop.garage.from_car_file import hit_of, survey_of
from shop.garage.models import Car, Customer
from shop.launches import bridge
from shop.people.access import form_view
from shop.people.permissions import WRITE
from shop.refusals import Refused
from shop.setups.choices import beginning
from shop.setups.services import start_draft

REFUSED = 422
MOST_BYTES = 1024 * 1024


class CarFileForm(forms.Form):
    customer = SafeModelChoiceField(Customer.objects.none(), empty_label="choose the customer")
    name = forms.CharField(max_length=80, required=False, help_text="Left blank: the name in the file.")
    file = forms.FileField(label="Car file", help_text="JSON, as the solver reads it and as every revision offers it.")

    def __init__(self, *args, **kwargs) -> None:
        super().__init__(*args, **kwargs)
        self.fields["customer"].queryset = Customer.objects.filter(archived_at__isnull=True)

    def clean_file(self) -> str:
        file = self.cleaned_data["file"]
        if file.size > MOST_BYTES:
            raise forms.ValidationError(f"a car file is some kilobytes; this one has {file.size:,} bytes")
        try:
            return file.read().decode("utf-8-sig")
        except UnicodeDecodeError as error:
            raise forms.ValidationError("not a text file; a car file is JSON in UTF-8") from error


@form_view(WRITE)
def from_file(request: HttpRequest) -> HttpResponse:
    if request.method != "POST":
        return render(request, "garage/from_file.html", {"form": CarFileForm(), "may_write": request.member.may(WRITE)})
    form = CarFileForm(request.POST, request.FILES)
    faults: list[str] = []
    if form.is_valid():
        try:
            car = _take_in(request, form)
        except Refused as refused:
            faults = list(refused.faults.values())
        else:
            messages.success(request, f"{car} is in the ledger, with survey 1 and a draft of its first revision.")
            return redirect("garage:car", car.pk)
    context = {"form": form, "faults": faults, "may_write": request.member.may(WRITE)}
    return render(request, "garage/from_file.html", context, status=REFUSED)


def _take_in(request: HttpRequest, form: CarFileForm) -> Car:
    """Car, survey and draft, or nothing at all."""
    data = bridge.read_car_file(form.cleaned_data["file"])
    reading = survey_of(data)
    name = (form.cleaned_data["name"] or data.get("name") or "from a file")[:80]
    with transaction.atomic():
        car = services.add(request.member, Car(customer=form.cleaned_data["customer"], name=name))
        notes = "Read from a car file; left and right are halves of what the file lumps together."
        survey = services.add_survey(request.member, car, reading, timezone.localdate(), notes)
        table = hit_of(data)
        lines = "\n".join(f"{time:g} {force:g}" for time, force in table)
        choices = replace(
            beginning(survey, None), hit_table=table, hit_lines=lines, hit_lines_unit="N", reason="As in the car file"
        )
        start_draft(request.member, car, survey, None, choices)
    return car
