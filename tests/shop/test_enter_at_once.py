"""Driver, crew chief and a phone with a bad connection enter passes at the same moment."""

import uuid

import pytest
from django_scopes import scope

from shop.track import services
from shop.track.forms import PassForm
from tests.shop.setups_world import make_world
from tests.shop.test_issue_at_once import at_once
from tests.shop.track_world import enter, make_weekend, passes_of

pytestmark = pytest.mark.django_db(transaction=True)


def values(world, weekend, **typed):
    with scope(shop=world.shop):
        data = {"car": str(world.car.pk), "revision": "none", "time_60": "1.31", **typed}
        form = PassForm(data, weekend=weekend, shop=world.shop)
        assert form.is_valid(), form.errors
        return form.values


def test_each_pass_gets_a_number_of_its_own():
    world = make_world()
    weekend = make_weekend(world)
    typed = values(world, weekend)
    at_once(world, *[lambda: services.add_pass(world.owner, weekend, typed)] * 4)
    assert sorted(run.number for run in passes_of(weekend)) == [1, 2, 3, 4]


def test_one_form_sent_four_times_makes_one_pass():
    world = make_world()
    weekend = make_weekend(world)
    typed = values(world, weekend, entry_key=str(uuid.uuid4()))
    made = at_once(world, *[lambda: services.add_pass(world.owner, weekend, typed)] * 4)
    run, = passes_of(weekend)
    assert {each.pk for each in made} == {run.pk}


def test_two_who_save_the_same_pass_do_not_lose_each_others_words():
    world = make_world()
    run = enter(world, make_weekend(world), time_60="1.31")

    def save(lane):
        try:
            return services.save_pass(world.owner, run, 1, {"lane": lane})
        except services.Stale:
            return None

    saved = at_once(world, lambda: save("left"), lambda: save("right"))
    assert sum(each is not None for each in saved) == 1
    assert passes_of(run.weekend)[0].version == 2
