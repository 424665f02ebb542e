"""Guessing a password: after eight wrong ones, that account is closed to that address for a while, and to no other."""

from __future__ import annotations

import pytest
from django.conf import settings
from django.test import Client
from django.urls import reverse

from shop.people.models import Membership, Shop, User

pytestmark = pytest.mark.django_db


@pytest.fixture
def owner() -> User:
    user = User.objects.create_user("owner@bay.example", "Owner", "right-and-long")
    Membership.objects.create(shop=Shop.objects.create(name="Bay"), user=user, role="owner")
    return user


def attempt(password: str, email: str = "owner@bay.example", address: str = "127.0.0.1"):
    data = {"username": email, "password": password}
    return Client(REMOTE_ADDR=address).post(reverse("people:sign-in"), data)


def test_the_right_password_opens(owner: User) -> None:
    assert attempt("right-and-long").status_code == 302


def test_a_wrong_one_is_told_so_beside_what_was_typed(owner: User) -> None:
    answer = attempt("wrong")
    assert answer.status_code == 200
    assert b"owner@bay.example" in answer.content
    assert b"wrong" not in answer.content.replace(b"wrong too many", b"")


def test_after_eight_wrong_ones_even_the_right_one_waits(owner: User) -> None:
    statuses = [attempt(f"guess {number}").status_code for number in range(settings.AXES_FAILURE_LIMIT)]
    assert statuses[0] == 200
    assert statuses[-1] == 429
    answer = attempt("right-and-long")
    assert answer.status_code == 429
    assert b"Try again in 15 minutes" in answer.content


def test_elsewhere_and_for_others_signing_in_stays_open(owner: User) -> None:
    for number in range(settings.AXES_FAILURE_LIMIT):
        attempt(f"guess {number}")
    assert attempt("right-and-long", address="127.0.0.2").status_code == 302
    User.objects.create_user("other@bay.example", "Other", "right-and-long")
    assert attempt("right-and-long", email="other@bay.example").status_code == 302


def test_a_right_one_forgets_the_wrong_ones_before_it(owner: User) -> None:
    for number in range(settings.AXES_FAILURE_LIMIT - 1):
        attempt(f"guess {number}")
    assert attempt("right-and-long").status_code == 302
    assert attempt("one more").status_code == 200


def test_an_account_that_is_not_there_looks_the_same(owner: User) -> None:
    there, not_there = attempt("wrong"), attempt("wrong", email="nobody@bay.example")
    assert there.status_code == not_there.status_code == 200
    assert there.content.count(b"fault") == not_there.content.count(b"fault")
