"""The least-squares procedure against worked vectors, its search for p, its branches."""

import json
from math import isnan
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence.estimators._powers import ORDERS, fixed_powers, free_power
from convergence.estimators.least_squares import Choice, chosen, half_width, least_squares

FILE = Path(__file__).parents[1] / "reference" / "least_squares_vectors.json"
VECTORS = json.loads(FILE.read_text())["vectors"]
POWERS = {"1": (1.0,), "2": (2.0,), "12": (1.0, 2.0)}
WEIGHTS = ("weighted", "unweighted")


def ladder(name: str) -> tuple[np.ndarray, np.ndarray]:
    """Return sizes and values of a vector, coarse to fine."""
    vector = VECTORS[name]
    h = np.array(vector["h"], dtype=float)
    if "law" in vector:
        limit, c, p = vector["law"]
        return h[::-1], (limit + c * h**p)[::-1]
    return h[::-1], np.array(vector["f"])[::-1]


def weights(h: np.ndarray, kind: str) -> np.ndarray:
    raw = 1.0 / h if kind == "weighted" else np.ones_like(h)
    return raw / raw.sum()


@pytest.mark.parametrize("name", VECTORS)
def test_uncertainty_limit_and_order(name: str) -> None:
    vector, (h, f) = VECTORS[name], ladder(name)
    estimate = least_squares(h, f)
    assert estimate.uncertainty == pytest.approx(vector["uncertainty"], abs=1e-8)  # ten decimals, p to 1e-8
    assert estimate.limit == pytest.approx(vector["limit"], abs=6e-9)
    assert least_squares(h, f, formal_order=2.0).uncertainty == estimate.uncertainty
    if vector["orders"][0] is None:
        assert isnan(estimate.order)
    else:
        assert min(abs(estimate.order - order) for order in vector["orders"]) < 1e-7


@pytest.mark.parametrize("name", VECTORS)
def test_parts_of_the_uncertainty(name: str) -> None:
    vector, (h, f) = VECTORS[name], ladder(name)
    choice = chosen(h / h[0], f, 2.0)
    step = (f.max() - f.min()) / (len(f) - 1)
    assert step == pytest.approx(vector["step"], abs=6e-11)
    assert choice.free == (vector["fit"] == "free")
    assert abs(choice.fit.error) == pytest.approx(vector["error"], abs=6e-11)
    assert choice.fit.sigma == pytest.approx(vector["sigma"], abs=6e-8)
    assert abs(choice.fit.residual) == pytest.approx(vector["residual"], abs=6e-8)
    assert half_width(choice, step, 2.0) == pytest.approx(vector["uncertainty"], abs=1e-8)
    if not choice.free:
        powers, kind = vector["fit"].split()
        assert choice.fit == fixed_powers(h / h[0], f, weights(h, kind), POWERS[powers])


@pytest.mark.parametrize("name", VECTORS)
def test_free_orders(name: str) -> None:
    h, f = ladder(name)
    for kind, expected in zip(WEIGHTS, VECTORS[name]["orders"], strict=True):
        _, order = free_power(h / h[0], f, weights(h, kind))
        # the vectors' p comes from a minimum of S, which is flat: 1e-7 is sqrt(round-off) times ten
        assert isnan(order) if expected is None else order == pytest.approx(expected, abs=1e-7)


def test_eight_standard_deviations_of_v6() -> None:
    h, f = ladder("V6")
    for kind, (free, *fixed) in VECTORS["V6"]["sigmas"].items():
        w = weights(h, kind)
        assert free_power(h / h[0], f, w)[0].sigma == pytest.approx(free, rel=5e-5)  # five digits
        for powers, expected in zip(POWERS.values(), fixed, strict=True):
            assert fixed_powers(h / h[0], f, w, powers).sigma == pytest.approx(expected, rel=5e-5)


def test_slow_convergence_is_not_covered() -> None:
    """The procedure misses f = 1 + 0.1 h^0.3 (true error 0.1), and its remark says that p is too low."""
    estimate = least_squares(*ladder("V5"))
    assert estimate.uncertainty < 0.1
    assert "observed order 0.30 is below 0.5" in estimate.remark


def test_v8_is_covered() -> None:
    assert least_squares(*ladder("V8")).uncertainty > 0.02


def densest(x: np.ndarray, y: np.ndarray) -> float:
    """Return the least unweighted sigma of a search a hundred times denser than the program's own."""
    p = np.geomspace(ORDERS[0], ORDERS[-1], 12001)[:, None]
    z = np.expm1(p * np.log(x)) / p
    z = z - z.mean(axis=1, keepdims=True)
    r = y - y.mean() - ((z @ y) / (z**2).sum(axis=1))[:, None] * z
    return float(np.sqrt((r**2).sum(axis=1).min() / (len(x) - 3)))


def test_free_power_finds_the_best_of_two_minima() -> None:
    """S has minima near p = 1.1 and p = 8.9 here; the second is the lower one by a third."""
    x = np.array([1.0, 0.93, 0.9, 0.41, 0.1, 0.03])
    y = np.array([1.04, 0.53, 0.23, 0.13, -0.24, -0.41])
    fit, order = free_power(x, y, np.full(6, 1.0 / 6.0))
    assert order == pytest.approx(8.9, abs=0.5)
    assert fit.sigma <= densest(x, y) * (1.0 + 1e-9)


def test_free_power_is_no_worse_than_a_dense_search() -> None:
    generator = np.random.default_rng(4)
    for _ in range(20):
        x = np.sort(generator.uniform(0.05, 1.0, 6))[::-1]
        x = x / x[0]
        y = x ** generator.uniform(0.3, 5.0) + 0.1 * generator.standard_normal(6)
        assert free_power(x, y, np.full(6, 1.0 / 6.0))[0].sigma <= densest(x, y) * (1.0 + 1e-9)


@settings(deadline=None)
@given(
    ratios=st.lists(st.floats(1.2, 2.0), min_size=3, max_size=5),
    p=st.floats(0.5, 2.0),
    c=st.floats(0.1, 10.0),
    limit=st.floats(-10.0, 10.0),
)
def test_a_power_law_is_recovered_on_unequal_ratios(
    ratios: list[float], p: float, c: float, limit: float
) -> None:
    h = np.cumprod([1.0, *(1.0 / ratio for ratio in ratios)])
    estimate = least_squares(h, limit + c * h**p)
    # round-off 1e-14 over a range of at least 0.1 (1 - 1.2^-1.5) = 0.02, times the condition of the fit (1e3)
    assert estimate.order == pytest.approx(p, abs=1e-9)
    assert estimate.limit == pytest.approx(limit, abs=1e-9)
    assert estimate.uncertainty == pytest.approx(1.25 * c * h[-1] ** p, abs=1e-8)


def test_another_formal_order_moves_limits_and_powers() -> None:
    h, f = ladder("V4")
    quartic = least_squares(h, f, formal_order=4.0)
    assert quartic.uncertainty == pytest.approx(1.25 * 0.001, abs=1e-9)
    assert quartic.remark == ""
    linear = chosen(h / h[0], h**2, 1.0)
    assert not linear.free and linear.order == pytest.approx(2.0)
    candidates = [
        fixed_powers(h / h[0], h**2, weights(h, kind), power)
        for kind in WEIGHTS
        for power in ((0.5,), (1.0,))
    ]
    assert linear.fit == min(candidates, key=lambda fit: fit.sigma)


def test_the_least_order_trusted_is_at_most_half_the_formal_one() -> None:
    h, f = ladder("V5")
    assert least_squares(h, 1.0 + h**0.45, formal_order=0.8).remark == ""
    assert "is below 0.4" in least_squares(h, f, formal_order=0.8).remark


def test_order_up_to_a_tenth_above_formal_keeps_the_small_factor() -> None:
    fit = fixed_powers(
        np.array([1.0, 0.5, 0.3, 0.2]), np.array([1.0, 0.5, 0.3, 0.2]), np.full(4, 0.25), (1.0,)
    )
    assert half_width(Choice(fit, 2.09, False), 1.0, 2.0) == pytest.approx(1.25 * 0.2)
    assert half_width(Choice(fit, 2.11, False), 1.0, 2.0) == pytest.approx(3.0 * 0.2)
    assert half_width(Choice(fit, float("nan"), False), 1.0, 2.0) == pytest.approx(3.0 * 0.2)


def test_scatter_and_lack_of_order_are_remarked() -> None:
    remark = least_squares(*ladder("V7"), formal_order=2.0).remark
    assert "no order can be found" in remark and "scatter" in remark


def test_equal_values_tell_nothing() -> None:
    estimate = least_squares(np.array([4.0, 3.0, 2.0, 1.0]), np.full(4, 0.1) * [1.0, 1.0, 1.0, 1.0 + 1e-15])
    assert isnan(estimate.uncertainty) and "round-off" in estimate.remark
