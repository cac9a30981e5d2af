"""Least-squares fit over all levels, with the fit, the safety factor and its scatter chosen by rule.

Eca & Hoekstra 2014 (rules from memory; the abstract confirms the frame). Written there for second order.
With another formal order p_f the limits 2 and 2.1 become p_f and p_f + 0.1, and the powers h and h^2
become h^(p_f/2) and h^p_f: a generalisation of this program, equal to the paper at p_f = 2.
"""

from dataclasses import dataclass

import numpy as np

from convergence.estimators._powers import Fit, fixed_powers, free_power
from convergence.estimators._triplet import assumed, joined, nothing
from convergence.results import Estimate
from convergence.sequences import noise_floor, unusable

SOURCE = (
    "L. Eca, M. Hoekstra, A procedure for the estimation of the numerical uncertainty of CFD calculations "
    "based on grid refinement studies, J. Comput. Phys. 262 (2014) 104-130, doi 10.1016/j.jcp.2014.01.006"
)
LEVELS = 4
LEAST_ORDER = 0.5
MARGIN = 0.1
SAME_ORDER = 1e-6
FACTOR = 1.25
DOUBTFUL_FACTOR = 3.0


@dataclass(frozen=True)
class Choice:
    """The fit the rules choose, and the observed order (NaN: none) that the safety factor depends on."""

    fit: Fit
    order: float
    free: bool


def least_squares(h: np.ndarray, f: np.ndarray, *, formal_order: float | None = None) -> Estimate:
    """Return the limit of the chosen fit, the observed order and the uncertainty of the finest value.

    All levels count, so a coarse level that resolves nothing spoils it. It does not cover sequences
    slower than about h^0.5, and it gives a finite width even where no order can be found: mind the remark.
    """
    reason = unusable(h, f, max(LEVELS, len(f)))
    if reason:
        return nothing(reason)
    finest, spread = float(f[-1]), float(np.max(f)) - float(np.min(f))
    if not noise_floor(f) < spread < np.inf:
        return nothing("the values differ by no more than round-off: there is nothing to fit")
    formal, remark = assumed(formal_order)
    x, y = h / h[0], (f - finest) / spread
    choice = chosen(x, y, formal)
    step = 1.0 / (len(f) - 1)
    width = half_width(choice, step, formal)
    remark = joined(remark, _doubts(choice, step, formal))
    return Estimate(finest + spread * choice.fit.limit, choice.order, spread * width, remark)


def chosen(x: np.ndarray, y: np.ndarray, formal: float) -> Choice:
    """Return step 2 of the procedure: the free power if its order is in range, else fixed powers."""
    weightings = ((1.0 / x) / np.sum(1.0 / x), np.full(len(x), 1.0 / len(x)))
    free = [free_power(x, y, w) for w in weightings]
    sound = [pair for pair in free if _reaches(pair[1], formal) and pair[1] <= formal + SAME_ORDER]
    if sound:
        return Choice(*min(sound, key=_sigma_of_pair), True)
    _, order = min(free, key=_sigma_of_pair)
    powers: list[tuple[float, ...]] = [(formal / 2.0,), (formal,)]
    if not order > formal:
        powers.append((formal / 2.0, formal))
    fits = [fixed_powers(x, y, w, power) for w in weightings for power in powers]
    return Choice(min(fits, key=_sigma), order, False)


def half_width(choice: Choice, step: float, formal: float) -> float:
    """Return steps 3 and 4; `step` is the range of the values over the number of steps."""
    fit = choice.fit
    spread = fit.sigma + abs(fit.residual)
    if fit.sigma >= step:
        return DOUBTFUL_FACTOR * fit.sigma / step * (abs(fit.error) + spread)
    trusted = _reaches(choice.order, formal) and choice.order < formal + MARGIN
    return (FACTOR if trusted else DOUBTFUL_FACTOR) * abs(fit.error) + spread


def _sigma(fit: Fit) -> float:
    return fit.sigma


def _sigma_of_pair(pair: tuple[Fit, float]) -> float:
    return pair[0].sigma


def _least(formal: float) -> float:
    return min(LEAST_ORDER, formal / 2.0)


def _reaches(order: float, formal: float) -> bool:
    """Return whether an order that was found (not NaN) is at least the smallest one trusted."""
    return order >= _least(formal) - SAME_ORDER


def _doubts(choice: Choice, step: float, formal: float) -> str:
    order = ""
    if np.isnan(choice.order):
        order = "no order can be found: fixed powers of h are fitted, with factor 3"
    elif not _reaches(choice.order, formal):
        order = f"observed order {choice.order:.2f} is below {_least(formal):g}: fixed powers of h are fitted"
    elif choice.order >= formal + MARGIN:
        order = f"observed order {choice.order:.2f} is above {formal:g}: a fixed power of h is fitted"
    scatter = "the scatter about the fit is as large as the change from level to level"
    return joined(order, scatter if choice.fit.sigma >= step else "")
