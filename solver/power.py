"""Correcting power, times and speeds for the weather."""

from __future__ import annotations

from dataclasses import dataclass

from solver.checks import between, positive

REFERENCE_DRY_PRESSURE = 99000.0
REFERENCE_TEMPERATURE = 298.0
EXPONENT = 1.0 / 3.0
EXPONENT_STATUS = (
    "speed goes as power to the 1/3 and time as power to the -1/3: exact for a car that pushes with"
    " constant power from rest, common practice for a real one"
)


@dataclass(frozen=True)
class PowerCorrection:
    """What power would have been in standard air, over what it was.

    ``factor`` above one means that the air was worse than standard. Applies to
    naturally breathing engines; ``warnings`` says where the formula is stretched.
    """

    factor: float
    standard: str
    warnings: tuple


def j1349_correction(temperature: float, dry_pressure: float) -> PowerCorrection:
    """SAE J1349 correction for a naturally breathing engine.

    ``1.18 (990/Pd) sqrt((Tc + 273)/298) - 0.18``, Pd in mbar of dry air: indicated
    power goes with air, and 18 percent of it is taken for friction, which does
    not (published, secondary sources).

    Parameters
    ----------
    temperature : float
        At the air intake, K.
    dry_pressure : float
        Station pressure less vapour pressure, Pa.

    Returns
    -------
    PowerCorrection
        Multiply the power seen by ``factor`` to have it in standard air.

    Raises
    ------
    ValueError
        When a value is out of range for weather.
    """
    hot = between("the temperature", temperature, 233.15, 333.15, "K")
    dry = between("the dry pressure", dry_pressure, 50000.0, 110000.0, "Pa")
    kelvin = hot - 273.15 + 273.0
    ratio = REFERENCE_DRY_PRESSURE / dry * (kelvin / REFERENCE_TEMPERATURE) ** 0.5
    factor = 1.18 * ratio - 0.18
    warnings: tuple[str, ...] = ()
    if not 0.93 <= factor <= 1.07:
        warnings = (
            f"The correction is {factor:.3f}: beyond 7 percent either way it is a stretch (limit from memory).",
        )
    return PowerCorrection(factor=factor, standard="SAE J1349", warnings=warnings)


def corrected_time(seconds: float, factor: float, exponent: float = EXPONENT) -> float:
    """Elapsed time the car would have run with standard air's power.

    ``t / factor^(1/3)``: see `EXPONENT_STATUS`.

    Parameters
    ----------
    seconds : float
    factor : float
        Power in standard air over power as run.
    exponent : float
        Share of the power ratio that time feels; 1/3 is common practice.

    Returns
    -------
    float
        s.

    Raises
    ------
    ValueError
        When a value is out of range.
    """
    return positive("the elapsed time", seconds, "s") / _ratio(factor, exponent)


def corrected_speed(speed: float, factor: float, exponent: float = EXPONENT) -> float:
    """Trap speed the car would have run with standard air's power.

    ``v factor^(1/3)``, in the unit the speed came in; otherwise as
    `corrected_time`.

    Raises
    ------
    ValueError
        When a value is out of range.
    """
    return positive("the speed", speed) * _ratio(factor, exponent)


def _ratio(factor: float, exponent: float) -> float:
    share = between("the exponent", exponent, 0.0, 1.0)
    return between("the power correction", factor, 0.5, 2.0) ** share
