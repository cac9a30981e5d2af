"""Correction factor, factor of safety and limited order against one table of five triplets."""

import json
from math import isnan
from pathlib import Path

import numpy as np
import pytest

from convergence.estimators import correction_factor as cf
from convergence.estimators import factor_of_safety as fs
from convergence.estimators import limited_order_index as limited
from convergence.estimators.grid_convergence_index import grid_convergence_index
from convergence.estimators.richardson import richardson

FILE = Path(__file__).parents[1] / "reference" / "index_variants.json"
CASES = json.loads(FILE.read_text())["cases"]
DIGITS = 0.6e-9  # the table has nine decimals
H = np.array([4.0, 2.0, 1.0])
SWING = np.array([1.0, 2.0, 1.4])


def ladder(name: str) -> tuple[np.ndarray, np.ndarray, dict[str, float]]:
    case = CASES[name]
    return np.array(case["h"], dtype=float), np.array(case["f"]), case


@pytest.mark.parametrize("name", CASES)
def test_order_and_index(name: str) -> None:
    h, f, case = ladder(name)
    plain = richardson(h, f)
    assert plain.order == pytest.approx(case["order"], abs=DIGITS)
    assert plain.uncertainty == pytest.approx(case["error"], abs=DIGITS)
    assert grid_convergence_index(h, f).uncertainty == pytest.approx(case["index"], abs=DIGITS)


@pytest.mark.parametrize("name", CASES)
def test_correction_factor(name: str) -> None:
    h, f, case = ladder(name)
    plain, estimate = richardson(h, f), cf.correction_factor(h, f, formal_order=2.0)
    factor = cf.correction(h[1] / h[2], plain.order, 2.0)
    assert factor == pytest.approx(case["correction"], abs=DIGITS)
    assert estimate.uncertainty == pytest.approx(case["uncorrected"], abs=DIGITS)
    assert cf.uncertainty_corrected(factor, plain.uncertainty) == pytest.approx(case["corrected"], abs=DIGITS)
    with_formal_order = f[2] - (f[1] - f[2]) / ((h[1] / h[2]) ** 2 - 1.0)
    assert estimate.limit == pytest.approx(with_formal_order, rel=1e-12)


@pytest.mark.parametrize("name", CASES)
def test_factor_of_safety(name: str) -> None:
    h, f, case = ladder(name)
    estimate = fs.factor_of_safety(h, f, formal_order=2.0)
    assert estimate.order / 2.0 == pytest.approx(case["relative_order"], abs=DIGITS)
    assert estimate.uncertainty == pytest.approx(case["safety"], abs=DIGITS)


@pytest.mark.parametrize("name", CASES)
def test_limited_order(name: str) -> None:
    h, f, case = ladder(name)
    estimate = limited.limited_order_index(h, f, formal_order=2.0)
    assert estimate.uncertainty == pytest.approx(case["limited"], abs=DIGITS)
    factor, order = limited.factor_and_order(estimate.order, 2.0)
    assert factor == case["limited_factor"]
    assert order == pytest.approx(case["limited_order"], abs=DIGITS)


@pytest.mark.parametrize(
    ("observed", "expected"),
    [(1.81, (1.25, 2.0)), (2.19, (1.25, 2.0)), (2.21, (3.0, 2.0)), (1.79, (3.0, 1.79)), (0.2, (3.0, 0.5))],
)
def test_limits_of_the_limited_order(observed: float, expected: tuple[float, float]) -> None:
    assert limited.factor_and_order(observed, 2.0) == expected


@pytest.mark.parametrize(
    ("factor", "uncorrected", "corrected"),
    [
        (1.1, 9.6 * 0.01 + 1.1, 2.4 * 0.01 + 0.1),
        (0.8, 2.0 * 0.2 + 1.0, 2.4 * 0.04 + 0.1),
        (0.76, 2.0 * 0.24 + 1.0, 2.4 * 0.24**2 + 0.1),
        (0.7, 2.0 * 0.3 + 1.0, 0.3),
        (1.5, 2.0, 0.5),
    ],
)
def test_branches_of_the_correction_factor(factor: float, uncorrected: float, corrected: float) -> None:
    assert cf.uncertainty_uncorrected(factor, -1.0) == pytest.approx(uncorrected)
    assert cf.uncertainty_corrected(factor, -1.0) == pytest.approx(corrected)


@pytest.mark.parametrize(("relative", "factor"), [(0.5, 2.025), (1.0, 1.6), (1.5, 9.8)])
def test_factor_of_safety_is_the_short_form(relative: float, factor: float) -> None:
    """(2.45 - 0.85 P) up to P = 1, (16.4 P - 14.8) above."""
    assert fs.safety(relative) == pytest.approx(factor, abs=1e-12)


@pytest.mark.parametrize("method", [cf.correction_factor, fs.factor_of_safety])
def test_oscillation_has_half_its_range(method: object) -> None:
    estimate = method(H, SWING, formal_order=2.0)  # type: ignore[operator]
    assert estimate.uncertainty == pytest.approx(0.5)
    assert isnan(estimate.limit) and "oscillate" in estimate.remark


def test_limited_order_refuses_oscillation() -> None:
    estimate = limited.limited_order_index(H, SWING, formal_order=2.0)
    assert isnan(estimate.uncertainty) and "oscillate" in estimate.remark


@pytest.mark.parametrize("method", [cf.correction_factor, fs.factor_of_safety, limited.limited_order_index])
def test_the_assumed_order_is_two_and_said(method: object) -> None:
    f = 1.0 + 0.1 * H**1.7
    bare, told = method(H, f), method(H, f, formal_order=2.0)  # type: ignore[operator]
    assert (bare.limit, bare.uncertainty) == (told.limit, told.uncertainty)
    assert bare.remark == "no formal order is given, 2 is assumed" and told.remark == ""
