"""Two ladders of one quantity: they must meet; the narrower interval stands, where that was measured."""

import math
from dataclasses import replace

import numpy as np
import pytest

from convergence.companions import together
from convergence.coverage import WITH_COMPANION, Coverage
from convergence.histories.table import Table, table
from convergence.intervals import Interval, interval
from convergence.results import Facts, Ladder, Level, Quantity, Verdict
from convergence.verdicts import verdict

H = np.array([8.0, 4.0, 2.0, 1.0])
MEASURED = Coverage(WITH_COMPANION, 4, 289, 279, 0.937, 0.983, 3.2)


def on_ladder(limit: float, error: float, order: float = 2.0) -> Interval:
    return interval(H, limit + error * H**order, kind="displacement", degree=1)


def taught(factor: float = 1.0) -> Table:
    """The packaged table with a factor of the companion and a coverage measured for four levels only."""
    usual = table()
    return replace(
        usual,
        stretch={**usual.stretch, WITH_COMPANION: {"4": {"always": math.log(factor)}}},
        coverage={**usual.coverage, WITH_COMPANION: {"4": MEASURED}},
    )


def worded(found: Interval) -> Verdict:
    levels = tuple(Level(h, 10, 20, 0.1, {"u": 1.0}) for h in H)
    quantity = Quantity("u", "displacement", relative=0.05)
    return verdict(quantity, found, {}, Ladder(levels, "t"), Facts())


WIDE, NARROW = on_ladder(100.0, -0.2), on_ladder(100.0, -0.01)


def test_the_narrower_interval_of_the_companion_stands_for_both() -> None:
    found = together(WIDE, NARROW, taught())
    assert (found.low, found.high, found.limit) == pytest.approx((NARROW.low, NARROW.high, NARROW.limit))
    assert found.half_width == max(found.high - WIDE.value, WIDE.value - found.low) < WIDE.half_width
    assert found.coverage == MEASURED
    assert (found.value, found.order, found.growth) == (WIDE.value, WIDE.order, WIDE.growth)


def test_the_interval_of_the_companion_is_widened_by_the_factor_of_the_bank() -> None:
    found = together(WIDE, NARROW, taught(1.5))
    assert found.high - found.low == pytest.approx(1.5 * (NARROW.high - NARROW.low))
    assert 0.5 * (found.low + found.high) == pytest.approx(NARROW.limit)


@pytest.mark.parametrize("factor", [1.0, 100.0])
def test_a_companion_that_knows_less_changes_no_number(factor: float) -> None:
    found = together(NARROW, WIDE, taught(factor))
    assert (found.low, found.high, found.limit) == (NARROW.low, NARROW.high, NARROW.limit)
    assert found.half_width == NARROW.half_width


def test_a_factor_never_makes_the_interval_wider_than_that_of_one_ladder() -> None:
    found = together(WIDE, NARROW, taught(1e3))
    assert (found.low, found.high) == (WIDE.low, WIDE.high)


def test_ladders_that_do_not_meet_prove_nothing_and_both_intervals_are_said() -> None:
    found = together(WIDE, on_ladder(150.0, -0.2), taught())
    assert found.flaw.startswith("the two ladders do not meet: ")
    assert all(math.isnan(x) for x in (found.low, found.high, found.limit, found.half_width))
    said = worded(found)
    assert said.word == "unproven"
    assert "on this ladder" in said.reasons[0] and "on its companion" in said.reasons[0]


def test_the_verdict_says_that_the_ladders_meet() -> None:
    assert any(
        reason.startswith("The two ladders meet: ")
        for reason in worded(together(WIDE, NARROW, taught())).reasons
    )


def test_intervals_are_joined_only_where_their_coverage_was_measured() -> None:
    three = interval(H[1:], 100.0 - 0.01 * H[1:] ** 2, kind="displacement", degree=2)
    found = together(WIDE, three, taught())
    assert (found.low, found.high, found.coverage) == (WIDE.low, WIDE.high, WIDE.coverage)
    assert found.companion.startswith("The two ladders meet")


def test_a_companion_without_an_interval_is_left_out_with_the_reason() -> None:
    empty = interval(H[:0], H[:0])
    found = together(WIDE, empty, taught())
    assert (found.low, found.high) == (WIDE.low, WIDE.high)
    assert found.companion == "The companion ladder is not used: the finest level has no value."


def test_a_main_ladder_without_an_interval_gets_none_from_its_companion() -> None:
    empty = interval(H[:0], H[:0])
    assert together(empty, NARROW, taught()) is empty


@pytest.mark.parametrize("known", [{}, {"kind": "displacement"}])
def test_intervals_are_joined_only_where_kind_and_degree_are_known(known: dict) -> None:
    bare = interval(H, 100.0 - 0.2 * H**2, **known)
    found = together(bare, NARROW, taught())
    assert (found.low, found.high, found.coverage) == (bare.low, bare.high, bare.coverage)
    assert found.companion.startswith("The two ladders meet")
