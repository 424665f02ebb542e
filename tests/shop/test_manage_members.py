"""Who works in a shop: added, promoted, removed; a shop keeps an owner; a new member sets a password once."""

import re

import pytest
from django.urls import reverse
from django_scopes import scope

from shop.people.models import Membership, User
from shop.people.permissions import MANAGE, PERMISSIONS, ROLES, may
from tests.shop.setups_world import make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


NEW = {"email": "Quinn@Example.test", "name": "Quinn Abara", "role": "technician"}


def test_a_new_member_gets_an_address_that_sets_a_password_once(client, world):
    page = signed_in(client, world.owner).post(reverse("people:members"), NEW).content.decode()
    address = re.search(r"http://testserver(/welcome/[^<]+)", page)[1]
    user = User.objects.get(email="quinn@example.test")
    assert not user.has_usable_password() or not user.check_password("")
    client.logout()
    form = client.get(address, follow=True)
    password = {"new_password1": "brisk-lantern-44", "new_password2": "brisk-lantern-44"}
    sent = client.post(form.redirect_chain[-1][0], password)
    assert sent.status_code == 302
    user.refresh_from_db()
    assert user.check_password("brisk-lantern-44")
    assert "This address has been used" in client.get(address, follow=True).content.decode()


def test_somebody_known_from_another_shop_is_added_without_an_address(client, world):
    world.stranger.user.set_password("x-bright-mornings")
    world.stranger.user.save()
    data = NEW | {"email": world.stranger.user.email}
    assert signed_in(client, world.owner).post(reverse("people:members"), data).status_code == 302
    assert Membership.objects.filter(user=world.stranger.user).count() == 2


def test_nobody_is_added_twice(client, world):
    answer = signed_in(client, world.owner).post(reverse("people:members"), NEW | {"email": world.mate.user.email})
    assert answer.status_code == 422
    assert "already works in" in answer.content.decode()


def test_a_shop_keeps_an_owner(client, world):
    client = signed_in(client, world.owner)
    client.post(reverse("people:role", args=[world.owner.pk]), {"role": "reader"})
    client.post(reverse("people:remove", args=[world.owner.pk]))
    world.owner.refresh_from_db()
    assert world.owner.role == "owner"
    client.post(reverse("people:role", args=[world.mate.pk]), {"role": "owner"})
    client.post(reverse("people:role", args=[world.owner.pk]), {"role": "reader"})
    world.owner.refresh_from_db()
    assert world.owner.role == "reader"


def test_a_removed_member_is_out_at_once(client, world):
    signed_in(client, world.owner).post(reverse("people:remove", args=[world.mate.pk]))
    answer = signed_in(client, world.mate).get(reverse("garage:cars"))
    assert answer.status_code == 403
    assert "do not work in any shop" in answer.content.decode()


@pytest.mark.parametrize("role", ["mate", "reader"])
def test_only_the_owner_manages(client, world, role):
    client = signed_in(client, getattr(world, role))
    assert client.get(reverse("people:members")).status_code == 200
    assert client.post(reverse("people:members"), NEW).status_code == 403
    assert client.post(reverse("people:role", args=[world.owner.pk]), {"role": "reader"}).status_code == 403
    assert client.post(reverse("people:shop"), {"name": "Mine now", "units": "us", "paper": "a4"}).status_code == 403


def test_a_stranger_reaches_no_member_of_this_shop(client, world):
    client = signed_in(client, world.stranger)
    assert client.post(reverse("people:role", args=[world.mate.pk]), {"role": "owner"}).status_code == 404
    assert client.post(reverse("people:remove", args=[world.mate.pk])).status_code == 404
    assert client.post(reverse("people:choose-shop", args=[world.shop.pk])).status_code == 404


@pytest.mark.parametrize("name", ["people:role", "people:remove"])
def test_a_change_is_a_button(client, world, name):
    assert signed_in(client, world.owner).get(reverse(name, args=[world.mate.pk])).status_code == 405


def test_the_shop_s_units_turn_every_page(client, world):
    client = signed_in(client, world.owner)
    client.post(reverse("people:shop"), {"name": world.shop.name, "units": "metric", "paper": "a4", "address": ""})
    assert "kg" in client.get(reverse("garage:survey", args=[world.survey.pk])).content.decode()


def test_the_log_tells_in_words_and_only_of_this_shop(client, world):
    signed_in(client, world.owner).post(reverse("people:members"), NEW)
    page = client.get(reverse("people:log"), {"q": "quinn"}).content.decode()
    assert "added Quinn Abara (technician)" in page
    assert "Quinn" not in signed_in(client, world.stranger).get(reverse("people:log")).content.decode()


def test_a_key_is_shown_once_and_revoked(client, world):
    client = signed_in(client, world.mate)
    page = client.post(reverse("people:make-token"), {"name": "bench tablet"}).content.decode()
    key = re.search(r"<code>([\w-]{40,})</code>", page)[1]
    assert key not in client.get(reverse("people:shop")).content.decode()
    with scope(shop=world.shop):
        token = world.mate.tokens.get()
    assert signed_in(client, world.owner).post(reverse("people:revoke-token", args=[token.pk])).status_code == 404
    signed_in(client, world.mate).post(reverse("people:revoke-token", args=[token.pk]))
    with scope(shop=world.shop):
        assert not world.mate.tokens.exists()


def test_every_permission_is_somebody_s_and_readers_only_read():
    for permission in PERMISSIONS:
        assert may("owner", permission)
    assert [permission for permission in PERMISSIONS if may("reader", permission)] == ["read"]
    assert not may("technician", MANAGE)
    assert not may("visitor", "read")
    assert set(ROLES) == {"owner", "technician", "reader"}
    with pytest.raises(ValueError, match="no permission"):
        may("owner", "fly")
