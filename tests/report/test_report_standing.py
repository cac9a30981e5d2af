"""Where a ladder stands among the bank's: who is like it, how many of them are covered, and warnings."""

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.coverage import Coverage
from convergence.report.figures_standing import NEAREST, OTHERS, standing, standing_figure
from convergence.results import Ladder, Quantity, Verdict

PEAK = Quantity("s", "peak_stress", "MPa")
H = np.array([16.0, 8.0, 4.0, 2.0, 1.0])
KNOWN = Coverage("kind and degree", 5, 2140, 2057, 0.9521, 0.9690, 3.1)


def make_bank(levels: int = 5, kind: str = "peak_stress", missed: int = 10, count: int = 300) -> np.ndarray:
    """Bank ladders of regularity 0.01 to 1; every `missed`-th misses if all is known, none if nothing is."""
    fields = [(f"{what}_{told}", float) for what in ("regularity", "share") for told in ("nothing", "known")]
    bank = np.zeros(count, [("levels", int), ("kind", "U16"), *fields])
    bank["levels"], bank["kind"] = levels, kind
    bank["regularity_nothing"] = bank["regularity_known"] = np.geomspace(0.01, 1.0, count)
    bank["share_nothing"] = 0.3
    bank["share_known"] = np.where(np.arange(count) % missed == 0, 2.0, 0.3)
    return bank


@pytest.fixture(name="ladder")
def ladder_(ladder_of: Callable[..., Ladder]) -> Ladder:
    """Values that span 20."""
    return ladder_of({"s": np.array([300.0, 310.0, 315.0, 318.0, 320.0])}, H)


@pytest.fixture(name="verdict")
def verdict_(verdict_of: Callable[..., Verdict]) -> Verdict:
    """A half-width of 2, a tenth of the span: the middle of the made-up bank."""
    return verdict_of(value=320.0, limit=321.0, low=319.0, high=323.0, coverage=KNOWN)


def test_the_nearest_are_counted(ladder: Ladder, verdict: Verdict) -> None:
    """The 200 nearest of 300 evenly spaced ones are those from 50 to 249: every tenth of them misses."""
    found = standing(PEAK, verdict, ladder, make_bank(missed=10))
    assert found is not None and found.at == pytest.approx(0.1, rel=1e-12)
    assert (found.nearest, found.covered) == (200, 180)
    assert "of the 200 ladders nearest in width 180 are covered (90.0 %)" in found.words()
    assert found.what.startswith("300 bank peak stress ladders of 5 levels or more, each judged with")


@pytest.mark.parametrize(("missed", "warned"), [(10, True), (14, False), (1000, False)])
def test_too_few_covered_beyond_chance_is_said(
    ladder: Ladder, verdict: Verdict, missed: int, warned: bool
) -> None:
    """Upper ends of the binomial intervals of 180 and 186 of 200: 93.8 % and 96.1 %. Own computation."""
    found = standing(PEAK, verdict, ladder, make_bank(missed=missed))
    assert found is not None and found.falls_short == warned == ("with care" in found.words())


def test_few_like_it_is_said(ladder: Ladder, verdict: Verdict) -> None:
    """Half-widths of ten spans: the widest of the bank is one, a factor of ten away."""
    wide = replace(verdict, low=121.0, high=521.0)
    found = standing(PEAK, wide, ladder, make_bank())
    assert found is not None and "few are like it: 0 within a factor of 3" in found.words()
    near = standing(PEAK, verdict, ladder, make_bank())
    assert near is not None and "few" not in near.words()


def test_what_is_not_known_is_not_used(ladder: Ladder, verdict: Verdict) -> None:
    """With nothing known the outcomes of that state count, in which no made-up ladder misses."""
    bare = replace(verdict, coverage=replace(KNOWN, knowledge="nothing"))
    found = standing(replace(PEAK, kind="unknown"), bare, ladder, make_bank())
    assert found is not None and found.covered == 200
    assert (
        found.what
        == "300 bank ladders of 5 levels or more, each judged with its family left out, nothing known"
    )


def test_levels_and_kinds_are_kept_apart(ladder: Ladder, verdict: Verdict) -> None:
    """Seven levels count with five, four do not; ten of a kind are too few, so all kinds are taken."""
    bank = np.concatenate([make_bank(levels=7), make_bank(levels=4), make_bank(kind="energy", count=10)])
    found = standing(PEAK, verdict, ladder, bank)
    assert found is not None and len(found.share) == 300
    rare = standing(replace(PEAK, kind="energy"), verdict, ladder, bank)
    assert rare is not None and len(rare.share) == 310
    assert "of all kinds, as only 10 are of the kind energy" in rare.what
    assert standing(PEAK, verdict, ladder, make_bank(levels=3)) is None


def test_none_without_a_calibrated_interval(
    ladder: Ladder, verdict: Verdict, ladder_of: Callable[..., Ladder]
) -> None:
    assert standing_figure("s", PEAK, replace(verdict, coverage=None), ladder, make_bank()) is None
    flat = ladder_of({"s": np.full(5, 320.0)}, H)
    assert standing_figure("s", PEAK, verdict, flat, make_bank()) is None


def test_figure_draws_the_nearest_and_some_of_the_others(ladder: Ladder, verdict: Verdict) -> None:
    picture = standing_figure("s-standing", PEAK, verdict, ladder, make_bank(count=3000))
    assert picture is not None
    assert "180 of the 200 bank ladders most like this one are covered: 90.0 %" in picture.svg
    for words in (
        "this ladder",
        "most like this one, missed",
        "true error / half-width",
        "span of the values",
    ):
        assert words in picture.svg
    marks = picture.svg.count("<use ")
    assert NEAREST + OTHERS < marks < NEAREST + OTHERS + 60  # and ticks, grid and legend
    again = standing_figure("s-standing", PEAK, verdict, ladder, make_bank(count=3000))
    assert again is not None and again.svg == picture.svg
