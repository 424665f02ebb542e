"""Every address the application answers, walked as a stranger, as nobody, as a reader, and with things nobody should send.

The addresses come from the application's own list, so a new one is walked without being named here; one whose ids this
file cannot fill fails until it can.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

import pytest
from django.conf import settings
from django.shortcuts import resolve_url
from django.test import Client
from django.urls import URLPattern, URLResolver, get_resolver, reverse
from django_scopes import scope

from shop.people.models import AccessToken
from shop.sheets.services import share
from tests.shop.setups_world import World, make_draft, make_issued, make_world, signed_in
from tests.shop.study_world import make_study
from tests.shop.track_world import enter, make_weekend

# Open without a member by design: the way in, the health check, a sheet shared by its secret, and the API's schema.
OPEN = {"healthz", "people:sign-in", "people:sign-out", "people:welcome", "sheets:shared", "garage:home"}
# A reader may send these: they only read, or concern nobody but the reader.
READERS_OWN = {
    "people:sign-in",
    "people:sign-out",
    "people:change-password",
    "people:choose-shop",
    "people:make-token",
    "people:revoke-token",
    "studies:rank",
    "garage:home",
    "sheets:shared",
    "people:welcome",
    # Forms that are only looked at: what would it be, how would it launch, how many would there be.
    "setups:preview",
    "setups:try",
    "studies:count",
    "garage:scaling",
}
ODD = "?page=x&page=-1&a=&b=99999999999999999999&from=x&q=%00&survey=x&car=%F0%9F%8F%81&parent=-1&sort=nope"
ROWS_ASKED_FOR = ("page", "a", "b", "from", "survey", "parent", "car", "customer", "weekend", "revision", "compare")
HUGE = "?" + "&".join(f"{word}={10**20 - 1}" for word in ROWS_ASKED_FOR)
FIELDS = (
    "name q email reason version survey parent car customer revision role taken_on wheelbase wheelbase_unit "
    "lower_chassis_count lower_chassis_lines days place starts_on units"
).split()


class Row:
    """An address with the names of its parts."""

    def __init__(self, name: str, words: tuple[str, ...], route: str) -> None:
        self.name, self.words, self.route = name, words, route

    def at(self, ids: dict[str, Any]) -> str:
        kind = self.route.removeprefix("api/v1/").lstrip("^").split("/")[0]
        kind = "/".join(self.route.split("/")[:2]) if kind in ("shop", "sheets") else kind
        given = {"number": 1, "car_id": ids["cars"], "pk": ids.get(kind, ids["cars"]), "uidb64": "MQ", "token": "a-b", "key": "spring"}
        if "weekend_id" in self.words:
            given["weekend_id"] = ids["weekends"]
        return reverse(self.name, kwargs={word: given[word] for word in self.words})


def rows(patterns: Any = None, space: str = "", before: str = "") -> Iterator[Row]:
    for pattern in get_resolver().url_patterns if patterns is None else patterns:
        route = before + str(pattern.pattern)
        if isinstance(pattern, URLResolver):
            inner = f"{space}{pattern.namespace}:" if pattern.namespace else space
            yield from rows(pattern.url_patterns, inner, route)
        elif isinstance(pattern, URLPattern) and "format" not in pattern.pattern.regex.groupindex:
            name = space + pattern.name if pattern.name else ""
            yield Row(name, tuple(pattern.pattern.regex.groupindex), route)


NAMED = [row for row in rows() if row.name]
WITH_IDS = [row for row in NAMED if set(row.words) & {"pk", "car_id", "weekend_id"}]


@pytest.fixture
def world(db: None) -> World:
    return make_world()


@pytest.fixture
def ids(world: World) -> dict[str, int]:
    """One row of each kind in the first shop, by the word its address begins with."""
    issued = make_issued(world)
    make_draft(world, issued, reason="Next")
    study, weekend = make_study(world, issued), make_weekend(world)
    run = enter(world, weekend, issued, time_60="1.05")
    with scope(shop=world.shop):
        link, _token = share(world.owner, issued, 7)
        token, _key = AccessToken.issue(world.owner, "walk")
        job = study.job
    return {
        "cars": world.car.pk,
        "surveys": world.survey.pk,
        "customers": world.car.customer_id,
        "revisions": issued.pk,
        "launches": job.pk,
        "studies": study.pk,
        "weekends": weekend.pk,
        "passes": run.pk,
        "shop/members": world.mate.pk,
        "shop/keys": token.pk,
        "shop/choose": world.shop.pk,
        "sheets/links": link.pk,
    }


def test_a_strangers_row_is_not_found(client: Client, world: World, ids: dict[str, int]) -> None:
    signed_in(client, world.stranger)
    wrong = []
    for row in WITH_IDS:
        for send in (client.get, client.post):
            answer = send(row.at(ids))
            if answer.status_code not in (404, 405):
                wrong.append((row.name, answer.status_code))
    assert not wrong


def test_nobody_gets_in(client: Client, world: World, ids: dict[str, int]) -> None:
    wrong = []
    for row in NAMED:
        if row.name in OPEN or row.name == "schema" or row.name.endswith(":schema"):
            continue
        for send in (client.get, client.post):
            answer = send(row.at(ids))
            led = answer.status_code == 302 and answer["Location"].startswith(resolve_url(settings.LOGIN_URL))
            if not led and answer.status_code not in (401, 403, 405):
                wrong.append((row.name, answer.status_code))
    assert not wrong


def test_a_reader_writes_nothing(client: Client, world: World, ids: dict[str, int]) -> None:
    signed_in(client, world.reader)
    wrong = []
    for row in NAMED:
        if row.name not in READERS_OWN:
            answer = client.post(row.at(ids))
            if answer.status_code not in (403, 405):
                wrong.append((row.name, answer.status_code))
    assert not wrong


def test_odd_words_break_no_page(client: Client, world: World, ids: dict[str, int]) -> None:
    signed_in(client, world.owner)
    client.raise_request_exception = False
    broken = []
    for row in NAMED:
        if row.name == "people:sign-out":
            continue
        far = row.at(dict.fromkeys(ids, 10**30))
        for address in (row.at(ids), row.at(ids) + ODD, row.at(ids) + HUGE, far):
            answer = client.get(address)
            if answer.status_code >= 500:
                broken.append((row.name, address, answer.status_code))
    assert not broken


def test_odd_forms_break_no_page(client: Client, world: World, ids: dict[str, int]) -> None:
    """Nothing sent, and every field that a page may have with a NUL, a long word or a huge number in it."""
    signed_in(client, world.owner)
    client.raise_request_exception = False
    broken = []
    for value in ("", "a\0b", "9" * 400, "🏁" * 3000, "=cmd|' /C calc'!A0", "<script>alert(1)</script>", "NaN"):
        for row in NAMED:
            if row.name in ("people:sign-out", "people:change-password", "people:sign-in"):
                continue
            answer = client.post(row.at(ids), dict.fromkeys(FIELDS, value))
            if answer.status_code >= 500:
                broken.append((row.name, value[:8], answer.status_code))
    assert not broken


def test_sign_in_leads_nowhere_else(client: Client, world: World) -> None:
    world.owner.user.set_password("correct horse 17")
    world.owner.user.save()
    typed = {"username": world.owner.user.email, "password": "correct horse 17"}
    for away in ("https://elsewhere.example/", "//elsewhere.example/", "/\\elsewhere.example", "javascript:alert(1)"):
        client.logout()
        answer = client.post(reverse("people:sign-in"), {**typed, "next": away})
        assert answer.status_code == 302
        assert "elsewhere" not in answer["Location"] and "javascript" not in answer["Location"]


def test_a_session_from_before_signing_in_is_not_kept(client: Client, world: World) -> None:
    world.owner.user.set_password("correct horse 17")
    world.owner.user.save()
    session = client.session
    session["planted"] = "yes"
    session.save()
    client.cookies[settings.SESSION_COOKIE_NAME] = session.session_key
    client.post(reverse("people:sign-in"), {"username": world.owner.user.email, "password": "correct horse 17"})
    assert client.session.session_key != session.session_key


def test_a_form_from_elsewhere_is_refused(world: World) -> None:
    strict = Client(enforce_csrf_checks=True)
    signed_in(strict, world.owner)
    assert strict.post(reverse("garage:customer-new"), {"name": "Forged"}).status_code == 403
