"""How the stress at a corner grows over the levels: the exponent with its own interval, or like log h.

Stress intensity s of the cells at a corner grows like h^(λ−1) (Williams 1952, J. Appl. Mech. 19:526): ln s
over ln h is fitted by least squares, each level weighted by 1/h. On its way the slope between neighbouring
levels drifts. Half-width: how far the fit lags behind the last slope, or twice its standard error where that
is more, and all drift that is left where it falls by a fifth with each halving of h: four times the last one
at a ratio of 2. The drift before the last counts by half, so that one that vanishes by accident does not
narrow the interval.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np

FALLING, EARLIER = 0.8, 0.5
STANDARD_ERRORS = 2.0
NEARLY_LOG, WIDEST = 0.9, 0.25
CLEARER, LEAST_LEVELS = 0.25, 4  # one law's residual over the other's where they are told apart


@dataclass(frozen=True)
class Growth:
    """λ and its half-width, NaN where levels are too few; the law that fits clearly better, "" if none."""

    exponent: float
    half_width: float
    law: Literal["power", "log h", ""] = ""

    @property
    def low(self) -> float:
        return self.exponent - self.half_width

    @property
    def high(self) -> float:
        return self.exponent + self.half_width

    def agrees(self, exponent: float) -> bool | None:
        """Return whether the interval holds an exponent, None without one or where it is too wide to tell."""
        return self.low <= exponent <= self.high if self.half_width <= WIDEST else None


def growth(h: np.ndarray, intensity: np.ndarray) -> Growth:
    """Return the growth of a positive stress intensity; two levels give an exponent, three an interval."""
    usable = np.isfinite(intensity) & (intensity > 0.0)
    x, s, weight = np.log(h[usable]), intensity[usable], h[usable].min(initial=np.inf) / h[usable]
    if len(x) < 2 or not np.all(np.diff(x) < 0.0):
        return Growth(np.nan, np.nan)
    slope, power, error = _line(x, np.log(s), weight)
    if len(x) < 3:
        return Growth(1.0 + slope, np.nan)
    slopes = np.diff(np.log(s)) / np.diff(x)
    drifts, lag = np.abs(np.diff(slopes)), abs(slopes[-1] - slope)
    drift = max(drifts[-1], EARLIER * drifts[-2:].max())
    _, logarithm, _ = _line(x, s / s[-1], weight)
    law: Literal["power", "log h", ""] = ""
    if slope < 0.0 and len(x) >= LEAST_LEVELS and min(power, logarithm) < CLEARER * max(power, logarithm):
        law = "log h" if logarithm < power else "power"
    kept = FALLING ** ((x[-2] - x[-1]) / np.log(2.0))
    half = kept / (1.0 - kept) * drift + max(lag, STANDARD_ERRORS * error)
    return Growth(1.0 + slope, float(half), law)


def _line(x: np.ndarray, y: np.ndarray, weight: np.ndarray) -> tuple[float, float, float]:
    """Return slope, weighted residual and standard error of the slope (NaN from two places) of y over x."""
    rows = np.stack([x, np.ones_like(x)], axis=1)
    (slope, start), *_ = np.linalg.lstsq(rows * weight[:, None], y * weight, rcond=None)
    residual = float(np.linalg.norm((y - slope * x - start) * weight))
    middle = np.average(x, weights=weight**2)
    spread = np.linalg.norm((x - middle) * weight)
    error = residual / np.sqrt(len(x) - 2.0) / spread if len(x) > 2 else np.nan
    return float(slope), residual, float(error)


def growth_words(found: Growth, theory: float) -> str:
    """Return what the levels give for λ, beside what theory says."""
    if not np.isfinite(found.exponent):
        return "the levels do not measure it"
    if not np.isfinite(found.half_width):
        return f"the levels give {found.exponent:.3f}, too few for an interval"
    given = f"the levels give {found.exponent:.3f} ({found.low:.3f} to {found.high:.3f})"
    if found.agrees(theory) is None:
        return f"{given}, too wide to judge theory by"
    if found.agrees(theory):
        alike = " (growth like log h fits as well)" if found.law == "" and theory > NEARLY_LOG else ""
        return f"{given}, which agrees{alike}"
    if found.law == "log h":
        return f"{given} and fit growth like log h, which does not agree"
    return f"{given}, which does not agree: coarse levels, or a load that leaves the weakest term out"
