"""Digits follow the uncertainty, and no printed number changes sides."""

import math
from decimal import Decimal

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from convergence import numbers

FINITE = st.floats(allow_nan=False, allow_infinity=False, min_value=-1e300, max_value=1e300)
SIZE = st.floats(min_value=1e-300, max_value=1e300)
ORDINARY = st.floats(min_value=1e-12, max_value=1e12)


def exact(value: float) -> Decimal:
    return Decimal(repr(value))


def sign(value: Decimal) -> int:
    return (value > 0) - (value < 0)


@pytest.mark.parametrize(
    ("value", "limit", "text"),
    [
        (1.996, 2.0, "1.996"),
        (2.0004, 2.0, "2.0004"),
        (1.99951, 2.0, "1.9995"),
        (1.5, 2.0, "1.50"),
        (2.0, 2.0, "2.00"),
        (-1.9999, -2.0, "-1.9999"),
        (0.0, 2.0, "0"),
        (math.nan, 2.0, "none"),
        (354.97, 355.0, "354.97"),
        (1.23456, math.nan, "1.23"),
    ],
)
def test_a_number_stays_on_its_side(value: float, limit: float, text: str) -> None:
    assert numbers.beside_limit(value, limit) == text


@given(FINITE, FINITE)
def test_side_of_any_limit(value: float, limit: float) -> None:
    printed = Decimal(numbers.beside_limit(value, limit))
    assert sign(printed - exact(limit)) == sign(exact(value) - exact(limit))


@given(ORDINARY, st.integers(-4, 4), st.integers(1, 6))
def test_side_of_a_close_limit(limit: float, ulps: int, digits: int) -> None:
    value = limit
    for _ in range(abs(ulps)):
        value = math.nextafter(value, math.copysign(math.inf, ulps))
    printed = Decimal(numbers.beside_limit(value, limit, digits))
    assert sign(printed - exact(limit)) == sign(exact(value) - exact(limit))


@given(FINITE, FINITE)
def test_both_rounded_compare_as_they_are(value: float, limit: float) -> None:
    shown, accepted = (Decimal(text) for text in numbers.both_sides(value, limit))
    assert sign(shown - accepted) == sign(exact(value) - exact(limit))


@given(st.floats(min_value=1e-9, max_value=10), st.floats(min_value=1e-9, max_value=10))
def test_per_cent_stays_on_its_side(ratio: float, limit: float) -> None:
    printed = Decimal(numbers.percent(ratio, limit).removesuffix(" %"))
    assert sign(printed - 100 * exact(limit)) == sign(exact(ratio) - exact(limit))


@given(ORDINARY, ORDINARY, st.sampled_from([0.01, 0.02, 0.05, 0.1, 0.003]))
def test_share_of_a_tolerance_stays_on_its_side(width: float, tolerance: float, relative: float) -> None:
    assume(1e-6 < width / tolerance < 1e6)
    printed = Decimal(numbers.percent_share(width, tolerance, relative).removesuffix(" %"))
    assert sign(printed - 100 * exact(relative)) == sign(exact(width) - exact(tolerance))


def test_per_cent_of_the_classic_case() -> None:
    assert numbers.percent(0.01996, 0.02) == "1.996 %"
    assert numbers.percent(0.020004, 0.02) == "2.0004 %"
    assert numbers.percent(0.5) == "50.0 %"
    assert numbers.percent(math.nan, 0.02) == "none"
    assert numbers.plain_percent(0.02) == "2 %"
    assert numbers.plain_percent(0.0125) == "1.25 %"


@pytest.mark.parametrize(
    ("value", "uncertainty", "text"),
    [
        (312.437, 1.996, "312.4"),
        (312.437, 0.031, "312.437"),
        (312.437, 41.0, "312"),
        (12345.6, 1234.0, "12300"),
        (0.5, 300.0, "0.50"),
        (-0.032095, 0.0012, "-0.0321"),
        (2.13e11, 1e8, "2.1300e+11"),
        (0.0, 0.012, "0"),
        (12001.9, math.nan, "12001.9"),
        (1 / 3, 0.0, "0.333333"),
        (math.nan, 1.0, "none"),
        (math.inf, 1.0, "unbounded"),
    ],
)
def test_digits_follow_the_uncertainty(value: float, uncertainty: float, text: str) -> None:
    assert numbers.rounded(value, uncertainty) == text


@given(FINITE, SIZE)
def test_rounding_is_small_beside_the_uncertainty(value: float, uncertainty: float) -> None:
    """Two digits of the uncertainty: half a unit of its second digit is at most 1/20 of it.

    Only the 17 digits of a double set a floor: half a unit of the last is 5e-17 of the value.
    """
    error = abs(Decimal(numbers.rounded(value, uncertainty)) - exact(value))
    assert error <= max(exact(uncertainty) / 20, abs(exact(value)) * Decimal("5e-17"))


@given(FINITE, st.floats(min_value=0, max_value=1e300), st.floats(min_value=0, max_value=1e300))
def test_an_interval_never_shrinks(value: float, below: float, above: float) -> None:
    low, high = value - below, value + above
    shown = [Decimal(text) for text in numbers.outward(low, high, value, max(below, above))]
    assert shown[0] <= exact(low)
    assert shown[1] >= exact(high)
    assert shown[0] <= Decimal(numbers.rounded(value, max(below, above))) <= shown[1]


def test_words_and_counts() -> None:
    assert numbers.compact(0.75, 3) == "0.75"
    assert numbers.compact(1200.0, 3) == "1200"
    assert numbers.at_step(312.5, 2.5) == "312.5"
    assert numbers.at_step(20.0, 20.0) == "20"
    assert numbers.at_step(0.30000000000000004, 0.1) == "0.3"
    assert numbers.count(42666) == "42,666"
    assert numbers.count(249_740.1) == "250,000"
    assert numbers.count(math.nan) == "none"
    assert numbers.several(1, "level") == "1 level"
    assert numbers.several(0, "level") == "0 levels"


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (0.0, "0 MB"),
        (0.52, "0.52 MB"),
        (80.4, "80 MB"),
        (999.0, "1000 MB"),
        (2345.0, "2.3 GB"),
        (4.1e6, "4.1 TB"),
    ],
)
def test_an_amount_of_memory(value: float, text: str) -> None:
    assert numbers.amount(value, numbers.MEMORY) == text


def test_an_amount_beside_its_limit() -> None:
    assert numbers.amounts(100.0, 61.0, numbers.TIME) == ("1.7 min", "1 min")
    assert numbers.amounts(6004.0, 6000.0, numbers.MEMORY) == ("6.004 GB", "6 GB")
    assert numbers.amounts(30_000.0, 100.0, numbers.MEMORY) == ("30 GB", "100 MB")
    assert numbers.amounts(7200.0, 0.0, numbers.TIME) == ("2.0 h", "0 s")


def test_the_cost_of_a_mesh_says_what_is_known() -> None:
    assert numbers.cost(10.0, 20.0, 90.0, 2e3) == (
        " (10 cells, 20 unknowns, about 1.5 min, about 2.0 GB of memory)"
    )
    nan = float("nan")
    assert numbers.cost(10.0, 0.0, nan, nan) == " (10 cells)" and numbers.cost(nan, nan, nan, nan) == ""
