"""How sure the figures are, against moving each measurement by hand; and robustness against the plain definition."""

import math

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.garage.models import Measurement
from shop.launches import bridge
from shop.launches.models import Job
from shop.launches.tasks import run
from shop.setups import car_file
from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.study_world import fresh, make_study


@pytest.fixture
def world(db):
    made = make_world()
    with scope(shop=made.shop):
        Measurement.objects.filter(survey=made.survey, key="cg_height").update(tolerance=0.5)
        Measurement.objects.filter(survey=made.survey, key="rear_spring_rate").update(tolerance=5)
    return made


def send(client, member, revision):
    return signed_in(client, member).post(reverse("studies:spread", args=[revision.pk]))


def solved(client, world, member=None):
    revision = make_issued(world)
    send(client, member or world.owner, revision)
    with scope(shop=world.shop):
        job = Job.objects.get(kind="sensitivity")
        run(job.pk)
        return revision, Job.objects.select_related("result").get(pk=job.pk)


def test_the_part_of_one_measurement_is_half_the_difference_of_two_launches(client, world):
    revision, job = solved(client, world)
    assert job.state == "done", job.error
    parts = {part["key"]: part["part"] for part in job.result.figures["mean_rear_load_500ms"]["parts"]}
    step = 0.5 * 0.0254 / math.sqrt(3)
    ends = []
    with scope(shop=world.shop):
        inputs = car_file.inputs_of(revision)
        for by in (step, -step):
            survey = {**inputs.survey, "cg_height": inputs.survey["cg_height"] + by}
            file = car_file.build_from(car_file.Inputs(survey, inputs.settings, inputs.holes, inputs.linkage), "moved")
            ends.append(bridge.solve(file)["figures"]["mean_rear_load_500ms"])
    assert parts["cg_height"] == pytest.approx(abs(ends[0] - ends[1]) / 2, rel=1e-4)


def test_the_page_names_what_dominates(client, world):
    revision, _ = solved(client, world, world.mate)
    page = signed_in(client, world.reader).get(reverse("studies:spread", args=[revision.pk])).content.decode()
    assert "CG height above ground" in page and "−0" not in page and "Work it out" not in page


def test_few_changes_come_with_how_sure_they_are(client, world):
    base = make_issued(world)
    with scope(shop=world.shop):
        own = bridge.statics_of(base)["anti_squat"]
    edge = {"anti_squat": {"least": own, "most": None}}
    study = make_study(world, base, mode="few", size=1, limits=edge)
    run(study.job_id)
    job = fresh(study).job
    assert job.state == "done", job.error
    with scope(shop=world.shop):
        robust = Job.objects.select_related("result").get(pk=job.pk).result.figures["robust"]
    # The car as it is sits on the edge: about half the cars that the survey cannot tell from it fall outside.
    assert 0.2 < robust["0"] < 0.8
    assert max(robust.values()) > robust["0"]
    page = signed_in(client, world.owner).get(reverse("studies:study", args=[study.pk])).content.decode()
    assert f"{100 * robust['0']:.0f} %" in page


def test_a_reader_may_not_ask(client, world):
    assert send(client, world.reader, make_issued(world)).status_code == 403


def test_a_stranger_does_not_find_it(client, world):
    assert send(client, world.stranger, make_issued(world)).status_code == 404


@pytest.mark.parametrize("path", ["/revisions/987654/spread", "/revisions/x/spread"])
def test_an_id_of_nothing_or_malformed(client, world, path):
    assert signed_in(client, world.owner).get(path).status_code == 404
