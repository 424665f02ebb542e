"""What one change does: each bar is the difference of two launches solved by themselves."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.launches import bridge
from shop.launches.tasks import run
from shop.studies.models import Study
from shop.studies.services import columns_so_far
from shop.studies.steps import charts_of
from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.study_world import fresh, make_solved_study

LBF = 4.4482216152605


@pytest.fixture
def world(db):
    return make_world()


def asked(client, world, member, revision):
    response = signed_in(client, member).post(reverse("studies:steps", args=[revision.pk]))
    with scope(shop=world.shop):
        return response, Study.objects.get()


def test_it_works_and_agrees_with_two_launches(client, world):
    revision = make_issued(world)
    response, study = asked(client, world, world.mate, revision)
    assert response.url == reverse("studies:changes", args=[study.pk])
    run(study.job_id)
    with scope(shop=world.shop):
        charts = {chart.measure.key: chart for chart in charts_of(fresh(study), world.shop.units)}
        spring = str(revision.settings["rear_spring_rate"]["value"] + 25)
        one = bridge.solve(revision.car_file)["figures"]["mean_rear_load_100ms"]
        stiffer = make_issued(world, revision, rear_spring_rate=spring)
        other = bridge.solve(stiffer.car_file)["figures"]["mean_rear_load_100ms"]
    chart = charts["mean_rear_load_100ms"]
    step = (other - one) / LBF
    words = [f"{bar.change} {bar.text}" for bar in chart.bars] + chart.smaller
    spoken = next(text for text in words if text.startswith(f"rear springs, each {float(spring):g}"))
    assert spoken.endswith(f"{step:+,.0f} lbf".replace("-", "−")) or abs(step) < 0.5
    page = client.get(response.url).content.decode()
    assert "What does one change do to Marigold?" in page and "lower chassis hole" in page


def test_bars_run_from_the_largest_down_right_for_more_left_for_less(client, world):
    _, study = asked(client, world, world.owner, make_issued(world))
    run(study.job_id)
    with scope(shop=world.shop):
        charts = charts_of(fresh(study), world.shop.units)
        columns, _ = columns_so_far(study)
    assert len(charts) > 15
    for chart in charts:
        assert [bar.width for bar in chart.bars] == sorted((bar.width for bar in chart.bars), reverse=True)
        for bar in chart.bars:
            grows = columns[chart.measure.key][bar.number] > columns[chart.measure.key][0]
            assert bar.more == grows and bar.x == (0.0 if grows else -bar.width) and bar.text[0] == ("+" if grows else "−")


def test_every_kind_of_step_is_tried(client, world):
    _, study = asked(client, world, world.owner, make_issued(world))
    keys = {axis["key"] for axis in study.plan["axes"]}
    assert {"lower_chassis", "rear_spring_rate", "rear_shock_rate"} <= keys
    assert {"ride_height_rear", "ballast_weight", "rear_pressure"} <= keys


def test_another_kind_of_study_has_no_such_page(client, world):
    study = make_solved_study(world)
    assert signed_in(client, world.owner).get(reverse("studies:changes", args=[study.pk])).status_code == 404


def test_a_stranger_does_not_find_it(client, world):
    _, study = asked(client, world, world.owner, make_issued(world))
    assert signed_in(client, world.stranger).get(reverse("studies:changes", args=[study.pk])).status_code == 404


@pytest.mark.parametrize("path", ["/studies/987654/changes", "/studies/x/changes"])
def test_an_id_of_nothing_or_malformed(client, world, path):
    assert signed_in(client, world.owner).get(path).status_code == 404
