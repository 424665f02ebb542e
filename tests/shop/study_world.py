"""Studies for the tests: an issued revision of a surveyed car, and a study of it, waiting or solved."""

from __future__ import annotations

from typing import Any

from django_scopes import scope

from shop.launches.tasks import run
from shop.setups.models import Revision
from shop.studies import services
from shop.studies.models import Study
from tests.shop.setups_world import World, make_issued

# Ten choices of two brackets: enough to rank, quick to solve.
HOLES = [{"key": "upper_chassis", "values": [1, 2]}, {"key": "lower_chassis", "values": [1, 2, 3, 4, 5]}]


def make_study(world: World, revision: Revision | None = None, axes: Any = None, **more: Any) -> Study:
    """A waiting study; `mode`, `size`, `numbers` go into its plan, `limits` and `weights` to the study."""
    revision = revision or make_issued(world)
    given = {key: more.pop(key) for key in ("limits", "weights") if key in more}
    plan = {"mode": "every", "axes": axes or HOLES, **more}
    with scope(shop=world.shop):
        return services.request_study(world.owner, revision, plan, "Holes", **given)


def make_solved_study(world: World, revision: Revision | None = None, **more: Any) -> Study:
    study = make_study(world, revision, **more)
    run(study.job_id)
    return fresh(study)


def fresh(study: Study) -> Study:
    related = ("job", "revision__survey", "revision__car", "shop")
    with scope(shop=study.shop):
        return Study.objects.select_related(*related).get(pk=study.pk)


def asking(**typed: str) -> dict[str, str]:
    """What the form that asks for a study sends."""
    upper = {"vary_upper_chassis": "on", "values_upper_chassis": "1, 2"}
    lower = {"vary_lower_chassis": "on", "values_lower_chassis": "1 to 3"}
    return {**upper, **lower, "mode": "every", "seed": "1", "size": "", "name": "Some holes", **typed}
