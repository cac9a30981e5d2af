"""The calibrated interval: it holds known limits, does not mind units, and widens where it should."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as some

from convergence.histories.calibrated import FINEST_LEVELS, Calibrated, calibrated
from convergence.histories.table import table

KNOWN = (("unknown", None), ("displacement", None), ("energy", 2), ("point_stress", 1))
# Recovered stress of linear cells has order p + 1 at most (Zienkiewicz & Zhu 1992, Int. J. Numer. Meth. Engng
# 33:1331), so a belief that knows kind and degree need not hold higher ones
HIGHEST = {("point_stress", 1): 2.0}


def sizes(levels: int, ratio: float = 2.0) -> np.ndarray:
    return ratio ** -np.arange(float(levels))


def half(found: Calibrated) -> float:
    return 0.5 * (found.high - found.low)


@pytest.mark.parametrize("order", [1.0, 1.5, 2.0, 3.0, 4.0])
@pytest.mark.parametrize("ratio", [1.5, 2.0])
@pytest.mark.parametrize("levels", [3, 4, 5, 6])
def test_the_limit_of_a_power_law_is_held(order: float, ratio: float, levels: int) -> None:
    h = sizes(levels, ratio)
    for sign in (1.0, -1.0):
        for kind, degree in KNOWN:
            found = calibrated(h, 5.0 + sign * 0.03 * h**order, kind=kind, degree=degree)
            assert found.low <= 5.0 <= found.high, (kind, sign)
            assert found.low < found.limit < found.high
            if order <= HIGHEST.get((kind, degree), np.inf):
                assert found.order_low <= order <= found.order_high


@pytest.mark.parametrize("order", [1.0, 2.0, 3.0])
def test_the_best_estimate_of_five_levels_is_nearer_than_the_finest_value(order: float) -> None:
    h = sizes(5)
    f = 5.0 + 0.03 * h**order
    for kind, degree in KNOWN:
        assert abs(calibrated(h, f, kind=kind, degree=degree).limit - 5.0) < 0.5 * abs(f[-1] - 5.0)


@settings(deadline=None, max_examples=40)
@given(
    changes=some.lists(some.floats(0.01, 10.0), min_size=1, max_size=5),
    signs=some.lists(some.sampled_from([-1.0, 1.0]), min_size=5, max_size=5),
    shift=some.floats(-100.0, 100.0),
    scale=some.sampled_from([-1.0, 1e-6, 145.0377, 1e9]),
    unit=some.sampled_from([25.4, 1e-3]),
)
def test_units_and_origin_do_not_matter(
    changes: list, signs: list, shift: float, scale: float, unit: float
) -> None:
    """Round-off of a shift by 100 is 1e-12 of changes of 0.01."""
    f = np.cumsum([0.0, *(sign * change for sign, change in zip(signs, changes, strict=False))])
    h = sizes(len(f), 1.7)
    plain = calibrated(h, f, kind="energy", degree=1)
    moved = calibrated(unit * h, scale * (f + shift), kind="energy", degree=1)
    width = half(plain)
    assert moved.limit / scale - shift == pytest.approx(plain.limit, abs=1e-6 * width)
    assert half(moved) == pytest.approx(abs(scale) * width, rel=1e-6)
    assert moved.order_low == pytest.approx(plain.order_low, abs=1e-6)
    assert moved.order_high == pytest.approx(plain.order_high, abs=1e-6)
    assert moved.coverage == plain.coverage


@pytest.mark.parametrize("size", [1e-200, 1e200])
def test_very_small_and_very_large_values(size: float) -> None:
    f = np.array([1.0, 1.4, 1.5, 1.54])
    plain, found = calibrated(sizes(4), f), calibrated(sizes(4), size * f)
    assert found.limit == pytest.approx(size * plain.limit, rel=1e-9)
    assert half(found) == pytest.approx(size * half(plain), rel=1e-9)


@pytest.mark.parametrize(("kind", "degree"), KNOWN)
def test_scattered_values_have_a_wider_interval(kind: str, degree: int | None) -> None:
    """Errors 30 % off the power law in turns, at the same span of the values."""
    h = sizes(5)
    clean = 5.0 - 0.03 * h
    scattered = 5.0 - 0.03 * h * np.array([1.0, 0.7, 1.3, 0.7, 1.3])
    scattered *= np.ptp(clean) / np.ptp(scattered)
    exact, rough = (calibrated(h, f, kind=kind, degree=degree) for f in (clean, scattered))
    assert half(rough) > half(exact)


@pytest.mark.parametrize("order", [1.0, 2.0])
@pytest.mark.parametrize(("kind", "degree"), KNOWN)
def test_two_levels_say_less_than_three(order: float, kind: str, degree: int | None) -> None:
    h = sizes(3)
    f = 5.0 - 0.03 * h**order
    three, two = (calibrated(h[-n:], f[-n:], kind=kind, degree=degree) for n in (3, 2))
    assert half(two) > half(three)
    assert two.coverage is not None and two.coverage.levels == 2 and two.growth != "shown"


def test_coverage_is_that_of_its_like() -> None:
    """State of knowledge and number of levels; five stands for more."""
    for levels in range(2, 8):
        h = sizes(levels)
        for kind, degree, known in (
            ("unknown", None, "nothing"),
            ("energy", None, "kind"),
            ("energy", 2, "kind and degree"),
        ):
            found = calibrated(h, 5.0 - 0.03 * h, kind=kind, degree=degree).coverage
            assert found == table().coverage[known][str(min(levels, 5))]


def test_knowledge_of_kind_and_degree_counts() -> None:
    """Each has weights and stretches of its own; degrees above two count as two."""
    h = sizes(4)
    f = 5.0 - 0.03 * h**2
    told = [calibrated(h, f, kind=kind, degree=degree) for kind, degree in (("unknown", None), *KNOWN[1:])]
    told.append(calibrated(h, f, kind="energy", degree=1))
    assert len({half(one) for one in told}) == len(told)
    assert calibrated(h, f, kind="energy", degree=5) == calibrated(h, f, kind="energy", degree=2)


@pytest.mark.parametrize("degree", [None, 1, 2])
def test_a_kind_that_the_bank_does_not_know_is_unknown(degree: int | None) -> None:
    h = sizes(4)
    f = 5.0 - 0.03 * h**2
    assert calibrated(h, f, kind="brightness", degree=degree) == calibrated(h, f)
    assert calibrated(h, f, kind="unknown", degree=degree) == calibrated(h, f)


def test_two_digits_of_a_clean_series_are_still_evidence() -> None:
    """10 + 0.01 h² printed to 0.01: rounding moves the limit by less than twice the last step."""
    f = np.array([10.64, 10.16, 10.04, 10.01])
    found = calibrated(np.array([8.0, 4.0, 2.0, 1.0]), f, resolution=0.005)
    assert found.low < 10.0 < found.high and 0.005 < half(found) < 2.0 * (f[-2] - f[-1])


def test_resolution_is_the_least_half_width() -> None:
    h = sizes(5)
    f = 5.0 - 0.03 * h**2
    found = calibrated(h, f, resolution=0.01)
    assert half(found) >= 0.01 * (1.0 - 1e-9) > half(calibrated(h, f))
    assert half(calibrated(h, f, resolution=1e-9)) == pytest.approx(half(calibrated(h, f)), rel=0.01)


def test_the_finest_levels_count() -> None:
    h = sizes(FINEST_LEVELS + 2)
    f = 5.0 - 0.03 * h
    f[:2] = 99.0
    assert calibrated(h, f) == calibrated(h[2:], f[2:])


@pytest.mark.parametrize("kind", ["unknown", "peak_stress", "point_stress"])
def test_growth(kind: str) -> None:
    """A corner's growth h^-0.4555 (Williams 1952, 270°, free) from four levels on; h² has a limit."""
    for levels in (4, 5, 6):
        h = sizes(levels)
        grows = calibrated(h, 20.0 + 30.0 * h**-0.4555, kind=kind)
        assert grows.growth == "shown" and grows.order_low < 0.0
        falls = calibrated(h, 20.0 - 3.0 * h**2, kind=kind)
        assert falls.growth == "excluded" if levels == 6 else falls.growth != "shown"
    h = sizes(3)
    assert calibrated(h, 20.0 + 30.0 * h**-0.4555, kind=kind).growth == "possible"
