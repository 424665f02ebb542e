"""Cancelling a study, taking it up again, and what a dead or overtaken worker leaves behind."""

from datetime import timedelta

import numpy as np
import pytest
from django.urls import reverse
from django.utils import timezone
from django_scopes import scope

from shop.launches.tasks import run
from shop.studies import services, work
from shop.studies.models import Chunk
from tests.shop.setups_world import make_world, signed_in
from tests.shop.study_world import fresh, make_solved_study, make_study


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def small_chunks(monkeypatch):
    monkeypatch.setattr(services, "FIRST_CHUNK", 4)
    monkeypatch.setattr(services, "CHUNK", 3)


def send(client, member, study, name="cancel"):
    return signed_in(client, member).post(reverse(f"studies:{name}", args=[study.pk]))


def solve_one_chunk(world, study):
    with scope(shop=world.shop):
        chunk = services.take_chunk(study)
        columns, refused = work.solve_choices(fresh(study).job.input, chunk.start, chunk.stop)
        assert services.keep_chunk(chunk, work.packed(columns), refused)


def test_it_works_and_keeps_the_rows(client, world, small_chunks):
    study = make_study(world)
    solve_one_chunk(world, study)
    send(client, world.owner, study)
    assert fresh(study).job.state == "cancelled"
    page = client.get(reverse("studies:study", args=[study.pk])).content.decode()
    assert "4 of 10 solved" in page and "Take it up again" in page


def test_taken_up_again_it_goes_on_where_it_stopped(client, world, small_chunks):
    study = make_study(world)
    solve_one_chunk(world, study)
    send(client, world.owner, study)
    send(client, world.mate, study, "go-on")
    run(study.job_id)
    with scope(shop=world.shop):
        assert fresh(study).job.state == "done"
        assert [chunk.attempt for chunk in study.chunks.all()] == [1, 1, 1]
        assert np.isfinite(services.columns_so_far(study)[0]["peak_rear_load"]).all()


def test_a_chunk_whose_worker_died_is_solved_again_and_the_dead_one_writes_nothing(world, small_chunks):
    study = make_study(world)
    with scope(shop=world.shop):
        lost = services.take_chunk(study)
        assert services.take_chunk(study).start == 4
        Chunk.objects.filter(pk=lost.pk).update(lease_until=timezone.now() - timedelta(seconds=1))
        again = services.take_chunk(study)
        assert (again.start, again.attempt) == (0, 2)
        assert not services.keep_chunk(lost, work.packed({"peak_rear_load": np.zeros(4)}), {})
        assert services.columns_so_far(study) == ({}, {})
        assert services.keep_chunk(again, work.packed({"peak_rear_load": np.ones(4)}), {})
        assert services.columns_so_far(study)[0]["peak_rear_load"][:4].tolist() == [1.0] * 4


def test_a_chunk_that_kills_every_worker_ends_the_study_in_words(world, small_chunks):
    study = make_study(world)
    with scope(shop=world.shop):
        Chunk.objects.filter(study=study, start=4).update(attempt=3)
    run(study.job_id)
    after = fresh(study)
    assert after.job.state == "failed" and "the worker died 3 times on choices 5 to 7" in after.job.error


def test_a_part_of_it_refused_leaves_the_rest(client, world):
    axes = [{"key": "hit_peak", "values": [9.80665, 50.0]}, {"key": "upper_chassis", "values": [1, 2]}]
    study = make_solved_study(world, axes=axes)
    with scope(shop=world.shop):
        columns, refused = services.columns_so_far(study)
    assert study.job.state == "done" and refused and all(refused.values())
    solved = np.isfinite(columns["peak_rear_load"])
    assert solved[:2].all() and not any(solved[int(number)] for number in refused)
    page = signed_in(client, world.owner).get(reverse("studies:study", args=[study.pk])).content.decode()
    assert f"{len(refused)} cannot be solved" in page and "Why some cannot be solved" in page


def test_what_is_done_stays_done(client, world):
    study = make_solved_study(world)
    send(client, world.owner, study)
    send(client, world.owner, study, "go-on")
    assert fresh(study).job.state == "done"


@pytest.mark.parametrize("name", ["cancel", "go-on"])
def test_a_reader_may_not(client, world, name):
    assert send(client, world.reader, make_study(world), name).status_code == 403


@pytest.mark.parametrize("name", ["cancel", "go-on"])
def test_a_stranger_does_not_find_it(client, world, name):
    study = make_study(world)
    assert send(client, world.stranger, study, name).status_code == 404
    assert fresh(study).job.state == "waiting"


@pytest.mark.parametrize("name", ["cancel", "go-on"])
def test_get_is_refused(client, world, name):
    assert signed_in(client, world.owner).get(reverse(f"studies:{name}", args=[make_study(world).pk])).status_code == 405


@pytest.mark.parametrize("name", ["cancel", "go-on"])
@pytest.mark.parametrize("pk", ["987654", "x"])
def test_an_id_of_nothing_or_malformed(client, world, pk, name):
    assert signed_in(client, world.owner).post(f"/studies/{pk}/{name}").status_code == 404
