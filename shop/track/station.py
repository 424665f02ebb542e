"""The stations' readings of several weekends, read at once."""

from __future__ import annotations

from collections.abc import Iterable

from shop.track.models import WeatherReading, Weekend


def station_of(weekends: Iterable[Weekend]) -> dict[int, list[WeatherReading]]:
    """Readings in order of time by weekend id."""
    found: dict[int, list[WeatherReading]] = {}
    for reading in WeatherReading.objects.filter(weekend__in=list(weekends)).order_by("day", "clock"):
        found.setdefault(reading.weekend_id, []).append(reading)
    return found
