"""The verdict: never better than the evidence, tolerances to the last digit, the size that would do."""

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence import numbers
from convergence.corner import Corner
from convergence.intervals import Interval, interval
from convergence.results import Facts, Ladder, Level, Quantity, Verdict
from convergence.verdicts import accepted, expected_order, verdict

H = np.array([16.0, 8.0, 4.0, 2.0, 1.0])
NAN = math.nan
CORNER = Corner("heel", ((0.0, 0.0),), ("heel",), 270.0, ("free", "free"), 0.5445)


def ladder_of(h: np.ndarray, f: np.ndarray) -> Ladder:
    levels = []
    for size, value in zip(h, f, strict=True):
        cells = max(1, int(1e4 / size**2))
        seconds, memory = 1e-4 * (2 * cells) ** 1.2, 50.0 + 0.01 * cells
        levels.append(Level(float(size), cells, 2 * cells, seconds, {"f": float(value)}, memory))
    return Ladder(tuple(levels), "t")


def judged(
    values: object,
    h: np.ndarray = H,
    formal: float | None = 2.0,
    facts: Facts | None = None,
    spoiled: dict | None = None,
    **tolerance: object,
) -> Verdict:
    f = np.asarray(values, dtype=float)
    sizes = np.asarray(h, dtype=float)[-len(f) :] if len(f) else H[:0]
    quantity = Quantity("f", "displacement", "mm", formal, **tolerance)
    found = interval(sizes, f, formal_order=formal)
    return verdict(quantity, found, spoiled or {}, ladder_of(sizes, f), facts or Facts())


def fixed(half_width: float, value: float = 100.0, **changes: object) -> Interval:
    """An interval with a given half-width, as if five levels had said so."""
    base = Interval(
        value, value, half_width, 2.0, "monotone convergence", {"last change": half_width}, 5, 0, "", {}
    )
    return replace(base, **changes)


def of(found: Interval, spoiled: dict | None = None, **tolerance: object) -> Verdict:
    quantity = Quantity("f", "displacement", "mm", 2.0, **tolerance)
    return verdict(quantity, found, spoiled or {}, ladder_of(H, np.full(5, found.value)), Facts())


def test_the_larger_of_both_tolerances_counts() -> None:
    assert accepted(Quantity("f", relative=0.05), -40.0) == 2.0
    assert accepted(Quantity("f", absolute=3.0), 40.0) == 3.0
    assert accepted(Quantity("f", relative=0.05, absolute=3.0), 40.0) == 3.0
    assert accepted(Quantity("f", relative=0.05, absolute=3.0), 100.0) == 5.0
    assert accepted(Quantity("f"), 100.0) == 0.0
    assert of(fixed(1.5), relative=0.02).word == "sound"
    assert of(fixed(2.5), relative=0.02).word == "refine"
    assert of(fixed(2.5), absolute=2.5).word == "sound"
    assert of(fixed(2.5), relative=0.02, absolute=2.5).word == "sound"


def test_nothing_is_rounded_across_the_limit() -> None:
    assert of(fixed(2.0), relative=0.02).word == "sound"
    assert of(fixed(math.nextafter(2.0, 3.0)), relative=0.02).word == "refine"
    assert of(fixed(1.996), relative=0.02).word == "sound"


def test_a_value_of_zero_needs_an_absolute_tolerance() -> None:
    """A share of zero accepts nothing; the reason says what to give."""
    values = 0.01 * H**2 / 256.0
    near_zero = judged(values - values[-1], relative=0.05)
    assert near_zero.word == "unproven" and near_zero.tolerance == 0.0
    assert any("give an absolute_tolerance" in reason for reason in near_zero.reasons)
    assert judged(values - values[-1], relative=0.05, absolute=0.01).word == "sound"


def test_all_zero() -> None:
    """Zero on every level to the last bit is a constant like any other."""
    said = judged([0.0] * 4, relative=0.05)
    assert said.word == "sound" and (said.low, said.high) == (0.0, 0.0)


def test_constant() -> None:
    said = judged([5.0] * 4, relative=1e-6)
    assert said.word == "sound" and said.limit == 5.0
    assert said.low <= 5.0 <= said.high
    tight = judged([5.0] * 4, absolute=1e-15)
    assert tight.word == "unproven", "round-off is wider, and no mesh would help"
    assert math.isnan(tight.next_h)


@pytest.mark.parametrize("values", [[], [1.0], [1.0, 1.001], [1.0, 1.1, NAN], [NAN] * 4])
def test_too_little_is_unproven(values: list) -> None:
    said = judged(values, relative=0.5)
    assert said.word == "unproven" and said.reasons
    assert math.isnan(said.next_h)


def test_two_levels_say_what_would_help() -> None:
    said = judged([1.0, 1.001], relative=0.5)
    assert "Two levels cannot show an order; a third one would." in said.reasons


def test_divergence_is_unproven_with_its_reason() -> None:
    said = judged([309.0, 285.0, 283.0, 296.0, 357.0], relative=0.05)
    assert said.word == "unproven" and math.isnan(said.low)
    assert said.reasons[0].startswith("No interval: the last three levels show monotone divergence, observed")


def test_lost_levels_are_mentioned() -> None:
    said = judged([1.0, NAN, 1.4, 1.5, 1.52], relative=0.5)
    assert "1 level(s) without a value were left out." in said.reasons


@pytest.mark.parametrize("word", ["unproven", "singular"])
def test_a_failed_check_overrules_a_narrow_interval(word: str) -> None:
    said = of(fixed(1e-6), {word: "the equations are not solved"}, relative=0.5)
    assert said.word == word and said.reasons[0] == "The equations are not solved."
    both = of(fixed(1e-6), {"unproven": "a", "singular": "b"}, relative=0.5)
    assert both.word == "singular" and both.reasons == ("B.",)
    assert math.isnan(both.limit) and math.isnan(both.low) and math.isnan(both.high)
    assert both.value == 100.0


def test_order_against_theory() -> None:
    assert expected_order(Quantity("f", formal_order=4.0), Facts()) == 4.0
    assert expected_order(Quantity("f", formal_order=4.0), Facts(corners=(CORNER,))) == 2 * 0.5445
    assert expected_order(Quantity("f", formal_order=1.0), Facts(corners=(CORNER,))) == 1.0
    assert expected_order(Quantity("f"), Facts(corners=(CORNER,))) is None
    slow = judged(5.0 + 0.1 * H**1.089, formal=4.0, facts=Facts(corners=(CORNER,)), relative=0.5)
    assert (
        "Theory expects 1.09 (the formal 4 is limited in the end by the model's weakest corner)."
        in slow.reasons
    )
    assert not any("far below theory" in reason for reason in slow.reasons)
    late = judged(5.0 + 0.1 * H**0.9, formal=2.0, relative=0.5)
    assert any("far below theory" in reason for reason in late.reasons)
    lucky = judged(5.0 + 0.001 * H**3.2, formal=2.0, relative=0.5)
    assert any("above theory" in reason for reason in lucky.reasons)


def test_an_assumed_tolerance_is_said() -> None:
    said = of(fixed(1.0), relative=0.05, assumed_tolerance=True)
    assert "Accepted: 5 % of the value (assumed, none was given), that is 5." in said.reasons
    both = of(fixed(1.0), relative=0.05, absolute=0.25)
    assert "Accepted: 5 % of the value or 0.25 mm, that is 5." in both.reasons


def test_coverage_is_not_claimed() -> None:
    said = judged(5.0 + 0.1 * H**2, relative=0.5)
    assert said.coverage is None
    assert any("its coverage has not been calibrated" in reason for reason in said.reasons)


@pytest.mark.parametrize("order", [0.2, 1.0, 1.5, 2.0, 3.0])
@pytest.mark.parametrize("accept", [0.5, 0.1, 0.01])
def test_the_named_size_would_do(order: float, accept: float) -> None:
    """Values f0 + c h^p on a ladder that ends at the named size: its interval fits the tolerance."""

    def values(h: np.ndarray) -> np.ndarray:
        return 40.0 + 1.3 * h**order

    tolerance = accept * 1.3 * (2.0**order - 1.0)
    said = judged(values(H), formal=order, absolute=tolerance)
    assert said.word == "refine" and said.next_h < 1.0
    finer = said.next_h * H
    again = judged(values(finer), finer, formal=order, absolute=tolerance * (1.0 + 1e-6))
    assert again.word == "sound"
    # not much finer than needed either: half as fine again does not fit, where the order may be used up to 4
    coarser = 1.5 * finer
    assert judged(values(coarser), coarser, formal=order, absolute=tolerance).word == "refine"
    # cost: cells and unknowns grow with h^-2 in the plane
    growth = said.next_h**-2
    assert said.next_cells == pytest.approx(1e4 * growth) and said.next_dofs == pytest.approx(2e4 * growth)
    assert said.next_seconds == pytest.approx(1e-4 * 2e4**1.2 * growth**1.2, rel=0.01)
    # the part that does not grow is not scaled
    assert said.next_memory == pytest.approx(50.0 + 100.0 * growth, rel=0.01)
    assert f"about {numbers.amount(said.next_memory, numbers.MEMORY)} of memory" in " ".join(said.reasons)


def test_an_accidentally_high_order_does_not_promise_much() -> None:
    """The order is used up to theory's only, even where more is observed."""
    high = judged(40.0 + 1e-3 * H**4, formal=2.0, absolute=1e-4)
    assert high.word == "refine"
    assert high.next_h == pytest.approx((1e-4 / high.uncertainty) ** (1.0 / 2.0))
    slow = judged(40.0 - 10.0 * H**0.2, formal=2.0, absolute=0.1)
    assert slow.word == "refine" and slow.observed_order == pytest.approx(0.2)
    assert slow.next_h == pytest.approx((0.1 / slow.uncertainty) ** (1.0 / 0.2), rel=1e-6)
    assert any("out of reach" in reason for reason in slow.reasons)


TOLERANCES = st.one_of(st.none(), st.floats(0.0, 10.0))


@settings(deadline=None, max_examples=120)
@given(
    values=st.lists(st.one_of(st.just(NAN), st.floats(-1e6, 1e6)), max_size=6),
    relative=TOLERANCES,
    absolute=TOLERANCES,
    formal=st.sampled_from([None, 1.0, 2.0, 4.0]),
    reason=st.sampled_from([{}, {}, {"unproven": "why"}, {"singular": "why"}]),
)
def test_never_better_than_the_evidence(
    values: list, relative: float | None, absolute: float | None, formal: float | None, reason: dict
) -> None:
    said = judged(
        values,
        formal=formal,
        spoiled=reason,
        relative=relative,
        absolute=absolute,
        h=8.0 * 1.7 ** -np.arange(6.0),
    )
    assert said.reasons and all(text.endswith(".") for text in said.reasons)
    usable = [value for value in values if math.isfinite(value)]
    if said.word == "sound":
        assert not reason and len(usable) >= 3 and math.isfinite(values[-1])
        assert said.uncertainty <= said.tolerance
        assert abs(usable[-1] - usable[-2]) <= said.tolerance
        assert said.low <= said.value <= said.high
    if said.word == "refine":
        assert not reason and said.uncertainty > said.tolerance > 0.0
        assert 0.0 < said.next_h < 1e6 and said.next_cells > 0.0
    else:
        assert math.isnan(said.next_h)
    assert (said.word == "singular") == ("singular" in reason)


@settings(deadline=None, max_examples=40)
@given(
    values=st.lists(st.floats(1.0, 2.0), min_size=3, max_size=6),
    scale=st.sampled_from([-1.0, 1e-3, 145.0377]),
    relative=st.floats(1e-4, 1.0),
)
def test_another_unit_gives_the_same_word(values: list, scale: float, relative: float) -> None:
    f, h = np.array(values), 8.0 * 1.7 ** -np.arange(float(len(values)))
    plain = judged(f, h, relative=relative)
    moved = judged(scale * f, h, relative=relative)
    tie = abs(plain.uncertainty - plain.tolerance) <= 1e-9 * plain.tolerance
    near_equal = len(f) >= 3 and abs(abs(f[-1] - f[-2]) - abs(f[-2] - f[-3])) < 1e-9
    small = np.abs(np.diff(f)).min() < 1e-6
    assert moved.word == plain.word or tie or near_equal or small
    if not (near_equal or small):
        assert moved.uncertainty == pytest.approx(abs(scale) * plain.uncertainty, rel=1e-5, nan_ok=True)
