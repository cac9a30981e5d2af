"""The packaged table on families that it was not made of: disjoint from the bank, and covered as stated."""

import numpy as np
import pytest

from convergence.calibration.bank import UNSEEN, read_bank
from convergence.calibration.binomial import binomial_interval
from convergence.calibration.calibrate import judged_with
from convergence.calibration.growth import called
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.left_out import KNOWLEDGE, Outcome, finite
from convergence.calibration.making import UNSEEN as PACKAGE
from convergence.calibration.making import family_names
from convergence.calibration.sub_ladders import BETTER_KNOWN, sub_ladders
from convergence.coverage import Knowledge
from convergence.histories.table import TABLE, table

OF_A_FAMILY = 120
ASKED = 0.95
SOURCES = ("nested", "perturbed", "remeshed")


@pytest.fixture(scope="module")
def unseen() -> list[KnownLadder]:
    return read_bank(UNSEEN)


@pytest.fixture(scope="module")
def told(unseen) -> dict[Knowledge, list[Outcome]]:
    return judged_with(sub_ladders(unseen, OF_A_FAMILY), table())


def test_no_family_and_no_part_is_of_the_bank_or_of_the_table(packaged, unseen) -> None:
    families = {one.family for one in unseen}
    assert families == set(family_names(PACKAGE)) and len(families) >= 8
    assert not families & {one.family for one in packaged}
    assert not {one.case for one in unseen} & {one.case for one in packaged}
    text = TABLE.read_text(encoding="utf-8")
    assert not [name for name in families if f'"{name}"' in text]


def test_every_ladder_is_sound(unseen) -> None:
    for one in unseen:
        assert one.h[-1] < one.h[0] and one.h.min() > 0.0 and len(one.h) == len(one.f) >= 3, one
        assert np.isfinite(one.f).all() and np.isfinite(one.limit) != one.singular, one
    limits = [one for one in unseen if not one.singular]
    known = [abs(one.f[0] - one.limit) >= BETTER_KNOWN * one.bound for one in limits]
    assert np.mean(known) > 0.9


@pytest.mark.slow
@pytest.mark.parametrize("known", KNOWLEDGE)
@pytest.mark.parametrize("source", SOURCES)
def test_intervals_hold_the_limit_as_often_as_asked(told, known: Knowledge, source: str) -> None:
    """95 % is not above the binomial interval of the share that is held, from three levels."""
    of = [one for one in finite(told[known]) if one.sub.of.source == source and one.sub.levels >= 3]
    held = sum(one.is_covered for one in of)
    assert len(of) >= 20 and binomial_interval(held, len(of))[1] >= ASKED, (held, len(of))


@pytest.mark.slow
@pytest.mark.parametrize("known", KNOWLEDGE)
def test_singular_values_are_seldom_taken_for_others(told, known: Knowledge) -> None:
    """As `growth` counts: shown, or possible and not narrow, in at least 98 of 100, within chance."""
    counts = called(known, told[known], table().growth[known])
    singular = counts["singular stresses", "4 levels and more"]
    found = singular.cases - singular.neither
    assert singular.cases >= 20 and binomial_interval(found, singular.cases)[1] >= 0.98, singular
