"""A car's studies."""

from __future__ import annotations

from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, render

from shop.garage.models import Car
from shop.people.access import shop_view
from shop.setups.models import Revision
from shop.studies.models import Study

# As many as one reads; older ones are reached from their revision's own page of work.
MOST = 100


@shop_view()
def studies(request: HttpRequest, car_id: int) -> HttpResponse:
    car = get_object_or_404(Car, pk=car_id)
    found = Study.objects.filter(revision__car=car).select_related("revision", "job", "author").defer("job__input", "plan")
    current = Revision.objects.filter(car=car, number__isnull=False).order_by("-number").first()
    return render(request, "studies/list.html", {"car": car, "current": current, "studies": found[:MOST]})
