"""Several people issue at the same moment, each in a thread with its own connection."""

from concurrent.futures import ThreadPoolExecutor
from threading import Barrier

import pytest
from django.db import connection
from django_scopes import scope

from shop.launches.models import Job
from shop.refusals import Refused
from shop.setups import services
from shop.setups.models import Revision
from tests.shop.setups_world import make_draft, make_world

pytestmark = pytest.mark.django_db(transaction=True)


def at_once(world, *calls):
    """What each call returned or raised, all let go together."""
    gate = Barrier(len(calls))

    def run(call):
        try:
            with scope(shop=world.shop):
                gate.wait(timeout=30)
                return call()
        except Refused as told:
            return told
        finally:
            connection.close()

    with ThreadPoolExecutor(len(calls)) as pool:
        return list(pool.map(run, calls))


def test_each_draft_gets_a_number_of_its_own():
    world = make_world()
    drafts = [make_draft(world, reason=f"Draft {n}") for n in range(4)]
    issued = at_once(world, *[lambda draft=draft: services.issue(world.owner, draft, draft.version) for draft in drafts])
    assert sorted(revision.number for revision in issued) == [1, 2, 3, 4]
    with scope(shop=world.shop):
        assert Job.objects.count() == 4


def test_of_two_who_knew_the_same_newest_the_second_is_told():
    world = make_world()
    drafts = [make_draft(world, reason=f"Draft {n}") for n in range(2)]
    answers = at_once(world, *[lambda draft=draft: services.issue(world.mate, draft, draft.version, 0) for draft in drafts])
    told = [answer for answer in answers if isinstance(answer, Refused)]
    assert len(told) == 1
    assert f"{world.mate.user} issued rev 1 of Marigold 218" in str(told[0])
    with scope(shop=world.shop):
        assert sorted(Revision.objects.values_list("number", flat=True), key=lambda n: n or 0) == [None, 1]
        assert Job.objects.count() == 1


def test_one_draft_is_issued_once():
    world = make_world()
    draft = make_draft(world)
    issue = lambda: services.issue(world.owner, draft, draft.version)  # noqa: E731
    answers = at_once(world, issue, issue, issue)
    assert sum(isinstance(answer, Revision) for answer in answers) == 1
    assert sum("has issued this draft as rev 1" in str(answer) for answer in answers) == 2
    with scope(shop=world.shop):
        assert Job.objects.count() == 1
