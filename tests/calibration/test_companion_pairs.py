"""Pairs of the bank: who is a companion of whom, the factor, and what is counted as covered."""

import math
from dataclasses import replace

import numpy as np
import pytest

from convergence.calibration.companions import Pair, companion_factors, companion_outcomes, companion_pairs
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.left_out import Outcome
from convergence.calibration.stretches import ASKED
from convergence.calibration.sub_ladders import SubLadder

H = np.array([4.0, 2.0, 1.0])
LIMIT = 10.0
BASE = KnownLadder(
    "lug", "thin", "pin", "displacement", "remeshed", "triangle", 2, 1, None, False, H, LIMIT - H, LIMIT, 0.0
)


def outcome(miss: float, half: float, error: float = 1.0, finest: float = 1.0, **changes: object) -> Outcome:
    """An interval of this half-width whose best estimate misses the limit by so much."""
    of = replace(BASE, **changes)
    sub = SubLadder(of, H * finest, LIMIT - error * H)
    return Outcome(sub, LIMIT + miss - half, LIMIT + miss + half, 0.0)


MAIN = outcome(0.0, 1.0)


@pytest.mark.parametrize(
    ("changes", "finest", "paired"),
    [
        ({"degree": 2}, 1.0, True),
        ({"shape": "mostly quadrilateral"}, 1.4, True),
        ({}, 1.0, False),
        ({"degree": 2}, 1.6, False),
        ({"degree": 2, "label": "lug"}, 1.0, False),
        ({"degree": 2, "source": "nested"}, 1.0, False),
        ({"degree": 2, "singular": True}, 1.0, False),
    ],
)
def test_a_companion_is_the_same_quantity_on_like_meshes(changes: dict, finest: float, paired: bool) -> None:
    found = companion_pairs([MAIN, outcome(0.0, 1.0, finest=finest, **changes)])
    assert [(pair.main, pair.other) for pair in found] == ([(MAIN, found[0].other)] if paired else [])


def test_two_levels_have_no_companion() -> None:
    two = [outcome(0.0, 1.0, degree=degree) for degree in (1, 2)]
    two = [replace(one, sub=replace(one.sub, h=one.sub.h[1:], f=one.sub.f[1:])) for one in two]
    assert companion_pairs(two) == []


def pairs_with(shares: np.ndarray) -> list[Pair]:
    """Pairs that meet, whose narrower interval misses by these shares of its half-width."""
    return [Pair(outcome(0.0, 2.0), outcome(share, 1.0, degree=2)) for share in shares]


def test_the_factor_covers_the_asked_share_of_the_narrower_intervals() -> None:
    shares = np.linspace(0.01, 1.99, 199)
    rank = math.ceil(ASKED * (len(shares) + 1))
    assert companion_factors(pairs_with(shares)) == {"3": pytest.approx(shares[rank - 1])}


def test_the_factor_never_narrows() -> None:
    assert companion_factors(pairs_with(np.linspace(0.01, 0.5, 100))) == {"3": 1.0}


def test_the_factor_comes_from_pairs_that_meet_only() -> None:
    apart = [Pair(outcome(0.0, 2.0), outcome(9.0, 1.0, degree=2))] * 200
    assert companion_factors(apart) == {"3": 1.0}


def test_an_outcome_is_held_against_the_better_ladder() -> None:
    pair = Pair(outcome(0.0, 2.0, error=1.0), outcome(0.5, 1.0, error=0.25, degree=2))
    (found,) = companion_outcomes([pair])
    assert found.half == pytest.approx(1.0) and found.is_covered
    assert found.sub.error == pytest.approx(0.25)


def test_the_narrower_main_ladder_keeps_its_interval() -> None:
    (found,) = companion_outcomes([Pair(outcome(0.1, 1.0), outcome(0.5, 2.0, degree=2))])
    assert (found.low, found.high) == pytest.approx((LIMIT - 0.9, LIMIT + 1.1))


def test_a_family_is_judged_with_the_factor_of_the_others() -> None:
    strict = [Pair(outcome(0.0, 3.0, family="eye"), outcome(2.0, 1.0, family="eye", degree=2))] * 100
    mine = pairs_with(np.full(100, 0.2))
    found = companion_outcomes(strict + mine)
    for family, half in (("eye", 1.0), ("lug", 2.0)):
        assert [one.half for one in found if one.sub.of.family == family] == pytest.approx([half] * 100)


def test_pairs_that_do_not_meet_are_not_counted() -> None:
    assert companion_outcomes([Pair(MAIN, outcome(9.0, 1.0, degree=2))]) == []
