"""What one change does, for a revision: asked for with one button, read as a chart for each figure."""

from __future__ import annotations

from django.contrib import messages
from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.launches import bridge
from shop.people.access import action_view, shop_view
from shop.people.permissions import ISSUE
from shop.refusals import Refused
from shop.setups.models import Revision
from shop.studies import services
from shop.studies.models import Study
from shop.studies.steps import charts_of, steps_plan


@action_view(ISSUE)
def ask(request: HttpRequest, pk: int) -> HttpResponse:
    related = ("car", "survey__car", "parent", "shop")
    revision = get_object_or_404(Revision.objects.select_related(*related), pk=pk, number__isnull=False)
    try:
        plan = steps_plan(revision, request.shop.units)
        study = services.request_study(request.member, revision, plan, f"What one change does to {revision.label}")
    except Refused as refused:
        messages.error(request, str(refused))
        return redirect("setups:revision", pk)
    return redirect("studies:changes", study.pk)


@shop_view()
def changes(request: HttpRequest, pk: int) -> HttpResponse:
    related = ("job", "shop", "revision__car", "revision__survey", "revision__shop")
    study = get_object_or_404(Study.objects.select_related(*related).defer("job__input"), pk=pk)
    if study.plan["mode"] != "one":
        raise Http404("this study does not change one thing at a time")
    _, refused = services.columns_so_far(study)
    context = {
        "study": study,
        "revision": study.revision,
        "car": study.revision.car,
        "job": study.job,
        "running": not study.job.settled,
        "charts": charts_of(study, request.shop.units) if study.job.settled else [],
        "refused": refused,
        "provisional": bridge.provisional(study.revision),
    }
    return render(request, "studies/changes.html", context)
