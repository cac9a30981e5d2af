"""The constant of the stretch from made-up errors: who sets it, and for which numbers of levels."""

from collections.abc import Sequence
from dataclasses import replace

import numpy as np
import pytest

from convergence.calibration.stretches import ASKED, FEW, FOLDS, MANY, NEAR, REGRESSED, Told, stretches
from convergence.calibration.sub_ladders import SubLadder
from convergence.histories.width import UNIT, half_width

FAMILIES = [f"family {number}" for number in range(FOLDS)]
EACH = 2 * (MANY // FOLDS + 1)
AT_MOST = ASKED * (1.0 + 1.0 / (FOLDS * EACH)) + 1.0 / EACH  # the next one included; a step of errors
EVEN = (np.arange(EACH) + 0.5) / EACH


@pytest.fixture
def made(lawful):
    """Return a maker of the same errors in every family: any β of others is then that of all."""

    def make(errors: Sequence[float], *, levels: int = 3, kind: str = "displacement") -> list[Told]:
        ladder = replace(lawful(2.0), kind=kind)
        told = []
        for family in FAMILIES:
            sub = SubLadder(replace(ladder, family=family), ladder.h[:levels], ladder.f[:levels])
            told += [Told(sub, {UNIT: 1.0, "always": 1.0}, ladder.limit + error) for error in errors]
        return told

    return make


def covered(told: Sequence[Told], stretch: dict[str, float]) -> float:
    """Return the share covered; the way to the minimum rounds a logarithm off by NEAR."""
    return float(np.mean([one.miss <= half_width(one.facts, stretch) * np.exp(NEAR) for one in told]))


def test_the_worst_kind_is_covered_and_by_the_least_constant(made) -> None:
    wild, tame = made(10.0 * EVEN, kind="peak_stress"), made(EVEN)
    stretch = stretches([*wild, *tame], "nothing")["3"]
    assert ASKED <= covered(wild, stretch) <= AT_MOST
    assert covered(tame, stretch) == 1.0


def test_a_source_counts_by_its_number_of_levels(made) -> None:
    """At four levels errors are ten times those at three; both have the factor that four levels need."""
    three, four = made(EVEN), made(10.0 * EVEN, levels=4)
    found = stretches([*three, *four], "nothing")
    assert ASKED <= covered(four, found["4"]) <= AT_MOST
    assert found["4"]["always"] - found["3"]["always"] == pytest.approx(np.log(10.0), abs=2.0 * NEAR)


def test_a_kind_counts_over_all_numbers_of_levels(made) -> None:
    """A kind with too few of three and of four levels, but enough of both together."""
    some = EVEN[: EACH // 4 + 1]
    rare = [made(10.0 * some, levels=levels, kind="rotation") for levels in (3, 4)]
    assert all(len(one) < MANY <= len(rare[0]) + len(rare[1]) for one in rare)
    usual = [made(np.tile(EVEN, 20), levels=levels) for levels in (3, 4)]
    found = stretches([one for told in (*rare, *usual) for one in told], "nothing")
    share = np.mean([covered(one, found[levels]) for one, levels in zip(rare, "34", strict=True)])
    assert share >= ASKED


def test_two_levels_have_a_factor_of_their_own(made) -> None:
    two, three = made(EVEN, levels=2), made(10.0 * EVEN)
    alone = stretches(two, "nothing")["2"]
    beside = stretches([*two, *three], "nothing")
    assert beside["2"] == alone
    assert ASKED <= covered(two, alone) <= AT_MOST


def test_a_handful_sets_nothing(made) -> None:
    usual = made(np.tile(EVEN, 20))
    handful = made([10.0] * (FEW // FOLDS - 1), kind="rotation")
    for one in handful:
        assert one.sub.of.source == usual[0].sub.of.source
    found = stretches([*usual, *handful], "nothing")["3"]
    assert covered(handful, found) == 0.0
    assert found["always"] >= np.log(REGRESSED) - NEAR
