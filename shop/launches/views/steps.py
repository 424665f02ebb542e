"""What a person may do to work: cancel it, have it tried again."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect

from shop.launches import services
from shop.launches.views.launch_page import job_of
from shop.people.access import action_view
from shop.people.permissions import ISSUE
from shop.refusals import Refused


@action_view(ISSUE)
def cancel(request: HttpRequest, pk: int) -> HttpResponse:
    job = job_of(pk)
    try:
        services.request_cancel(request.member, job)
    except Refused as refused:
        messages.warning(request, f"Nothing was cancelled: {refused}.")
    return redirect("launches:launch", pk)


@action_view(ISSUE)
def retry(request: HttpRequest, pk: int) -> HttpResponse:
    job = job_of(pk)
    try:
        again = services.retry(request.member, job)
    except Refused as refused:
        messages.warning(request, f"Nothing was queued: {refused}.")
        return redirect("launches:launch", pk)
    return redirect("launches:launch", again.pk)
