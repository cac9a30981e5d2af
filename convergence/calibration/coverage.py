"""Coverage and width of every estimate over ladders with known limits.

"Covers": the limit lies within the half-width U of the finest value. U/e: half-width over true error.
"""

import math
from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np

from convergence.calibration.exact_ladders import KnownLadder
from convergence.intervals import interval

LEVELS = (3, 4, 5)
STATED = "interval as stated"
NEGLIGIBLE = 1e-8


@dataclass(frozen=True)
class Count:
    """What one method did on one number of levels: cases, answers, covered, U/e of each answer."""

    cases: int
    answered: int
    covered: int
    ratios: tuple[float, ...]

    @property
    def coverage(self) -> float:
        """Return the share of answers that cover, NaN without an answer."""
        return self.covered / self.answered if self.answered else math.nan

    @property
    def median_ratio(self) -> float:
        """Return the median of U/e over the answers, NaN without an answer."""
        return float(np.median(self.ratios)) if self.ratios else math.nan


def coverage(ladders: Iterable[KnownLadder]) -> dict[tuple[str, int], Count]:
    """Return a count per method and number of levels, over all runs of neighbouring levels."""
    found: dict[tuple[str, int], list[tuple[float, float]]] = {}
    for ladder in ladders:
        scale = max(float(np.abs(ladder.f).max()), abs(ladder.limit))
        for count in LEVELS:
            for end in range(count, len(ladder.f) + 1):
                h, f = ladder.h[end - count : end], ladder.f[end - count : end]
                error = abs(float(f[-1]) - ladder.limit)
                if error <= NEGLIGIBLE * scale:
                    continue
                for method, width in _widths(h, f, ladder.formal_order).items():
                    found.setdefault((method, count), []).append((width, error))
    return {key: _count(pairs) for key, pairs in found.items()}


def _widths(h: np.ndarray, f: np.ndarray, formal_order: float) -> dict[str, float]:
    judged = interval(h, f, formal_order=formal_order)
    widths = {name: estimate.uncertainty for name, estimate in judged.estimates.items()}
    return {**widths, STATED: judged.half_width}


def _count(pairs: list[tuple[float, float]]) -> Count:
    answers = [(width, error) for width, error in pairs if math.isfinite(width)]
    covered = sum(width >= error for width, error in answers)
    return Count(len(pairs), len(answers), covered, tuple(width / error for width, error in answers))
