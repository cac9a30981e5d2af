"""Quantiles of a belief known in closed form, its order, the odds of growth, the candidates."""

import numpy as np
import pytest
from scipy.stats import norm

from convergence.histories.belief import Belief, belief, candidates
from convergence.histories.evidence import evidence
from convergence.histories.laws import COURSES, IS_GROWING, KNEE, ORDERS, SCATTERS

SHAPE = (len(COURSES), len(SCATTERS))
EVEN = np.where(IS_GROWING, 1.0 / IS_GROWING.sum(), 1.0 / (~IS_GROWING).sum())[:, None] * np.ones(SHAPE)
LIMITS = 5.0 + 0.2 * np.linspace(-8.0, 8.0, 4001)


def law(order: float) -> int:
    return int(np.flatnonzero(np.isinf(KNEE) & (order == ORDERS))[0])


def of(shares: dict[float, float], scatter: int = 1) -> Belief:
    """Return a belief normal in the limit, 5 ± 0.2, shared by some orders."""
    plausible = np.zeros((len(LIMITS), *SHAPE))
    for order, share in shares.items():
        plausible[:, law(order), scatter] = share * norm.pdf(LIMITS, 5.0, 0.2)
    return Belief(LIMITS, plausible)


def test_quantiles_of_a_normal_belief() -> None:
    """Steps of 0.004 deviations: straight lines between are off by less than 1e-5 deviations."""
    found = of({2.0: 1.0})
    assert found.limit == pytest.approx(5.0, abs=1e-5)
    for share in (0.5, 0.7, 0.9, 0.99):
        assert found.half(share) == pytest.approx(0.2 * norm.ppf(0.5 + 0.5 * share), abs=1e-5)


def test_a_belief_in_growth_does_not_move_the_limit() -> None:
    plausible = of({2.0: 1.0}).plausible.copy()
    plausible[:, law(-0.5), 0] = 50.0 * (LIMITS > 5.5)
    assert Belief(LIMITS, plausible).limit == of({2.0: 1.0}).limit


def test_growth_is_the_log_odds() -> None:
    assert of({-0.5: 0.3, 1.0: 0.1}).growth == pytest.approx(np.log(3.0), abs=1e-9)
    assert of({-0.5: 0.1, -1.0: 0.1, 1.0: 0.2}).growth == pytest.approx(0.0, abs=1e-9)
    assert of({1.0: 1.0}).growth < -500.0 and of({-1.0: 1.0}).growth > 500.0


def test_shares_of_courses_and_scatters() -> None:
    found = of({-0.5: 0.5, 1.0: 0.1, 2.0: 0.3}, scatter=3)
    assert found.courses_with_limit[law(1.0)] == pytest.approx(0.25)
    assert found.courses_with_limit[law(2.0)] == pytest.approx(0.75)
    assert found.courses_with_limit.sum() == pytest.approx(1.0)
    assert found.scatters.tolist() == pytest.approx([0.0, 0.0, 0.0, 1.0, 0.0, 0.0])


def test_quantiles_of_the_order() -> None:
    """The median of one order is that order, its ends are between its neighbours in the table of laws."""
    one = of({2.0: 1.0})
    assert one.order() == pytest.approx(2.0)
    assert 1.75 <= one.order(0.025) < 2.0 < one.order(0.975) <= 2.25
    two = of({1.0: 0.5, 3.0: 0.5})
    assert 1.0 < two.order() < 3.0
    assert of({-0.75: 0.9, 2.0: 0.1}).order() < 0.0
    shares = np.linspace(0.01, 0.99, 15)
    assert np.all(np.diff([two.order(share) for share in shares]) >= 0.0)


@pytest.mark.parametrize("levels", [4, 5, 6])
@pytest.mark.parametrize("ratio", [1.5, 2.0])
def test_growth_tells_a_corner_from_a_limit(levels: int, ratio: float) -> None:
    """Even weights. Stress at a free corner of 270° grows like h^-0.4555 (Williams 1952)."""
    h = ratio ** -np.arange(float(levels))

    def growth(f: np.ndarray) -> float:
        return belief(h, f, EVEN, caution=0.0).growth

    corner, logarithm = growth(h**-0.4555), growth(-np.log(h))
    assert corner > 0.0 > growth(h**1.0) > growth(h**2.0)
    assert corner > logarithm > growth(h**0.7)


@pytest.mark.parametrize("order", [0.7, 1.0, 2.0, 3.0])
def test_a_power_law_is_recognised(order: float) -> None:
    """Six exact levels, even weights: limit and order are found, more levels are surer."""
    h = 2.0 ** -np.arange(6.0)
    f = 5.0 - 0.03 * h**order
    found = belief(h, f, EVEN, caution=0.0)
    finest = abs(f[-1] - 5.0)
    assert found.limit == pytest.approx(5.0, abs=0.3 * finest)
    assert found.order(0.025) <= order <= found.order(0.975)
    assert found.half(0.9) < belief(h[-3:], f[-3:], EVEN, caution=0.0).half(0.9)


def test_caution_widens_what_more_than_three_levels_say() -> None:
    h = 2.0 ** -np.arange(5.0)
    f = 5.0 - 0.03 * h
    careful, rash = (belief(h, f, EVEN, caution=caution).half(0.9) for caution in (0.35, 0.0))
    assert careful > rash
    three = [belief(h[-3:], f[-3:], EVEN, caution=caution).half(0.9) for caution in (0.35, 0.0)]
    assert three[0] == three[1]


@pytest.mark.parametrize("f", [(1.0, 1.4), (1.0, 2.0, 1.5, 1.75), (3.0, 3.0, 3.0, 4.0)])
def test_candidates(f: tuple) -> None:
    """Ascending, all different, on both sides of the finest value, which is among them."""
    values = np.array(f)
    found = candidates(2.0 ** -np.arange(float(len(f))), values)
    step = np.abs(np.diff(values)).max()
    assert np.all(np.diff(found) > 0.0) and f[-1] in found
    assert found[0] < f[-1] - 1e3 * step and found[-1] > f[-1] + 1e3 * step


@pytest.mark.parametrize("order", [-0.4555, -0.1, 0.7, 1.0, 2.0])
@pytest.mark.parametrize("ratio", [1.5, 2.0])
def test_the_candidates_resolve_the_evidence(order: float, ratio: float) -> None:
    """Six exact levels, the sharpest evidence: candidates twenty times as dense say nearly the same.

    Beyond 1.5 deviations the steps double, so straight lines lie above a normal density and 90 % come out
    too wide, never too narrow. Odds of e^0.5 are no evidence of anything.
    """
    h = ratio ** -np.arange(6.0)
    f = 5.0 + 0.03 * h**order
    found = belief(h, f, EVEN, caution=0.35)
    places = np.arange(len(found.limits), dtype=float)
    dense = np.interp(np.arange(0.0, places[-1], 0.05), places, found.limits)
    weighed = evidence(h, f, dense) * 0.5**0.35
    wanted = Belief(dense, np.exp(weighed - weighed.max()) * EVEN)
    assert found.growth == pytest.approx(wanted.growth, abs=0.5)
    assert 0.95 < found.half(0.9) / wanted.half(0.9) < 1.5
    assert found.limit == pytest.approx(wanted.limit, abs=0.5 * wanted.half(0.7))
