"""The verdict: never better than the evidence, tolerances to the last digit, the deciding reason first."""

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence.corner import Corner
from convergence.coverage import Coverage
from convergence.intervals import Interval, interval
from convergence.results import Facts, Ladder, Level, Quantity, Verdict
from convergence.verdicts import SETTLED, accepted, expected_order, verdict

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
    kind: str = "displacement",
    **tolerance: object,
) -> Verdict:
    f = np.asarray(values, dtype=float)
    sizes = np.asarray(h, dtype=float)[-len(f) :] if len(f) else H[:0]
    quantity = Quantity("f", kind, "mm", formal_order=formal, **tolerance)
    found = interval(sizes, f, kind=kind)
    return verdict(quantity, found, spoiled or {}, ladder_of(sizes, f), facts or Facts())


def fixed(half_width: float, value: float = 100.0, **changes: object) -> Interval:
    """An interval with a given half-width, as if five levels had said so."""
    base = Interval(
        value=value,
        limit=value,
        low=value - half_width,
        high=value + half_width,
        half_width=half_width,
        order=2.0,
        order_low=1.5,
        order_high=2.5,
        growth="excluded",
        behaviour="monotone convergence",
        levels=5,
        lost=0,
        flaw="",
        coverage=None,
    )
    return replace(base, **changes)


def of(
    found: Interval,
    spoiled: dict | None = None,
    kind: str = "displacement",
    facts: Facts | None = None,
    formal: float = 2.0,
    **tolerance: object,
) -> Verdict:
    quantity = Quantity("f", kind, "mm", formal_order=formal, **tolerance)
    ladder = ladder_of(H, np.full(5, found.value))
    return verdict(quantity, found, spoiled or {}, ladder, facts or Facts())


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
    assert near_zero.reasons[0] == "The value is zero within its interval: give an absolute_tolerance."
    assert judged(values - values[-1], relative=0.05, absolute=0.01).word == "sound"


def test_all_zero() -> None:
    """Zero on every level to the last bit is a constant like any other."""
    said = judged([0.0] * 4, relative=0.05)
    assert said.word == "sound" and (said.low, said.high) == (0.0, 0.0) and said.coverage is None


def test_constant() -> None:
    said = judged([5.0] * 4, relative=1e-6)
    assert said.word == "sound" and said.limit == 5.0
    assert said.low <= 5.0 <= said.high
    tight = judged([5.0] * 4, absolute=1e-15)
    assert tight.word == "unproven" and math.isnan(tight.next_h)
    assert tight.reasons[0].endswith("wider than the tolerance: no finer mesh helps.")


@pytest.mark.parametrize("values", [[], [1.0], [1.0, 1.001], [1.0, 1.1, NAN], [NAN] * 4])
def test_too_little_is_unproven(values: list) -> None:
    said = judged(values, relative=0.5)
    assert said.word == "unproven" and said.reasons
    assert math.isnan(said.next_h)


def test_two_levels_say_what_would_help() -> None:
    """The interval is stated for orientation, even within the tolerance."""
    said = judged([1.0, 1.001], relative=0.5)
    assert said.word == "unproven" and said.uncertainty < said.tolerance
    assert said.low < said.value < said.high
    assert (
        said.reasons[0]
        == "Two levels never prove a value: the interval is an orientation; add a third level."
    )


def test_no_interval_says_why_first() -> None:
    said = judged([1.0, NAN, NAN, 1.5, NAN], relative=0.5)
    assert said.reasons == (
        "No interval: the finest level has no value.",
        "3 level(s) without a value were left out.",
    )


@pytest.mark.parametrize("kind", ["peak_stress", "point_stress", "unknown"])
def test_a_stress_that_may_grow_is_unproven_whatever_is_accepted(kind: str) -> None:
    """Where the model is not known; theory decides where it is, and other kinds always have a limit."""
    moving = fixed(5.0, growth="possible")
    for relative in (0.01, 0.5):
        said = of(moving, kind=kind, relative=relative)
        assert said.word == "unproven" and math.isnan(said.next_h)
        assert said.reasons[0].startswith("The levels do not tell slow convergence from growth without limit")
        assert (said.low, said.high) == (95.0, 105.0)
    assert of(moving, kind=kind, relative=0.5, facts=Facts(corners=())).word == "sound"
    assert of(moving, kind="energy", relative=0.5).word == "sound"
    assert of(replace(moving, growth="excluded"), kind=kind, relative=0.5).word == "sound"


def test_a_stress_that_hardly_moves_is_settled() -> None:
    """No value that grows without limit moves by so little from level to level."""
    assert of(fixed(SETTLED * 100.0, growth="possible"), kind="point_stress", relative=0.05).word == "sound"
    wider = fixed(math.nextafter(SETTLED * 100.0, 9.0), growth="possible")
    assert of(wider, kind="point_stress", relative=0.05).word == "unproven"


def test_changes_that_grow_are_not_sound() -> None:
    """Half of the last change is accepted, yet the levels may show growth without limit."""
    values = [309.0, 285.0, 283.0, 296.0, 357.0]
    for kind in ("displacement", "point_stress"):
        said = judged(values, kind=kind, absolute=0.5 * (357.0 - 296.0))
        assert said.word in ("refine", "unproven") and said.low < said.limit < said.high
        assert any("monotone divergence" in reason for reason in said.reasons)


def test_lost_levels_are_mentioned() -> None:
    said = judged([1.0, NAN, 1.4, 1.5, 1.52], relative=0.5)
    assert "1 level(s) without a value were left out." in said.reasons


@pytest.mark.parametrize("word", ["unproven", "singular"])
def test_a_failed_check_overrules_a_narrow_interval(word: str) -> None:
    said = of(fixed(1e-6), {word: "the equations are not solved"}, relative=0.5)
    assert said.word == word and said.reasons[0] == "The equations are not solved."
    assert said.value == 100.0
    both = of(fixed(1e-6), {"unproven": "a", "singular": "b"}, relative=0.5)
    assert both.word == "singular" and both.reasons == ("B.",)
    assert math.isnan(both.limit) and math.isnan(both.low) and math.isnan(both.high)
    assert both.value == 100.0


def test_order_against_theory() -> None:
    assert expected_order(Quantity("f", formal_order=4.0), Facts()) == 4.0
    assert expected_order(Quantity("f", formal_order=4.0), Facts(corners=(CORNER,))) == 2 * 0.5445
    assert expected_order(Quantity("f", formal_order=1.0), Facts(corners=(CORNER,))) == 1.0
    assert expected_order(Quantity("f"), Facts(corners=(CORNER,))) is None
    limited = "Theory expects 1.09 (the formal 4 is limited in the end by the model's weakest corner)."
    slow = of(fixed(1.0, order=1.089), facts=Facts(corners=(CORNER,)), formal=4.0, relative=0.5)
    assert limited in slow.reasons and not any("far below theory" in reason for reason in slow.reasons)
    late = of(fixed(1.0, order=0.9), relative=0.5)
    assert any("far below theory" in reason for reason in late.reasons)
    lucky = of(fixed(1.0, order=3.2), relative=0.5)
    assert any("above theory" in reason for reason in lucky.reasons)


def test_an_assumed_tolerance_is_said() -> None:
    said = of(fixed(1.0), relative=0.05, assumed_tolerance=True)
    assert "Accepted: 5 % of the value (assumed, none was given), that is 5." in said.reasons
    both = of(fixed(1.0), relative=0.05, absolute=0.25)
    assert "Accepted: 5 % of the value or 0.25 mm, that is 5." in both.reasons


def test_interval_order_and_coverage_are_handed_on() -> None:
    """The coverage is a number of the verdict, not one of its reasons; a singular one has none."""
    measured = Coverage("kind", 5, 200, 190, 0.9104, 0.9758, 2.0)
    found = fixed(3.0, limit=101.0, low=99.0, high=103.0, coverage=measured)
    said = of(found, relative=0.05)
    assert (said.limit, said.low, said.high, said.uncertainty) == (101.0, 99.0, 103.0, 3.0)
    assert (said.observed_order, said.order_low, said.order_high) == (2.0, 1.5, 2.5)
    assert said.coverage is measured and not any("held the limit" in reason for reason in said.reasons)
    (line,) = (reason for reason in said.reasons if reason.startswith("Half-width"))
    assert line.startswith("Half-width 3.00 about the finest value; best estimate of the limit 101.0 ± 2.0")
    assert of(found, {"singular": "why"}).coverage is None


@pytest.mark.parametrize("order", [1.0, 1.5, 2.0, 3.0])
def test_a_power_law(order: float) -> None:
    """The word follows the tolerance, the interval does not, and it holds the limit."""
    f = 40.0 + 1.3 * H**order
    wide, tight = judged(f, formal=order, absolute=100.0), judged(f, formal=order, absolute=1e-6)
    assert (wide.word, tight.word) == ("sound", "refine")
    assert wide.low <= 40.0 <= wide.high
    assert (wide.limit, wide.low, wide.high, wide.coverage) == (
        tight.limit,
        tight.low,
        tight.high,
        tight.coverage,
    )
    assert wide.coverage is not None and wide.coverage.levels == 5


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
        assert said.low <= said.limit <= said.high
        assert max(said.high - said.value, said.value - said.low) <= said.tolerance
    if said.word == "refine":
        assert not reason and said.uncertainty > said.tolerance > 0.0
        assert math.isnan(said.next_h) or (0.0 < said.next_h < 8.0 and said.next_cells > 0.0)
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


@pytest.mark.parametrize(("exponent", "word"), [(0.46, "sound"), (0.44, "unproven")])
def test_slower_than_is_calibrated(exponent: float, word: str) -> None:
    """A corner below the exponents of the bank leaves everything unproven, with the reason."""
    found = of(fixed(1.0), facts=Facts(corners=(replace(CORNER, exponent=exponent),)), relative=0.05)
    assert found.word == word
    assert any("values that converge so slowly are not calibrated" in one for one in found.reasons) == (
        word == "unproven"
    )
