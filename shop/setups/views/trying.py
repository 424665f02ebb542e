"""The launch of what is chosen right now in the revision form; saves and queues nothing."""

from __future__ import annotations

from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, render

from shop.garage.models import Car
from shop.launches import bridge
from shop.people.access import shop_view
from shop.people.permissions import READ
from shop.refusals import Refused
from shop.setups import services
from shop.setups.choices import Choices
from shop.setups.forms import form_of
from shop.setups.trying import CHANNELS, tried
from shop.setups.views.drafting import parent_asked, survey_asked


@shop_view(READ, methods=("POST",))
def try_launch(request: HttpRequest, car_id: int) -> HttpResponse:
    """A faulty field stands in with what the form began from, as on the drawing."""
    car = get_object_or_404(Car, pk=car_id)
    survey = survey_asked(request, car)
    if survey is None:
        raise Http404("this car has no survey")
    draft = services.new_revision(request.member, car, survey, parent_asked(request, car))
    form = form_of(draft, request.shop, request.POST)
    form.is_valid()
    form.readable.standing_in(Choices.of(draft), set(form.errors)).put_on(draft)
    channel = request.POST.get("try_channel", "")
    context = {"standing_in": bool(form.errors)}
    try:
        context["tried"] = tried(draft, channel if channel in CHANNELS else CHANNELS[0], request.shop.units)
    except (Refused, bridge.CannotSolve) as fault:
        context["fault"] = str(fault)
    return render(request, "setups/_try_launch.html", context)
