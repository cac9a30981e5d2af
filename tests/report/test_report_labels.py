"""Labels beside their places, levels that do not count, and ticks that leave room for each other."""

import math
from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.histories.calibrated import FINEST_LEVELS
from convergence.report._axes import _apart, middle
from convergence.report._labels import CLEAR, offsets
from convergence.report._levels import counted
from convergence.report.figures_growth import growth_figure
from convergence.report.figures_order import error_figure
from convergence.report.figures_value import value_figure
from convergence.results import Ladder, Quantity, Verdict

NAN = math.nan
STRESS = Quantity("s", unit="MPa")


def overlaps(middles: np.ndarray, sizes: np.ndarray) -> int:
    """Count the pairs of boxes that lie on each other."""
    count = middles.shape[1]
    pairs = [(i, j) for i in range(count) for j in range(i)]
    apart = [abs(middles[:, i] - middles[:, j]) - 0.5 * (sizes[:, i] + sizes[:, j]) for i, j in pairs]
    return sum(bool((gap < 0.0).all()) for gap in apart)


def test_labels_of_close_places_do_not_cover_each_other() -> None:
    places = 6.0 * np.array([[0.0, 1.0, 2.0, 0.0, 1.0, 2.0], [0.0, 0.0, 0.0, 1.0, 1.0, 1.0]])
    sizes = np.full((2, 6), 12.0)
    towards = np.tile([[1.0], [0.0]], 6)
    assert overlaps(places + 14.0 * towards, sizes) > 0, "side by side they would"
    middles = places + offsets(places, sizes, towards)
    assert overlaps(middles, sizes) == 0
    assert overlaps(np.hstack((middles, places)), np.hstack((sizes, np.zeros((2, 6))))) == 0
    assert CLEAR > 0.0


def test_a_label_alone_stands_where_it_should() -> None:
    (across,), (up,) = offsets(np.zeros((2, 1)), np.full((2, 1), 10.0), np.array([[0.0], [-3.0]]))
    assert math.isclose(across, 0.0, abs_tol=1e-12) and up < -10.0


def test_names_are_shortened_by_their_width() -> None:
    assert len(middle("W" * 100)) < len(middle("n" * 100)) == 41
    assert middle("ship" * 10) == "ship" * 10
    assert len(middle("漢" * 100)) <= 21


def test_the_finest_levels_with_a_value_count() -> None:
    values = np.arange(FINEST_LEVELS + 3, dtype=float)
    values[-2] = NAN
    assert np.flatnonzero(counted(values)).tolist() == [2, *range(3, FINEST_LEVELS + 1), FINEST_LEVELS + 2]


def test_levels_that_do_not_count_are_marked(
    verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    """Nine values and one level without: two of the nine are too coarse to count."""
    h = 2.0 ** -np.arange(10.0)
    values = 313.9 - 20.0 * h
    values[4] = NAN
    ladder = ladder_of({"s": values}, h)
    verdict = verdict_of(value=float(values[-1]))
    for draw in (value_figure, error_figure):
        picture = draw("f", STRESS, verdict, ladder, "mm")
        assert picture is not None
        for label in ("levels that do not count", "levels without a value"):
            assert f"{label}</text>" in picture.svg
        assert f"Hollow: too coarse to count, as the {FINEST_LEVELS} finest" in picture.caption
        assert "Crosses on the axis: 1 level without a value." in picture.caption
        early, late = (
            picture.svg.split(f'<g id="levels{which}">')[1].split("</g>\n   </g>")[0]
            for which in ("-early", "")
        )
        assert (early.count("<use"), late.count("<use")) == (2, FINEST_LEVELS)
    all_count = value_figure("f", STRESS, verdict, ladder_of({"s": values[5:]}, h[5:]), "mm")
    assert all_count is not None and "do not count" not in all_count.svg + all_count.caption


def test_a_level_that_is_not_solved_is_named(
    verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    ladder = ladder_of({"s": np.array([300.0, 309.0, 312.0])}, np.array([4.0, 2.0, 1.0]))
    said = "level 4 (9,000 unknowns) is not solved: it would take too long"
    ladder = replace(ladder, remarks=("a node was merged", said))
    assert ladder.unsolved == (said,)
    for picture in (
        value_figure("v", STRESS, verdict_of(), ladder, "mm"),
        growth_figure("g", STRESS, ladder, "mm", 0.5),
    ):
        assert picture is not None and "Level 4 (9,000 unknowns) is not solved: it" in picture.caption
        assert "merged" not in picture.caption


@pytest.mark.parametrize(
    ("labels", "kept"),
    [
        ({1.0: "1", 2.0: "2", 4.0: "4"}, ["1", "2", "4"]),
        ({2.0**-k: f"{2.0**-k:.4g}" for k in range(10)}, None),
        ({NAN: "none", 0.0: "0"}, []),
        ({3.0: "3"}, ["3"]),
    ],
)
def test_ticks_leave_room_for_their_labels(labels: dict[float, str], kept: list[str] | None) -> None:
    found = list(_apart(labels).values())
    assert found == kept if kept is not None else 3 <= len(found) < len(labels)
