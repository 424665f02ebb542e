"""Rows for the tests of race weekends: the shop of setups_world, a weekend, and passes entered as a form enters them."""

from __future__ import annotations

from datetime import date, time
from typing import Any

from django_scopes import scope

from shop.setups.models import Revision
from shop.track import services
from shop.track.forms import PassForm
from shop.track.models import Pass, Weekend
from tests.shop.setups_world import World

# Published or library-checked: invented runs whose Welch t, interval and permutation p SciPy gives.
RUNS_A = ["7.512", "7.498", "7.521", "7.505"]
RUNS_B = ["7.489", "7.476", "7.493", "7.481", "7.485"]


def make_weekend(world: World, place: str = "Harrow Bend Dragway", **more: Any) -> Weekend:
    with scope(shop=world.shop):
        values = {"place": place, "starts_on": date(2026, 5, 9), "ends_on": date(2026, 5, 10), **more}
        return services.add_weekend(world.owner, values)


def enter(world: World, weekend: Weekend, revision: Revision | None = None, **typed: Any) -> Pass:
    """A pass as the page's form takes it; `typed` by field names."""
    with scope(shop=world.shop):
        data = {"car": str(world.car.pk), "revision": str(revision.pk) if revision else "none", **typed}
        form = PassForm(data, weekend=weekend, shop=world.shop)
        assert form.is_valid(), form.errors
        return services.add_pass(world.owner, weekend, form.values)


def passes_of(weekend: Weekend) -> list[Pass]:
    with scope(shop=weekend.shop):
        return list(weekend.passes.select_related("car", "revision"))


def at(hour: int, minute: int = 0) -> time:
    return time(hour, minute)
