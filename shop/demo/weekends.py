"""The demo shop's race weekends: invented slips, entered through the form a phone uses.

Two weekends of the first car, on its first two revisions, so that the comparison and the Monday page have
something to say. The second revision is made 0.014 s quicker to 60 ft than the first; the scatter is fixed, not drawn.
"""

from __future__ import annotations

from datetime import date, timedelta
from typing import Any

from django.utils import timezone

from shop.garage.models import Car
from shop.people.models import Membership
from shop.setups.models import Revision
from shop.track.forms import PassForm
from shop.track.models import Weekend
from shop.track.services import add_pass, add_weekend

PLACES = (
    ("Cedar Flats Raceway", 28, "Cool morning; tight to 330 ft."),
    ("Harrow Bend Dragway", 7, "Sprayed to 330 ft, bald beyond it."),
)
# Seconds to 60 ft off the revision's own, in the order in which they ran.
SCATTER = (0.004, -0.006, 0.001, 0.007, -0.003, -0.004, 0.002)
BASE = 1.324
GAIN = 0.014


def load_weekends(member: Membership, car: Car) -> None:
    """Two weekends of `car`, which has two issued revisions or more."""
    first, second = Revision.objects.filter(car=car, number__in=(1, 2)).order_by("number")
    for place, days_ago, surface in PLACES:
        saturday = _saturday(days_ago)
        elevation = {"typed": "1,180", "value": 1180.0, "unit": "ft"}
        weekend = add_weekend(member, {
            "place": place, "starts_on": saturday, "ends_on": saturday + timedelta(days=1), "surface": surface,
            "elevation": elevation,
        })
        later = days_ago < 14
        for i, scatter in enumerate(SCATTER if later else SCATTER[:4]):
            on_the_car = second if later and i > 2 else first
            sixty = BASE + scatter - (GAIN if on_the_car == second else 0.0)
            _enter(member, weekend, car, on_the_car, i, sixty)
        if later:
            _shut_off(member, weekend, car, second)


def _saturday(days_ago: int) -> date:
    day = timezone.localdate() - timedelta(days=days_ago)
    return day - timedelta(days=(day.weekday() - 5) % 7)


def _enter(member: Membership, weekend: Weekend, car: Car, revision: Revision, i: int, sixty: float) -> None:
    _form(member, weekend, car, revision, {
        "clock": f"{10 + i}:{7 * i:02d}", "lane": ("left", "right")[i % 2], "reaction": f"{0.042 + 0.013 * (i % 4):.3f}",
        "time_60": f"{sixty:.3f}", "time_330": f"{sixty * 2.752:.3f}", "time_660": f"{sixty * 4.231:.3f}",
        "speed_660": f"{163.4 / sixty:.2f}", "time_1000": f"{sixty * 5.508:.3f}", "time_1320": f"{sixty * 6.604:.3f}",
        "speed_1320": f"{206.1 / sixty:.2f}", "launch_rpm": "5,200", "left_rear_pressure": "11 1/2",
        "right_rear_pressure": "11 1/4", "temperature": str(68 + 2 * i), "pressure": f"{28.81 - 0.01 * i:.2f}",
        "humidity": str(58 - 3 * i),
    })


def _shut_off(member: Membership, weekend: Weekend, car: Car, revision: Revision) -> None:
    _form(member, weekend, car, revision, {
        "clock": "18:20", "lane": "right", "time_60": "1.352", "aborted": "on", "abort_reason": "tyres shook at 150 ft",
        "good_to": "", "driver_saw": "Front came up, then it shook; lifted.", "crew_saw": "Left rear wrinkled late.",
    })


def _form(member: Membership, weekend: Weekend, car: Car, revision: Revision, typed: dict[str, Any]) -> None:
    data = {"car": str(car.pk), "revision": str(revision.pk), "day": weekend.starts_on.isoformat(), **typed}
    form = PassForm(data, weekend=weekend, shop=member.shop)
    if not form.is_valid():
        raise ValueError(f"the demo's own pass is refused: {form.errors.as_text()}")
    add_pass(member, weekend, form.values)
