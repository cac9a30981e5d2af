"""Section force, mean stress and peak against Kirsch's plate (hole 10, quarter 40, tension 60)."""

from collections.abc import Callable
from dataclasses import replace
from typing import Any

import numpy as np
import pytest

from convergence.corner import Corner
from convergence.errors import Unsuitable
from convergence.fem.loads import Traction
from convergence.fem.mesh import mesh
from convergence.fem.part import Part, finer
from convergence.fem.problem import Problem, Support
from convergence.fem.solution import solve
from convergence.quantities import peak_stress as module
from convergence.quantities.mean_stress import mean_stress
from convergence.quantities.peak_stress import peak_stress
from convergence.quantities.section_force import section_force

TENSION, HOLE, SIDE, THICKNESS = 60.0, 10.0, 40.0, 8.0


def ligament_integral(y: float) -> float:
    """∫ σ_xx dy on x = 0 of Kirsch's field (Timoshenko & Goodier, art. 35): 1 + q/2 + 3 q²/2, q = (a/y)²."""
    return TENSION * (y - HOLE**2 / (2 * y) - HOLE**4 / (2 * y**3))


LIGAMENT = ligament_integral(SIDE) - ligament_integral(HOLE)
LINE = {"start": "hole_top", "end": "top"}


@pytest.mark.parametrize("recovery", ["recovered", "direct"])
def test_the_force_through_the_ligament(
    recovery: str,
    element: tuple[str, int],
    ladder_of: Callable,
    measured: Callable,
    order_of: Callable,
    formal: Callable,
) -> None:
    """Both line quantities are one integral of σ_xx; at least the order of the stress.

    Recovered stress of linear triangles is one-sided along the edge and jumps between orders, so only its
    size is tested: below a tenth of the direct error's.
    """
    shape, degree = element
    ladder = ladder_of("perforated_plate", shape, degree, 1, 5)
    force = measured("section_force", ladder, **LINE, recovery=recovery)
    mean = measured("mean_stress", ladder, **LINE, component="xx", recovery=recovery)
    assert mean == pytest.approx(force / THICKNESS / (SIDE - HOLE), rel=1e-12)
    errors = abs(force - THICKNESS * LIGAMENT)
    promised = formal("section_force", degree, recovery=recovery)
    assert promised == formal("mean_stress", degree, recovery=recovery)
    if (shape, degree, recovery) == ("triangle", 1, "recovered"):
        assert errors[-1] < 1e-3 * THICKNESS * LIGAMENT
    else:
        assert order_of(ladder, errors)[-1] > promised - 0.2
    # over the hole's radius, Kirsch's only length
    cell = 0.5 * np.pi / ladder[-1].mesh.facets["hole"][0].shape[1]
    assert errors[-1] < cell**degree * THICKNESS * LIGAMENT


def bar(shear: float = 0.0) -> Problem:
    """A bar 100 x 40 x 8 on the left, pulled on the right by 10 MPa."""
    part = Part(
        points={"a": (0.0, 0.0), "b": (100.0, 0.0), "c": (100.0, 40.0), "d": (0.0, 40.0)},
        blocks=(("a", "b", "c", "d"),),
        boundaries={"left": (("d", "a"),), "right": (("b", "c"),)},
    )
    supports = (Support("left", x=0.0, boundary="left"), Support("pin", y=0.0, point="a"))
    return Problem("bar", part, {}, supports, (Traction("right", (10.0, shear)),), thickness=THICKNESS)


@pytest.mark.parametrize("recovery", ["recovered", "direct"])
def test_directions_of_a_section_force(recovery: str, element: tuple[str, int], ladder_of: Callable) -> None:
    """Uniform tension of 10 MPa: a cut at 45 degrees carries cos 45° of the force each way."""
    steel = ladder_of("patch_test", "triangle", 1, 1, 1)[0].problem.materials
    problem = replace(bar(), materials=steel)
    counts = finer(problem.part.divisions(size=None, divisions=4), 1.0, 0)
    solution = solve(problem, mesh(problem.part, counts, shape=element[0], degree=element[1]))
    force = {"recovery": recovery, "start": (30.0, 0.0), "end": (70.0, 40.0)}
    whole = 10.0 * 40.0 * THICKNESS
    assert section_force(solution, **force, component="x") == pytest.approx(whole, rel=1e-9)
    assert section_force(solution, **force, component="y") == pytest.approx(0.0, abs=1e-9 * whole)
    along = whole * np.sqrt(0.5)
    assert section_force(solution, **force, component="normal") == pytest.approx(along, rel=1e-9)
    assert section_force(solution, **force, component="shear") == pytest.approx(along, rel=1e-9)
    back = force | {"start": (70.0, 40.0), "end": (30.0, 0.0)}
    assert section_force(solution, **back, component="x") == pytest.approx(-whole, rel=1e-9)
    assert section_force(solution, **back, component="normal") == pytest.approx(along, rel=1e-9)
    with pytest.raises(Unsuitable, match="a place on the part"):
        section_force(solution, start=(30.0, 0.0), end=(30.0, 41.0))
    with pytest.raises(Unsuitable, match="a place on the part"):
        mean_stress(solution, start=(-1.0, 10.0), end=(30.0, 10.0))


def test_the_mean_is_formed_before_the_invariant(ladder_of: Callable) -> None:
    """Along x = 0 shear vanishes, so the means of both components give the invariant by hand."""
    solution = ladder_of("perforated_plate", "quadrilateral", 2, 1, 5)[3]
    xx, yy = (mean_stress(solution, **LINE, component=name) for name in ("xx", "yy"))
    shear = mean_stress(solution, **LINE, component="xy")
    mises = np.sqrt(xx**2 - xx * yy + yy**2 + 3.0 * shear**2)
    assert mean_stress(solution, **LINE) == pytest.approx(mises, rel=1e-12)


@pytest.mark.parametrize("recovery", ["recovered", "direct"])
def test_the_peak_of_the_hole_and_its_place(
    recovery: str,
    element: tuple[str, int],
    ladder_of: Callable,
    order_of: Callable,
    formal: Callable,
) -> None:
    """Three times the remote tension at (0, 10). The place is within a cell of it."""
    shape, degree = element
    ladder = ladder_of("perforated_plate", shape, degree, 1, 5)
    peaks = [peak_stress(s, boundary="hole", component="first_principal", recovery=recovery) for s in ladder]
    assert formal("peak_stress", degree, recovery=recovery) == min(2, degree + (recovery == "recovered"))
    for solution, peak in zip(ladder, peaks, strict=True):
        around = 0.5 * np.pi * HOLE / (solution.mesh.facets["hole"][0].shape[1])
        cells = 2.0 if (shape, degree, recovery) == ("quadrilateral", 1, "direct") else 1.0
        assert np.hypot(peak.x, peak.y - HOLE) <= cells * around
        assert np.hypot(peak.x, peak.y) == pytest.approx(HOLE, rel=1e-12), "on the hole"
    # Kirsch at the hole: slope of σ_θθ along y is 7 x 60 / 10 MPa/mm; half a cell of it for degree 1
    error = abs(np.array([peak.value for peak in peaks]) - 3.0 * TENSION)
    cell = 0.5 * np.pi * HOLE / ladder[-1].mesh.facets["hole"][0].shape[1]
    assert error[-1] < (0.5 * 42.0 * cell if degree == 1 else 42.0 / HOLE * cell**2)
    if degree == 2:
        assert order_of(ladder, error)[-1] > formal("peak_stress", degree, recovery=recovery) - 0.2


def test_the_peak_is_the_smallest_third_principal_stress(ladder_of: Callable) -> None:
    """Minus the remote tension at the hole's end (10, 0)."""
    solution = ladder_of("perforated_plate", "quadrilateral", 2, 1, 5)[3]
    peak = peak_stress(solution, component="third_principal")
    assert peak.value == pytest.approx(-TENSION, rel=0.01)
    assert (peak.x, peak.y) == pytest.approx((HOLE, 0.0), abs=1e-9)


def test_where_a_peak_is_looked_for(ladder_of: Callable) -> None:
    solution = ladder_of("perforated_plate", "triangle", 2, 1, 5)[2]
    away = peak_stress(solution, near="corner", radius=10.0)
    assert np.hypot(away.x - SIDE, away.y - SIDE) <= 10.0
    assert away.value == pytest.approx(TENSION, rel=0.1), "far from the hole the field is nearly uniform"
    on_side = peak_stress(solution, boundary="side")
    assert on_side.x == pytest.approx(SIDE)
    both = peak_stress(solution, boundary="hole", near="hole_end", radius=5.0, component="xx")
    assert both.value < 1.0 * TENSION < peak_stress(solution, boundary="hole", component="xx").value
    assert peak_stress(solution, region="body") == peak_stress(solution)


def test_refused_places_of_a_peak(ladder_of: Callable) -> None:
    solution = ladder_of("perforated_plate", "triangle", 2, 1, 5)[0]
    with pytest.raises(Unsuitable) as alone:
        peak_stress(solution, near="hole_top")
    assert str(alone.value) == "radius None: `near` and `radius` together, or neither"
    with pytest.raises(Unsuitable) as other:
        peak_stress(solution, radius=3.0)
    assert str(other.value) == "radius 3.0: `near` and `radius` together, or neither"
    with pytest.raises(Unsuitable) as empty:
        peak_stress(solution, near=(20.0, 1.0), radius=1e-3)
    assert str(empty.value) == "radius 0.001: a region, boundary and radius that hold at least one node"


def test_which_corners_a_peak_covers(ladder_of: Callable) -> None:
    plain = ladder_of("perforated_plate", "triangle", 2, 1, 5)[0].problem.part
    part = replace(plain, regions={"low": (0,), "high": (1,)})

    def covers(part: Part, point: str, arguments: dict[str, Any]) -> bool:
        corner = Corner(point, (part.points[point],), (point,), 90.0, ("clamped", "free"), 0.7583)
        return bool(module.covers(part, corner, arguments))

    assert covers(part, "corner", {})
    assert covers(part, "hole_top", {"boundary": "hole"}) and not covers(part, "corner", {"boundary": "hole"})
    assert covers(part, "hole_top", {"region": "high"}) and not covers(part, "hole_top", {"region": "low"})
    assert covers(part, "corner", {"region": "low"}) and covers(part, "corner", {"region": "high"})
    near = {"near": "corner", "radius": 30.0}
    assert covers(part, "top", {"near": "corner", "radius": SIDE}), "the radius itself is within"
    assert not covers(part, "top", near) and covers(part, "corner", near)
    assert not covers(part, "hole_top", {"boundary": "hole", **near})
    assert covers(plain, "corner", {"region": "body"}), "a part without regions is one body"
