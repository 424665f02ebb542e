"""Air density, pressures and power correction against published and library values."""

import math

import pytest

from solver.atmosphere import (
    altimeter_from_station,
    density_altitude,
    standard_air,
    station_from_altimeter,
)
from solver.power import corrected_speed, corrected_time, j1349_correction
from solver.weather import humidity_from_dew_point, moist_air, saturation_pressure

FOOT, INHG = 0.3048, 3386.389
PSI, SLUG_PER_FT3 = 6894.757, 515.3788


def kelvin(fahrenheit):
    return (fahrenheit - 32.0) / 1.8 + 273.15


@pytest.mark.parametrize(
    ("celsius", "pressure", "humidity", "cipm", "others"),
    [
        # CIPM-2007 [calc, constants partly mem]; CoolProp HAPropsSI, psychrolib, metpy [lib].
        (20.0, 101325.0, 0.5, 1.1993139, (1.1993593, 1.1988980, 1.1988843)),
        (30.0, 98000.0, 0.6, 1.1154469, (1.1154888, 1.1151511, 1.1151598)),
        (20.0, 101325.0, 0.0, 1.2045573, ()),
    ],
)
def test_moist_air_density(celsius, pressure, humidity, cipm, others):
    air = moist_air(celsius + 273.15, pressure, humidity)
    assert air.density == pytest.approx(cipm, abs=5e-7)
    for library in others:
        # The libraries differ among themselves by 4 in 10 000 (ideal gas, other constants).
        assert air.density == pytest.approx(library, rel=5e-4)
    assert air.vapour_pressure + air.dry_pressure == pytest.approx(pressure)


def test_intermediates_of_the_first_row():
    # psv 2339.1632 Pa, xv 0.01158934, Z 0.99961477 [calc].
    air = moist_air(293.15, 101325.0, 0.5)
    assert saturation_pressure(293.15) == pytest.approx(2339.1632, abs=5e-4)
    assert air.vapour_fraction == pytest.approx(0.01158934, abs=5e-9)
    assert air.compressibility == pytest.approx(0.99961477, abs=5e-9)


@pytest.mark.parametrize(("celsius", "library"), [(20, 2339.318), (30, 4246.971), (40, 7384.938)])
def test_saturation_pressure(celsius, library):
    # CoolProp, Pa [lib].
    assert saturation_pressure(celsius + 273.15) == pytest.approx(library, rel=2e-4)


def test_leaving_the_published_range_is_said():
    # Valid 600-1100 hPa, 15-27 C [pub].
    assert moist_air(293.15, 101325.0, 0.5).warnings == ()
    assert "30.0 C" in moist_air(303.15, 98000.0, 0.6).warnings[0]
    assert "590 hPa" in moist_air(293.15, 59000.0, 0.5).warnings[0]


@pytest.mark.parametrize(
    ("feet", "fahrenheit", "psi", "slugs"),
    [(5000, 41.17, 12.228, 20.48e-4), (10000, 23.36, 10.108, 17.56e-4)],
)
def test_standard_atmosphere_tables(feet, fahrenheit, psi, slugs):
    # Standard-atmosphere tables in English units [pub], geometric heights.
    height = feet * FOOT
    air = standard_air(6356766.0 * height / (6356766.0 + height))
    assert (air.temperature - 273.15) * 1.8 + 32 == pytest.approx(fahrenheit, abs=0.015)
    assert air.pressure / PSI == pytest.approx(psi, abs=1e-3)
    assert air.density / SLUG_PER_FT3 == pytest.approx(slugs, abs=1e-6)


@pytest.mark.parametrize(
    ("feet", "sigma"),
    [(1000, 0.971064), (2000, 0.942773), (3000, 0.915117), (5000, 0.861671), (10000, 0.738479)],
)
def test_density_ratio_and_its_inverse(feet, sigma):
    # [calc], geopotential.
    air = standard_air(feet * FOOT)
    assert air.density_ratio == pytest.approx(sigma, abs=6e-7)
    assert density_altitude(air.density) / FOOT == pytest.approx(feet, abs=1e-6)


# Station pressure inHg, F, RH, density altitude ft by ideal gas [calc] and by the US weather
# service's virtual-temperature form [pub formula].
DENSITY_ALTITUDES = [
    (29.92, 59.0, 0.0, 1.4, None),
    (29.00, 85.0, 0.60, 3034.3, 3050.3),
    (28.86, 85.0, 0.85, 3332.0, 3347.2),
    (24.90, 95.0, 0.20, 8486.5, 8500.0),
]


@pytest.mark.parametrize(("inhg", "fahrenheit", "humidity", "ideal", "service"), DENSITY_ALTITUDES)
def test_density_altitude(inhg, fahrenheit, humidity, ideal, service):
    pressure, temperature = inhg * INHG, kelvin(fahrenheit)
    celsius = temperature - 273.15
    vapour = humidity * 611.2 * math.exp(17.67 * celsius / (celsius + 243.5))
    density = (pressure - vapour) / (287.05 * temperature) + vapour / (461.495 * temperature)
    assert density_altitude(density) / FOOT == pytest.approx(ideal, abs=1.0)
    # The real gas of CIPM-2007 is a little denser: 0.04 percent of density is 12 to 15 ft.
    real = moist_air(temperature, pressure, humidity).density_altitude / FOOT
    assert real == pytest.approx(ideal, abs=20.0)
    if service:
        assert real == pytest.approx(service, abs=40.0)


def test_altimeter_setting_is_not_station_pressure():
    # US weather service: ((QNH^0.190263) - 8.417286e-5 z)^(1/0.190263), hPa and m [mem].
    for setting, elevation in ((1013.25, 500.0), (1005.0, 1600.0), (1030.0, -50.0)):
        service = (setting**0.190263 - 8.417286e-5 * elevation) ** (1 / 0.190263)
        station = station_from_altimeter(setting * 100, elevation)
        assert station / 100 == pytest.approx(service, abs=0.02)
        assert altimeter_from_station(station, elevation) / 100 == pytest.approx(setting)


def test_altimeter_setting_of_standard_air():
    for height in (0.0, 300.0, 1600.0):
        assert station_from_altimeter(101325.0, height) == pytest.approx(standard_air(height).pressure)


@pytest.mark.parametrize(
    ("fahrenheit", "humidity", "inhg", "factor"),
    [(85.0, 0.85, 28.85, 1.06928), (55.0, 0.35, 30.10, 0.94803)],
)
def test_j1349(fahrenheit, humidity, inhg, factor):
    # Formula [pub, secondary], values [calc] with ideal-gas vapour; the choice of saturation formula
    # and of the inch of mercury moves them by 5 in the fifth decimal.
    temperature, pressure = kelvin(fahrenheit), inhg * INHG
    celsius = temperature - 273.15
    vapour = humidity * 611.2 * math.exp(17.67 * celsius / (celsius + 243.5))
    assert j1349_correction(temperature, pressure - vapour).factor == pytest.approx(factor, abs=5e-5)
    # CIPM-2007's real gas holds 0.4 percent more vapour (its enhancement factor).
    real = moist_air(temperature, pressure, humidity).dry_pressure
    assert j1349_correction(temperature, real).factor == pytest.approx(factor, abs=3e-4)


def test_j1349_says_when_it_is_stretched():
    assert j1349_correction(298.15, 99000.0).warnings == ()
    assert j1349_correction(298.15, 99000.0).factor == pytest.approx(1.0, abs=1e-12)
    assert "stretch" in j1349_correction(308.15, 83000.0).warnings[0]


def test_exponent_is_exact_for_constant_power():
    # Constant power P from rest: v = (3 P s/m)^(1/3), s = sqrt(8 P/(9 m)) t^1.5 [calc].
    def run(power):
        seconds = (402.336 / math.sqrt(8 * power / (9 * 1200.0))) ** (2 / 3)
        return seconds, (3 * power * 402.336 / 1200.0) ** (1 / 3)

    poor, standard = run(500e3), run(500e3 * 1.06)
    assert corrected_time(poor[0], 1.06) == pytest.approx(standard[0])
    assert corrected_speed(poor[1], 1.06) == pytest.approx(standard[1])


def test_dew_point():
    assert humidity_from_dew_point(298.15, 298.15) == 1.0
    # 25 C with a dew point of 15 C is about 54 percent (psychrometric tables) [mem].
    assert humidity_from_dew_point(298.15, 288.15) == pytest.approx(0.54, abs=0.005)


@pytest.mark.parametrize(
    ("call", "words"),
    [
        (lambda: moist_air(20.0, 101325.0, 0.5), "temperature is 20 K"),
        (lambda: moist_air(293.15, 29.92, 0.5), "station pressure is 29.92 Pa"),
        (lambda: moist_air(293.15, 101325.0, 50.0), "relative humidity is 50"),
        (lambda: humidity_from_dew_point(290.0, 291.0), "dew point cannot be above"),
        (lambda: standard_air(20000.0), "height is 20000 m"),
        (lambda: station_from_altimeter(2992.0, 0.0), "altimeter setting is 2992 Pa"),
        (lambda: corrected_time(0.0, 1.0), "elapsed time is 0 s"),
        (lambda: corrected_time(9.0, 9.0), "power correction is 9"),
    ],
)
def test_bad_input_is_named(call, words):
    with pytest.raises(ValueError, match=words):
        call()
