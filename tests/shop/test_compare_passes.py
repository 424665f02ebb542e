"""Which revision was better, and is it real? Figures against SciPy's and published values, through the page."""

from html import unescape

import pytest
from django.urls import reverse
from django_scopes import scope
from scipy import stats

from shop.track.comparing import compare
from shop.track.figures import BY_KEY
from shop.track.groups import BY_REVISION, Group, Question
from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.track_world import RUNS_A, RUNS_B, enter, make_weekend


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def weekend(world):
    return make_weekend(world)


@pytest.fixture
def revisions(world):
    first = make_issued(world)
    return first, make_issued(world, first, "Upper bar up one hole", upper_chassis=4)


@pytest.fixture
def both(world, weekend, revisions):
    """The runs of the published-values table: A on rev 1, B on rev 2, lanes mixed."""
    for revision, runs in zip(revisions, (RUNS_A, RUNS_B), strict=True):
        for i, time in enumerate(runs):
            enter(world, weekend, revision, time_1320=time, lane=("left", "right")[i % 2])
    return weekend


def page(client, member, car, **asked):
    response = signed_in(client, member).get(reverse("track:compare", args=[car.pk]), {"figure": "time_1320", **asked})
    assert response.status_code == 200
    return unescape(response.content.decode())


def test_it_works(client, world, both):
    # Invented runs; Welch interval of the difference 0.009506 to 0.038894, exact permutation p 0.0158730 (SciPy).
    said = page(client, world.owner, world.car)
    assert "rev 2 is quicker to 1320 ft than rev 1 by 0.024 s (0.010 to 0.039), 5 passes against 4." in said
    assert "95 % interval of the difference of the means, by Welch's t." in said
    assert "Permutation test over all 126 arrangements: p = 0.016." in said
    # Medians, best and spread by hand.
    for figure in ("7.508 s", "7.498 s", "0.023 s", "7.485 s", "7.476 s", "0.017 s"):
        assert figure in said


def test_the_same_numbers_straight_from_scipy(client, world, both):
    a, b = [[float(t) for t in runs] for runs in (RUNS_A, RUNS_B)]
    low, high = stats.ttest_ind(a, b, equal_var=False).confidence_interval(0.95)
    p = stats.permutation_test((a, b), lambda x, y: sum(x) / len(x) - sum(y) / len(y), permutation_type="independent",
                               n_resamples=float("inf")).pvalue
    said = page(client, world.owner, world.car)
    assert f"({low:.3f} to {high:.3f})" in said and f"p = {p:.3f}" in said


def test_the_other_way_round(client, world, both, revisions):
    said = page(client, world.owner, world.car, against=f"r{revisions[1].pk}")
    assert "rev 1 is slower to 1320 ft than rev 2 by 0.024 s (0.010 to 0.039), 4 passes against 5." in said


def test_a_reader_may(client, world, both):
    assert "rev 2 is quicker" in page(client, world.reader, world.car)


def test_a_stranger_does_not_find_it(client, world, both):
    url = reverse("track:compare", args=[world.car.pk])
    assert signed_in(client, world.stranger).get(url).status_code == 404


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).get("/cars/987654/passes").status_code == 404


def test_a_malformed_id(client, world):
    assert signed_in(client, world.owner).get("/cars/x/passes").status_code == 404


def test_post_is_refused(client, world):
    assert signed_in(client, world.owner).post(reverse("track:compare", args=[world.car.pk])).status_code == 405


@pytest.mark.parametrize("asked", [
    {"figure": "x"}, {"lane": "x"}, {"by": "x"}, {"against": "x"}, {"weekend": "x"}, {"revision": "-1"},
])
def test_a_question_that_makes_no_sense_is_the_usual_one(client, world, both, asked):
    assert "Which revision" in page(client, world.owner, world.car, **asked)


def test_nothing_to_compare(client, world, weekend):
    assert "No pass of Marigold can be counted" in page(client, world.owner, world.car)
    enter(world, weekend, make_issued(world), time_1320="8.7")
    assert "There is one group only: rev 1, 1 pass." in page(client, world.owner, world.car)


def test_aborted_passes_and_those_without_a_revision_are_left_out_and_said(client, world, both, revisions):
    enter(world, both, revisions[1], time_60="1.3", time_1320="9.9", aborted="on", abort_reason="lifted")
    enter(world, both, None, time_1320="7.5")
    enter(world, both, revisions[0], time_60="1.3")
    said = page(client, world.owner, world.car)
    assert "5 passes against 4" in said
    assert "1 pass was left out: aborted before 1320 ft." in said
    assert "1 pass was left out: no revision." in said
    assert "1 pass was left out: the slip has no 1320 ft." in said


def test_an_aborted_pass_counts_to_the_mark_it_is_good_to(client, world, both, revisions):
    for revision in revisions:
        enter(world, both, revision, time_60="1.3", time_330="3.9", aborted="on", good_to="time_60")
    assert "1 pass against 1" in page(client, world.owner, world.car, figure="time_60")
    assert "2 passes were left out: aborted before 330 ft." in page(client, world.owner, world.car, figure="time_330")


def test_one_pass_against_some_proves_nothing(client, world, weekend, revisions):
    for time in RUNS_A:
        enter(world, weekend, revisions[0], time_1320=time)
    enter(world, weekend, revisions[1], time_1320="7.48")
    said = page(client, world.owner, world.car)
    assert "rev 2 was quicker to 1320 ft than rev 1 by 0.029 s on average, 1 pass against 4: too few" in said
    assert "One pass tells nothing of the car's own scatter" in said


def test_so_few_that_a_shuffle_cannot_show_it_only_seems(client, world, weekend, revisions):
    # Three against three: of 20 orders the plainest has a chance of 0.1, whatever the t test says.
    for revision, runs in zip(revisions, (("7.512", "7.513", "7.514"), ("7.480", "7.481", "7.482")), strict=True):
        for time in runs:
            enter(world, weekend, revision, time_1320=time)
    said = page(client, world.owner, world.car)
    assert "rev 2 seems quicker" in said and "even the plainest order has a chance of 0.10" in said


def test_one_lane_alone(client, world, both):
    assert "3 passes against 2" in page(client, world.owner, world.car, lane="left")


def test_a_lane_for_each_revision_is_a_caution(client, world, weekend, revisions):
    for revision, runs, lane in zip(revisions, (RUNS_A, RUNS_B), ("left", "right"), strict=True):
        for time in runs:
            enter(world, weekend, revision, time_1320=time, lane=lane)
    said = page(client, world.owner, world.car)
    assert "rev 2 ran only in the right lane and rev 1 only in the left: lane and setup cannot be told apart here." in said


def test_corrected_times_count_only_passes_whose_air_is_known(client, world, both, revisions):
    air = {"temperature": "85", "pressure": "28.85", "humidity": "85"}
    for revision, time in zip(revisions, ("7.6", "7.5"), strict=True):
        enter(world, both, revision, time_1320=time, **air)
    said = page(client, world.owner, world.car, times="corrected")
    assert "9 passes were left out: no weather to correct by." in said
    assert f"{7.5 / 1.0693 ** (1 / 3):.3f}"[:4] in said and "SAE J1349" in said


def test_weekends_against_each_other(client, world, both, revisions):
    other = make_weekend(world, "Cedar Flats Raceway")
    for time in RUNS_B:
        enter(world, other, revisions[0], time_1320=time)
    said = page(client, world.owner, world.car, by="weekend")
    assert "Cedar Flats Raceway" in said and "They ran on different weekends: surface and air were not the same." in said
    only = page(client, world.owner, world.car, by="weekend", weekend=other.pk)
    assert "There is one group only" in only


def test_several_comparisons_ask_each_to_be_surer(client, world, both, revisions):
    third = make_issued(world, revisions[1], "Softer", rear_spring_rate="150")
    for time in RUNS_A:
        enter(world, both, third, time_1320=time)
    said = page(client, world.owner, world.car)
    assert "97.5 % interval" in said and "2 comparisons stand on this page" in said


def test_speeds_count_the_other_way_and_in_the_shops_unit(client, world, weekend, revisions):
    slips = (("150.1", "150.3", "150.2"), ("152.0", "152.2", "151.9"))
    for revision, speeds in zip(revisions, slips, strict=True):
        for speed in speeds:
            enter(world, weekend, revision, time_1320="8.9", speed_1320=speed)
    enter(world, weekend, revisions[1], speed_1320="244.8", speed_unit="km/h")
    said = page(client, world.owner, world.car, figure="speed_1320")
    assert "rev 2 seems faster at 1320 ft than rev 1" in said or "rev 2 is faster at 1320 ft than rev 1" in said
    assert "152.20 mph" in said


def test_times_between_marks(client, world, weekend, revisions):
    for revision in revisions:
        enter(world, weekend, revision, time_60="1.300", time_330="3.650")
    assert "2.350 s" in page(client, world.owner, world.car, figure="from_60_to_330")


def test_no_scatter_at_all_is_no_proof(world):
    same = Question(BY_KEY["time_60"], "us", BY_REVISION)
    groups = [Group(key, key, values=[value] * 3) for key, value in (("a", 1.3), ("b", 1.4))]
    with scope(shop=world.shop):
        said = compare(*groups, same)
    assert said.verdict == "too few" and "too few, or too alike" in said.words


def test_eight_against_eight_use_the_bootstrap(client, world, weekend, revisions):
    for revision, base in zip(revisions, (1.320, 1.300), strict=True):
        for i in range(8):
            enter(world, weekend, revision, time_60=f"{base + 0.001 * ((i * 5) % 8):.3f}")
    said = page(client, world.owner, world.car, figure="time_60")
    assert "by bootstrap, BCa" in said and "rev 2 is quicker to 60 ft than rev 1 by 0.020 s" in said
