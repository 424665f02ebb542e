"""Adjust the doubtful numbers of a car until its launch agrees with what was logged.

Weighted least squares within stated bounds (`scipy.optimize.least_squares`, trust region
reflective), with the linearised covariance of the estimate: s^2 (J'J)^-1 with s^2 from the
residuals (Bates and Watts, Nonlinear Regression Analysis, 1988, from memory).
"""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import least_squares
from scipy.stats import t as student

from solver.car import Car
from solver.car_paths import number_at
from solver.carfile import car_from_dict, car_to_dict
from solver.faults import CarError, LaunchFailed
from solver.launching import launch
from solver.sweeping import changed

Array = NDArray[np.float64]

# Beside paths of the car file: the hit as a multiple, and the log's clock against the run's (s).
HIT_SCALE = "hit.scale"
DELAY = "delay"
# Below this share of the prior width the log has told something of its own.
LEARNED = 0.9


@dataclass(frozen=True)
class Channel:
    """One logged channel in SI, named after the history it is compared with.

    Attributes
    ----------
    name : str
        A name of `solver.figures.HISTORIES`.
    time, values : Array
        Shape (samples,), seconds from the hit and SI values; NaN samples are left out.
    sigma : float
        Standard deviation of its noise in SI: the weight of the channel against the others.
    """

    name: str
    time: Array
    values: Array
    sigma: float


@dataclass(frozen=True)
class Doubtful:
    """A number to adjust: a dotted car-file path, `HIT_SCALE` or `DELAY`, and how far it may go."""

    path: str
    half_width: float


@dataclass(frozen=True)
class Estimate:
    """What the log says of one doubtful number.

    Attributes
    ----------
    path : str
    before, value : float
    uncertainty : float
        Standard uncertainty of the fitted value.
    low, high : float
        95 % confidence interval, Student's t.
    identified : bool
        False when the log hardly narrows what was known before.
    at_bound : bool
        True when the fit would have gone further than it may.
    """

    path: str
    before: float
    value: float
    uncertainty: float
    low: float
    high: float
    identified: bool
    at_bound: bool


@dataclass(frozen=True)
class Fit:
    """A fitted car and how well it fits.

    Attributes
    ----------
    estimates : tuple of Estimate
    correlation : Array
        Shape (parameters, parameters).
    residual_before, residual_after : dict of str to float
        Root mean square by channel, SI.
    car : dict
        The car file with the fitted numbers.
    converged : bool
    message : str
    """

    estimates: tuple[Estimate, ...]
    correlation: Array
    residual_before: dict[str, float]
    residual_after: dict[str, float]
    car: dict[str, Any]
    converged: bool
    message: str


def with_numbers(data: Mapping[str, Any], numbers: Mapping[str, float]) -> dict[str, Any]:
    """A car file with some of its numbers changed; `DELAY` is no number of the car."""
    other = dict(data)
    for path, value in numbers.items():
        if path == DELAY:
            continue
        if path == HIT_SCALE:
            table = [[time, value * force] for time, force in data["hit"]["table"]]
            other = {**other, "hit": {**data["hit"], "table": table}}
        else:
            other = changed(other, path, value)
    return other


def fit(
    car: Car,
    channels: Sequence[Channel],
    doubtful: Sequence[Doubtful],
    *,
    progress: Callable[[int], None] | None = None,
) -> Fit:
    """Fit the doubtful numbers of a car to logged channels.

    Parameters
    ----------
    car : Car
        As measured; what is doubtful starts from its numbers.
    channels : sequence of Channel
        What was logged during the launch.
    doubtful : sequence of Doubtful
        What may be adjusted, each within its half-width.
    progress : callable(launches), optional
        Told after each launch; an exception it raises ends the fit.

    Returns
    -------
    Fit

    Raises
    ------
    ValueError
        With the words for the page, when there is nothing to fit or too little to fit it to.
    CarError, LaunchFailed
        When the car as measured cannot be launched.
    """
    data = car_to_dict(car)
    log = [_sound(channel) for channel in channels]
    start = np.array([_start(data, item.path) for item in doubtful])
    width = np.array([item.half_width for item in doubtful])
    samples = sum(len(channel.time) for channel in log)
    _check(doubtful, width, log, samples)
    launches = [0]

    def residuals(x: Array) -> Array:
        launches[0] += 1
        if progress:
            progress(launches[0])
        return _residuals(data, doubtful, log, start + width * x)

    # The car as measured must launch; a fault there is the user's to hear of.
    first = residuals(np.zeros(len(doubtful)))
    if not np.isfinite(first).all():
        launch(car)
    found = least_squares(
        residuals, np.zeros(len(doubtful)), bounds=(-1.0, 1.0), method="trf", diff_step=1e-3, x_scale=1.0, max_nfev=60
    )
    return _told(data, doubtful, log, start, width, first, found)


def _start(data: Mapping[str, Any], path: str) -> float:
    if path == DELAY:
        return 0.0
    return 1.0 if path == HIT_SCALE else number_at(dict(data), path)


def _sound(channel: Channel) -> Channel:
    time, values = np.asarray(channel.time, dtype=float), np.asarray(channel.values, dtype=float)
    if time.shape != values.shape or time.ndim != 1:
        raise ValueError(f"{channel.name}: as many times as values are needed")
    if not channel.sigma > 0:
        raise ValueError(f"{channel.name}: its noise must be more than nothing")
    known = np.isfinite(time) & np.isfinite(values)
    return Channel(channel.name, time[known], values[known], channel.sigma)


def _check(doubtful: Sequence[Doubtful], width: Array, log: Sequence[Channel], samples: int) -> None:
    if not doubtful:
        raise ValueError("nothing to fit: choose at least one doubtful number")
    if len({item.path for item in doubtful}) < len(doubtful):
        raise ValueError("a number is to be fitted twice")
    if not (width > 0).all():
        names = ", ".join(item.path for item, wide in zip(doubtful, width, strict=True) if not wide > 0)
        raise ValueError(f"no room to adjust {names}: its tolerance is nil")
    if not log or samples < 5 * len(doubtful):
        raise ValueError(
            f"too little to fit to: {samples} logged values for {len(doubtful)} doubtful numbers; at least five for each"
        )


def _residuals(data: Mapping[str, Any], doubtful: Sequence[Doubtful], log: Sequence[Channel], numbers: Array) -> Array:
    chosen = {item.path: float(number) for item, number in zip(doubtful, numbers, strict=True)}
    delay = chosen.get(DELAY, 0.0)
    try:
        histories = launch(car_from_dict(with_numbers(data, chosen))).histories
    except (CarError, LaunchFailed):
        # No car there: far from any log, so that the search turns back.
        return np.concatenate([np.full(len(channel.time), 1e6) for channel in log])
    parts = []
    for channel in log:
        model = np.interp(channel.time - delay, histories["t"], histories[channel.name])
        parts.append((model - channel.values) / channel.sigma)
    return np.concatenate(parts)


def _told(
    data: Mapping[str, Any],
    doubtful: Sequence[Doubtful],
    log: Sequence[Channel],
    start: Array,
    width: Array,
    first: Array,
    found: Any,
) -> Fit:
    count, parameters = len(found.fun), len(doubtful)
    freedom = max(count - parameters, 1)
    scatter = float(found.fun @ found.fun) / freedom
    # A pseudo-inverse: a direction the log says nothing of gets an infinite spread, not a failure.
    _, singular, rows = np.linalg.svd(found.jac, full_matrices=False)
    known = singular > singular[0] * 1e-9 if singular[0] > 0 else np.zeros_like(singular, dtype=bool)
    inverse = np.where(known, 1.0 / np.where(known, singular, 1.0) ** 2, np.inf)
    with np.errstate(invalid="ignore"):
        covariance = scatter * (rows.T * np.where(np.isfinite(inverse), inverse, 1e12)) @ rows
    spread = np.sqrt(np.diag(covariance))
    correlation = covariance / np.outer(spread, spread)
    reach = float(student.ppf(0.975, freedom))
    estimates = []
    for n, item in enumerate(doubtful):
        value, uncertainty = start[n] + width[n] * found.x[n], width[n] * spread[n]
        estimates.append(
            Estimate(
                item.path, float(start[n]), float(value), float(uncertainty), float(value - reach * uncertainty),
                float(value + reach * uncertainty),
                # What was known before: anywhere within the half-width, 1/sqrt(3) of it as a standard uncertainty.
                bool(spread[n] < LEARNED / np.sqrt(3.0)),
                bool(abs(found.x[n]) > 1 - 1e-6),
            )
        )
    chosen = {estimate.path: estimate.value for estimate in estimates}
    return Fit(
        tuple(estimates), correlation, _by_channel(first, log), _by_channel(found.fun, log), with_numbers(data, chosen),
        bool(found.status > 0), str(found.message),
    )


def _by_channel(residuals: Array, log: Sequence[Channel]) -> dict[str, float]:
    found, at = {}, 0
    for channel in log:
        part = residuals[at : at + len(channel.time)] * channel.sigma
        found[channel.name] = float(np.sqrt(np.mean(part**2)))
        at += len(channel.time)
    return found
