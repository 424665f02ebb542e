"""Moist air: density by CIPM-2007, and what a weather station's numbers mean."""

from __future__ import annotations

import math
from dataclasses import dataclass

from solver.atmosphere import SEA_LEVEL_DENSITY, density_altitude
from solver.checks import between

KELVIN = 273.15
GAS_CONSTANT = 8.314472
WATER_MOLAR_MASS = 18.01528e-3
PUBLISHED_RANGE = "CIPM-2007 is published for 600 to 1100 hPa and 15 to 27 C"


@dataclass(frozen=True)
class MoistAir:
    """Air as an engine breathes it.

    Attributes
    ----------
    density : float
        kg/m^3.
    density_altitude : float
        Standard-atmosphere height of that density, m.
    density_ratio : float
        Over sea-level standard density.
    vapour_pressure, dry_pressure : float
        Pa; their sum is the station pressure.
    vapour_fraction, compressibility : float
        Mole fraction of water vapour, and Z of the equation.
    warnings : tuple of str
        Where the published range is left.
    """

    density: float
    density_altitude: float
    density_ratio: float
    vapour_pressure: float
    dry_pressure: float
    vapour_fraction: float
    compressibility: float
    warnings: tuple


def saturation_pressure(temperature: float) -> float:
    """Saturation vapour pressure over water, by the equation of CIPM-2007.

    ``exp(A T^2 + B T + C + D/T)`` (Picard et al., Metrologia 45 (2008) 149-155,
    annex A.1; constants from memory, checked against a steam-property library).

    Parameters
    ----------
    temperature : float
        K, from 233 to 333.

    Returns
    -------
    float
        Pa.

    Raises
    ------
    ValueError
        When the temperature is out of range.
    """
    hot = between("the temperature", temperature, 233.15, 333.15, "K")
    return math.exp(1.2378847e-5 * hot**2 - 1.9121316e-2 * hot + 33.93711047 - 6.3431645e3 / hot)


def moist_air(
    temperature: float, pressure: float, humidity: float, carbon_dioxide: float = 0.0004
) -> MoistAir:
    """Density of moist air by CIPM-2007.

    ``rho = p Ma/(Z R T) [1 - xv (1 - Mv/Ma)]`` (Picard, Davis, Glaeser and Fujii,
    Metrologia 45 (2008) 149-155).

    Parameters
    ----------
    temperature : float
        K.
    pressure : float
        Station pressure, Pa: not reduced to sea level.
    humidity : float
        Relative humidity as a fraction, 0 to 1.
    carbon_dioxide : float
        Mole fraction.

    Returns
    -------
    MoistAir

    Raises
    ------
    ValueError
        When a value is out of range for weather.
    """
    hot = between("the temperature", temperature, 233.15, 333.15, "K")
    press = between("the station pressure", pressure, 50000.0, 110000.0, "Pa")
    wet = between("the relative humidity", humidity, 0.0, 1.0)
    carbon = between("the carbon dioxide fraction", carbon_dioxide, 0.0, 0.01)
    celsius = hot - KELVIN
    enhancement = 1.00062 + 3.14e-8 * press + 5.6e-7 * celsius**2
    fraction = wet * enhancement * saturation_pressure(hot) / press
    compressibility = _compressibility(press, hot, fraction)
    molar = 28.96546e-3 + 12.011e-3 * (carbon - 400e-6)
    dry = press * molar / (compressibility * GAS_CONSTANT * hot)
    density = dry * (1.0 - fraction * (1.0 - WATER_MOLAR_MASS / molar))
    return MoistAir(
        density=density,
        density_altitude=density_altitude(density),
        density_ratio=density / SEA_LEVEL_DENSITY,
        vapour_pressure=fraction * press,
        dry_pressure=press * (1.0 - fraction),
        vapour_fraction=fraction,
        compressibility=compressibility,
        warnings=_warnings(press, celsius),
    )


def _compressibility(pressure: float, temperature: float, fraction: float) -> float:
    t, ratio = temperature - KELVIN, pressure / temperature
    first = (
        1.58123e-6
        - 2.9331e-8 * t
        + 1.1043e-10 * t**2
        + (5.707e-6 - 2.051e-8 * t) * fraction
        + (1.9898e-4 - 2.376e-6 * t) * fraction**2
    )
    return 1.0 - ratio * first + ratio**2 * (1.83e-11 - 0.765e-8 * fraction**2)


def _warnings(pressure: float, celsius: float) -> tuple[str, ...]:
    found = []
    if not 60000.0 <= pressure <= 110000.0:
        found.append(f"The station pressure is {pressure / 100:.0f} hPa: {PUBLISHED_RANGE}.")
    if not 15.0 <= celsius <= 27.0:
        found.append(
            f"The temperature is {celsius:.1f} C: {PUBLISHED_RANGE}; at track temperatures the error"
            " stays far below that of the weather station."
        )
    return tuple(found)


def humidity_from_dew_point(temperature: float, dew_point: float) -> float:
    """Relative humidity from temperature and dew point.

    The vapour pressure is the saturation pressure at the dew point (definition).

    Parameters
    ----------
    temperature, dew_point : float
        K.

    Returns
    -------
    float
        Fraction, 0 to 1.

    Raises
    ------
    ValueError
        When the dew point is above the temperature or a value is out of range.
    """
    if dew_point > temperature:
        raise ValueError(
            f"the dew point is {dew_point - KELVIN:.1f} C and the air {temperature - KELVIN:.1f} C:"
            " the dew point cannot be above the air temperature."
        )
    return saturation_pressure(dew_point) / saturation_pressure(temperature)
