"""What is read at the track beside the slip: weather, pressures, the launch. Stored as typed, like settings."""

from __future__ import annotations

from typing import Any

from shop.quantities import Quantity
from shop.units import FOOT, RPM, Reading, unit_of

ELEVATION = Quantity("elevation", "Elevation of the track", "distance", -1400 * FOOT, 14000 * FOOT, 10 * FOOT,
                     optional=True, help="Above sea level. Needed when the pressure is an altimeter setting.")

def _pressure(key: str, label: str, tolerance: float) -> Quantity:
    return Quantity(key, label, "pressure", 5000.0, 600000.0, tolerance, optional=True, section="tyres")


def _weather(key: str, label: str, dimension: str, least: float, most: float, tolerance: float) -> Quantity:
    return Quantity(key, label, dimension, least, most, tolerance, optional=True, section="weather")


QUANTITIES: tuple[Quantity, ...] = (
    Quantity("launch_rpm", "Engine speed at launch", "rotation", 500 * RPM, 14000 * RPM, 50 * RPM,
             optional=True, section="launch"),
    _pressure("front_pressure", "Front tyre pressure", 3000.0),
    _pressure("left_rear_pressure", "Left rear tyre pressure", 1500.0),
    _pressure("right_rear_pressure", "Right rear tyre pressure", 1500.0),
    _weather("temperature", "Air temperature", "temperature", 233.15, 333.15, 0.5),
    _weather("pressure", "Air pressure", "barometer", 50000.0, 110000.0, 50.0),
    _weather("humidity", "Relative humidity", "percent", 0.0, 1.0, 0.03),
    _weather("surface_temperature", "Track surface temperature", "temperature", 233.15, 363.15, 2.0),
)
BY_KEY = {quantity.key: quantity for quantity in QUANTITIES}
SECTIONS = {"launch": "The launch", "tyres": "Tyre pressures", "weather": "Weather at the car"}
AIR = ("temperature", "pressure", "humidity")

STATION, ALTIMETER = "station", "altimeter"
PRESSURE_KINDS = [
    (STATION, "at the track (station pressure)"),
    (ALTIMETER, "reduced to sea level (altimeter setting)"),
]


def stored(reading: Reading) -> dict[str, Any]:
    return {"typed": reading.typed, "value": reading.value, "unit": reading.unit}


def si_of(quantity: Quantity, entry: dict[str, Any] | None) -> float | None:
    """The SI value of a stored reading, None when there is none."""
    if not entry:
        return None
    return unit_of(quantity.dimension, entry["unit"]).to_si(entry["value"])


def text_of(entry: dict[str, Any] | None) -> str:
    """A stored reading as it was typed, with its unit."""
    if not entry:
        return "—"
    typed, unit = str(entry["typed"]), str(entry["unit"])
    return f"{typed} {unit}" if typed[-1:].isdigit() or typed.endswith(".") else typed
