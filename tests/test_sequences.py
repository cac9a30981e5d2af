"""Order, behaviour and noise of a sequence: recovery, signs, special cases."""

import json
import math
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from convergence.sequences import (
    LARGEST_ORDER,
    behaviour,
    noise_floor,
    observed_order,
    observed_orders,
    unusable,
)

FAMILIES = json.loads((Path(__file__).parent / "reference" / "extrapolation_families.json").read_text())
H = np.array([4.0, 2.0, 1.0])
RATIO = st.floats(1.3, 3.0)


def law(h: np.ndarray, p: float, c: float, limit: float) -> np.ndarray:
    return limit - c * h**p


def test_order_of_published_families() -> None:
    tolerance = FAMILIES["tolerance"]["p"]
    for ratio, p, c, limit in FAMILIES["constant_ratio"]["rows"]:
        h = np.array([1.0, ratio, ratio**2])
        assert observed_order(h, law(h, p, c, limit)) == pytest.approx(p, abs=tolerance)
    for h3, h2, h1, p, c, limit in FAMILIES["other_sizes"]["rows"]:
        h = np.array([h3, h2, h1])
        assert observed_order(h, law(h, p, c, limit)) == pytest.approx(p, abs=tolerance)


@given(r32=RATIO, r21=RATIO, p=st.floats(-4.0, 4.0).filter(lambda p: abs(p) > 0.1), c=st.floats(0.1, 10.0))
def test_order_of_a_power_law_is_its_signed_exponent(r32: float, r21: float, p: float, c: float) -> None:
    h = np.array([r21 * r32, r21, 1.0])
    # round-off 2e-16 max|f| against the smaller difference: at worst 9^4 / 0.027 = 2e5 times it
    assert observed_order(h, c * h**p) == pytest.approx(p, abs=1e-9)


@given(r32=RATIO, r21=RATIO, p=st.floats(-4.0, 4.0))
def test_order_of_alternating_values_solves_the_published_equation(r32: float, r21: float, p: float) -> None:
    h = np.array([r21 * r32, r21, 1.0])
    alternating = np.array([1.0, -1.0, 1.0]) * h**p  # e32/e21 = -r21^p (r32^p + 1)/(r21^p + 1)
    assert observed_order(h, alternating) == pytest.approx(p, abs=1e-9)


def test_order_where_the_published_fixed_point_does_not_settle() -> None:
    """Two finest sizes nearly equal: the iteration of the source still wanders after 100 rounds."""
    h = np.array([0.5, 0.13, 0.125])
    f = law(h, 2.0, 1.0, 5.0)
    r21, r32, p = h[1] / h[2], h[0] / h[1], 1.0
    for _ in range(100):
        q = math.log((r21**p - 1.0) / (r32**p - 1.0))
        p = min(abs(math.log((f[0] - f[1]) / (f[1] - f[2])) + q) / math.log(r21), 50.0)
    assert abs(p - 2.0) > 0.1
    assert observed_order(h, f) == pytest.approx(2.0, abs=1e-9)


@pytest.mark.parametrize(
    ("h", "f"),
    [
        (H[1:], [1.0, 2.0]),
        (H, [1.0, 2.0, 2.0]),
        (H, [2.0, 2.0, 1.0]),
        (H, [1.0, 1.0, 1.0]),
        (H, [1.0, np.nan, 2.0]),
        (H, [1.0, np.inf, 2.0]),
        ([2.0, 1.0, 1.0], [1.0, 2.0, 2.5]),
        ([1.0, 2.0, 4.0], [1.0, 2.0, 2.5]),
        ([2.0, 1.0, 0.0], [1.0, 2.0, 2.5]),
    ],
)
def test_no_order_where_none_is_defined(h: list[float], f: list[float]) -> None:
    assert math.isnan(observed_order(np.array(h), np.array(f)))


def test_only_the_three_finest_levels_count() -> None:
    h = np.array([16.0, 8.0, 4.0, 2.0, 1.0])
    f = np.array([np.nan, 77.0, *(3.0 + H**2)])
    assert observed_order(h, f) == pytest.approx(2.0, abs=1e-12)
    assert behaviour(h, f) == "monotone convergence"


@pytest.mark.parametrize(
    ("f", "expected"),
    [
        ([2.6, 1.4, 1.1], "monotone convergence"),
        ([1.0, 2.0, 1.5], "oscillatory convergence"),
        ([1.0, 2.0, 4.0], "monotone divergence"),
        ([1.0, 2.0, 0.0], "oscillatory divergence"),
        ([0.0, 0.0, 0.0], "constant"),
        ([1.0, 2.0, 2.0], "monotone convergence"),
        ([2.0, 2.0, 1.0], "monotone divergence"),
        ([1.0, 2.0, 3.0], "monotone divergence"),
        ([1.0, 2.0, np.nan], "too few levels"),
        ([1.0, 2.0], "too few levels"),
        ([1.0], "too few levels"),
        ([], "too few levels"),
    ],
)
def test_behaviour(f: list[float], expected: str) -> None:
    assert behaviour(H[3 - len(f) :], np.array(f)) == expected


@pytest.mark.parametrize("h", [H, np.array([2.5, 1.3, 1.0])])
def test_orders_of_many_ladders_are_those_of_each(h: np.ndarray) -> None:
    """Linear interpolation over steps of 0.005 of a smooth function is off by less than 1e-5."""
    random = np.random.default_rng(7)
    f = random.normal(size=(3, 400)) * 10.0 ** random.uniform(-2.0, 2.0, (3, 400))
    f[:, 0], f[1, 1], f[0, 2] = 1.0, np.nan, f[1, 2]
    one_by_one = np.clip([observed_order(h, one) for one in f.T], -LARGEST_ORDER, LARGEST_ORDER)
    assert observed_orders(h, f) == pytest.approx(one_by_one, abs=1e-5, nan_ok=True)
    assert np.isnan(observed_orders(h, f)[:3]).all()


def test_behaviour_takes_the_ratios_into_account() -> None:
    """A larger last difference that comes from a larger last step is convergence still."""
    h = np.array([1.1, 1.0, 0.25])
    f = law(h, 1.0, 1.0, 5.0)
    assert abs(f[2] - f[1]) > abs(f[1] - f[0])
    assert behaviour(h, f) == "monotone convergence"
    assert behaviour(h[[0, 0, 2]], f) == "too few levels"


def test_behaviour_ignores_noise() -> None:
    f = np.array([1.000, 1.004, 1.003])
    assert behaviour(H, f) == "oscillatory convergence"
    assert behaviour(H, f, noise=0.002) == "monotone convergence"
    assert behaviour(H, f, noise=0.01) == "constant"


def test_noise_floor_is_round_off_and_the_last_digit() -> None:
    assert noise_floor(np.array([-3.0, 2.0])) == pytest.approx(3e-10, rel=1e-12)
    assert noise_floor(np.array([])) == 0.0
    printed = np.array([1.02, 1.01])  # half a unit of the last digit each: their difference may be nothing
    assert abs(printed[0] - printed[1]) <= noise_floor(printed, resolution=0.005)
    assert abs(printed[0] - printed[1]) > noise_floor(printed, resolution=0.0049)


def test_what_makes_levels_unusable_is_said() -> None:
    assert unusable(H, H, 3) == ""
    assert unusable(H, H, 4) == "needs 4 levels, the ladder has 3"
    assert "missing or not finite" in unusable(H, np.array([1.0, 2.0, np.nan]), 3)
    assert "fall from level to level" in unusable(H[::-1], H, 3)
