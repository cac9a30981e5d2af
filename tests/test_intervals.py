"""The interval of one quantity, what is told beside it, and honest answers where there is none."""

import math

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from convergence.intervals import Interval, interval

H = np.array([16.0, 8.0, 4.0, 2.0, 1.0])
NAN = math.nan


def of(values: object, h: object = H, resolution: float = 0.0) -> Interval:
    f = np.asarray(values, dtype=float)
    sizes = np.asarray(h, dtype=float)
    return interval(sizes[-len(f) :] if len(f) else sizes[:0], f, resolution=resolution)


@pytest.mark.parametrize("order", [1.0, 2.0, 3.0, 4.0])
@pytest.mark.parametrize("h", [H, np.array([10.0, 6.0, 4.0, 2.2, 1.5])])
def test_a_power_law(order: float, h: np.ndarray) -> None:
    """Order and limit are found; the interval holds the limit, the half-width reaches its farther end."""
    f = 5.0 + 0.03 * h**order
    found = of(f, h)
    assert found.flaw == "" and found.behaviour == "monotone convergence"
    assert found.low <= 5.0 <= found.high and found.low < found.limit < found.high
    assert abs(found.limit - 5.0) < 0.5 * abs(found.value - 5.0)
    assert found.half_width == max(found.high - found.value, found.value - found.low)
    assert found.order == pytest.approx(order, abs=1e-6)
    assert found.order_low <= order <= found.order_high and found.growth != "shown"
    assert (found.levels, found.lost) == (5, 0)
    assert found.coverage is not None
    assert (found.coverage.knowledge, found.coverage.levels) == ("nothing", 5)


def test_kind_and_degree_are_used() -> None:
    f = 5.0 + 0.03 * H**2
    told = [interval(H, f, kind="energy", degree=degree) for degree in (None, 1)]
    assert len({one.half_width for one in (of(f), *told)}) == 3
    assert [one.coverage and one.coverage.knowledge for one in told] == ["kind", "kind and degree"]


@pytest.mark.parametrize("value", [5.0, -5.0, 0.0, 1e-300, 1e300])
@pytest.mark.parametrize("levels", [3, 4, 5])
def test_a_constant_series(value: float, levels: int) -> None:
    found = of([value] * levels)
    assert found.behaviour == "constant" and found.flaw == ""
    assert found.limit == found.value == value
    assert math.isnan(found.order)
    # a width of round-off only: 1e-10 of the value; the ends are sums, good to 1e-16 of it
    assert 0.0 <= found.half_width <= 1e-10 * abs(value) * (1.0 + 1e-5)
    assert found.low <= value <= found.high
    assert found.coverage is None and found.growth == "excluded"


def test_constant_to_printed_digits() -> None:
    """Values printed to 0.01: what differs by the last digit says no more than that."""
    found = of([10.42, 10.43, 10.42, 10.43], resolution=0.005)
    assert found.behaviour == "constant"
    assert found.half_width == pytest.approx(0.01, rel=1e-6)
    exact = of([10.42, 10.43, 10.42, 10.43])
    assert exact.behaviour != "constant"


def test_settled_at_the_end_is_not_taken_for_exact() -> None:
    """Two equal values at the end are an accident until a third agrees: the change before still counts."""
    found = of([1.0, 2.0, 2.6, 2.9, 2.9])
    assert found.flaw == ""
    assert found.behaviour == "monotone convergence"
    assert found.low < found.limit < found.high and found.half_width > 1e-3 * 0.3


@pytest.mark.parametrize(
    ("values", "flaw"),
    [
        ([], "the finest level has no value"),
        ([1.0], "one level says nothing about its error; add at least two more"),
        ([NAN, NAN, NAN, NAN], "the finest level has no value"),
        ([1.0, 2.0, 2.5, NAN], "the finest level has no value"),
        ([1.0, 2.0, 2.5, math.inf], "the finest level has no value"),
        ([NAN, NAN, 3.0], "one level says nothing about its error; add at least two more"),
    ],
)
def test_no_interval(values: list, flaw: str) -> None:
    found = of(values)
    assert found.flaw == flaw
    assert math.isnan(found.half_width) and math.isnan(found.limit)
    assert math.isnan(found.low) and math.isnan(found.high)


@pytest.mark.parametrize(
    "values", [[1.0, 1.1, 1.3, 1.7, 2.5], [3.0, 3.0, 3.0, 3.0, 4.0], [1.0, 2.0, 3.0, 4.0]]
)
def test_growing_changes_leave_growth_open(values: list) -> None:
    """There is an interval, of the last change at least, and no claim that a limit exists."""
    found = of(values)
    assert found.flaw == "" and found.behaviour == "monotone divergence"
    assert found.growth != "excluded" and found.order_low < 0.0
    assert found.low < found.limit < found.high and found.high - found.low > values[-1] - values[-2]


def test_growing_oscillation_has_a_wide_interval() -> None:
    values = [1.0, 1.1, 0.9, 1.3, 0.5]
    found = of(values)
    assert found.behaviour == "oscillatory divergence" and found.flaw == ""
    assert found.high - found.low > np.ptp(values)


def test_two_levels() -> None:
    """An interval for orientation, wider than the change."""
    found = of([1.0, 1.4])
    assert found.flaw == "" and found.behaviour == "too few levels" and math.isnan(found.order)
    assert found.half_width > 0.4 and found.low < 1.4 < found.high
    assert found.coverage is not None and found.coverage.levels == 2


def test_two_equal_values() -> None:
    found = of([1.4, 1.4])
    assert found.limit == 1.4 and found.coverage is None
    assert found.half_width == pytest.approx(1e-10 * 1.4, rel=1e-5)


def test_a_missing_value_in_the_middle_is_left_out() -> None:
    """The rest is judged over its own sizes: unequal ratios, the same limit."""
    f = 5.0 + 0.03 * H**2
    f[2] = NAN
    found = of(f)
    assert (found.levels, found.lost) == (4, 1)
    assert found.order == pytest.approx(2.0, abs=1e-6)
    assert found.low <= 5.0 <= found.high and abs(found.limit - 5.0) < abs(found.value - 5.0)
    coarse = 5.0 + 0.03 * H**2
    coarse[0] = NAN
    assert of(coarse).half_width == pytest.approx(of((5.0 + 0.03 * H**2)[1:]).half_width)


@pytest.mark.parametrize(
    "h", [[4.0, 2.0, 2.0, 1.0], [4.0, 2.0, 1.0, 1.0], [4.0, 4.0, 2.0, 1.0], [1.0, 2.0, 4.0, 8.0]]
)
def test_equal_or_rising_sizes(h: list) -> None:
    found = of([1.0, 1.4, 1.5, 1.55], h)
    assert found.flaw == (
        "two levels have the same size but different values, so there is no ratio; keep one of them"
    )
    assert math.isnan(found.half_width)


def test_equal_sizes_of_missing_values_do_not_count() -> None:
    assert of([1.0, NAN, 1.4, 1.5], [4.0, 2.0, 2.0, 1.0]).flaw == ""


def test_settling_oscillation_has_an_interval() -> None:
    found = of([1.0, 2.0, 1.5, 1.75, 1.7])
    assert found.behaviour == "oscillatory convergence" and found.flaw == ""
    assert found.half_width >= 0.05


VALUES = st.lists(st.floats(-1e3, 1e3), min_size=2, max_size=6)


@settings(deadline=None, max_examples=60)
@given(
    values=VALUES,
    scale=st.sampled_from([-1.0, 1e-3, 145.0377]),
    shift=st.floats(-100.0, 100.0),
    unit=st.sampled_from([25.4, 1e-3]),
)
def test_units_and_origin_do_not_matter(values: list, scale: float, shift: float, unit: float) -> None:
    """Another unit or origin of the values, another unit of h: the same statement."""
    f = np.array(values)
    h = 8.0 * 1.7 ** -np.arange(len(f))
    changes = np.abs(np.diff(f))
    # changes well above the round-off of shifted values, and no order at the edge of growing
    assume(changes.min() > 1e-3)
    if len(f) >= 3:
        assume(abs(np.log(changes[-1] / changes[-2])) > 0.01)
    plain, moved = of(f, h), of(scale * (f + shift), unit * h)
    assert (moved.behaviour, moved.flaw) == (plain.behaviour, plain.flaw)
    assert moved.half_width == pytest.approx(abs(scale) * plain.half_width, rel=1e-5, nan_ok=True)
    assert moved.order == pytest.approx(plain.order, rel=1e-5, abs=1e-5, nan_ok=True)


@settings(deadline=None, max_examples=60)
@given(
    values=st.lists(
        st.one_of(st.floats(-1e150, 1e150), st.sampled_from([NAN, math.inf, -math.inf])), max_size=6
    )
)
def test_any_values_have_an_answer(values: list) -> None:
    """Nothing raises; either a flaw and no interval, or an interval about the best estimate."""
    found = of(values, 8.0 * 1.7 ** -np.arange(len(values)) if values else H)
    if found.flaw:
        assert math.isnan(found.half_width) and math.isnan(found.limit) and found.coverage is None
        return
    assert math.isfinite(values[-1]) and found.low <= found.limit <= found.high
    assert found.half_width == max(found.high - values[-1], values[-1] - found.low) >= 0.0
    assert 2.0 * found.half_width >= found.high - found.low
