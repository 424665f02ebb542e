"""A launch as data: the charts' JSON, the CSV and the whole run, against what is stored."""

import csv
import io
import json

import pytest
from django.urls import reverse

from shop.launches import tasks
from shop.launches.curves import settled_value
from shop.units import INCH, POUND_FORCE
from tests.shop.launch_world import fresh, make_hopeless, make_job, make_solved, set_row
from tests.shop.setups_world import make_world, signed_in

NAMES = ("histories", "csv", "json")


@pytest.fixture
def world(db):
    return make_world()


def url(job, name):
    return reverse(f"launches:{name}", args=[job.pk])


def get(client, world, job, name, query=""):
    response = signed_in(client, world.owner).get(url(job, name) + query)
    assert response.status_code == 200
    return response


def test_the_charts_get_the_stored_curves_in_the_shops_units(client, world):
    job = make_solved(world)
    data = get(client, world, job, "histories").json()
    stored = job.result.histories
    assert data["time"] == stored["t"] and data["unit"] == "s" and data["why_empty"] is None
    load = data["channels"]["rear_load"]
    assert load["unit"] == "lbf"
    assert load["values"] == pytest.approx([value / POUND_FORCE for value in stored["rear_load"]], rel=1e-6)
    rise = data["channels"]["ride_height_front"]
    assert rise["unit"] == "in"
    assert rise["values"] == pytest.approx([value / INCH for value in stored["ride_height_front"]], rel=1e-6, abs=1e-9)
    assert data["channels"]["anti_squat"]["values"][0] == pytest.approx(stored["anti_squat"][0], rel=1e-6)
    assert data["channels"]["anti_squat"]["unit"] == "%"
    assert [event["time"] for event in data["events"]] == [event["time"] for event in job.result.events]
    assert "compare" not in load and data["labels"] == {"run": "rev 1"}
    assert all(len(channel["values"]) == len(data["time"]) for channel in data["channels"].values())


def test_another_launch_is_laid_over_it(client, world):
    first = make_solved(world)
    second = make_solved(world, first.revision, reason="Softer", rear_spring_rate="120")
    data = get(client, world, second, "histories", f"?compare={first.pk}").json()
    load = data["channels"]["rear_load"]
    assert load["compare"] == pytest.approx([value / POUND_FORCE for value in first.result.histories["rear_load"]], rel=1e-6)
    assert load["compare"] != load["values"]
    assert data["labels"] == {"run": "rev 2", "compare": "rev 1"}


def test_a_launch_with_other_times_is_laid_over_at_these(client, world):
    first = make_solved(world)
    second = make_solved(world, first.revision, reason="Softer", rear_spring_rate="120")
    histories = {"t": [0.0, 0.01, 0.02], "rear_load": [0.0, 100.0, 200.0]}
    first.result.histories = histories
    first.result.save()
    data = get(client, world, second, "histories", f"?compare={first.pk}").json()
    at = data["time"].index(pytest.approx(0.015))
    assert data["channels"]["rear_load"]["compare"][at] == pytest.approx(150.0 / POUND_FORCE)
    assert data["channels"]["rear_load"]["compare"][-1] is None


@pytest.mark.parametrize("state", ["waiting", "running", "cancelled"])
def test_without_an_answer_it_says_why(client, world, state):
    job = make_job(world)
    set_row(job, state=state, lease_until=job.created_at)
    data = get(client, world, job, "histories").json()
    assert data["channels"] == {} and data["time"] == [] and "curves" in data["why_empty"]


def test_a_failed_one_says_what_failed(client, world):
    job = make_hopeless(world)
    tasks.run(job.pk)
    assert fresh(job).error in get(client, world, job, "histories").json()["why_empty"]


def test_a_curve_that_comes_to_rest_has_a_settled_value_and_one_that_swings_has_none():
    time = [0.01 * step for step in range(101)]
    assert settled_value(time, [1.0 - 0.5 ** (10 * at) for at in time]) == pytest.approx(1.0, abs=0.01)
    assert settled_value(time, list(time)) is None
    assert settled_value(time, [5.0] * 101) is None  # it never moved
    assert settled_value(time, [None, *time[1:]]) is None


def test_the_table_in_si_is_what_is_stored_digit_by_digit(client, world):
    job = make_solved(world)
    response = get(client, world, job, "csv")
    assert response["Content-Type"].startswith("text/csv") and "marigold-218-rev-1" in response["Content-Disposition"]
    head, *lines = csv.reader(io.StringIO(response.content.decode()))
    at = head.index("rear_load [N]")
    assert head[0] == "t [s]"
    assert [float(line[at]) for line in lines] == job.result.histories["rear_load"]
    assert [float(line[0]) for line in lines] == job.result.histories["t"]


def test_the_table_in_the_shops_units(client, world):
    job = make_solved(world)
    head, *lines = csv.reader(io.StringIO(get(client, world, job, "csv", "?units=shop").content.decode()))
    at = head.index("Rear tyres [lbf]")
    stored = [value / POUND_FORCE for value in job.result.histories["rear_load"]]
    assert [float(line[at]) for line in lines] == pytest.approx(stored, rel=1e-6)


def test_the_whole_run_in_si_is_what_is_stored(client, world):
    job = make_solved(world)
    data = json.loads(get(client, world, job, "json").content)
    for name in ("statics", "modes", "figures", "events", "histories"):
        assert data[name] == getattr(job.result, name)
    assert data["units"] == "SI" and data["input_hash"] == job.input_hash and data["solver_version"] == job.solver_version


def test_the_whole_run_in_the_shops_units(client, world):
    job = make_solved(world)
    data = json.loads(get(client, world, job, "json", "?units=shop").content)
    assert data["units"] == "us" and data["channels"]["rear_load"]["unit"] == "lbf"


@pytest.mark.parametrize("query", ["?units=furlongs", "?units="])
@pytest.mark.parametrize("name", ["csv", "json"])
def test_units_there_are_none_of(client, world, name, query):
    assert signed_in(client, world.owner).get(url(make_solved(world), name) + query).status_code == 404


@pytest.mark.parametrize("name", ["csv", "json"])
def test_what_is_not_solved_cannot_be_taken_away(client, world, name):
    assert signed_in(client, world.owner).get(url(make_job(world), name)).status_code == 404


def test_strangers_launches_are_not_laid_over(client, world):
    other = make_world("Night Heron")
    theirs, mine = make_solved(other), make_solved(world)
    for asked in (theirs.pk, 987654, "seven", "-1", "9" * 30, "²"):
        assert signed_in(client, world.owner).get(f"{url(mine, 'histories')}?compare={asked}").status_code == 404


@pytest.mark.parametrize("name", NAMES)
def test_a_reader_may_and_a_stranger_does_not_find_it(client, world, name):
    job = make_solved(world)
    assert signed_in(client, world.reader).get(url(job, name)).status_code == 200
    assert signed_in(client, world.stranger).get(url(job, name)).status_code == 404


@pytest.mark.parametrize("name", NAMES)
def test_post_is_refused(client, world, name):
    assert signed_in(client, world.owner).post(url(make_job(world), name)).status_code == 405
