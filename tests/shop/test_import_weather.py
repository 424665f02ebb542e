"""A weather station's file, matched to the passes by time."""

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.urls import reverse
from django_scopes import scope

from shop.track.models import WeatherReading
from shop.track.weather import air_of
from tests.shop.setups_world import make_world, signed_in
from tests.shop.test_import_passes import confirm as confirm_at
from tests.shop.test_import_passes import fates, words
from tests.shop.track_world import enter, make_weekend

FILE = (
    "day,time,temperature (C),pressure (hPa),humidity (%)\r\n"
    "2026-05-09,14:00,20,1013.25,50\r\n"
    "2026-05-09,14:30,30,980,60\r\n"
)


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def weekend(world):
    return make_weekend(world)


def url(weekend):
    return reverse("track:weather", args=[weekend.pk])


def upload(client, weekend, text, **more):
    return client.post(url(weekend), {"file": SimpleUploadedFile("station.csv", text.encode()), **more})


def confirm(client, weekend, preview, monkeypatch, **more):
    # The passes' confirm, sent to this page.
    monkeypatch.setattr("tests.shop.test_import_passes.reverse", lambda name, args: url(weekend))
    return confirm_at(client, weekend, preview)


def readings(world):
    with scope(shop=world.shop):
        return list(WeatherReading.objects.select_related("weekend"))


def air(world, run):
    with scope(shop=world.shop):
        return air_of(run, list(run.weekend.weather.all()))


def test_it_works(client, world, weekend, monkeypatch):
    client = signed_in(client, world.owner)
    preview = upload(client, weekend, FILE)
    assert fates(preview) == [("new", "2"), ("new", "3")] and readings(world) == []
    assert confirm(client, weekend, preview, monkeypatch).status_code == 302
    first, second = readings(world)
    assert (first.temperature, first.temperature_unit, second.pressure, second.humidity) == (20.0, "°C", 980.0, 60.0)


def test_a_team_mate_may(client, world, weekend, monkeypatch):
    client = signed_in(client, world.mate)
    confirm(client, weekend, upload(client, weekend, FILE), monkeypatch)
    assert len(readings(world)) == 2


def test_a_reader_may_not(client, world, weekend):
    client = signed_in(client, world.reader)
    assert upload(client, weekend, FILE).status_code == 403
    assert client.get(url(weekend)).status_code == 200


def test_a_stranger_does_not_find_it(client, world, weekend):
    client = signed_in(client, world.stranger)
    assert upload(client, weekend, FILE).status_code == 404
    assert client.post(reverse("track:weather-clear", args=[weekend.pk])).status_code == 404


def test_the_air_of_a_pass_at_a_reading(client, world, weekend, monkeypatch):
    # CIPM-2007, 20 C, 101 325 Pa, 50 %: 1.1993139 kg/m^3 (Picard et al., Metrologia 45 (2008) 149-155).
    client = signed_in(client, world.owner)
    confirm(client, weekend, upload(client, weekend, FILE), monkeypatch)
    found = air(world, enter(world, weekend, time_60="1.3", day="2026-05-09", clock="14:00"))
    assert found.air.density == pytest.approx(1.1993139, abs=2e-7)
    assert found.weather.source == "station, 14:00"


def test_between_two_readings_it_is_interpolated(client, world, weekend, monkeypatch):
    client = signed_in(client, world.owner)
    confirm(client, weekend, upload(client, weekend, FILE), monkeypatch)
    found = air(world, enter(world, weekend, time_60="1.3", day="2026-05-09", clock="14:15"))
    assert found.weather.temperature == pytest.approx(298.15)
    assert found.weather.pressure == pytest.approx(99662.5)
    assert found.weather.source == "station, between 14:00 and 14:30"


@pytest.mark.parametrize(("clock", "said"), [
    ("13:30", ""), ("15:00", ""),
    ("13:29", "nearest reading is 31 min away"), ("19:45", "nearest reading is 5 h 15 min away"),
])
def test_outside_the_file_half_an_hour_is_the_most(client, world, weekend, monkeypatch, clock, said):
    client = signed_in(client, world.owner)
    confirm(client, weekend, upload(client, weekend, FILE), monkeypatch)
    found = air(world, enter(world, weekend, time_60="1.3", day="2026-05-09", clock=clock))
    assert said in found.missing and bool(found.air) is not bool(said)


def test_a_gap_in_the_file_is_not_bridged(client, world, weekend, monkeypatch):
    client = signed_in(client, world.owner)
    gap = FILE.replace("14:30", "16:00")
    confirm(client, weekend, upload(client, weekend, gap), monkeypatch)
    found = air(world, enter(world, weekend, time_60="1.3", day="2026-05-09", clock="15:00"))
    assert found.air is None and "nearest reading is 60 min away" in found.missing


def test_what_was_read_at_the_car_goes_before_the_station(client, world, weekend, monkeypatch):
    client = signed_in(client, world.owner)
    confirm(client, weekend, upload(client, weekend, FILE), monkeypatch)
    at_the_car = {"temperature": "85", "pressure": "28.85", "humidity": "85"}
    run = enter(world, weekend, time_60="1.3", day="2026-05-09", clock="14:00", **at_the_car)
    found = air(world, run)
    # SAE J1349: 85 F, 85 %, 28.85 inHg gives 1.06928 (published formula, calculated with a simpler vapour
    # pressure than CIPM-2007's, which is what the difference of 2e-4 comes from).
    assert found.weather.source == "read at the car"
    assert found.air.factor == pytest.approx(1.06928, abs=4e-4)
    page = client.get(reverse("track:pass", args=[run.pk])).content.decode()
    # Corrected beside raw: 1.3/1.0693^(1/3), and the formula by its name.
    assert "1.300 s" in page and f"{1.3 / found.air.factor ** (1 / 3):.3f} s" in page and "SAE J1349" in page
    assert "CIPM-2007 is published for" in page


@pytest.mark.parametrize(("text", "fate", "said"), [
    (FILE + "2026-05-09,15:00,,980,60\r\n", "refused", "no air temperature"),
    (FILE + "2026-05-09,15:00,30,980,160\r\n", "refused", "160 is outside 0.0 % to 100.0 %"),
    (FILE + "2026-05-09,15:00,30,28.9,60\r\n", "refused", "outside 500.0 hPa to 1,100.0 hPa"),
    (FILE + "2026-06-09,15:00,30,980,60\r\n", "refused", "outside this weekend"),
    (FILE + "2026-05-09,quarter past,30,980,60\r\n", "refused", "is not a time of day such as 14:05"),
    (FILE + ",15:00,30,980,60\r\n", "refused", "no day, and the weekend has more than one"),
    (FILE + "2026-05-09,14:00,21,980,60\r\n", "duplicate", "a reading of this time is already here"),
    (FILE + "2026-05-09,15:00,30\r\n", "refused", "3 fields where the header has 5"),
])
def test_a_bad_reading_says_why_and_the_others_stay(client, world, weekend, text, fate, said):
    preview = upload(signed_in(client, world.owner), weekend, text)
    assert [found for found, _ in fates(preview)] == ["new", "new", fate] and said in words(preview)


def test_one_column_for_day_and_time(client, world, weekend):
    text = "timestamp;temperature;pressure;humidity\r\n2026-05-09T14:00:00+02:00;68,5;29,92;50\r\n"
    preview = upload(signed_in(client, world.owner), weekend, text)
    assert fates(preview) == [("new", "2")] and "68.5 °F, 29.92 inHg, 50.0 %" in words(preview)


def test_a_unit_that_does_not_fit_refuses_the_file(client, world, weekend):
    response = upload(signed_in(client, world.owner), weekend, FILE.replace("hPa", "psi"))
    assert response.status_code == 422 and "unit “psi” does not fit here; use inHg, hPa" in words(response)


def test_an_altimeter_setting_needs_the_elevation(client, world, monkeypatch):
    client = signed_in(client, world.owner)
    low = make_weekend(world)
    file = FILE.replace("pressure (hPa)", "altimeter (hPa)")
    confirm(client, low, upload(client, low, file), monkeypatch)
    run = enter(world, low, time_60="1.3", day="2026-05-09", clock="14:00")
    assert "give the elevation of the track" in air(world, run).missing
    high = make_weekend(world, "High Desert Strip", elevation={"typed": "5000", "value": 5000.0, "unit": "ft"})
    confirm(client, high, upload(client, high, file), monkeypatch)
    run = enter(world, high, time_60="1.3", day="2026-05-09", clock="14:00")
    # The standard atmosphere at 5000 ft is 12.228 psi (published table); at 1013.25 hPa that is what is left.
    assert air(world, run).weather.pressure == pytest.approx(12.228 * 6894.757, abs=20)


def test_removing_the_readings(client, world, weekend, monkeypatch):
    client = signed_in(client, world.owner)
    confirm(client, weekend, upload(client, weekend, FILE), monkeypatch)
    clear = reverse("track:weather-clear", args=[weekend.pk])
    assert client.get(clear).status_code == 405
    assert signed_in(client, world.reader).post(clear).status_code == 403
    signed_in(client, world.owner).post(clear)
    assert readings(world) == []
