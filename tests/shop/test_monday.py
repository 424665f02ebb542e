"""The Monday page: changes, air, passes, and what was foreseen against what was measured."""

from html import unescape

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.launches import bridge
from shop.launches.models import Job, Result
from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.track_world import RUNS_A, RUNS_B, enter, make_weekend


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def weekends(world):
    first = make_issued(world)
    second = make_issued(world, first, "Upper bar up one hole", upper_chassis=4, rear_pressure="10 3/4")
    early, late = make_weekend(world, "Cedar Flats Raceway"), make_weekend(world, "Harrow Bend Dragway")
    for weekend, revision, runs in ((early, first, RUNS_A), (late, second, RUNS_B)):
        for time in runs:
            enter(world, weekend, revision, time_60="1.312", time_1320=time)
    return early, late


def solve(world, revision, distance=None):
    """A finished launch of the revision: what the worker would have written, or a run made by hand."""
    with scope(shop=world.shop):
        job = revision.jobs.get()
        Job.objects.filter(pk=job.pk).update(state=Job.DONE, attempt=1)
        histories = distance or bridge.solve(revision.car_file)["histories"]
        Result.objects.create(shop=world.shop, job=job, attempt=1, statics={"anti_squat": 96.4}, histories=histories,
                              figures={"peak_rear_load": 12000.0, "front_lift_time": 0.213})


def revision_of(world, weekend):
    with scope(shop=world.shop):
        return weekend.passes.select_related("revision").first().revision


def page(client, member, car, **asked):
    response = signed_in(client, member).get(reverse("track:monday", args=[car.pk]), asked)
    assert response.status_code == 200
    return unescape(response.content.decode())


def test_it_works_for_two_weekends(client, world, weekends):
    early, late = weekends
    said = page(client, world.owner, world.car, **{"weekend": late.pk, "with": early.pk})
    assert "Upper link, chassis bracket: hole 3 → <strong>hole 4</strong>" in said
    assert "11 1/2 psi → <strong>10 3/4 psi</strong>" in said
    assert "rev 2 at Harrow Bend Dragway" in said and "5 passes against 4" in said
    told = [said.index(f"{place}, 9 to 10 May 2026: {count} passes") for place, count in
            (("Cedar Flats Raceway", 4), ("Harrow Bend Dragway", 5))]
    assert told == sorted(told)
    assert "Its launch is not solved yet." in said


def test_the_last_weekend_when_none_is_chosen(client, world, weekends):
    said = page(client, world.owner, world.car)
    assert "Harrow Bend Dragway, 9 to 10 May 2026: 5 passes" in said
    assert "Cedar Flats Raceway, 9 to 10 May 2026: 4" not in said


def test_a_reader_may(client, world, weekends):
    page(client, world.reader, world.car)


def test_a_stranger_does_not_find_it(client, world, weekends):
    assert signed_in(client, world.stranger).get(reverse("track:monday", args=[world.car.pk])).status_code == 404


def test_an_id_of_nothing(client, world, weekends):
    client = signed_in(client, world.owner)
    assert client.get("/cars/987654/monday").status_code == 404
    for asked in ("987654", "x"):
        assert client.get(reverse("track:monday", args=[world.car.pk]), {"weekend": asked}).status_code == 404


def test_a_car_that_never_ran(client, world):
    assert "has run on no weekend yet" in page(client, world.owner, world.car)


def test_a_run_that_goes_past_60_ft_is_read_off_like_a_slip(client, world, weekends):
    # Constant 1 g from rest, a foot of rollout: sqrt(2 (60 + 1)/32.174) - sqrt(2/32.174) = 1.6980 s.
    t = [i * 0.01 for i in range(201)]
    run = {"t": t, "distance": [0.5 * 9.80665 * x * x for x in t], "speed": [9.80665 * x for x in t]}
    solve(world, revision_of(world, weekends[1]), run)
    said = page(client, world.owner, world.car, weekend=weekends[1].pk)
    assert "1.698 s" in said and "−0.386 s" in said and "96.4 %" in said and "0.213 s" in said
    assert "continued at its last pull" not in said


def test_a_run_that_ends_short_is_continued_and_says_so(client, world, weekends):
    t = [i * 0.01 for i in range(151)]
    run = {"t": t, "distance": [0.5 * 9.80665 * x * x for x in t], "speed": [9.80665 * x for x in t]}
    solve(world, revision_of(world, weekends[1]), run)
    said = page(client, world.owner, world.car, weekend=weekends[1].pk)
    assert "1.698 s" in said and "The launch ends at 36 ft; to 60 ft it is continued at its last pull." in said


def test_a_run_that_hardly_moves_gives_no_time(client, world, weekends):
    run = {"t": [0.0, 0.5, 1.0], "distance": [0.0, 0.5, 1.0], "speed": [0.0, 1.0, 1.0]}
    solve(world, revision_of(world, weekends[1]), run)
    assert "<td class=\"number\">—</td><td class=\"number\">1.312 s</td>" in page(client, world.owner, world.car)


def test_a_real_launch(client, world, weekends):
    solve(world, revision_of(world, weekends[1]))
    said = page(client, world.owner, world.car)
    assert "Measured less simulated" in said and "The launch ends at" in said


def test_aborted_passes_are_told_and_do_not_count(client, world, weekends):
    enter(world, weekends[1], revision_of(world, weekends[1]), time_60="9.9", aborted="on", abort_reason="tyres shook",
          crew_saw="Left rear wrinkled late")
    said = page(client, world.owner, world.car)
    assert "6 passes, 1 aborted" in said and "⊘ aborted: tyres shook; not counted in comparisons." in said
    assert "5, best 1.312" in said and "Left rear wrinkled late" in said
