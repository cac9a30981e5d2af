"""The interval of one quantity: the widest of the index, the least-squares uncertainty and the last change.

Its coverage is not calibrated. It stands about the finest value.
"""

import math
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from convergence import rooms
from convergence.results import Estimate
from convergence.sequences import behaviour, noise_floor, observed_order

PARTS = {
    "grid_convergence_index": "grid convergence index",
    "least_squares": "least-squares uncertainty",
    "last change": "last change",
}
LEAST_ORDER = 0.05


@dataclass(frozen=True)
class Interval:
    """What the levels with a value say. NaN where there is none.

    `widths` are the half-widths the interval was chosen from; `lost` is the number of levels without a
    value; `flaw` says why there is no interval, "" where there is one.
    """

    value: float
    limit: float
    half_width: float
    order: float
    behaviour: str
    widths: Mapping[str, float]
    levels: int
    lost: int
    flaw: str
    estimates: Mapping[str, Estimate]

    @property
    def low(self) -> float:
        return self.value - self.half_width

    @property
    def high(self) -> float:
        return self.value + self.half_width


def interval(
    h: np.ndarray, f: np.ndarray, *, formal_order: float | None, resolution: float = 0.0
) -> Interval:
    """Judge the values f over the sizes h, coarse to fine; NaN values are left out."""
    usable = np.isfinite(f)
    x, y = h[usable], f[usable]
    estimates = {
        name: rooms.find("estimators", name)(x, y, formal_order=formal_order)
        for name in rooms.names("estimators")
    }
    noise = noise_floor(y, resolution)
    manner = behaviour(x, y, noise)
    widths = _widths(x, y, estimates, noise)
    flaw = _flaw(x, f, y, manner, formal_order, estimates["least_squares"].order)
    half = max(widths.values(), default=math.nan)
    if manner == "constant":
        half = max(noise, float(np.ptp(y[-3:])))
    if flaw:
        half = math.nan
    return Interval(
        value=float(f[-1]) if len(f) else math.nan,
        limit=math.nan if flaw else _limit(y, estimates, manner),
        half_width=half,
        order=observed_order(x, y) if manner not in ("constant", "too few levels") else math.nan,
        behaviour=manner,
        widths=widths,
        levels=len(y),
        lost=len(f) - len(y),
        flaw=flaw,
        estimates=estimates,
    )


def _widths(
    h: np.ndarray, f: np.ndarray, estimates: Mapping[str, Estimate], noise: float
) -> dict[str, float]:
    found = {name: estimates[key].uncertainty for key, name in PARTS.items() if key in estimates}
    if len(f) >= 2:
        found["last change"] = _last_change(h, f, noise)
    return {name: float(width) for name, width in found.items() if math.isfinite(width)}


def _last_change(h: np.ndarray, f: np.ndarray, noise: float) -> float:
    """Return the last change; one that vanishes by accident is replaced by the one before, at order one."""
    last = abs(float(f[-1] - f[-2]))
    if last > noise or len(f) < 3:
        return last
    return max(last, abs(float(f[-2] - f[-3])) * float(h[-1] / h[-2]))


def _limit(f: np.ndarray, estimates: Mapping[str, Estimate], manner: str) -> float:
    """Return the limit of the fit over all levels where its conditions hold, else of the finest ones."""
    if manner == "constant":
        return float(f[-1])
    fitted = estimates["least_squares"]
    if math.isfinite(fitted.limit) and not fitted.remark:
        return fitted.limit
    for name in ("richardson", "grid_convergence_index", "least_squares"):
        if math.isfinite(estimates[name].limit):
            return estimates[name].limit
    return math.nan


def _flaw(
    h: np.ndarray,
    f: np.ndarray,
    usable: np.ndarray,
    manner: str,
    formal_order: float | None,
    fitted_order: float,
) -> str:
    """Return why no interval can be stated, "" where one can.

    Diverging changes of the last three levels are no flaw where the fit over all levels converges.
    """
    if len(usable) == 0 or not math.isfinite(f[-1]):
        return "the finest level has no value"
    if np.any(h[1:] >= h[:-1]):
        return "two levels have the same size but different values, so there is no ratio; keep one of them"
    if len(usable) == 1:
        return "one level says nothing about its error; add at least two more"
    if len(usable) == 2 and formal_order is None:
        return "two levels say nothing about the order, and theory's is not known; add a level"
    if manner.endswith("divergence") and not math.isfinite(fitted_order):
        order = observed_order(h, usable)
        stated = f", observed order {order:.2f}" if math.isfinite(order) else ""
        return f"the last three levels show {manner}{stated}: the changes grow"
    if manner == "monotone convergence" and observed_order(h, usable) < LEAST_ORDER:
        return "the changes of the last three levels hardly shrink: growth like log h looks the same"
    return ""
