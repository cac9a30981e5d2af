"""The interval of one quantity: what it is the widest of, and honest answers where there is none."""

import math

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from convergence import rooms
from convergence.intervals import PARTS, Interval, interval

H = np.array([16.0, 8.0, 4.0, 2.0, 1.0])
NAN = math.nan


def of(values: object, h: object = H, formal: float | None = 2.0, resolution: float = 0.0) -> Interval:
    f = np.asarray(values, dtype=float)
    sizes = np.asarray(h, dtype=float)
    return interval(sizes[-len(f) :] if len(f) else sizes[:0], f, formal_order=formal, resolution=resolution)


@pytest.mark.parametrize("order", [0.7, 1.0, 2.0, 4.0])
@pytest.mark.parametrize("h", [H, np.array([10.0, 6.0, 4.0, 2.2, 1.5])])
def test_a_power_law(order: float, h: np.ndarray) -> None:
    """Limit and order are found, the interval holds the limit and is the widest of its parts."""
    found = of(5.0 + 0.03 * h**order, h, order)
    assert found.flaw == "" and found.behaviour == "monotone convergence"
    assert found.limit == pytest.approx(5.0, abs=1e-8)
    assert found.order == pytest.approx(order, abs=1e-6)
    assert found.low <= 5.0 <= found.high
    assert set(found.widths) == set(PARTS.values())
    assert found.half_width == max(found.widths.values())
    assert found.widths["last change"] == pytest.approx(0.03 * (h[-2] ** order - h[-1] ** order))
    assert set(found.estimates) == set(rooms.names("estimators"))
    assert (found.levels, found.lost) == (5, 0)


@pytest.mark.parametrize("value", [5.0, -5.0, 0.0, 1e-300, 1e300])
@pytest.mark.parametrize("levels", [3, 4, 5])
def test_a_constant_series(value: float, levels: int) -> None:
    found = of([value] * levels)
    assert found.behaviour == "constant" and found.flaw == ""
    assert found.limit == found.value == value
    assert math.isnan(found.order)
    # a width of round-off only: 1e-10 of the value
    assert 0.0 <= found.half_width <= 1e-10 * abs(value)


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
    assert found.widths["last change"] == pytest.approx(0.3 * 0.5)
    assert found.half_width >= 0.15 - 1e-12


@pytest.mark.parametrize(
    ("values", "flaw"),
    [
        ([], "the finest level has no value"),
        ([1.0], "one level says nothing about its error; add at least two more"),
        ([NAN, NAN, NAN, NAN], "the finest level has no value"),
        ([1.0, 2.0, 2.5, NAN], "the finest level has no value"),
        ([1.0, 2.0, 2.5, math.inf], "the finest level has no value"),
        ([NAN, NAN, 3.0], "one level says nothing about its error; add at least two more"),
        (
            [1.0, 1.1, 1.3, 1.7, 2.5],
            "the last three levels show monotone divergence, observed order -1.00: the changes grow",
        ),
        (
            [1.0, 1.1, 0.9, 1.3, 0.5],
            "the last three levels show oscillatory divergence, observed order -1.00: the changes grow",
        ),
        ([3.0, 3.0, 3.0, 3.0, 4.0], "the last three levels show monotone divergence: the changes grow"),
    ],
)
def test_no_interval(values: list, flaw: str) -> None:
    found = of(values)
    assert found.flaw == flaw
    assert math.isnan(found.half_width) and math.isnan(found.limit)
    assert math.isnan(found.low) and math.isnan(found.high)


def test_constant_differences_diverge() -> None:
    """1, 2, 3, 4: neither settling nor growing; there is no limit to speak of."""
    assert of([1.0, 2.0, 3.0, 4.0]).flaw != ""


def test_two_levels() -> None:
    """With theory's order the change says something, without it nothing."""
    found = of([1.0, 1.4], formal=2.0)
    assert found.flaw == "" and found.behaviour == "too few levels" and math.isnan(found.order)
    assert found.half_width >= 0.4 * (1.0 - 1e-12)
    unknown = of([1.0, 1.4], formal=None)
    assert unknown.flaw == "two levels say nothing about the order, and theory's is not known; add a level"
    assert math.isnan(unknown.half_width)


def test_a_missing_value_in_the_middle_is_left_out() -> None:
    """The rest is judged over its own sizes: unequal ratios, the same limit."""
    f = 5.0 + 0.03 * H**2
    f[2] = NAN
    found = of(f)
    assert (found.levels, found.lost) == (4, 1)
    assert found.order == pytest.approx(2.0, abs=1e-6) and found.limit == pytest.approx(5.0, abs=1e-8)
    assert found.low <= 5.0 <= found.high
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
@given(values=st.lists(st.floats(allow_nan=True, allow_infinity=True), max_size=6))
def test_any_values_have_an_answer(values: list) -> None:
    """Nothing raises; either a flaw and no interval, or a width that is not smaller than the last change."""
    found = of(values, 8.0 * 1.7 ** -np.arange(len(values)) if values else H)
    if found.flaw:
        assert math.isnan(found.half_width) and math.isnan(found.limit)
        return
    assert found.half_width >= 0.0 and math.isfinite(values[-1])
    usable = [value for value in values if math.isfinite(value)]
    assert found.half_width >= abs(usable[-1] - usable[-2]) * (1.0 - 1e-12)
