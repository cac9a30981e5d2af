"""Linear analysis: yield against the upper end of the interval, displacement and rotation small."""

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.checks.linear_range import linear_range, own_peaks, record
from convergence.corner import Corner
from convergence.fem.mesh import mesh
from convergence.fem.problem import Support
from convergence.fem.solution import solve
from convergence.results import Check, Facts, Ladder, Level, Yield

CORNER = Corner("heel", ((0.0, 0.0),), ("heel",), 270.0, ("free", "free"), 0.5445)


def ladder(**columns: float) -> Ladder:
    names = {name.replace("__", "."): value for name, value in columns.items()}
    return Ladder(tuple(Level(h, 10, 20, 0.0, names) for h in (2.0, 1.0)), "t")


def small(**columns: float) -> Ladder:
    own = {
        "linear_range__body__peak_von_mises": 200.0,
        "linear_range__displacement": 1e-3,
        "linear_range__rotation": 1e-3,
    }
    return ladder(**(own | columns))


def facts(limit: float | None = 355.0, **more: object) -> Facts:
    stated = {"linear_range.body.peak_von_mises": (190.0, 210.0), "peak": (280.0, 320.0)}
    yields = {"body": None if limit is None else Yield(limit, "EN 10025-2")}
    return Facts(**({"yields": yields, "intervals": stated, "corners": ()} | more))


def test_below_yield_with_its_source() -> None:
    check = linear_range(small(), facts())
    assert check.passed is True
    assert "small-displacement theory holds" in check.finding
    assert "Against the yield strength 355 (EN 10025-2)" in check.finding
    assert "reaches 210 at the upper end of its interval: below yield." in check.finding


def test_the_upper_end_counts_not_the_value() -> None:
    """Value 200, interval to 210, yield 205: the value alone would pass."""
    check = linear_range(small(), facts(205.0))
    assert check.passed is False and check.finding.endswith("not below yield.")
    assert linear_range(small(), facts(210.0)).passed is False, "the limit itself is not below"
    assert linear_range(small(), facts(210.0001)).passed is True
    assert linear_range(small(), facts(150.0)).passed is False


def test_a_peak_asked_for_counts_too() -> None:
    """Peak quantities of von Mises stress, and those of a table whose component is not known."""
    asked = {"kinds": {"peak": "peak_stress"}}
    assert linear_range(small(peak=300.0), facts(330.0, **asked)).passed is True
    assert linear_range(small(peak=300.0), facts(310.0, **asked)).passed is False
    other = asked | {"components": {"peak": "xx"}}
    assert linear_range(small(peak=300.0), facts(310.0, **other)).passed is True
    point = {"kinds": {"peak": "point_stress"}}
    assert linear_range(small(peak=300.0), facts(310.0, **point)).passed is True


def test_a_peak_without_an_upper_end_proves_nothing() -> None:
    """Below yield on the finest level is no proof; above it is one."""
    open_end = {"intervals": {}}
    check = linear_range(small(), facts(355.0, **open_end))
    assert check.passed is None and "has no upper end" in check.finding
    assert linear_range(small(), facts(199.0, **open_end)).passed is False
    cornered = linear_range(small(), facts(355.0, corners=(CORNER,)))
    assert cornered.passed is None, "a corner's peak grows on"


def test_without_a_yield_strength_only_displacements_are_judged() -> None:
    check = linear_range(small(), facts(None))
    assert check.passed is True and "stresses were not compared" in check.finding
    assert linear_range(ladder(f=1.0), Facts()).passed is None


@pytest.mark.parametrize(
    ("name", "value", "passed"),
    [
        ("displacement", 0.01, True),
        ("displacement", 0.0101, False),
        ("rotation", 0.1, True),
        ("rotation", 0.101, False),
    ],
)
def test_limits_of_small_displacements(name: str, value: float, passed: bool) -> None:
    check = linear_range(small(**{f"linear_range__{name}": value}), facts())
    assert check.passed is passed
    assert ("does not hold" in check.finding) is not passed


def test_a_bare_table_with_a_yield_strength() -> None:
    table = ladder(peak=300.0)
    known = {"kinds": {"peak": "peak_stress"}, "corners": None}
    for limit, passed in ((330.0, True), (310.0, False)):
        assert linear_range(table, facts(yields={"": Yield(limit)}, **known)).passed is passed


BONDED = {
    "linear_range__bar__peak_von_mises": 200.0,
    "linear_range__bond__peak_von_mises": 20.0,
    "linear_range__displacement": 1e-3,
    "linear_range__rotation": 1e-3,
}


def bonded(bar: float | None, bond: float | None, **more: object) -> Facts:
    """A bar whose peak reaches 210 on a bond whose peak reaches 21."""
    stated = {
        "linear_range.bar.peak_von_mises": (190.0, 210.0),
        "linear_range.bond.peak_von_mises": (19.0, 21.0),
        "peak": (190.0, 220.0),
    }
    yields = {"bar": bar and Yield(bar, "EN 10025-2"), "bond": bond and Yield(bond, "data sheet")}
    return Facts(**({"yields": yields, "intervals": stated, "corners": ()} | more))


@pytest.mark.parametrize(
    ("bar", "bond", "passed"),
    [
        (355.0, 30.0, True),
        (205.0, 30.0, False),
        (355.0, 20.5, False),
        (355.0, None, True),
        (None, 20.5, False),
    ],
)
def test_each_region_against_its_own_yield(bar: float | None, bond: float | None, passed: bool) -> None:
    check = linear_range(ladder(**BONDED), bonded(bar, bond))
    assert check.passed is passed
    for name, limit in (("bar", bar), ("bond", bond)):
        said = f"{name}'s peak von Mises stress reaches" in check.finding
        assert said is (limit is not None)
        assert (f"No yield strength is given for {name}." in check.finding) is not said


def test_a_peak_asked_for_in_a_part_of_several_yields() -> None:
    """It reaches 220 and counts only where it is confined to a region, with that region's yield."""
    asked = {"kinds": {"peak": "peak_stress"}}
    given = ladder(**BONDED, peak=200.0)
    assert linear_range(given, bonded(215.0, 30.0, **asked)).passed is True
    assert linear_range(given, bonded(215.0, 30.0, **asked, regions={"peak": "bar"})).passed is False
    assert linear_range(given, bonded(225.0, 30.0, **asked, regions={"peak": "bar"})).passed is True
    assert linear_range(given, bonded(215.0, 215.0, **asked)).passed is True, "two sources are two yields"
    one = Yield(215.0, "EN 10025-2")
    assert linear_range(given, bonded(None, None, **asked, yields={"bar": one, "bond": one})).passed is False


def test_the_peaks_that_a_ladder_has_of_its_own() -> None:
    assert own_peaks(ladder(**BONDED, peak=1.0)) == {
        "linear_range.bar.peak_von_mises": "bar",
        "linear_range.bond.peak_von_mises": "bond",
    }
    assert own_peaks(Ladder((), "t")) == {}


def test_the_peaks_of_two_regions(solved: Callable) -> None:
    """Uniform strain 1e-3 xx, yy and 2xy in two materials: each has the peak of its own stress (Hooke)."""
    solution = solved("patch_test", "quadrilateral", 2, 1, 1)[0]
    part, steel = solution.problem.part, solution.problem.materials["body"]
    regions = {"steel": tuple(range(1, len(part.blocks))), "soft": (0,)}
    problem = replace(
        solution.problem,
        part=replace(part, regions=regions),
        materials={"steel": steel, "soft": replace(steel, young=21000.0)},
    )
    counts = part.divisions(size=None, divisions=1)
    level = mesh(problem.part, counts, shape="quadrilateral", degree=2)
    numbers = record(replace(solution, problem=problem, mesh=level))
    peak = np.sqrt((210000.0 / 0.91 * 1.3e-3) ** 2 + 3.0 * (210000.0 / 2.6 * 1e-3) ** 2)
    assert numbers["steel.peak_von_mises"] == pytest.approx(peak, rel=1e-9)
    assert numbers["soft.peak_von_mises"] == pytest.approx(0.1 * peak, rel=1e-9)


def test_record_of_a_rotated_part(solved: Callable) -> None:
    """A rigid turn of 0.2 rad about the origin by hand: rotation 0.2, displacement 0.2 × farthest node."""
    solution = solved("tapered_arm", "triangle", 2, 1, 3)[0]
    x, y = solution.mesh.nodes
    turned = replace(solution, unknowns=0.2 * np.stack([-y, x], axis=1).ravel())
    numbers = record(turned)
    assert numbers["rotation"] == pytest.approx(0.2, rel=1e-9)
    size = np.hypot(1200.0, 240.0)
    assert numbers["displacement"] == pytest.approx(0.2 * np.hypot(1200.0, 60.0) / size, rel=1e-9)


def test_a_large_displacement_is_found(solved: Callable, recorded: Callable) -> None:
    """The arm with a hundred times its load bends by more than 1 % of its size."""

    def check_of(factor: float) -> Check:
        solutions = []
        for solution in solved("tapered_arm", "triangle", 2, 1, 3):
            moved = replace(solution, unknowns=factor * solution.unknowns)
            solutions.append(moved)
        return linear_range(recorded(solutions, "linear_range"), Facts())

    assert check_of(1.0).passed is True
    check = check_of(100.0)
    assert check.passed is False and "small-displacement theory does not hold" in check.finding


def test_the_peak_is_the_largest_von_mises_stress(solved: Callable) -> None:
    """Uniform tension of the patch's kind: 1e-3 in both directions and in shear, by Hooke's law."""
    solution = solved("patch_test", "triangle", 2, 1, 3)[0]
    xx = 210000.0 / 0.91 * 1.3e-3
    shear = 210000.0 / 2.6 * 1e-3
    assert record(solution)["body.peak_von_mises"] == pytest.approx(np.sqrt(xx**2 + 3.0 * shear**2), rel=1e-9)
    held = Support("rim", x=0.0, y=0.0, boundary="rim")
    still = solve(replace(solution.problem, supports=(held,), exact=None), solution.mesh)
    assert record(still)["body.peak_von_mises"] == 0.0
