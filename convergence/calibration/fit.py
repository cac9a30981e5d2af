"""Weights of the error laws, fitted to ladders with known limits by expectation-maximisation.

Each sub-ladder's evidence at its true limit says how plausible every law is; the weights are the mixture that
makes the whole set most plausible (Dempster, Laird & Rubin 1977, J. R. Stat. Soc. B 39:1). Families count the
same, however many ladders they have. Weights of a kind of quantity are drawn towards those of all. Growing
laws are fitted to the singular ladders, whose limit does not exist: to their evidence over all candidates.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from convergence.calibration.sub_ladders import SubLadder, family_weights
from convergence.histories.belief import candidates, tempered
from convergence.histories.laws import COURSES, IS_GROWING, SCATTERS
from convergence.histories.table import CAUTION

STEPS = 60
EVEN = 5.0  # sub-ladders that would stand for even weights
SHARED = 30.0  # sub-ladders that would stand for the weights of all kinds
SHAPE = (len(COURSES), len(SCATTERS))
GROWS = np.repeat(IS_GROWING, len(SCATTERS))


@dataclass(frozen=True, eq=False)
class Weighed:
    """The tempered evidence of a sub-ladder: at candidates (limits, laws), at the truth, over all of them."""

    sub: SubLadder
    limits: np.ndarray
    likely: np.ndarray
    at_truth: np.ndarray
    over_all: np.ndarray


def weighed(sub: SubLadder) -> Weighed:
    """Return the evidence of a sub-ladder; a singular one has none at a truth (zeros)."""
    limits = candidates(sub.h, sub.f)
    places = limits if sub.of.singular else np.append(limits, sub.of.limit)
    found = tempered(sub.h, sub.f, places, CAUTION).reshape(len(places), -1)
    likely = np.exp(found - found.max())
    at_truth = np.zeros(likely.shape[1]) if sub.of.singular else np.exp(found[-1] - found[-1].max())
    likely = likely[: len(limits)]
    over_all = np.trapezoid(likely, limits, axis=0)
    return Weighed(sub, limits, likely.astype(np.float32), at_truth, over_all / over_all.max())


def fitted_weights(known: Sequence[Weighed], shared: np.ndarray | None = None) -> np.ndarray:
    """Return weights (courses, scatters) of the falling laws; they add up to one."""
    rows = np.array([one.at_truth for one in known]) * ~GROWS
    prior = EVEN * ~GROWS / (~GROWS).sum() if shared is None else SHARED * shared.ravel()
    return _mixture(rows, family_weights([one.sub.of.family for one in known]), prior).reshape(SHAPE)


def fitted_growth(known: Sequence[Weighed]) -> np.ndarray:
    """Return weights (courses, scatters) of the growing laws; they add up to one."""
    rows = np.array([one.over_all for one in known]) * GROWS
    prior = EVEN * GROWS / GROWS.sum()
    return _mixture(rows, family_weights([one.sub.of.family for one in known]), prior).reshape(SHAPE)


def _mixture(rows: np.ndarray, counts: np.ndarray, prior: np.ndarray) -> np.ndarray:
    weights = prior / prior.sum()
    for _ in range(STEPS):
        shares = rows * weights
        shares /= np.maximum(shares.sum(axis=1, keepdims=True), np.finfo(float).tiny)
        weights = counts @ shares + prior
        weights /= weights.sum()
    return np.asarray(weights)
