"""Displacement and stress at a point: values and orders on exact fields, and the awkward places."""

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest

from convergence.corner import Corner
from convergence.errors import Unsuitable
from convergence.fem.part import Part
from convergence.quantities import stress as module
from convergence.quantities.displacement import displacement
from convergence.quantities.stress import stress

pytestmark = pytest.mark.slow

COMPONENTS = {"xx": 0, "yy": 1, "zz": 2, "xy": 3}
# inside the cylinder's ring 30 < r < 45, away from its boundary layers of patches
RADII, ANGLES = np.linspace(34.0, 41.0, 7), np.radians(np.linspace(13.0, 77.0, 9))
INSIDE = [(float(r * np.cos(a)), float(r * np.sin(a))) for r in RADII for a in ANGLES]


def inner_errors(ladder: tuple, name: str, measured: Callable, **arguments: str) -> np.ndarray:
    """Root mean square over many places: the error at one place depends on where in its cell it lies."""
    exact = ladder[0].problem.exact
    total = np.zeros(len(ladder))
    for x, y in INSIDE:
        field = exact.displacement if name == "displacement" else exact.stress
        index = "xy".index(arguments["component"]) if name == "displacement" else COMPONENTS["yy"]
        true = field(np.array(x), np.array(y))[index]
        total += (measured(name, ladder, at=(x, y), **arguments) - true) ** 2
    return np.sqrt(total / len(INSIDE))


def test_displacement_inside_has_order_p_plus_one(
    element: tuple[str, int], ladder_of: Callable, measured: Callable, order_of: Callable, formal: Callable
) -> None:
    """Aubin-Nitsche. Places lie anywhere in cells, so the order scatters: p + 1 − 0.4 over two steps."""
    ladder = ladder_of("thick_cylinder", *element, 2, 4)
    errors = inner_errors(ladder, "displacement", measured, component="x")
    assert np.mean(order_of(ladder, errors)[-2:]) > formal("displacement", element[1]) - 0.4
    assert errors[-1] < (1e-5 if element[1] == 1 else 1e-8), "of 6e-3 mm"


def test_direct_stress_inside_has_order_p(
    element: tuple[str, int], ladder_of: Callable, measured: Callable, order_of: Callable, formal: Callable
) -> None:
    ladder = ladder_of("thick_cylinder", *element, 2, 4)
    errors = inner_errors(ladder, "stress", measured, component="yy", recovery="direct")
    order = np.mean(order_of(ladder, errors)[-2:])
    assert order == pytest.approx(formal("stress", element[1], recovery="direct"), abs=0.4)


@pytest.mark.parametrize("where", [("quadrilateral", 1), ("quadrilateral", 2), ("triangle", 1)])
def test_recovered_stress_inside_has_order_p_plus_one(
    where: tuple[str, int], ladder_of: Callable, measured: Callable, order_of: Callable, formal: Callable
) -> None:
    """Zienkiewicz & Zhu 1992. Quadratic triangles reach it at vertices only: the next test."""
    ladder = ladder_of("thick_cylinder", *where, 2, 4)
    errors = inner_errors(ladder, "stress", measured, component="yy")
    assert np.mean(order_of(ladder, errors)[-2:]) > formal("stress", where[1]) - 0.4


def test_recovered_stress_of_quadratic_triangles(
    ladder_of: Callable, measured: Callable, order_of: Callable
) -> None:
    """At a vertex p + 2 (p is even), between vertices theory promises p only."""
    ladder = ladder_of("thick_cylinder", "triangle", 2, 2, 4)
    at, true = (37.5 * np.sqrt(0.5), 37.5 * np.sqrt(0.5)), ladder[0].problem.exact.stress
    exact = true(np.array(at[0]), np.array(at[1]))[3]
    vertex = abs(measured("stress", ladder, at=at, component="xy") - exact)
    assert order_of(ladder, vertex)[-1] == pytest.approx(4.0, abs=0.1)
    recovered = inner_errors(ladder, "stress", measured, component="yy")
    direct = inner_errors(ladder, "stress", measured, component="yy", recovery="direct")
    assert np.mean(order_of(ladder, recovered)[-2:]) > 2.0 - 0.1
    assert np.all(recovered < direct)


@pytest.mark.parametrize("recovery", ["recovered", "direct"])
def test_stress_at_a_vertex_of_the_bore(
    recovery: str,
    element: tuple[str, int],
    ladder_of: Callable,
    measured: Callable,
    order_of: Callable,
    formal: Callable,
) -> None:
    """Direct: p. Recovered: p + 1 on quadrilaterals; one-sided patches of triangles promise p only.

    With quadratic triangles two terms of the error cancel on coarse meshes: their ladder begins finer.
    """
    shape, degree = element
    levels = (12, 3) if (*element, recovery) == ("triangle", 2, "recovered") else (2, 4)
    ladder = ladder_of("thick_cylinder", shape, degree, *levels)
    exact = -21.0  # the pressure on the bore, as radial stress
    errors = abs(measured("stress", ladder, at="bore_x", component="xx", recovery=recovery) - exact)
    if recovery == "direct":
        assert order_of(ladder, errors)[-1] == pytest.approx(
            formal("stress", degree, recovery=recovery), abs=0.15
        )
    else:
        least = formal("stress", degree) if shape == "quadrilateral" else degree
        assert order_of(ladder, errors)[-1] > least - 0.25
    # 16 cells over 15 mm; Lamé's radial stress at the bore: slope (54.6 + 21) / 30, curvature 3 x 75.6 / 30^2
    cell = 15.0 / 16.0
    assert errors[-1] < (75.6 / 30.0 * cell if degree == 1 else 0.5 * 3.0 * 75.6 / 900.0 * cell**2)


def test_invariants_come_from_the_components(ladder_of: Callable, measured: Callable) -> None:
    """At the bore: hoop 54.6 (Lamé 21 (45² + 30²)/(45² − 30²)), radial −21, axial 0.3 (54.6 − 21)."""
    ladder = ladder_of("thick_cylinder", "quadrilateral", 2, 2, 4)[-1:]
    hoop, radial = 21.0 * (45**2 + 30**2) / (45**2 - 30**2), -21.0
    axial = 0.3 * (hoop + radial)
    mises = np.sqrt(0.5 * ((hoop - radial) ** 2 + (radial - axial) ** 2 + (axial - hoop) ** 2))
    for component, exact in {
        "first_principal": hoop,
        "third_principal": radial,
        "zz": axial,
        "von_mises": mises,
    }.items():
        assert measured("stress", ladder, at="bore_y", component=component) == pytest.approx(exact, rel=1e-3)


def test_the_patch_is_exact_everywhere(element: tuple[str, int], ladder_of: Callable) -> None:
    """At nodes, on cell edges and inside cells: stress and displacement of a linear field, to round-off."""
    (solution,) = ladder_of("patch_test", *element, 1, 1)
    exact = solution.problem.exact
    for place in (
        (40.0, 20.0),
        (100.0, 22.5),
        (20.0, 10.0),
        (110.0, 50.0),
        (0.0, 60.0),
        (120.0, 0.0),
        (3.0, 60.0),
    ):
        x, y = np.array(place[0]), np.array(place[1])
        true = exact.displacement(x, y)
        assert displacement(solution, at=place, component="x") == pytest.approx(true[0], rel=1e-10)
        assert displacement(solution, at=place, component="y") == pytest.approx(true[1], rel=1e-10)
        assert displacement(solution, at=place, component="magnitude") == pytest.approx(
            np.hypot(*true), rel=1e-10
        )
        for recovery in ("recovered", "direct"):
            for component, index in COMPONENTS.items():
                found = stress(solution, at=place, component=component, recovery=recovery)
                assert found.value == pytest.approx(float(exact.stress(x, y)[index]), rel=1e-9, abs=1e-9)
                assert (found.x, found.y) == place


def test_direct_stress_on_an_edge_is_the_mean_of_its_two_cells(
    ladder_of: Callable, as_skfem: Callable
) -> None:
    (solution, *_) = ladder_of("thick_cylinder", "quadrilateral", 1, 2, 4)
    mesh = as_skfem(solution.mesh).mesh
    facet = int(np.flatnonzero(mesh.f2t[1] >= 0)[0])
    ends = mesh.p[:, mesh.facets[:, facet]]
    middle, along = ends.mean(axis=1), ends[:, 1] - ends[:, 0]
    across = 1e-6 * np.array([-along[1], along[0]])
    at = [(float(p[0]), float(p[1])) for p in (middle, middle + across, middle - across)]
    on, one, other = (stress(solution, at=place, component="yy", recovery="direct").value for place in at)
    assert one != pytest.approx(other, rel=1e-3)
    assert on == pytest.approx(0.5 * (one + other), rel=1e-5)


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
def test_a_place_on_a_curved_edge_of_a_straight_sided_mesh(shape: str, ladder_of: Callable) -> None:
    """It lies outside the chord by the sagitta, is taken from the nearest cell and converges."""
    ladder = ladder_of("thick_cylinder", shape, 1, 2, 4)
    angle = np.radians(2.0)  # between nodes on every level: cells of 10, 5, 2.5 and 1.25 degrees
    at = (float(45.0 * np.cos(angle)), float(45.0 * np.sin(angle)))
    exact = ladder[0].problem.exact.displacement(np.array(at[0]), np.array(at[1]))
    errors = [abs(displacement(solution, at=at, component="x") / exact[0] - 1.0) for solution in ladder]
    assert errors[-1] < 1e-3 and errors[-1] < errors[0]


@pytest.mark.parametrize(
    "place", [(45.3, 1.0), (46.0, 0.0), (29.0, 0.5), (-0.2, 40.0), (20.0, 20.0), (90.0, 90.0)]
)
def test_a_place_outside_the_part_is_refused_on_every_mesh(
    place: tuple, element: tuple, ladder_of: Callable
) -> None:
    """Also just outside, where a coarse cell could be extrapolated."""
    (solution, *_) = ladder_of("thick_cylinder", *element, 2, 4)
    for measure in (displacement, stress):
        with pytest.raises(Unsuitable) as caught:
            measure(solution, at=place)
        assert str(caught.value) == f"at {place!r}: a place on the part"


def test_covers_says_whether_the_stress_is_read_at_a_point(ladder_of: Callable) -> None:
    part = ladder_of("thick_cylinder", "triangle", 1, 2, 4)[0].problem.part

    def covers(part: Part, point: str, arguments: dict[str, Any]) -> bool:
        corner = Corner(point, (part.points[point],), (point,), 90.0, ("clamped", "free"), 0.7583)
        return bool(module.covers(part, corner, arguments))

    assert covers(part, "bore_x", {"at": "bore_x"}) and covers(part, "bore_x", {"at": (30.0, 0.0)})
    assert not covers(part, "bore_y", {"at": "bore_x"})
    assert not covers(part, "bore_x", {"at": (30.1, 0.0)})
