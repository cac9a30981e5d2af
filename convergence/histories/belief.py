"""What a ladder lets one believe of its limit, its order and whether it has a limit at all.

The evidence of every candidate limit is summed over the error laws with the weights of the bank. Levels of a
real ladder stray together more than independent scatter would, so evidence counts with the power
(3 / levels)^`caution`; the bank sets it.
"""

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from convergence.histories.evidence import evidence
from convergence.histories.laws import IS_GROWING, ORDERS, SCATTERS

TINY = 1e-300
SPREAD = np.logspace(-4.0, 3.5, 50)
FIXED_ORDERS = (
    *(-1.0, -0.75, -0.5, -0.25, -0.1),
    *(0.25, 0.5, 0.75, 1.0, 1.25, 1.5, 2.0, 2.5, 3.0, 4.0, 5.0),
)
AROUND = np.array([-6.0, -3.0, -1.5, -0.7, -0.3, -0.1, 0.0, 0.1, 0.3, 0.7, 1.5, 3.0, 6.0])


@dataclass(frozen=True, eq=False)
class Belief:
    """Candidate limits, ascending, and the plausibility (limits, courses, scatters) of each with every law.

    Plausibilities are densities over the limit, up to one common factor.
    """

    limits: np.ndarray
    plausible: np.ndarray

    @cached_property
    def _cumulative(self) -> np.ndarray:
        """Return the share of the belief in a limit at or below each candidate."""
        density = self.plausible[:, ~IS_GROWING].sum(axis=(1, 2))
        steps = 0.5 * (density[1:] + density[:-1]) * np.diff(self.limits)
        total = np.concatenate([[0.0], np.cumsum(steps)])
        return np.asarray(total / total[-1])

    @cached_property
    def _laws(self) -> np.ndarray:
        """Return the plausibility of every law (courses, scatters), whatever the limit."""
        return np.asarray(np.trapezoid(self.plausible, self.limits, axis=0))

    def half(self, share: float) -> float:
        """Return half the width of the central share of the belief."""
        ends = np.interp([0.5 - 0.5 * share, 0.5 + 0.5 * share], self._cumulative, self.limits)
        return float(0.5 * (ends[1] - ends[0]))

    @cached_property
    def limit(self) -> float:
        """Return the median of the belief, the best estimate of the limit."""
        return float(np.interp(0.5, self._cumulative, self.limits))

    @cached_property
    def growth(self) -> float:
        """Return the logarithm of the odds that the value grows without limit."""
        grows, falls = self._laws[IS_GROWING].sum(), self._laws[~IS_GROWING].sum()
        return float(np.log(max(grows, TINY)) - np.log(max(falls, TINY)))

    @cached_property
    def courses_with_limit(self) -> np.ndarray:
        """Return the share of each course among those with a limit, zero for the others."""
        shares = np.where(IS_GROWING, 0.0, self._laws.sum(axis=1))
        return np.asarray(shares / shares.sum())

    @cached_property
    def scatters(self) -> np.ndarray:
        """Return the share of each scatter among the laws with a limit."""
        shares = self._laws[~IS_GROWING].sum(axis=0)
        return np.asarray(shares / shares.sum())

    def order(self, share: float = 0.5) -> float:
        """Return a quantile of the order of all laws; below zero where the value grows."""
        orders, index = np.unique(ORDERS, return_inverse=True)
        shares = np.bincount(index, weights=self._laws.sum(axis=1))
        middle = np.cumsum(shares) - 0.5 * shares
        return float(np.interp(share, middle / shares.sum(), orders))


def belief(h: np.ndarray, f: np.ndarray, weights: np.ndarray, *, caution: float) -> Belief:
    """Return the belief from two levels or more; weights (courses, scatters) of the error laws."""
    limits = candidates(h, f)
    found = tempered(h, f, limits, caution)
    likely = np.exp(found - found.max())
    return Belief(limits, likely * weights)


def tempered(h: np.ndarray, f: np.ndarray, limits: np.ndarray, caution: float) -> np.ndarray:
    """Return the evidence of candidate limits with the power that so many levels deserve."""
    return np.asarray(evidence(h, f, limits) * (3.0 / len(f)) ** caution)


def candidates(h: np.ndarray, f: np.ndarray) -> np.ndarray:
    """Return limits to weigh: around the finest value at all distances, and around those of fixed orders.

    The latter in steps of what the misfit, or the least scatter, leaves open: evidence is that narrow there.
    """
    step = float(np.abs(np.diff(f)).max())
    found = [f[-1:], f[-1] + step * SPREAD, f[-1] - step * SPREAD]
    for order in FIXED_ORDERS:
        weight = (h[-1] / h) ** order
        rows = np.stack([weight, np.ones_like(weight)], axis=1)
        (limit, size), *_ = np.linalg.lstsq(rows, f * weight, rcond=None)
        misfit = np.linalg.norm(f * weight - rows @ (limit, size))
        width = max(misfit, SCATTERS[0] * abs(size)) / np.linalg.norm(weight - weight.mean())
        found.append(limit + max(width, 1e-6 * step) * AROUND)
    return np.unique(np.concatenate(found))
