"""All work of the shop, newest first."""

from __future__ import annotations

from django.core.paginator import Paginator
from django.http import HttpRequest, HttpResponse
from django.shortcuts import render

from shop.launches.models import Job
from shop.people.access import shop_view


@shop_view()
def runs(request: HttpRequest) -> HttpResponse:
    """`state` shows only work that stands so; a state there is not shows all."""
    state = request.GET.get("state", "")
    state = state if state in Job.STATES else ""
    # Inputs are whole car files, which a list has no use for.
    jobs = Job.objects.select_related("revision__car", "requested_by").defer("input", "revision__car_file")
    page = Paginator(jobs.filter(state=state) if state else jobs, 40).get_page(request.GET.get("page"))
    context = {
        "page": page,
        "state": state,
        "states": Job.STATES,
        "under_way": any(not job.settled for job in page),
        "query": f"&state={state}" if state else "",
    }
    return render(request, "launches/runs.html", context)
