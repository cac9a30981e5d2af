"""Sub-ladders of the bank: always the same ones, within their rules, kinds and levels in equal parts."""

from collections import Counter

import numpy as np

from convergence.calibration.sub_ladders import BETTER_KNOWN, LEVELS, RATIOS, STILL, sub_ladders

MOST = 24


def test_they_are_the_same_at_every_call(packaged) -> None:
    first, second = (sub_ladders(packaged[::30], MOST) for _ in range(2))
    assert len(first) == len(second) > 100
    for one, other in zip(first, second, strict=True):
        assert one.of is other.of and np.array_equal(one.h, other.h)


def test_they_keep_the_rules(packaged) -> None:
    for sub in sub_ladders(packaged[::30], MOST):
        ratios = sub.h[:-1] / sub.h[1:]
        assert sub.levels in LEVELS
        assert RATIOS[0] <= ratios.min() and ratios.max() <= RATIOS[1]
        assert np.isin(sub.h, sub.of.h).all() and np.isin(sub.f, sub.of.f).all()
        assert np.ptp(sub.f) > STILL * np.abs(sub.f).max()
        assert sub.of.singular or sub.error >= BETTER_KNOWN * sub.of.bound


def test_no_family_has_more_than_its_share(packaged) -> None:
    counts = Counter(sub.of.family for sub in sub_ladders(packaged[::30], MOST))
    assert max(counts.values()) == MOST


def test_levels_come_in_equal_parts(lawful) -> None:
    """One kind, plenty of runs of 2, 3, 4 and 5 levels of many ladders: each in equal number."""
    subs = sub_ladders([lawful(1.0 + 0.01 * n) for n in range(20)], 40)
    assert Counter(sub.levels for sub in subs) == {2: 10, 3: 10, 4: 10, 5: 10}


def test_a_limit_that_is_not_known_well_enough_is_not_used(lawful) -> None:
    """Errors of h^2 are 1, 1/4, 1/16 ...: with a bound of 1/100 the third is 6 bounds, the second 25."""
    subs = sub_ladders([lawful(2.0, bound=0.01)], 100)
    assert subs and {float(sub.h[-1]) for sub in subs} == {0.5}


def test_values_that_do_not_move_are_not_used(lawful) -> None:
    assert sub_ladders([lawful(2.0, size=1e-8)], 100) == []
