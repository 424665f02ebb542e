"""Changing a pass: everything of it on one page, over the version one saw."""

from decimal import Decimal

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.people.models import LogEntry
from shop.refusals import Stale
from shop.track import services
from shop.track.forms import initial_of
from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.track_world import enter, make_weekend, passes_of

SLIP = {"reaction": "-.012", "time_60": "1.312", "time_330": "3.61", "time_660": "5.5521", "speed_660": "124.31",
        "time_1000": "7.23", "time_1320": "8.671", "speed_1320": "157.02"}


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def run(world):
    return enter(world, make_weekend(world), time_60="1.312")


def send(client, run, **typed):
    data = {**initial_of(run), **typed}
    return client.post(reverse("track:pass", args=[run.pk]), {k: v for k, v in data.items() if v is not False})


def fresh(run):
    return passes_of(run.weekend)[0]


def test_it_works(client, world, run):
    issued = make_issued(world)
    more = {"revision": issued.pk, "lane": "left", "clock": "14:05", "launch_rpm": "5,200", "left_rear_pressure": "9 3/4",
            "temperature": "84", "pressure": "28.92", "humidity": "41", "drive_notes": "two plates", "driver_saw": "Clean."}
    assert send(signed_in(client, world.owner), run, **SLIP, **more).status_code == 302
    saved = fresh(run)
    assert (saved.reaction, saved.time_660, saved.speed_1320) == (Decimal("-0.0120"), Decimal("5.5521"), Decimal("157.02"))
    assert saved.readings["left_rear_pressure"] == {"typed": "9 3/4", "value": 9.75, "unit": "psi"}
    assert (saved.revision, saved.lane, saved.version) == (issued, "left", 2)


def test_the_log_says_what_was_changed(client, world, run):
    issued = make_issued(world)
    client = signed_in(client, world.owner)
    send(client, run, time_60="1.305", time_330="3.61", lane="left", revision=issued.pk, humidity="40")
    with scope(shop=world.shop):
        entry = LogEntry.objects.get(action="changed")
    assert entry.detail["reason"] == (
        "60 ft 1.312 s to 1.305 s; 330 ft — to 3.610 s; revision none to rev 1; lane none to left; relative humidity"
    )


def test_what_is_shown_is_what_was_saved(client, world, run):
    client = signed_in(client, world.owner)
    send(client, run, **SLIP, lane="right", temperature="29 C")
    page = client.get(reverse("track:pass", args=[run.pk])).content.decode()
    for shown in ('value="-0.012"', 'value="5.5521"', 'value="124.31"', 'value="29 C"', '<option value="right" selected>'):
        assert shown in page
    # Saving the page as it stands changes nothing.
    before = fresh(run)
    assert send(client, before).status_code == 302
    after = fresh(run)
    assert {f.name: getattr(after, f.name) for f in after._meta.fields if f.name != "version"} == {
        f.name: getattr(before, f.name) for f in before._meta.fields if f.name != "version"
    }


def test_a_team_mate_may(client, world, run):
    assert send(signed_in(client, world.mate), run, lane="left").status_code == 302


def test_a_reader_may_look_and_not_change(client, world, run):
    client = signed_in(client, world.reader)
    assert client.get(reverse("track:pass", args=[run.pk])).status_code == 200
    assert send(client, run, lane="left").status_code == 403
    assert fresh(run).lane == ""


def test_a_stranger_does_not_find_it(client, world, run):
    client = signed_in(client, world.stranger)
    assert client.get(reverse("track:pass", args=[run.pk])).status_code == 404
    assert send(client, run).status_code == 404


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).get("/passes/987654/").status_code == 404


def test_a_malformed_id(client, world):
    assert signed_in(client, world.owner).get("/passes/seven/").status_code == 404


def test_times_out_of_order_are_refused_beside_the_field_in_words(client, world, run):
    response = send(signed_in(client, world.owner), run, **{**SLIP, "time_660": "3.552"})
    page = response.content.decode()
    assert response.status_code == 422
    beside = page[page.index('id="beside-time_660"'):]
    words = "3.552 s to 660 ft cannot be: the car was already at 330 ft after 3.610 s"
    assert words in beside[: beside.index("</div>")]
    assert 'value="3.552"' in page and 'value="157.02"' in page
    assert fresh(run).time_330 is None


def test_a_slip_that_is_rare_but_possible_is_kept_and_doubted(client, world, run):
    client = signed_in(client, world.owner)
    # The car slows down between two marks: somebody lifted, or a digit is wrong.
    assert send(client, run, **{**SLIP, "time_1320": "9.671"}).status_code == 302
    page = client.get(reverse("track:pass", args=[run.pk])).content.decode()
    assert "did the driver lift, or is a time mistyped?" in page.replace("&#x27;", "'")


def test_speeds_of_one_slip_have_one_unit(client, world, run):
    page = send(signed_in(client, world.owner), run, speed_1320="252 km/h").content.decode()
    assert "the speeds of this slip are in mph; choose km/h for the slip" in page


@pytest.mark.parametrize(("field", "typed", "words"), [
    ("day", "2026-05-12", "outside this weekend, 9 to 10 May 2026"),
    ("clock", "25:00", "write the time like 14:05"),
    ("number", "0", "passes are numbered from 1"),
    ("humidity", "140", "140 is outside 0.0 % to 100.0 %"),
    ("pressure", "735", "outside 14.76 inHg to 32.48 inHg"),
    ("temperature", "84 in", "does not fit here; use °F, °C"),
    ("launch_rpm", "52", "outside 500 rpm to 14,000 rpm"),
    ("abort_reason", "shut off", "tick “aborted”, or clear this"),
    ("lane", "middle", "Select a valid choice"),
])
def test_a_wrong_entry_is_refused_beside_its_field(client, world, run, field, typed, words):
    response = send(signed_in(client, world.owner), run, **{field: typed})
    page = response.content.decode()
    beside = page[page.index(f'id="beside-{field}"'):]
    assert response.status_code == 422 and words in beside[: beside.index("</div>")]


def test_an_aborted_pass_counts_as_far_as_said(client, world, run):
    client = signed_in(client, world.owner)
    assert send(client, run, aborted="on", good_to="time_330").status_code == 422
    assert send(client, run, aborted="on", good_to="time_60", abort_reason="tyres shook").status_code == 302
    saved = fresh(run)
    assert saved.counts_to("time_60") and not saved.counts_to("time_330") and not saved.counts_to("speed_1320")


def test_a_number_already_taken_is_refused(client, world, run):
    second = enter(world, run.weekend, time_60="1.30")
    response = send(signed_in(client, world.owner), second, number="1")
    assert response.status_code == 422 and "is already entered" in response.content.decode()


def test_the_second_person_is_told_and_shown_the_difference(client, world, run):
    with scope(shop=world.shop):
        form = {"car": run.car, "revision": None, "number": 1, "day": run.day, "lane": "right"}
        services.save_pass(world.mate, run, 1, form)
    client = signed_in(client, world.owner)
    response = send(client, run, lane="left")
    page = response.content.decode()
    assert response.status_code == 409
    assert "<td>right</td><td>left</td>" in page and 'name="version" value="2"' in page
    assert fresh(run).lane == "right"
    # Sent again, now knowingly, it goes through.
    assert send(client, run, lane="left", version=2).status_code == 302
    assert fresh(run).lane == "left"


def test_saving_twice_from_one_version_loses_nothing(world, run):
    with scope(shop=world.shop):
        services.save_pass(world.owner, run, 1, {"lane": "left"})
        with pytest.raises(Stale):
            services.save_pass(world.mate, run, 1, {"lane": "right"})
