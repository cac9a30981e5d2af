"""The interval of one quantity, calibrated on the bank."""

import math
from dataclasses import dataclass

import numpy as np

from convergence.coverage import Coverage
from convergence.histories.calibrated import Calibrated, Growth, calibrated
from convergence.results import Kind
from convergence.sequences import behaviour, noise_floor, observed_order


@dataclass(frozen=True)
class Interval:
    """What the levels with a value say. NaN where there is none.

    `limit` is the best estimate, `low` and `high` its calibrated interval, `half_width` that about the finest
    value. `order` is that of the last three levels; the order of the error law lies from `order_low` to
    `order_high`. `growth`: whether the levels show, allow or exclude that there is no limit. `lost` is the
    number of levels without a value; `flaw` says why there is no interval, "" where there is one; `companion`
    what a second ladder says and `side` on which side of the values the limit is known to be, "" for nothing.
    """

    value: float
    limit: float
    low: float
    high: float
    half_width: float
    order: float
    order_low: float
    order_high: float
    growth: Growth
    behaviour: str
    levels: int
    lost: int
    flaw: str
    coverage: Coverage | None
    companion: str = ""
    side: str = ""


def interval(
    h: np.ndarray,
    f: np.ndarray,
    *,
    kind: Kind = "unknown",
    degree: int | None = None,
    resolution: float = 0.0,
) -> Interval:
    """Judge the values f over the sizes h, coarse to fine; NaN values are left out."""
    usable = np.isfinite(f)
    x, y = h[usable], f[usable]
    noise = noise_floor(y, resolution)
    manner = behaviour(x, y, noise)
    flaw = _flaw(x, f, y)
    value = float(f[-1]) if len(f) else math.nan
    if flaw:
        found = None
    elif manner == "constant" or np.ptp(y) <= noise:
        found = _still(y, noise)
    else:
        found = calibrated(x, y, kind=kind, degree=degree, resolution=0.5 * noise)
    return Interval(
        value=value,
        limit=found.limit if found else math.nan,
        low=found.low if found else math.nan,
        high=found.high if found else math.nan,
        half_width=found.about(value) if found else math.nan,
        order=observed_order(x, y) if manner not in ("constant", "too few levels") else math.nan,
        order_low=found.order_low if found else math.nan,
        order_high=found.order_high if found else math.nan,
        growth=found.growth if found else "possible",
        behaviour=manner,
        levels=len(y),
        lost=len(f) - len(y),
        flaw=flaw,
        coverage=found.coverage if found else None,
    )


def _still(f: np.ndarray, noise: float) -> Calibrated:
    """Return the interval of values that do not move by more than round-off or their printed digits."""
    half = max(noise, float(np.ptp(f[-3:])))
    value = float(f[-1])
    return Calibrated(value, value - half, value + half, math.nan, math.nan, "excluded", -math.inf, None)


def _flaw(h: np.ndarray, f: np.ndarray, usable: np.ndarray) -> str:
    """Return why no interval can be stated, "" where one can."""
    if len(usable) == 0 or not math.isfinite(f[-1]):
        return "the finest level has no value"
    if np.any(h[1:] >= h[:-1]):
        return "two levels have the same size but different values, so there is no ratio; keep one of them"
    if len(usable) == 1:
        return "one level says nothing about its error; add at least two more"
    return ""
