"""Three fields between rounds make a pass."""

import uuid

import pytest
from django.urls import reverse
from django_scopes import scope

from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.track_world import enter, make_weekend, passes_of


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def weekend(world):
    return make_weekend(world)


def send(client, world, weekend, **typed):
    fields = {"car": world.car.pk, "mark": "time_60", "time": "1.312", "revision": "last", **typed}
    return client.post(reverse("track:quick", args=[weekend.pk]), fields)


def test_it_works(client, world, weekend):
    issued = make_issued(world)
    response = send(signed_in(client, world.owner), world, weekend, day="2026-05-09", clock="14:05")
    run, = passes_of(weekend)
    assert response.url == reverse("track:weekend", args=[weekend.pk])
    assert (str(run.time_60), run.number, run.revision, run.at.isoformat()) == ("1.3120", 1, issued, "2026-05-09T14:05:00")
    assert "60 ft 1.312 s" in client.get(response.url).content.decode()


def test_another_mark(client, world, weekend):
    send(signed_in(client, world.owner), world, weekend, mark="time_1320", time="8.75")
    run, = passes_of(weekend)
    assert (run.time_60, str(run.time_1320)) == (None, "8.7500")


def test_a_team_mate_may(client, world, weekend):
    assert send(signed_in(client, world.mate), world, weekend).status_code == 302


def test_a_reader_may_not(client, world, weekend):
    assert send(signed_in(client, world.reader), world, weekend).status_code == 403
    assert passes_of(weekend) == []


def test_a_stranger_does_not_find_it(client, world, weekend):
    assert send(signed_in(client, world.stranger), world, weekend).status_code == 404


def test_get_is_refused(client, world, weekend):
    assert signed_in(client, world.owner).get(reverse("track:quick", args=[weekend.pk])).status_code == 405


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).post("/weekends/987654/passes/quick").status_code == 404


def test_a_malformed_id(client, world):
    assert signed_in(client, world.owner).post("/weekends/x/passes/quick").status_code == 404


@pytest.mark.parametrize(("time", "words"), [
    ("", "give the 60 ft or another time"),
    ("1,312", "write the decimal mark as a point, like 1.312"),
    ("13.12 in", "use s, ms"),
    ("-1.3", "outside 0 to 60 s"),
    ("61", "outside 0 to 60 s"),
    ("0.4", "no car does that"),
    ("nan", "not a finite number"),
])
def test_a_time_that_cannot_be_is_refused_beside_its_field(client, world, weekend, time, words):
    response = send(signed_in(client, world.owner), world, weekend, time=time)
    page = response.content.decode()
    assert response.status_code == 422 and passes_of(weekend) == []
    beside = page[page.index('id="beside-quick-time"'):]
    assert words in beside[: beside.index("</div>")]
    assert f'value="{time}"' in page


def test_a_form_sent_twice_makes_one_pass(client, world, weekend):
    client = signed_in(client, world.owner)
    key = str(uuid.uuid4())
    for _ in range(2):
        assert send(client, world, weekend, entry_key=key).status_code == 302
    assert len(passes_of(weekend)) == 1


def test_the_revision_is_the_one_last_on_the_car(client, world, weekend):
    first = make_issued(world)
    second = make_issued(world, first, "Upper bar up one hole", upper_chassis=4)
    enter(world, weekend, first, time_60="1.31")
    page = signed_in(client, world.owner).get(reverse("track:weekend", args=[weekend.pk])).content.decode()
    assert f'<option value="{first.pk}" selected>' in page and "as on the last pass" in page
    send(client, world, weekend)
    assert [run.revision for run in passes_of(weekend)] == [first, first]
    third = make_issued(world, second, "Softer rear springs", rear_spring_rate="150")
    send(client, world, weekend)
    assert passes_of(weekend)[-1].revision == third


def test_another_cars_revision_is_refused(client, world, weekend):
    other = make_world("Marigold")
    theirs = make_issued(other)
    page = send(signed_in(client, world.owner), world, weekend, revision=theirs.pk).content.decode()
    assert "has no such issued revision" in page and passes_of(weekend) == []


def test_a_pass_without_a_revision_is_kept_and_said(client, world, weekend):
    send(signed_in(client, world.owner), world, weekend, revision="none")
    page = client.get(reverse("track:weekend", args=[weekend.pk])).content.decode()
    assert "no revision: not counted in comparisons" in page


def test_a_clock_outside_the_weekend_is_not_taken(client, world, weekend):
    send(signed_in(client, world.owner), world, weekend, day="2026-06-01", clock="09:00")
    run, = passes_of(weekend)
    assert run.clock is None and run.day == weekend.ends_on


def test_choosing_a_car_offers_its_revisions(client, world, weekend):
    issued = make_issued(world)
    url = reverse("track:on-the-car", args=[weekend.pk])
    page = signed_in(client, world.owner).get(url, {"car": world.car.pk}).content.decode()
    assert f'value="{issued.pk}" selected' in page
    assert client.get(url, {"car": "x"}).status_code == 404
    assert signed_in(client, world.stranger).get(url, {"car": world.car.pk}).status_code == 404


def test_numbers_count_up_for_each_car(world, weekend):
    with scope(shop=world.shop):
        assert [enter(world, weekend, time_60="1.3").number for _ in range(3)] == [1, 2, 3]
