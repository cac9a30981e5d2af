"""Weights and stretches from made-up ladders whose laws and quantiles are known."""

import numpy as np
import pytest

from convergence.calibration.fit import EVEN, fitted_growth, fitted_weights, weighed
from convergence.calibration.stretches import NEAR, REGRESSED, conformal, quantile_regression
from convergence.calibration.sub_ladders import SubLadder
from convergence.histories.laws import IS_GROWING, ORDERS

HALFWAY = 1.5
STEEP = ORDERS[~IS_GROWING] > HALFWAY


def of_laws(lawful, counts: dict[float, tuple[str, int]]):
    """Ladders of errors h^order with 3 % scatter, so many of each order, in the family named with it."""
    random = np.random.default_rng(3)
    ladders = [
        lawful(order, family=family, stray=0.03 * random.standard_normal(5))
        for order, (family, count) in counts.items()
        for _ in range(count)
    ]
    return [weighed(SubLadder(ladder, ladder.h, ladder.f)) for ladder in ladders]


def steep_share(weights: np.ndarray) -> float:
    return float(weights[~IS_GROWING][STEEP].sum())


def expected(share: float, count: int) -> float:
    """Return the share where EVEN ladders more, spread over all laws, are counted with `count` ladders."""
    return (share * count + EVEN * STEEP.mean()) / (count + EVEN)


def test_the_mixture_of_two_laws_is_found(lawful) -> None:
    """Orders 1 and 2 over a ratio of 16 with 3 % scatter are not mixed up, so the share is that of counts."""
    weights = fitted_weights(of_laws(lawful, {2.0: ("one", 84), 1.0: ("one", 36)}))
    assert weights.sum() == pytest.approx(1.0)
    assert weights[IS_GROWING].sum() == 0.0
    assert steep_share(weights) == pytest.approx(expected(0.7, 120), abs=0.01)


def test_families_count_the_same(lawful) -> None:
    weights = fitted_weights(of_laws(lawful, {2.0: ("large", 100), 1.0: ("small", 20)}))
    assert steep_share(weights) == pytest.approx(expected(0.5, 120), abs=0.01)


def test_own_weights_are_drawn_towards_the_shared_ones(lawful) -> None:
    known = of_laws(lawful, {2.0: ("one", 40)})
    shared = fitted_weights(of_laws(lawful, {1.0: ("one", 40)}))
    assert (
        steep_share(shared) < steep_share(fitted_weights(known, shared)) < steep_share(fitted_weights(known))
    )


def test_weights_of_growth_are_of_growing_laws_only(lawful) -> None:
    weights = fitted_growth(of_laws(lawful, {-0.5: ("one", 20)}))
    assert weights[~IS_GROWING].sum() == 0.0
    assert weights.sum() == pytest.approx(1.0)
    slowest = np.abs(ORDERS[IS_GROWING] + 0.5) <= 0.25
    assert weights[IS_GROWING][slowest].sum() > 0.8


def test_a_constant_alone_is_the_empirical_quantile() -> None:
    """Of even y in 0 … 1. The way to the minimum rounds its corner off by NEAR log(q / (1 - q))."""
    y = np.random.default_rng(1).permutation(np.linspace(0.0, 1.0, 2001))
    (found,) = quantile_regression(np.ones((len(y), 1)), y, np.ones(len(y)))
    off = NEAR * np.log(REGRESSED / (1.0 - REGRESSED))
    assert found == pytest.approx(REGRESSED, abs=off + 1.0 / 2000)


def test_the_share_below_is_as_asked() -> None:
    """Scatter that grows with x: at each half of x the asked share lies below, and β is known."""
    random = np.random.default_rng(2)
    x = random.uniform(0.0, 1.0, 4000)
    y = 1.0 + 2.0 * x + (1.0 + x) * random.uniform(0.0, 1.0, len(x))
    rows = np.stack([np.ones_like(x), x], axis=1)
    found = quantile_regression(rows, y, np.ones(len(y)))
    sampling = 3.0 * np.sqrt(REGRESSED * (1.0 - REGRESSED) / 2000)
    for half in (x < 0.5, x >= 0.5):
        assert np.mean(y[half] <= (rows @ found)[half]) == pytest.approx(REGRESSED, abs=sampling)


def test_weights_of_the_regression_count_as_copies() -> None:
    """The rounding NEAR of the corner is as far as two ways to the same minimum may lie apart."""
    random = np.random.default_rng(6)
    y, copies = random.uniform(0.0, 1.0, 500), random.integers(1, 4, 500)
    (weighted,) = quantile_regression(np.ones((500, 1)), y, copies.astype(float))
    every = np.repeat(y, copies)
    (copied,) = quantile_regression(np.ones((len(every), 1)), every, np.ones(len(every)))
    assert weighted == pytest.approx(copied, abs=NEAR)


def test_the_next_one_is_covered_as_asked() -> None:
    """Each of a set held against the bound from all others: the conformal guarantee, without a gap."""
    values = np.random.default_rng(4).normal(size=200)
    for asked in (0.8, 0.9, 0.955):
        below = [one <= conformal(np.delete(values, n), asked) for n, one in enumerate(values)]
        assert asked <= np.mean(below) <= asked + 1.5 / len(values)


def test_too_few_give_their_largest() -> None:
    assert conformal(np.array([3.0, 1.0, 2.0]), 0.955) == 3.0
