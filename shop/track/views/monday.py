"""Monday: one car on one weekend, or two, on one page of screen or paper."""

from __future__ import annotations

from django.http import Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, render
from django.utils import timezone

from shop.garage.models import Car
from shop.people.access import shop_view
from shop.track.models import Weekend
from shop.track.monday import monday
from shop.track.station import station_of
from shop.track.weather import CORRECTION


@shop_view()
def monday_page(request: HttpRequest, car_id: int) -> HttpResponse:
    """Without a choice: the car's last weekend."""
    car = get_object_or_404(Car.objects.select_related("customer"), pk=car_id)
    every = list(Weekend.objects.filter(passes__car=car).distinct().order_by("-starts_on", "-id"))
    chosen = [_asked(request, name, every) for name in ("weekend", "with")]
    weekends = [weekend for weekend in chosen if weekend] or every[:1]
    # A weekend against itself is that weekend.
    weekends = list({weekend.pk: weekend for weekend in weekends}.values())
    context = {
        "car": car, "every": every, "chosen": weekends, "first": weekends[0] if weekends else None,
        "second": weekends[1] if len(weekends) > 1 else None,
        "page": monday(car, weekends, station_of(weekends), request.shop.units),
        "correction": CORRECTION, "paper": request.shop.paper, "today": timezone.localdate().isoformat(),
    }
    return render(request, "track/monday.html", context)


def _asked(request: HttpRequest, name: str, every: list[Weekend]) -> Weekend | None:
    text = request.GET.get(name, "")
    if not text:
        return None
    for weekend in every:
        if str(weekend.pk) == text:
            return weekend
    raise Http404("this car ran on no such weekend")
