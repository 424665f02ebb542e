"""Issuing a revision: it gets the car's next number, its car file is frozen, its launch is queued."""

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.launches.models import Job
from shop.people.models import LogEntry
from shop.refusals import Refused, Stale
from shop.setups import services
from shop.setups.choices import Choices
from shop.setups.models import Revision
from tests.shop.setups_world import make_draft, make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def send(client, world, draft, **typed):
    url = reverse("setups:edit", args=[draft.pk])
    always = {"reason": "Upper bar up one: it spun", "version": draft.version, "newest": 0, "do": "issue"}
    return client.post(url, world.form(**{**always, **typed}))


def test_it_works(client, world):
    draft = make_draft(world)
    response = send(signed_in(client, world.owner), world, draft, upper_chassis=2)
    assert response.status_code == 302
    with scope(shop=world.shop):
        issued = Revision.objects.get(pk=draft.pk)
        assert (issued.number, issued.author) == (1, world.owner.user)
        assert issued.holes["upper_chassis"] == 2
        assert issued.car_file["format"] == "launch-ledger/car"
        assert issued.car_file["name"] == "Marigold 218, rev 1"
        assert issued.issued_at is not None
        job = Job.objects.get(revision=issued)
        assert (job.kind, job.input["mass"]) == ("launch", pytest.approx(issued.car_file["mass"]))
        entry = LogEntry.objects.filter(action="issued").get()
        assert (entry.object_id, entry.user) == (issued.pk, world.owner.user)
    assert response.url == reverse("setups:revision", args=[draft.pk])


def test_in_one_step_from_a_new_form(client, world):
    url = reverse("setups:new", args=[world.car.pk])
    response = signed_in(client, world.owner).post(url, world.form(reason="As it came in", newest=0, do="issue"))
    with scope(shop=world.shop):
        issued = Revision.objects.get()
    assert issued.number == 1
    assert response.url == reverse("setups:revision", args=[issued.pk])


def test_numbers_follow_each_other(world):
    first = make_issued(world)
    second = make_issued(world, first, "Second")
    assert (first.number, second.number, second.parent_id) == (1, 2, first.pk)


def test_a_team_mate_may_and_stands_for_it(client, world):
    draft = make_draft(world)
    send(signed_in(client, world.mate), world, draft)
    with scope(shop=world.shop):
        assert Revision.objects.get(pk=draft.pk).author == world.mate.user


def test_a_reader_may_not(client, world):
    draft = make_draft(world)
    assert send(signed_in(client, world.reader), world, draft).status_code == 403
    with scope(shop=world.shop):
        assert not Revision.objects.get(pk=draft.pk).issued


def test_a_stranger_does_not_find_it(client, world):
    draft = make_draft(world)
    assert send(signed_in(client, world.stranger), world, draft).status_code == 404


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).post("/revisions/987654/edit", {"do": "issue"}).status_code == 404


def test_a_malformed_id(client, world):
    assert signed_in(client, world.owner).post("/revisions/seven/edit", {"do": "issue"}).status_code == 404


def test_it_must_say_why(client, world):
    draft = make_draft(world)
    response = send(signed_in(client, world.owner), world, draft, reason="  ", notes="kept", rear_pressure="12 1/4")
    page = response.content.decode()
    assert response.status_code == 422
    assert "say what this revision changes, and why" in page
    assert "12 1/4" in page and "kept" in page
    with scope(shop=world.shop):
        assert not Revision.objects.get(pk=draft.pk).issued


def test_what_cannot_be_solved_is_not_issued(client, world):
    with scope(shop=world.shop):
        upper = world.survey.brackets.get(place="upper_chassis")
        lower = world.survey.brackets.get(place="lower_chassis")
        upper.holes = lower.holes
        upper.save()
        housing = world.survey.brackets.get(place="upper_housing")
        housing.holes = world.survey.brackets.get(place="lower_housing").holes
        housing.save()
    draft = make_draft(world)
    response = send(signed_in(client, world.owner), world, draft)
    assert response.status_code == 422
    with scope(shop=world.shop):
        assert not Revision.objects.get(pk=draft.pk).issued
        assert not Job.objects.exists()


def test_somebody_issued_meanwhile(client, world):
    """The second person is told who issued what and why; the draft is kept and can be issued next."""
    draft = make_draft(world)
    make_issued(world, reason="Softer front springs")
    client = signed_in(client, world.mate)
    response = send(client, world, draft, rear_pressure="12 1/4")
    assert response.url == reverse("setups:edit", args=[draft.pk])
    page = client.get(response.url).content.decode()
    assert "issued rev 1" in page and "Softer front springs" in page and "12 1/4" in page
    with scope(shop=world.shop):
        kept = Revision.objects.get(pk=draft.pk)
        assert not kept.issued
        assert kept.settings["rear_pressure"]["typed"] == "12 1/4"
        again = services.issue(world.mate, kept, kept.version, newest_seen=1)
    assert again.number == 2


def test_the_same_draft_twice(world):
    draft = make_draft(world)
    with scope(shop=world.shop):
        services.issue(world.owner, draft, draft.version)
        with pytest.raises(Refused, match="has issued this draft as rev 1"):
            services.issue(world.mate, draft, draft.version)
        assert Revision.objects.filter(number__isnull=False).count() == 1
        assert Job.objects.count() == 1


def test_a_draft_saved_meanwhile_is_not_issued_as_it_was(world):
    draft = make_draft(world)
    with scope(shop=world.shop):
        services.save_draft(world.mate, draft, draft.version, Choices.of(draft))
        with pytest.raises(Stale):
            services.issue(world.owner, draft, draft.version)


def test_a_survey_changed_meanwhile_is_noticed(world):
    draft = make_draft(world)
    with scope(shop=world.shop):
        type(world.survey).objects.filter(pk=world.survey.pk).update(version=world.survey.version + 1)
        with pytest.raises(Refused, match="was changed while this was being issued"):
            services.issue(world.owner, draft, draft.version)
        assert not Job.objects.exists()
