"""What is foretold of a level: against recorded ladders, known laws, and the budget it is held against."""

import math
from itertools import pairwise

import pytest

from convergence.forecast import Budget, Forecast, forecast, grown, shortage
from convergence.results import Level

# Own measurement, two cores that were shared: unknowns, seconds, MB of every level of studies and of a
# clamped block (60 × 40 × 30 mm, solution only), one process each.
PLANE = {
    "lug, quadrilaterals of degree 2": (
        (392, 0.1135, 78.9), (1424, 0.102, 84.4), (5408, 0.2106, 104.9), (21056, 0.641, 171.4),
        (83072, 2.8386, 425.0), (329984, 10.9941, 935.3), (1315328, 29.1227, 1757.1),
    ),
    "sharp bracket, quadrilaterals of degree 2": (
        (594, 0.119, 79.1), (2210, 0.0929, 87.5), (8514, 0.2331, 122.2), (33410, 1.1284, 224.1),
        (132354, 5.438, 612.5), (526850, 13.9473, 1138.5),
    ),
    "pin link, triangles of degree 2": (
        (1094, 0.0606, 78.4), (4106, 0.0795, 90.8), (15890, 0.2205, 136.1), (62498, 0.8848, 251.3),
        (247874, 3.747, 719.3), (987266, 16.148, 1129.9),
    ),
    "base plate, quadrilaterals of degree 2": (
        (1150, 0.0432, 79.8), (4410, 0.077, 99.7), (17266, 0.2528, 174.3), (68322, 1.0733, 362.7),
        (271810, 5.6117, 921.5), (1084290, 30.229, 1572.6),
    ),
    "brake disc, triangles of degree 2, ratio 1.5": (
        (110, 0.0754, 77.3), (238, 0.0364, 77.6), (414, 0.0277, 78.2), (1050, 0.0454, 80.4),
        (2142, 0.0801, 84.9), (4774, 0.1517, 96.6), (10810, 0.4467, 125.7), (23598, 0.8801, 145.7),
        (52942, 1.1639, 230.3),
    ),
}  # fmt: skip
FACTORIZED = (  # hexahedra of degree 1
    (240, 0.0064, 69.3), (600, 0.0682, 75.8), (2112, 0.1443, 98.2), (5808, 0.4463, 198.6),
    (18432, 4.1445, 396.2), (60480, 72.7407, 2237.6),
)  # fmt: skip
SOLID = {
    "hexahedra of degree 1": (
        (108, 0.0107, 67.9), (288, 0.0112, 70.0), (972, 0.0641, 82.4), (3159, 0.2322, 129.3),
        (12348, 1.0742, 281.1), (46464, 4.1756, 879.9), (187425, 12.0915, 1273.0),
    ),
    "hexahedra of degree 2": (
        (525, 0.2184, 74.3), (1617, 0.3324, 103.1), (6171, 0.6097, 205.0), (21675, 2.8187, 590.7),
        (89667, 11.5174, 1107.6), (349461, 43.1187, 2388.4),
    ),
    "tetrahedra of degree 2": (
        (525, 0.0146, 70.2), (1617, 0.0936, 91.3), (6171, 0.2287, 150.3), (21675, 1.0025, 371.4),
        (89667, 4.6116, 714.8), (349461, 26.6636, 1218.0),
    ),
}  # fmt: skip
NOTED = 0.5  # seconds: what takes less is ruled by loading and by the clock


def levels(rows: tuple[tuple[int, float, float], ...]) -> list[Level]:
    return [Level(1.0 / n, n, n, seconds, {}, memory) for n, seconds, memory in rows]


def law(counts: tuple[int, ...], fixed: float, factor: float, exponent: float) -> list[float]:
    return [fixed + factor * n**exponent for n in counts]


def foretold(rows: tuple[tuple[int, float, float], ...]) -> list[tuple[Forecast, Level]]:
    """The forecast of every level that has two before it, and what it took."""
    ladder = levels(rows)
    return [(forecast(ladder[:k], ladder[k].dofs), ladder[k]) for k in range(2, len(ladder))]


@pytest.mark.parametrize("rows", PLANE.values(), ids=PLANE)
def test_recorded_plane_ladders_are_foretold_within_the_stated_factors(rows: tuple) -> None:
    for ahead, level in foretold(rows):
        assert 0.75 <= ahead.memory / level.memory <= 2.7
        if level.seconds > NOTED:
            assert 0.5 <= ahead.seconds / level.seconds <= 2.0


@pytest.mark.parametrize("rows", SOLID.values(), ids=SOLID)
def test_recorded_solid_ladders_are_foretold_within_the_stated_factors(rows: tuple) -> None:
    for ahead, level in foretold(rows):
        assert 0.75 <= ahead.memory / level.memory <= 2.7
        if level.seconds > NOTED:
            assert 0.25 <= ahead.seconds / level.seconds <= 4.0


def test_a_factorization_in_space_may_need_more_than_twice_the_memory_foretold() -> None:
    for ahead, level in foretold(FACTORIZED):
        assert 0.4 <= ahead.memory / level.memory <= 2.7
        if level.seconds > NOTED:
            assert 0.25 <= ahead.seconds / level.seconds <= 4.0


@pytest.mark.parametrize("rows", PLANE.values(), ids=PLANE)
def test_a_whole_ladder_is_foretold_from_its_first_level(rows: tuple) -> None:
    """From a few hundred unknowns to a million: within the factor of 5 that constants can give."""
    first, *_, last = levels(rows)
    ahead = forecast([first], last.dofs)
    assert 0.2 <= ahead.seconds / last.seconds <= 5.0 and 0.2 <= ahead.memory / last.memory <= 5.0


@pytest.mark.parametrize("exponent", [1.0, 1.2, 1.6, 2.0])
def test_a_power_is_continued_exactly(exponent: float) -> None:
    costs = law((100, 400), 0.0, 3.0, exponent)
    assert grown([100, 400], costs, 5000, steepest=2.0) == pytest.approx(3.0 * 5000**exponent, rel=1e-12)


def test_what_does_not_grow_is_not_scaled() -> None:
    costs = law((100, 400), 80.0, 0.01, 1.0)
    assert grown([100, 400], costs, 1e6, steepest=1.5) == pytest.approx(80.0 + 1e4, rel=1e-12)


def test_the_exponent_is_bounded() -> None:
    steep = grown([10, 100], [1.0, 1e4], 1000, steepest=2.0)
    # through both levels with n^2: a + b·10^2 = 1, a + b·100^2 = 1e4
    assert steep == pytest.approx(1.0 + 9999.0 / 9900.0 * (1000**2 - 10**2), rel=1e-12)
    # growth slower than in proportion is a fixed cost and a straight line
    assert grown([10, 100], [1.0, 2.0], 1000, steepest=2.0) == pytest.approx(12.0, rel=1e-12)


def test_two_levels_without_growth() -> None:
    """A first level that loads packages: the second took less, so the slope is the given one."""
    assert grown([100, 400], [5.0, 1.0], 4400, steepest=2.0, slope=1e-3) == pytest.approx(5.0)
    # 1.0 for 400 cannot grow faster than 1/400 each
    assert grown([100, 400], [5.0, 1.0], 4400, steepest=2.0, slope=1.0) == pytest.approx(11.0)
    assert grown([100, 400], [5.0, 1.0], 4400, steepest=2.0) == pytest.approx(11.0)


def test_what_is_not_known_is_left_out() -> None:
    assert grown([100, 200, 400], [1.0, math.nan, 4.0], 800, steepest=2.0) == pytest.approx(8.0)
    assert math.isnan(grown([100, 200], [math.nan, math.nan], 400, steepest=2.0))
    assert grown([], [], 400, steepest=2.0, slope=0.5, start=10.0) == 210.0


def test_a_forecast_never_falls() -> None:
    ladder = levels(PLANE["lug, quadrilaterals of degree 2"])
    for count in range(len(ladder) + 1):
        ahead = [forecast(ladder[:count], 10.0**power) for power in range(7, 10)]
        assert all(a.seconds < b.seconds and a.memory < b.memory for a, b in pairwise(ahead))


SOLVED = levels(((1000, 1.0, 150.0), (10_000, 10.0, 1050.0)))  # 1 ms and 0.1 MB an unknown, 50 MB fixed


def test_what_fits_is_not_refused() -> None:
    assert shortage(SOLVED, 100_000, Budget()) == ""
    assert shortage(SOLVED, 100_000, Budget(seconds=101.0, memory=10_051.0)) == ""


def test_what_does_not_fit_is_told_with_its_figures() -> None:
    lacks = shortage(SOLVED, 100_000, Budget(memory=6_000.0))
    assert lacks == "it would need about 10 GB of memory where 6 GB are available"
    lacks = shortage(SOLVED, 100_000, Budget(seconds=150.0), spent=90.0)
    assert lacks == "it would need about 1.7 min where 1 min are left"
    lacks = shortage(SOLVED, 100_000, Budget(seconds=60.0, memory=6_000.0), spent=75.0)
    assert lacks == (
        "it would need about 10 GB of memory where 6 GB are available and about 1.7 min where 0 s are left"
    )


def test_figures_are_not_rounded_to_the_limit() -> None:
    lacks = shortage(SOLVED, 100_000, Budget(memory=10_049.0))
    assert lacks == "it would need about 10.050 GB of memory where 10.049 GB are available"


@pytest.mark.parametrize("known", [0, 1])
def test_with_little_evidence_only_the_absurd_is_refused(known: int) -> None:
    dofs = 1_000_000
    ahead = forecast(SOLVED[:known], dofs)
    assert (
        shortage(SOLVED[:known], dofs, Budget(memory=0.6 * ahead.memory, seconds=0.6 * ahead.seconds)) == ""
    )
    assert "of memory" in shortage(SOLVED[:known], dofs, Budget(memory=0.4 * ahead.memory))
    assert "are left" in shortage(SOLVED[:known], dofs, Budget(seconds=0.4 * ahead.seconds))
