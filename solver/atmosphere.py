"""The standard atmosphere, density altitude, and kinds of pressure.

International Standard Atmosphere (ISO 2533; ICAO Doc 7488), lower layer only:
tracks are below 11 km.
"""

from __future__ import annotations

from dataclasses import dataclass

from solver.checks import between, positive

SEA_LEVEL_TEMPERATURE = 288.15
SEA_LEVEL_PRESSURE = 101325.0
LAPSE = 0.0065
AIR_GAS_CONSTANT = 287.05287
GRAVITY = 9.80665
SEA_LEVEL_DENSITY = SEA_LEVEL_PRESSURE / (AIR_GAS_CONSTANT * SEA_LEVEL_TEMPERATURE)
EXPONENT = GRAVITY / (AIR_GAS_CONSTANT * LAPSE)
LOWEST, HIGHEST = -2000.0, 11000.0


@dataclass(frozen=True)
class StandardAir:
    """Standard air at one height: Pa, K, kg/m^3, and density over sea level's."""

    height: float
    temperature: float
    pressure: float
    density: float
    density_ratio: float


def standard_air(height: float) -> StandardAir:
    """Standard atmosphere at a geopotential height.

    ``T = T0 - L H``, ``p = p0 (T/T0)^(g/(R L))`` (ISO 2533).

    Parameters
    ----------
    height : float
        Geopotential, m, from -2000 to 11 000. At a track it differs from the
        height on a map by less than 1 m.

    Returns
    -------
    StandardAir

    Raises
    ------
    ValueError
        When the height is outside the layer.
    """
    level = between("the height", height, LOWEST, HIGHEST, "m")
    temperature = SEA_LEVEL_TEMPERATURE - LAPSE * level
    ratio = temperature / SEA_LEVEL_TEMPERATURE
    density = SEA_LEVEL_DENSITY * ratio ** (EXPONENT - 1.0)
    return StandardAir(
        height=level,
        temperature=temperature,
        pressure=SEA_LEVEL_PRESSURE * ratio**EXPONENT,
        density=density,
        density_ratio=density / SEA_LEVEL_DENSITY,
    )


def density_altitude(density: float) -> float:
    """Height in the standard atmosphere at which air has this density.

    ``H = T0/L [1 - (rho/rho0)^(1/(g/(R L) - 1))]``, the inverse of the above.

    Parameters
    ----------
    density : float
        kg/m^3, of the moist air.

    Returns
    -------
    float
        m, geopotential; below zero in cold dense air.

    Raises
    ------
    ValueError
        When the density is not above zero or belongs to no track on earth.
    """
    ratio = positive("the air density", density, "kg/m^3") / SEA_LEVEL_DENSITY
    height = SEA_LEVEL_TEMPERATURE / LAPSE * (1.0 - ratio ** (1.0 / (EXPONENT - 1.0)))
    return between("the density altitude", height, -5000.0, HIGHEST, "m")


def station_from_altimeter(altimeter_setting: float, elevation: float) -> float:
    """Station pressure from an airport's altimeter setting.

    An altimeter setting is reduced to sea level along the standard atmosphere;
    the air an engine breathes is at station pressure. ``p^n = QNH^n - p0^n (L/T0) z``
    with ``n = R L/g = 0.190263`` (ICAO Manual of the standard atmosphere; the US
    weather service gives the same with p0^n L/T0 = 8.417286e-5 in hPa and m, from
    memory).

    Parameters
    ----------
    altimeter_setting : float
        Pa.
    elevation : float
        Of the track, m.

    Returns
    -------
    float
        Pa.

    Raises
    ------
    ValueError
        When a value is out of range.
    """
    setting = between("the altimeter setting", altimeter_setting, 85000.0, 110000.0, "Pa")
    level = between("the elevation", elevation, LOWEST, 5000.0, "m")
    n = 1.0 / EXPONENT
    return (setting**n - SEA_LEVEL_PRESSURE**n * LAPSE / SEA_LEVEL_TEMPERATURE * level) ** EXPONENT


def altimeter_from_station(station_pressure: float, elevation: float) -> float:
    """Altimeter setting from station pressure, the inverse of the above.

    Parameters
    ----------
    station_pressure : float
        Pa.
    elevation : float
        m.

    Returns
    -------
    float
        Pa.

    Raises
    ------
    ValueError
        When a value is out of range.
    """
    station = between("the station pressure", station_pressure, 50000.0, 110000.0, "Pa")
    level = between("the elevation", elevation, LOWEST, 5000.0, "m")
    n = 1.0 / EXPONENT
    return (station**n + SEA_LEVEL_PRESSURE**n * LAPSE / SEA_LEVEL_TEMPERATURE * level) ** EXPONENT
