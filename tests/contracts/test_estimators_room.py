"""The contract of the room of estimators, swept over its members, and tested with bad ones."""

import importlib
import inspect
import math
import re
import warnings
from collections.abc import Callable
from types import ModuleType
from typing import Any

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence import rooms
from convergence.results import Estimate

YEAR = re.compile(r"\b(19|20)\d\d\b")
SIZES = np.array([16.0, 8.0, 4.0, 2.0, 1.0])
NAN, INF = math.nan, math.inf
DEGENERATE = {
    "no level": ([], []),
    "one level": ([1.0], [5.0]),
    "constant": (SIZES, [5.0] * 5),
    "all zero": (SIZES, [0.0] * 5),
    "constant to round-off": (SIZES, [0.3, 0.1 * 3, 0.3, 0.1 * 3, 0.3]),
    "settling within round-off": (SIZES, 5.0 + 1e-11 * SIZES),
    "last two equal": (SIZES, [1.0, 2.0, 2.5, 2.75, 2.75]),
    "first ones equal": (SIZES, [2.0, 2.0, 2.0, 2.0, 3.0]),
    "finest value missing": (SIZES, [1.0, 2.0, 2.5, 2.75, NAN]),
    "coarsest value missing": (SIZES, [NAN, 2.0, 2.5, 2.75, 2.8]),
    "infinite value": (SIZES, [1.0, 2.0, INF, 2.75, 2.8]),
    "all missing": (SIZES, [NAN] * 5),
    "equal sizes": ([4.0, 2.0, 2.0, 1.0, 1.0], [1.0, 2.0, 2.5, 2.75, 2.8]),
    "fine to coarse": (SIZES[::-1], [1.0, 2.0, 2.5, 2.75, 2.8]),
    "missing size": ([4.0, 3.0, NAN, 1.0, 0.5], [1.0, 2.0, 2.5, 2.75, 2.8]),
    "settling oscillation": (SIZES, [1.0, 2.0, 1.5, 1.75, 1.7]),
    "growing oscillation": (SIZES, [1.0, 1.1, 0.8, 1.5, -3.0]),
    "constant differences": (SIZES, [1.0, 2.0, 3.0, 4.0, 5.0]),
    "growth": (SIZES, SIZES**-0.5),
    "sudden stop": (SIZES, [9.0, 1.0, 1.0 + 2e-9, 1.0 + 1e-9, 1.0]),
    "very high order": (SIZES, SIZES**40),
    "very small ratios": (1.0 + 1e-7 * SIZES, [1.0, 2.0, 2.5, 2.75, 2.8]),
    "order beyond the largest number": ([8.0, 4.004, 4.0, 0.4], [3e6, 1e6, 1.0, 0.0]),
    "very large ratios": (SIZES**60, [1.0, 2.0, 2.5, 2.75, 2.8]),
    "very large values": (SIZES, [1.6e308, -1.7e308, 1.5e308, -1.0e308, 1.6e308]),
    "very small values": (SIZES, [1e-320, 3e-320, 4e-320, 45e-321, 46e-321]),
}


def function_of(module: ModuleType) -> Any:
    return getattr(module, module.__name__.rsplit(".", 1)[-1])


def check_signature(module: ModuleType) -> None:
    """name(h, f, *, formal_order: float | None = None) -> Estimate."""
    signature = inspect.signature(function_of(module))
    shape = re.sub(r"[\w.]*\.", "", str(signature))
    assert shape == "(h: ndarray, f: ndarray, *, formal_order: float | None = None) -> Estimate"


def check_words(module: ModuleType) -> None:
    """The file says what it is and where it is published; the function says what to know."""
    text = inspect.getdoc(module) or ""
    assert text.split("\n")[0].endswith(".")
    assert YEAR.search(text), "no year of a publication"
    assert inspect.getdoc(function_of(module))


def check_source(module: ModuleType) -> None:
    assert isinstance(module.SOURCE, str) and len(module.SOURCE) > 40 and YEAR.search(module.SOURCE)


def check_levels(module: ModuleType) -> None:
    """LEVELS levels of a good ladder are enough, one fewer is refused with a reason."""
    levels, member = module.LEVELS, function_of(module)
    assert isinstance(levels, int) and 2 <= levels <= 5
    f = 3.0 + 0.1 * SIZES**2
    enough = member(SIZES[-levels:], f[-levels:], formal_order=2.0)
    assert math.isfinite(enough.limit) and math.isfinite(enough.uncertainty)
    fewer = member(SIZES[1 - levels :], f[1 - levels :], formal_order=2.0)
    assert math.isnan(fewer.limit) and math.isnan(fewer.uncertainty) and fewer.remark


def check_good_ladder(module: ModuleType) -> None:
    """A power law of the formal order has its limit found, the true error covered, and no remark."""
    for order in (1.0, 2.0, 4.0):
        estimate = function_of(module)(SIZES, 3.0 + 0.1 * SIZES**order, formal_order=order)
        assert estimate.limit == pytest.approx(3.0, abs=1e-8)
        assert estimate.order == pytest.approx(order, abs=1e-6)
        assert estimate.uncertainty >= 0.1 * (1.0 - 1e-6)
        assert estimate.remark == ""


def check_degenerate(module: ModuleType) -> None:
    """No data raise, warn or are written to; what cannot be said is NaN and has a reason in one line."""
    for name, (sizes, values) in DEGENERATE.items():
        h, f = np.array(sizes, dtype=float), np.array(values, dtype=float)
        h.flags.writeable = f.flags.writeable = False
        for formal in (None, 1.0, 2.0):
            with warnings.catch_warnings():
                warnings.simplefilter("error")
                estimate = function_of(module)(h, f, formal_order=formal)
            numbers = (estimate.limit, estimate.order, estimate.uncertainty)
            assert all(isinstance(number, float) and not math.isinf(number) for number in numbers), name
            assert not estimate.uncertainty < 0.0, name
            if any(math.isnan(number) for number in numbers):
                assert estimate.remark and "\n" not in estimate.remark, name
    constant = ("constant", "all zero", "constant to round-off", "settling within round-off")
    for name in (*constant, "one level", "all missing", "equal sizes"):
        sizes, values = DEGENERATE[name]
        estimate = function_of(module)(np.array(sizes), np.array(values))
        assert math.isnan(estimate.uncertainty) and math.isnan(estimate.limit), name


def check_invariance(module: ModuleType, seed: int, levels: int, scale: float, shift: float) -> None:
    """Another unit or origin of the values, or another unit of h, changes nothing but the unit."""
    generator, member = np.random.default_rng(seed), function_of(module)
    h = np.cumprod(1.0 / generator.uniform(1.2, 2.2, levels))
    f = 1.0 + h ** generator.uniform(0.5, 3.0) * (1.0 + 0.1 * generator.standard_normal(levels))
    plain = member(h, f, formal_order=2.0)
    moved = member(3.7 * h, scale * (f + shift), formal_order=2.0)
    # round-off of the values (up to 12) over the least difference, times 1e4 for ill-conditioned fits
    noise = 1e4 * 1e-14 / float(np.min(np.abs(np.diff(f))))
    close = {"rel": max(1e-6, noise), "abs": max(1e-9, noise), "nan_ok": True}
    assert moved.limit / scale - shift == pytest.approx(plain.limit, **close)
    assert moved.uncertainty / abs(scale) == pytest.approx(plain.uncertainty, **close)
    assert moved.order == pytest.approx(plain.order, **close)
    assert bool(moved.remark) == bool(plain.remark)


CHECKS = [check_signature, check_words, check_source, check_levels, check_good_ladder, check_degenerate]
MEMBERS = rooms.names("estimators")


def member_module(name: str) -> ModuleType:
    return importlib.import_module(f"convergence.estimators.{name}")


def test_the_room_is_complete() -> None:
    index = {"grid_convergence_index", "limited_order_index"}
    assert index | {"richardson", "correction_factor", "factor_of_safety", "least_squares"} <= set(MEMBERS)


@pytest.mark.parametrize("name", MEMBERS)
@pytest.mark.parametrize("check", CHECKS)
def test_member(check: Callable[[ModuleType], None], name: str) -> None:
    check(member_module(name))


@pytest.mark.parametrize("name", MEMBERS)
@settings(deadline=None, max_examples=30)
@given(
    seed=st.integers(0, 10**6),
    levels=st.integers(3, 6),
    scale=st.sampled_from([-1.0, 1e-6, 145.0, -6894.757]),
    shift=st.floats(-10.0, 10.0),
)
def test_member_is_invariant(name: str, seed: int, levels: int, scale: float, shift: float) -> None:
    check_invariance(member_module(name), seed, levels, scale, shift)


def altered(**changes: Any) -> ModuleType:
    """Return a copy of a good member with something in it replaced."""
    good = member_module("richardson")
    bad = ModuleType("convergence.estimators.richardson", changes.pop("doc", good.__doc__))
    bad.__dict__.update({"SOURCE": good.SOURCE, "LEVELS": good.LEVELS, "richardson": good.richardson})
    bad.__dict__.update(changes)
    return bad


def answering(change: Callable[[np.ndarray, np.ndarray, Estimate], Estimate]) -> ModuleType:
    """Return a copy of a good member whose answers are changed."""
    good = member_module("richardson").richardson

    def richardson(h: np.ndarray, f: np.ndarray, *, formal_order: float | None = None) -> Estimate:
        """Return the changed answer."""
        return change(h, f, good(h, f, formal_order=formal_order))

    return altered(richardson=richardson)


def positional(h: np.ndarray, f: np.ndarray, formal_order: float | None = None) -> Estimate:
    """Return a sound answer through a signature of its own."""
    return member_module("richardson").richardson(h, f, formal_order=formal_order)


def silent(h: np.ndarray, f: np.ndarray, *, formal_order: float | None = None) -> Estimate:
    return positional(h, f, formal_order)


def warned(h: np.ndarray, f: np.ndarray, estimate: Estimate) -> Estimate:
    np.float64(1.0) / np.float64(len(f) - 1)
    return estimate


def written(h: np.ndarray, f: np.ndarray, estimate: Estimate) -> Estimate:
    f[:1] = 0.0
    return estimate


BAD = [
    (check_signature, altered(richardson=positional)),
    (check_signature, altered(richardson=lambda h, f, *, formal_order=None: None)),
    (check_words, altered(doc="A method of nobody, published nowhere.")),
    (check_words, altered(doc="No full stop, 1911")),
    (check_words, altered(richardson=silent)),
    (check_source, altered(SOURCE="Richardson")),
    (check_source, altered(SOURCE=None)),
    (check_levels, altered(LEVELS=2)),
    (check_levels, altered(LEVELS=4)),
    (check_levels, altered(LEVELS=3.0)),
    (check_good_ladder, answering(lambda h, f, e: Estimate(e.limit + 1e-3, e.order, e.uncertainty))),
    (check_good_ladder, answering(lambda h, f, e: Estimate(e.limit, e.order, 0.9 * e.uncertainty))),
    (check_good_ladder, answering(lambda h, f, e: Estimate(e.limit, e.order, e.uncertainty, "hm"))),
    (check_degenerate, answering(lambda h, f, e: Estimate(e.limit, e.order, e.uncertainty))),
    (check_degenerate, answering(lambda h, f, e: Estimate(f[-1], e.order, e.uncertainty, e.remark))),
    (check_degenerate, answering(lambda h, f, e: Estimate(e.limit, INF, e.uncertainty, e.remark))),
    (check_degenerate, answering(lambda h, f, e: Estimate(e.limit, e.order, -e.uncertainty, "no"))),
    (check_degenerate, answering(lambda h, f, e: Estimate(1.0, 2.0, 0.0))),
    (check_degenerate, answering(warned)),
    (check_degenerate, answering(written)),
]


@pytest.mark.parametrize(("check", "bad"), BAD)
def test_bad_members_fail(check: Callable[[ModuleType], None], bad: ModuleType) -> None:
    check(altered())
    with pytest.raises((AssertionError, ArithmeticError, LookupError, TypeError, ValueError, Warning)):
        check(bad)


@pytest.mark.parametrize(
    "change",
    [
        lambda h, f, e: Estimate(e.limit, e.order, e.uncertainty / abs(f[-1]), e.remark),
        lambda h, f, e: Estimate(e.limit, e.order, e.uncertainty + h[-1], e.remark),
        lambda h, f, e: Estimate(e.limit, e.order, abs(e.limit), e.remark),
        lambda h, f, e: Estimate(e.limit, e.order * h[0], e.uncertainty, e.remark),
    ],
)
def test_bad_members_are_not_invariant(
    change: Callable[[np.ndarray, np.ndarray, Estimate], Estimate],
) -> None:
    check_invariance(altered(), seed=1, levels=4, scale=-6894.757, shift=2.0)
    with pytest.raises(AssertionError):
        check_invariance(answering(change), seed=1, levels=4, scale=-6894.757, shift=2.0)
