"""The evidence in closed form against numerical integration; what must not change it; where it peaks."""

import math
from itertools import pairwise

import numpy as np
import pytest
from scipy.integrate import quad
from scipy.stats import norm

from convergence.histories.evidence import _absolute_moment, evidence
from convergence.histories.laws import COURSES, KNEE, ORDERS, SCATTERS, courses

H = np.array([8.0, 4.0, 2.4, 1.0])
F = np.array([3.1, 4.2, 4.4, 4.75])
LIMITS = np.array([3.0, 4.6, 4.75, 4.9, 5.4, 9.0])


@pytest.mark.parametrize("order", [1, 2, 3, 4, 5, 6])
@pytest.mark.parametrize("z", [0.0, 0.3, 1.0, 4.0, 30.0])
def test_absolute_moments(order: int, z: float) -> None:
    """E|Z + z|^order, orders of two to seven levels; the integral is asked for to 1e-10."""
    wanted = sum(
        quad(lambda x: abs(x) ** order * norm.pdf(x - z), a, b, epsabs=0.0, epsrel=1e-10)[0]
        for a, b in ((z - 12.0, min(0.0, z)), (min(0.0, z), max(0.0, z)), (max(0.0, z), z + 12.0))
        if b > a
    )
    assert _absolute_moment(np.array([z]), order)[0] == pytest.approx(wanted, rel=1e-9)


def by_quadrature(h: np.ndarray, f: np.ndarray, limit: float, law: int, scatter: float) -> float:
    """Return ln of the integral over c of the density of the values, with the prior 1 / |c|, c = ± exp(t)."""
    g = courses(h)[law]

    def density(t: float, sign: float) -> float:
        c = sign * math.exp(t)
        u, spread = (f - limit - c * g) / (scatter * abs(c) * g), scatter * abs(c) * g
        return float(np.exp(-0.5 * u @ u) / np.prod(spread * math.sqrt(2.0 * math.pi)))

    ends = np.linspace(-12.0, 12.0, 49)
    parts = (
        quad(density, a, b, args=(sign,), epsabs=0.0, epsrel=1e-10)[0]
        for sign in (-1.0, 1.0)
        for a, b in pairwise(ends)
    )
    return math.log(sum(parts))


@pytest.mark.parametrize("law", [2, 10, 17, len(COURSES) - 1])
def test_the_closed_form_is_the_integral_over_the_size_of_the_error(law: int) -> None:
    """Up to (2π)^(-(n-1)/2), left out as the same for all candidates and laws of a ladder."""
    found = evidence(H, F, LIMITS)
    left_out = -0.5 * (len(F) - 1) * math.log(2.0 * math.pi)
    for place, limit in enumerate(LIMITS):
        for which in (2, 4):
            wanted = by_quadrature(H, F, float(limit), law, float(SCATTERS[which]))
            assert found[place, law, which] + left_out == pytest.approx(wanted, abs=1e-7)


@pytest.mark.parametrize(("shift", "scale"), [(0.0, -1.0), (100.0, 1.0), (-7.0, 145.0377), (0.0, 1e-6)])
def test_shift_and_scale_of_the_values(shift: float, scale: float) -> None:
    """Only a constant of the ladder changes, that of n values in another unit."""
    plain = evidence(H, F, LIMITS)
    moved = evidence(H, shift + scale * F, shift + scale * LIMITS)
    assert moved + len(F) * math.log(abs(scale)) == pytest.approx(plain, rel=1e-8, abs=1e-6)


@pytest.mark.parametrize("unit", [25.4, 1e-3])
def test_sizes_count_by_their_ratios(unit: float) -> None:
    assert evidence(unit * H, F, LIMITS) == pytest.approx(evidence(H, F, LIMITS), rel=1e-10)


@pytest.mark.parametrize("law", range(0, len(COURSES), 7))
def test_no_law_explains_an_exact_history_better_than_its_own(law: int) -> None:
    """Misfit and size are least there (the mean of squares is not below that of logarithms)."""
    at_truth = evidence(H, 5.0 - 0.3 * courses(H)[law], np.array([5.0]))[0]
    assert np.all(at_truth.argmax(axis=0) == law)


@pytest.mark.parametrize("order", [0.7, 1.0, 2.0, 4.0])
@pytest.mark.parametrize("levels", [3, 5])
def test_the_evidence_of_a_power_law_peaks_at_its_limit(order: float, levels: int) -> None:
    """The peak is off by the share ε = n v̄ τ² / Σ(v - v̄)² of the finest error, to first order in τ²."""
    h = 2.0 ** -np.arange(float(levels))
    law = int(np.flatnonzero(np.isinf(KNEE) & (order == ORDERS))[0])
    v = (h[-1] / h) ** order
    off = levels * v.mean() * SCATTERS[0] ** 2 / ((v - v.mean()) ** 2).sum()
    finest = 0.03 * h[-1] ** order
    limits = 5.0 + finest * np.linspace(-1.0, 1.0, 4001)
    peak = limits[evidence(h, 5.0 + 0.03 * h**order, limits)[:, law, 0].argmax()]
    assert abs(peak - 5.0) <= 1.5 * off * finest < 0.1 * finest
