"""Counting: binomial intervals, what covers, the groups, what falls short, and the page made of it."""

from pathlib import Path

import numpy as np
import pytest
from scipy.stats import binomtest

from convergence.calibration.binomial import binomial_interval
from convergence.calibration.calibrate import Calibrated, is_slow
from convergence.calibration.groups import SOURCE, groups
from convergence.calibration.growth import Called, called
from convergence.calibration.left_out import KNOWLEDGE, Outcome
from convergence.calibration.make_up import part_of
from convergence.calibration.page import _called, write_page
from convergence.calibration.shortfalls import covered_less, wider
from convergence.calibration.sub_ladders import SubLadder, sub_ladders
from convergence.calibration.tally import OURS, judged, rules, tally

ABOVE = {"shown": 2.0, "possible": -2.0}


@pytest.mark.parametrize(("held", "cases"), [(0, 7), (7, 7), (1, 2), (95, 100), (513, 540)])
def test_the_binomial_interval_is_that_of_scipy(held: int, cases: int) -> None:
    exact = binomtest(held, cases).proportion_ci(method="exact")
    assert binomial_interval(held, cases) == pytest.approx((exact.low, exact.high), rel=1e-9)


def outcome(lawful, *, off: float, half: float, growth: float = -5.0, levels: int = 3) -> Outcome:
    """Limit 10, errors of h^2: finest error 1/16 at three levels; the best estimate is off by `off`."""
    ladder = lawful(2.0)
    sub = SubLadder(ladder, ladder.h[:levels], ladder.f[:levels])
    return Outcome(sub, 10.0 + off - half, 10.0 + off + half, growth)


def same(outcomes: list[Outcome]):
    return dict.fromkeys(KNOWLEDGE, outcomes)


def test_covered_and_widths_are_counted(lawful) -> None:
    (one,) = judged(same([outcome(lawful, off=0.1, half=0.125)]))
    answer = one.answers["bare table"]
    assert answer.covers and answer.own == pytest.approx(2.0)
    assert answer.share == pytest.approx(0.8)
    low, finest = 9.975, 10.0625
    assert answer.finest == pytest.approx(max(10.225 - finest, finest - low) / 0.0625)


def test_published_rules_get_the_same_levels_and_the_formal_order(lawful) -> None:
    """Exact h^2, as theory has a displacement of degree 1: the error is found, the index is 1.25 of it."""
    (one,) = judged(same([outcome(lawful, off=0.0, half=0.01)]))
    assert set(one.answers) >= {"grid convergence index", "Richardson"}
    assert one.answers["grid convergence index"].finest == pytest.approx(1.25)
    assert one.answers["Richardson"].finest == pytest.approx(1.0)
    assert "least squares" not in one.answers  # three levels are too few for it
    assert {"grid convergence index", "Richardson", "least squares"} < set(rules())


def test_a_miss_is_found_and_its_family_named(lawful) -> None:
    held = [outcome(lawful, off=0.0, half=0.1) for _ in range(5)]
    missed = [outcome(lawful, off=0.3, half=0.1) for _ in range(5)]
    of = groups(judged(same(held + missed)))
    count = tally(of[0].members, "bare table")
    assert (count.cases, count.covered, count.share) == (10, 5, 0.5)
    short = [one for one in covered_less(of) if one.group.table == SOURCE]
    assert [one.method for one in short if one.group.name == "nested, 3 levels"] == list(OURS.values())
    assert short[0].row[3:6] == ["50.0 % (18.7 % to 81.3 %)", "beyond chance", "made, 5 of 5"]
    assert covered_less(groups(judged(same(held)))) == []


def test_what_is_too_wide_is_found_from_three_levels(lawful) -> None:
    wide = [outcome(lawful, off=0.0, half=0.0625 * 4.0)]
    assert {one.method for one in wider(groups(judged(same(wide))))} == set(
        OURS.values()
    )  # 5 about the finest
    narrow = [outcome(lawful, off=0.0, half=0.0625 * 2.4)]
    assert wider(groups(judged(same(narrow)))) == []  # 3.4 about the finest
    two = [outcome(lawful, off=0.0, half=0.25 * 9.0, levels=2)]
    assert {one.group.table for one in wider(groups(judged(same(two))))} == set()


def test_growth_is_called_as_verdicts_call_it(lawful) -> None:
    """Widths are 1.6 % of the value (settled) or 16 %; three levels show no growth."""
    cases = [
        outcome(lawful, off=0.0, half=half, growth=growth, levels=levels)
        for half in (0.16, 1.6)
        for growth in (-3.0, 0.0, 3.0)
        for levels in (3, 4)
    ]
    counts = called("nothing", cases, ABOVE)
    many, few = (counts["all quantities with a limit", name] for name in ("4 levels and more", "3 levels"))
    assert (many.cases, many.singular, many.unproven, many.neither) == (6, 2, 1, 3)
    assert (few.cases, few.singular, few.unproven, few.neither) == (6, 0, 2, 4)
    assert ("all quantities with a limit", "3 levels") not in called("kind", cases, ABOVE)


def test_the_page_says_what_was_counted(packaged, tmp_path: Path) -> None:
    """One outcome in ten misses: every table is there, and the shares are those of the outcomes."""
    ladders = packaged[::59]
    subs = sub_ladders(ladders, 40)
    made = [_made(sub, number) for number, sub in enumerate(subs)]
    names = sorted({one.family for one in ladders})
    table = {
        "made_of": {
            "date": "2026-01-02",
            "families": names,
            "ladders": len(ladders),
            "sub_ladders": len(subs),
        },
        "growth": dict.fromkeys(KNOWLEDGE, ABOVE),
    }
    aside = [one for one in made if is_slow(one.sub.of) and not one.sub.of.singular]
    for folder in (tmp_path / "one", tmp_path / "two"):
        folder.mkdir()
        write_page(folder, Calibrated(table, same(made), same(aside), same(made)), ladders)
    page = (tmp_path / "one" / "calibration.md").read_text(encoding="utf-8")
    assert f"Made 2026-01-02 from {len(ladders):,} ladders of {len(names)} families" in page
    three = [one for one in made if one.sub.levels == 3 and not one.sub.of.singular]
    share = np.mean([one.is_covered for one in three])
    assert f"| bare table | 3 levels | {len(three):,} | 100 % | {100.0 * share:.1f} % |" in page
    assert all(name.replace("_", " ") in page for name in names)
    assert "below 0.45 have no part in the table (glued sleeve, held corner: " in page
    files = {file.name for file in (tmp_path / "one").iterdir()}
    plots = {f"calibration-{name}.svg" for name in ("coverage", "errors", "widths")}
    assert files == {"calibration.md"} | plots and all(f"({name})" in page for name in plots)
    assert all((tmp_path / "one" / n).read_bytes() == (tmp_path / "two" / n).read_bytes() for n in files)


def _made(sub: SubLadder, number: int) -> Outcome:
    if sub.of.singular:
        return Outcome(sub, float(sub.f[-1]) - 1.0, float(sub.f[-1]) + 1.0, 1.0)
    middle = sub.of.limit + (3.0 if number % 10 == 0 else 0.5) * sub.error
    return Outcome(sub, middle - 2.0 * sub.error, middle + 2.0 * sub.error, -3.0)


def test_a_part_is_named_without_its_ladder(packaged) -> None:
    names = {part_of(one) for one in packaged}
    assert "tie bar, two notches" in names
    assert not any(name.endswith(("ratio 2", "irregular", "perturbed")) for name in names)


def test_too_many_wrong_calls_are_bold() -> None:
    """Two in a hundred are the most: three singular ones that are called neither, three others called so."""
    many = "4 levels and more"
    assert _called("singular stresses", many, Called(100, 90, 8))[3] == "2.00 % (2)"
    assert _called("singular stresses", many, Called(100, 90, 7))[3] == "**3.00 % (3)**"
    assert _called("stresses with a limit", many, Called(100, 3, 0))[1] == "**3.00 % (3)**"
    assert _called("stresses with a limit", "3 levels", Called(100, 3, 0))[1] == "3.00 % (3)"
