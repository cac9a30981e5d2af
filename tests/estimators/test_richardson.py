"""Richardson extrapolation against printed extrapolations, its remarks and its refusals."""

import json
from math import isnan
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from convergence.estimators.richardson import richardson

REFERENCE = Path(__file__).parents[1] / "reference"
FAMILIES = json.loads((REFERENCE / "extrapolation_families.json").read_text())
COLUMNS = json.loads((REFERENCE / "celik_2008.json").read_text())["columns"]
H = np.array([4.0, 2.0, 1.0])


@pytest.mark.parametrize("case", FAMILIES["triplets"])
def test_printed_triplets(case: dict) -> None:
    h, f = np.array(case["h"]), np.array(case["f"])
    estimate = richardson(h, f)
    # printed to 11 decimals; the differences of the data hold 93/0.138 = 700 times their round-off
    assert estimate.limit == pytest.approx(case["limit"], abs=2e-11)
    assert estimate.order == pytest.approx(case["order"], abs=2e-11)
    assert (estimate.limit - f[0]) / h[0] ** estimate.order == pytest.approx(case["c"], abs=1e-9)
    assert estimate.uncertainty == pytest.approx(abs(estimate.limit - f[-1]), rel=1e-12)


def test_families_are_recovered() -> None:
    tolerance = FAMILIES["tolerance"]
    rows = [([1.0, row[0], row[0] ** 2], *row[1:]) for row in FAMILIES["constant_ratio"]["rows"]]
    rows += [(row[:3], *row[3:]) for row in FAMILIES["other_sizes"]["rows"]]
    assert len(rows) == 17
    for sizes, p, c, limit in rows:
        h = np.array(sizes)
        f = limit - c * h**p
        estimate = richardson(h, f)
        assert estimate.limit == pytest.approx(limit, abs=tolerance["limit"])
        assert estimate.order == pytest.approx(p, abs=tolerance["p"])
        assert (estimate.limit - f[0]) / h[0] ** estimate.order == pytest.approx(c, abs=tolerance["c"])


@given(
    r32=st.floats(1.2, 3.0),
    r21=st.floats(1.2, 3.0),
    p=st.floats(0.3, 5.0),
    c=st.floats(-10.0, 10.0).filter(lambda c: abs(c) > 0.1),
    limit=st.floats(-10.0, 10.0),
)
def test_a_power_law_is_recovered_on_unequal_ratios(
    r32: float, r21: float, p: float, c: float, limit: float
) -> None:
    h = np.array([1.0, 1.0 / r32, 1.0 / (r32 * r21)])
    f = limit + c * h**p
    estimate = richardson(h, f)
    # round-off of the values (4e-15) over the smaller difference, times the reach of the extrapolation
    # 1/(r^p - 1) <= 18 and the sensitivity of the order 1/ln r <= 6
    noise = 4e-15 / min(abs(np.diff(f)))
    assert estimate.limit == pytest.approx(
        limit, abs=max(1e-12, 18.0 * 18.0 * 6.0 * noise * abs(f[1] - f[2]))
    )
    assert estimate.order == pytest.approx(p, abs=max(1e-10, 60.0 * noise))


def test_low_order_on_a_smooth_problem_is_doubted() -> None:
    """The extrapolation is worse than the finest value there, and the remark warns of it."""
    case, true = FAMILIES["triplets"][0], FAMILIES["true_value_of_the_first"]["value"]
    estimate = richardson(np.array(case["h"]), np.array(case["f"]), formal_order=3.0)
    assert abs(estimate.limit - true) > abs(case["f"][-1] - true)
    assert estimate.remark == (
        "observed order 0.61 is far below the formal 3: the levels are not yet asymptotic, "
        "or a singularity limits it"
    )
    assert "far below the assumed 2" in richardson(np.array(case["h"]), np.array(case["f"])).remark


def test_sound_data_have_no_remark() -> None:
    assert richardson(H, 1.0 + 0.1 * H**2).remark == ""
    assert richardson(H, 1.0 + 0.1 * H**2, formal_order=2.0).remark == ""
    assert richardson(H, 1.0 + 0.1 * H**4).remark == ""


@pytest.mark.parametrize(
    ("h", "order", "formal", "expected"),
    [
        (H, 1.49, 3.0, "observed order 1.49 is far below the formal 3"),
        (H, 1.51, 3.0, ""),
        (H, 2.19, 2.0, ""),
        (H, 2.21, 2.0, "observed order 2.21 is above the formal 2"),
        (np.array([1.0, 0.9, 0.5]), 2.0, 2.0, "ratio 1.111 of sizes is below the 1.3 wanted by Celik et al."),
        (np.array([1.0, 0.5, 0.47]), 2.0, 2.0, "ratio 1.064 of sizes is below 1.1: noise governs the order"),
        (np.array([1.69, 1.3, 1.0]), 2.0, 2.0, ""),
    ],
)
def test_remarks(h: np.ndarray, order: float, formal: float, expected: str) -> None:
    remark = richardson(h, 1.0 + 0.1 * h**order, formal_order=formal).remark
    assert remark.startswith(expected) if expected else remark == ""


def test_oscillation_and_divergence_have_no_limit() -> None:
    column = COLUMNS["C"]
    h = np.array([column["r21"] * column["r32"], column["r21"], 1.0])
    swinging = richardson(h, np.array(column["f_coarse_to_fine"]))
    assert isnan(swinging.limit) and isnan(swinging.uncertainty) and "oscillate" in swinging.remark
    growing = richardson(H, 1.0 + 0.1 * H**-0.5)
    assert isnan(growing.limit) and isnan(growing.uncertainty)
    assert growing.order == pytest.approx(-0.5, abs=1e-9)
    assert growing.remark == (
        "the differences do not fall with h (observed order -0.50): no limit can be extrapolated"
    )
