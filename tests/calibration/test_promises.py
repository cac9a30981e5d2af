"""Promises of the next mesh: the bound that most steps keep, and an honest count of those that kept it."""

import numpy as np
import pytest

from convergence.calibration import promises as measured
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.promises import BOUNDED, Step, added, promise, promises
from convergence.histories.table import table

SIZES = 8.0 * 1.5 ** -np.arange(7.0)


def steps(families: str, spread: float, shift: float = 0.0) -> list[Step]:
    """Half-widths exp(shift + spread · u) / ratio, u even from 0 to 1: the quantile is known."""
    even = np.linspace(0.0, 1.0, 101)
    ratios = 1.3 * 4.0 ** np.random.default_rng(5).permutation(even)
    lefts = np.exp(shift + spread * even) / ratios
    return [
        Step(family, "whole, regular", float(ratio), float(left))
        for family in families
        for ratio, left in zip(ratios, lefts, strict=True)
    ]


def test_the_bound_is_the_quantile() -> None:
    """Ratio times half-width left is exp(spread · u): a share BOUNDED lies below exp(spread · BOUNDED)."""
    assert promise(steps("abc", 0.0)).safety == pytest.approx(1.0)
    assert np.log(promise(steps("abc", 0.2)).safety) == pytest.approx(0.2 * BOUNDED, abs=0.2 / 100)


def test_families_count_the_same() -> None:
    """Thirty families' worth of one more family does not outvote the others."""
    odd = steps("c" * 30, 0.0, shift=np.log(0.5))
    assert promise([*steps("ab", 0.2), *odd]).safety == promise([*steps("ab", 0.2), *odd[:101]]).safety


def test_a_family_is_held_against_the_bound_of_the_others() -> None:
    """Family c narrows half as much: none of its steps keeps what a and b promise, all of theirs are kept."""
    others, odd = steps("ab", 0.0), steps("c", 0.0, shift=np.log(2.0))
    found = promise([*others, *odd])
    told = [step for step in odd if 0.1 <= 1.0 / step.ratio <= 0.9]
    assert found.cases - found.kept == len(told) > 50
    assert found.low < found.kept / found.cases < found.high
    assert found.safety == pytest.approx(2.0), "the bound itself has seen c"


def test_levels_are_added_where_a_jump_is_large() -> None:
    assert added(SIZES, 2, 3) == [3]
    assert added(SIZES, 2, 4) == [4]
    assert added(SIZES, 2, 6) == [4, 6]
    assert added(np.array([4.0, 1.0, 0.5]), 0, 1) == [1], "no level between"


def test_a_small_bank(monkeypatch: pytest.MonkeyPatch) -> None:
    """Displacements with an error h² that strays little: finer meshes narrow the interval."""
    monkeypatch.setattr(measured, "MOST", 2)
    monkeypatch.setattr(measured, "ENOUGH", 5)
    random, ladders = np.random.default_rng(3), []
    for family in "abc":
        f = 10.0 + 0.01 * SIZES**2 * (1.0 + 0.05 * random.standard_normal(len(SIZES)))
        known = (family, "case", "tip", "displacement", "remeshed", "triangles", 2, 1, None)
        ladders.append(KnownLadder(*known, singular=False, h=SIZES, f=f, limit=10.0, bound=0.0))
        ladders.append(KnownLadder(*known, singular=True, h=SIZES, f=f, limit=np.nan, bound=0.0))
    found = promises(ladders, table())
    assert set(found) <= {
        f"{kind}, {how}" for kind in ("whole", "unknown") for how in ("regular", "irregular")
    }
    assert found["whole, regular"].ratio(0.5) < 4.0
    assert promises(ladders, table()) == found, "the same bank gives the same promises"
