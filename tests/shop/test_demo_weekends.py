"""The demo's weekends: every page of the track has something to say."""

from html import unescape

from django.urls import reverse
from django_scopes import scope

from shop.demo.load import load_demo
from shop.track.models import Pass, Weekend
from tests.shop.setups_world import signed_in


def test_the_pages_of_the_demo_weekends(client, db):
    owner = load_demo()
    with scope(shop=owner.shop):
        car = Pass.objects.select_related("car").first().car
        assert (Weekend.objects.count(), Pass.objects.count()) == (2, 12)
        late = Weekend.objects.first()
    client = signed_in(client, owner)
    monday = unescape(client.get(reverse("track:monday", args=[car.pk])).content.decode())
    assert "8 passes, 1 aborted" in monday and "Density altitude" in monday
    compared = unescape(client.get(reverse("track:compare", args=[car.pk]), {"weekend": late.pk}).content.decode())
    assert "quicker to 60 ft than rev 1 by 0.0" in compared and "1 pass was left out: aborted before 60 ft." in compared
