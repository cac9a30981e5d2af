"""Least-squares fits of f0 + sum a_k x^q_k and of f0 + a x^p with p free (variable projection).

x = h / h_coarsest, so 0 < x <= 1; weights w sum to 1; y holds the values, scaled to order 1.
"""

from dataclasses import dataclass

import numpy as np

ORDERS = np.geomspace(0.02, 20.0, 121)
ZOOM_POINTS = 17
ZOOMS = 12


@dataclass(frozen=True)
class Fit:
    """A fit seen from the finest level: its limit, the error of the fit there, its scatter, the residual.

    `sigma` is Eca & Hoekstra's standard deviation of the fit.
    """

    limit: float
    error: float
    sigma: float
    residual: float


def fixed_powers(x: np.ndarray, y: np.ndarray, w: np.ndarray, powers: tuple[float, ...]) -> Fit:
    """Fit f0 + sum a_k x^q_k."""
    return _linear(x, y, w, powers, len(x) - 1 - len(powers))


def free_power(x: np.ndarray, y: np.ndarray, w: np.ndarray) -> tuple[Fit, float]:
    """Fit f0 + a x^p over p in `ORDERS`, return the fit and p.

    Every local minimum is refined, the lowest wins. p is NaN where that lies at an end: the levels want a
    logarithm or growth, or a jump of the coarsest level alone, and no order can be found.
    """
    log_x = np.log(x)
    misfit, _ = _misfit(ORDERS, log_x, y, w)
    inner = np.flatnonzero((misfit[1:-1] <= misfit[:-2]) & (misfit[1:-1] <= misfit[2:])) + 1
    refined = [_refined(log_x, y, w, ORDERS[i - 1], ORDERS[i + 1]) for i in inner]
    candidates = np.array([ORDERS[0], ORDERS[-1], *refined])
    best = float(candidates[np.argmin(_misfit(candidates, log_x, y, w)[0])])
    order = best if ORDERS[0] < best < ORDERS[-1] else float("nan")
    return _linear(x, y, w, (best,), len(x) - 3), order


def _linear(x: np.ndarray, y: np.ndarray, w: np.ndarray, powers: tuple[float, ...], freedom: int) -> Fit:
    columns = np.stack([np.ones_like(x), *(x**power for power in powers)], axis=1)
    root = np.sqrt(w)
    coefficients = np.linalg.lstsq(columns * root[:, None], y * root, rcond=None)[0]
    residuals = y - columns @ coefficients
    sigma = float(np.sqrt(len(x) * (w @ residuals**2) / freedom))
    error = float(columns[-1, 1:] @ coefficients[1:])
    return Fit(float(coefficients[0]), error, sigma, float(residuals[-1]))


def _misfit(p: np.ndarray, log_x: np.ndarray, y: np.ndarray, w: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return the weighted squared misfit of each p, best f0 and a taken, and a number of its slope's sign.

    The column is (x^p - 1)/p, which spans the same functions with 1 as x^p and becomes ln x at p -> 0.
    At the best f0 and a only the explicit dependence on p counts in the slope.
    """
    exponent = p[:, None] * log_x
    column = np.expm1(exponent) / p[:, None]
    column = column - (column @ w)[:, None]
    factor = (column @ (w * y)) / (column**2 @ w)
    residual = y - y @ w - factor[:, None] * column
    slope = -factor * ((residual * np.exp(exponent)) @ (w * log_x))
    return residual**2 @ w, slope


def _refined(log_x: np.ndarray, y: np.ndarray, w: np.ndarray, low: float, high: float) -> float:
    """Return the p between `low` and `high` where the slope of the misfit changes from - to +.

    The zero of the slope is found to full precision, a minimum of the misfit itself to half of it.
    """
    for _ in range(ZOOMS):
        p = np.linspace(low, high, ZOOM_POINTS)
        misfit, slope = _misfit(p, log_x, y, w)
        falls = slope < 0.0
        if falls.all() or not falls[0]:
            return float(p[np.argmin(misfit)])
        first = int(np.argmin(falls))
        low, high = float(p[first - 1]), float(p[first])
    return 0.5 * (low + high)
