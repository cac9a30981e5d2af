"""A coarse mesh refined by us: counts, true geometry, names that stay, the orders that theory promises."""

from dataclasses import replace
from itertools import pairwise

import numpy as np
import pytest

from convergence.bodies.refinement import Refined
from convergence.bodies.shapes import Plane, Round
from convergence.fem.element import Shape
from convergence.fem.facets import facet_bases
from convergence.fem.given_part import REST, GivenMesh, GivenPart
from convergence.fem.material import material
from convergence.fem.mesh import mesh
from convergence.fem.part import Part, arc
from convergence.fem.problem import Problem
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import solve
from convergence.models.thick_cylinder import thick_cylinder

QUARTER = Part(
    points={"a": (1.0, 0.0), "b": (2.0, 0.0), "c": (0.0, 2.0), "d": (0.0, 1.0)},
    blocks=(("a", "b", "c", "d"),),
    curves={("b", "c"): arc((0.0, 0.0), 2.0, 0.0, 90.0), ("a", "d"): arc((0.0, 0.0), 1.0, 0.0, 90.0)},
    boundaries={"in": (("d", "a"),), "out": (("b", "c"),), "low": (("a", "b"),), "left": (("c", "d"),)},
)
DIMENSION: dict[Shape, int] = {
    "triangle": 2,
    "quadrilateral": 2,
    "tetrahedron": 3,
    "hexahedron": 3,
    "wedge": 3,
}
CASES = [(shape, degree) for shape in DIMENSION for degree in (1, 2)]


def coarse(shape: Shape, degree: int, divisions: int = 1) -> GivenMesh:
    part = QUARTER if DIMENSION[shape] == 2 else SolidPart(QUARTER, (("base", 0.0), ("lid", 1.0)))
    made = mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=degree)
    return GivenMesh(shape, degree, made.nodes, made.cell_nodes, made.facets, made.vertices, made.regions)


def curves(dimension: int) -> dict[str, Plane | Round]:
    axis = None if dimension == 2 else (0.0, 0.0, 1.0)
    centre = (0.0,) * dimension
    return {"in": Round(centre, 1.0, axis), "out": Round(centre, 2.0, axis)}


@pytest.mark.parametrize(("shape", "degree"), CASES)
def test_levels_of_a_curved_part(shape: Shape, degree: int) -> None:
    """The volume of facets on a circle errs by h² and, of degree 2, by h⁴; 0.2 for levels that are coarse."""
    dimension = DIMENSION[shape]
    series = Refined(coarse(shape, degree), curves(dimension), 4 if dimension == 2 else 3)
    part = GivenPart(series, series.node_counts)
    errors = []
    for number, made in enumerate(series):
        level = mesh(part, {0: number}, shape=shape, degree=degree)
        assert level.cells == series[0].cell_nodes.shape[1] * 2 ** (dimension * number)
        assert made.nodes.shape[1] == series.node_counts[number] == len(np.unique(made.cell_nodes))
        flux = sum(
            float((basis.normals * basis.places * basis.dx).sum())
            for name in made.facets
            for basis in facet_bases(level, name, 6)
        )
        assert flux == pytest.approx(dimension * level.measure, rel=1e-12)
        errors.append(abs(level.measure - 0.75 * np.pi))
        for name, radius in (("in", 1.0), ("out", 2.0)):
            on = np.unique(np.concatenate([group.ravel() for group in made.facets[name]]))
            assert np.abs(np.hypot(*made.nodes[:2, on]) - radius).max() < 1e-11
    orders = [np.log2(before / after) for before, after in pairwise(errors)]
    assert orders[-1] == pytest.approx(2.0 * degree, abs=0.2)


@pytest.mark.parametrize(("shape", "degree"), CASES)
def test_names_stay_where_they_are(shape: Shape, degree: int) -> None:
    first = coarse(shape, degree, divisions=2)
    half = first.cell_nodes.shape[1] // 2
    first = replace(first, regions={"one": np.arange(half), "two": np.arange(half, 2 * half)})
    series = Refined(first, {}, 2)
    for made in series:
        for name, node in series.vertices.items():
            assert made.nodes[:, node] == pytest.approx(first.nodes[:, first.vertices[name]], abs=1e-12)
    own, finer = GivenPart((first,)), GivenPart((series[1],))
    assert all(finer.region_points(name) == own.region_points(name) for name in ("one", "two"))
    assert np.sort(np.concatenate(list(series[1].regions.values()))).tolist() == list(
        range(series[1].cell_nodes.shape[1])
    )


@pytest.mark.parametrize(("shape", "degree"), [c for c in CASES if DIMENSION[c[0]] == 2])
def test_orders_of_a_cylinder_under_pressure(shape: Shape, degree: int) -> None:
    """Displacement converges with k + 1, energy with 2k (Strang & Fix 1973), on refined as on mapped cells.

    0.25 is room for levels that are coarse still.
    """
    usual = thick_cylinder(material=material())
    assert isinstance(usual.part, Part) and usual.exact is not None and usual.exact.energy is not None
    made = mesh(usual.part, usual.part.divisions(size=None, divisions=2), shape=shape, degree=degree)
    first = GivenMesh(shape, degree, made.nodes, made.cell_nodes, made.facets, made.vertices, made.regions)
    radius = {name: float(np.hypot(*made.nodes[:, made.facets[name][0][0, 0]])) for name in ("bore", "outer")}
    surfaces: dict[str, Plane | Round] = {name: Round((0.0, 0.0), r) for name, r in radius.items()}
    series = Refined(first, surfaces, 4)
    problem: Problem = replace(usual, part=GivenPart(series))
    energies, displacements = [], []
    for number in range(4):
        solution = solve(problem, mesh(problem.part, {0: number}, shape=shape, degree=degree))
        exact = usual.exact.displacement(*solution.mesh.nodes)
        displacements.append(float(np.sqrt(((solution.displacement - exact) ** 2).mean())))
        energies.append(abs(solution.energy - usual.exact.energy))
    order = [np.log2(errors[-2] / errors[-1]) for errors in (displacements, energies)]
    assert order[0] > degree + 1 - 0.25
    assert order[1] == pytest.approx(2.0 * degree, abs=0.25)


def test_thin_layers_give_way_to_the_curve() -> None:
    """Layers thinner than the sagitta of the facets would fold if the curve's own nodes alone were moved."""
    angles, radii = np.linspace(0.0, np.pi / 2, 3), (1.0, 1.02, 1.04, 1.5)
    nodes = np.array([[r * np.cos(a), r * np.sin(a)] for r in radii for a in angles]).T
    rows = [
        [3 * k + i, 3 * (k + 1) + i, 3 * (k + 1) + i + 1, 3 * k + i + 1] for k in range(3) for i in range(2)
    ]
    cells = np.array(rows).T
    around = [0, 3, 6, 9, 10, 11, 8, 5, 2]
    facets = {"in": (np.array([[1, 2], [0, 1]]),), REST: (np.array([around[:-1], around[1:]]),)}
    first = GivenMesh("quadrilateral", 1, nodes, cells, facets, {}, {"body": np.arange(6)})
    series = Refined(first, {"in": Round((0.0, 0.0), 1.0)}, 3)
    part = GivenPart(series)
    for number in range(3):
        assert mesh(part, {0: number}, shape="quadrilateral", degree=1).cell_measures.min() > 0.0
    assert np.hypot(*series[2].nodes[:, np.unique(series[2].facets["in"][0])]) == pytest.approx(1.0)


def test_tetrahedra_keep_their_shape() -> None:
    """Cut along the shortest diagonal, tetrahedra do not degenerate: volume / edge³ stays above a bound."""
    series = Refined(coarse("tetrahedron", 1), {}, 4)

    def worst(made: GivenMesh) -> float:
        corners = made.nodes[:, made.cell_nodes]
        volume = np.abs(np.linalg.det((corners[:, 1:] - corners[:, :1]).transpose(2, 0, 1))) / 6.0
        edges = [np.linalg.norm(corners[:, a] - corners[:, b], axis=0) for a in range(4) for b in range(a)]
        return float((volume / np.max(edges, axis=0) ** 3).min())

    first = worst(series[0])
    assert all(worst(series[number]) > 0.5 * first for number in (1, 2, 3))
