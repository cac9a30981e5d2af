"""The largest absolute value of several cases: its interval holds it whichever case it belongs to."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as some

from convergence.envelope import envelope, worst_case, worst_first
from convergence.results import Facts, Findings, Ladder, Quantity, Verdict, VerdictWord

NAN = math.nan


def verdict(word: VerdictWord, value: float, low: float = NAN, high: float = NAN) -> Verdict:
    return Verdict(
        word, value, NAN, low, high, 0.5 * (high - low), NAN, "", NAN, NAN, NAN, None, None, NAN, NAN, NAN,
        NAN, NAN, None, (),
    )  # fmt: skip


def findings(**verdicts: Verdict) -> Findings:
    quantities = tuple(Quantity(name) for name in verdicts)
    return Findings("", Ladder((), ""), quantities, Facts(), {}, (), verdicts)


def cases(*verdicts: Verdict) -> dict[str, Findings]:
    return {f"case{number}": findings(q=one) for number, one in enumerate(verdicts)}


def test_the_sign_is_kept_and_the_interval_is_of_the_size() -> None:
    found = envelope(cases(verdict("sound", 4.0, 3.0, 5.0), verdict("refine", -9.0, -9.5, -8.0)), "q")
    assert (found.case, found.value, found.low, found.high, found.word) == ("case1", -9.0, 8.0, 9.5, "refine")


def test_a_smaller_value_with_a_wider_interval_may_be_the_larger_one() -> None:
    found = envelope(cases(verdict("sound", 10.0, 9.9, 10.1), verdict("refine", 9.8, 8.0, 11.6)), "q")
    assert (found.case, found.low, found.high, found.word) == ("case0", 9.9, 11.6, "refine")


def test_a_case_below_the_interval_does_not_count() -> None:
    found = envelope(cases(verdict("sound", 10.0, 9.9, 10.1), verdict("refine", 1.0, -2.0, 4.0)), "q")
    assert (found.low, found.high, found.word) == (9.9, 10.1, "sound")


@pytest.mark.parametrize(
    "open_one",
    [
        verdict("singular", 1.0),
        verdict("unproven", 1.0, 0.9, 1.1),
        verdict("unproven", NAN),
        verdict("refine", 1.0, NAN, NAN),
    ],
)
def test_without_a_proven_interval_in_one_case_there_is_none(open_one: Verdict) -> None:
    found = envelope(cases(verdict("sound", -10.0, -10.1, -9.9), open_one), "q")
    assert found.case == "case0" and math.isnan(found.low) and math.isnan(found.high)
    assert found.word == open_one.word


@given(
    some.lists(
        some.tuples(some.floats(-100, 100), some.floats(0, 20), some.floats(-1, 1)), min_size=1, max_size=6
    )
)
def test_the_interval_holds_the_largest_of_any_answers_inside_the_intervals(
    spans: list[tuple[float, float, float]],
) -> None:
    """Value, half-width and where in its interval the answer of a case lies."""
    found = envelope(cases(*(verdict("sound", v, v - half, v + half) for v, half, _ in spans)), "q")
    largest = max(abs(v + share * half) for v, half, share in spans)
    # v + share * half may be rounded across the end v + half
    assert found.low - 1e-12 <= largest <= found.high + 1e-12
    assert abs(found.value) == max(abs(v) for v, _, _ in spans)


def test_the_worst_case_is_first() -> None:
    sound, refine = verdict("sound", 1.0, 0.9, 1.1), verdict("refine", 1.0, 0.5, 1.5)
    every = {
        "good": findings(a=sound, b=sound),
        "wide": findings(a=sound, b=refine),
        "wider": findings(a=refine, b=refine),
        "open": findings(a=sound, b=verdict("unproven", 1.0)),
        "sharp": findings(a=verdict("singular", 1.0), b=sound),
        "fine": findings(a=sound, b=sound),
    }
    assert worst_first(every) == ["sharp", "open", "wider", "wide", "good", "fine"]
    assert worst_case(every, "a") == "sharp" and worst_case(every, "b") == "open"
