"""Half-width of the interval about the best estimate: that of the belief, stretched as the bank demands.

The belief alone is too sure of some ladders and too shy of others. Its central 70 % are multiplied by
exp(β·φ): φ are facts of belief and ladder that neither a shift nor a scale of the values changes, β were
fitted by quantile regression to the true errors of the bank, one set for each number of levels and each state
of knowledge.
"""

from collections.abc import Mapping

import numpy as np

from convergence.histories.belief import Belief
from convergence.histories.laws import KNEE, ORDERS, SCATTERS
from convergence.histories.table import HIGHEST_DEGREE

CENTRAL = 0.7
UNIT = "half of 70 %"
LEAST_CHANGE = 1e-3
LEAST_OFFSET = 0.01
MOST_LEVELS = 5


def levels_key(levels: int) -> str:
    """Return "2", "3", "4" or "5": five stands for five and more."""
    return str(min(levels, MOST_LEVELS))


def half_width(told: Mapping[str, float], stretch: Mapping[str, float]) -> float:
    """Return the half-width about the best estimate from the facts and their β."""
    return told[UNIT] * float(np.exp(sum(beta * told.get(name, 0.0) for name, beta in stretch.items())))


def facts(found: Belief, h: np.ndarray, f: np.ndarray, kind: str, degree: int | None) -> dict[str, float]:
    """Return φ by name, and the half of the central 70 % of the belief."""
    unit, changes = found.half(CENTRAL), np.abs(np.diff(f))
    span = float(np.ptp(f))
    degree = None if degree is None else min(degree, HIGHEST_DEGREE)
    before = changes[-2] if len(changes) > 1 else changes[-1]
    courses = found.courses_with_limit
    order = float(courses @ ORDERS)
    return {
        UNIT: unit,
        "always": 1.0,
        f"is {kind}": 1.0,
        f"degree {degree}": 1.0,
        "half of 50 %": _log(found.half(0.5), unit),
        "half of 90 %": _log(found.half(0.9), unit),
        "half of 99 %": _log(found.half(0.99), unit),
        "finest from the estimate": _log(abs(float(f[-1]) - found.limit) + LEAST_OFFSET * unit, unit),
        "span": _log(span, unit),
        "last change": _log(max(float(changes[-1]), LEAST_CHANGE * span), span),
        "change before": _log(max(float(before), LEAST_CHANGE * span), span),
        "order": order,
        "spread of the order": float(np.sqrt(max(courses @ ORDERS**2 - order**2, 0.0))),
        "scatter": float(found.scatters @ np.log(SCATTERS)),
        "kneed": float(courses[np.isfinite(KNEE)].sum()),
        "last ratio": _log(float(h[-2]), float(h[-1])),
    }


def _log(value: float, unit: float) -> float:
    return float(np.log(value / unit))
