"""The air of a pass: typed at the car, else matched by time from the station's file."""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime, timedelta

from shop.launches import bridge
from shop.refusals import Refused
from shop.track.models import Pass, WeatherReading, Weekend
from shop.track.quantities import AIR, ALTIMETER, BY_KEY, ELEVATION, si_of
from shop.units import default_unit, show, unit_of

NEAR = timedelta(minutes=30)
BETWEEN = timedelta(minutes=60)
CORRECTION = (
    "Corrected by SAE J1349 for a naturally breathing engine: times by the power ratio to the power −1/3, speeds to 1/3"
    " (common practice). It presumes a car short of power, not of grip, so that a corrected 60 ft says little;"
    " it does not hold for forced induction."
)


@dataclass(frozen=True)
class Weather:
    """SI; pressure is station pressure."""

    temperature: float
    pressure: float
    humidity: float
    source: str


@dataclass(frozen=True)
class PassAir:
    """What the page shows of a pass's air; without `air`, `missing` says why there is none."""

    weather: Weather | None
    air: bridge.Air | None
    missing: str = ""


def air_of(run: Pass, station: Sequence[WeatherReading]) -> PassAir:
    """The air of a pass of a weekend whose station readings, in order of time, are `station`."""
    try:
        found = _at_the_car(run) or _from_station(run, station)
        if isinstance(found, str):
            return PassAir(None, None, found)
        return PassAir(found, bridge.air(found.temperature, found.pressure, found.humidity))
    except Refused as refused:
        return PassAir(None, None, str(refused))


def _at_the_car(run: Pass) -> Weather | None:
    temperature, pressure, humidity = (si_of(BY_KEY[key], run.readings.get(key)) for key in AIR)
    if temperature is None or pressure is None or humidity is None:
        return None
    return Weather(temperature, _station(pressure, run.pressure_kind, run.weekend), humidity, "read at the car")


def _station(pressure: float, kind: str, weekend: Weekend) -> float:
    if kind != ALTIMETER:
        return pressure
    elevation = si_of(ELEVATION, weekend.elevation)
    if elevation is None:
        raise Refused("the pressure is an altimeter setting; give the elevation of the track, so that it can be used")
    return bridge.station_pressure(pressure, elevation)


def _from_station(run: Pass, station: Sequence[WeatherReading]) -> Weather | str:
    lacking = [BY_KEY[key].label.lower() for key in AIR if key not in run.readings]
    partly = f"{' and '.join(lacking)} not noted" if len(lacking) < len(AIR) else "no weather noted"
    if not station:
        return partly
    if run.at is None:
        return f"{partly}; the station's file needs the pass's time of day"
    found = _matched(run.at, station, run.weekend)
    return found or f"{partly}; the station's nearest reading is {_gap(run.at, station)} away"


def _matched(at: datetime, station: Sequence[WeatherReading], weekend: Weekend) -> Weather | None:
    place = bisect_left(station, at, key=lambda reading: reading.at)
    before = station[place - 1] if place else None
    after = station[place] if place < len(station) else None
    if before and after and after.at - before.at <= BETWEEN:
        share = (at - before.at) / (after.at - before.at)
        low, high = _si(before, weekend), _si(after, weekend)
        temperature, pressure, humidity = (a + share * (b - a) for a, b in zip(low, high, strict=True))
        words = f"station, between {before.clock:%H:%M} and {after.clock:%H:%M}"
        return Weather(temperature, pressure, humidity, words if share < 1 else f"station, {after.clock:%H:%M}")
    nearest = min((r for r in (before, after) if r), key=lambda reading: abs(reading.at - at))
    if abs(nearest.at - at) > NEAR:
        return None
    return Weather(*_si(nearest, weekend), f"station, {nearest.clock:%H:%M}")


def _si(reading: WeatherReading, weekend: Weekend) -> tuple[float, float, float]:
    pressure = unit_of("barometer", reading.pressure_unit).to_si(reading.pressure)
    return (
        unit_of("temperature", reading.temperature_unit).to_si(reading.temperature),
        _station(pressure, reading.pressure_kind, weekend),
        reading.humidity / 100,
    )


def _gap(at: datetime, station: Sequence[WeatherReading]) -> str:
    minutes = round(min(abs(reading.at - at) for reading in station).total_seconds() / 60)
    return f"{minutes} min" if minutes < 120 else f"{minutes // 60} h {minutes % 60} min"


@dataclass(frozen=True)
class AirText:
    """Finished text for a page."""

    conditions: str
    density: str
    density_altitude: str
    factor: str
    source: str
    warnings: tuple[str, ...]
    missing: str = ""


def air_text(found: PassAir, units: str) -> AirText:
    if found.air is None or found.weather is None:
        return AirText("—", "—", "—", "—", "", (), found.missing)
    weather, air = found.weather, found.air
    conditions = ", ".join((
        show(weather.temperature, "temperature", default_unit("temperature", units), decimals=0),
        show(weather.pressure, "barometer", default_unit("barometer", units)),
        show(weather.humidity, "percent", "%", decimals=0),
    ))
    return AirText(
        conditions,
        show(air.density, "density", default_unit("density", units)),
        show(air.density_altitude, "distance", default_unit("distance", units), decimals=0),
        f"{air.factor:.4f}",
        weather.source,
        air.warnings,
    )
