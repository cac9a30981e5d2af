"""A part that is given by its meshes is solved and asked about like one with a map."""

from dataclasses import replace

import numpy as np
import pytest

from convergence.fem.element import Shape, element
from convergence.fem.facets import facet_bases
from convergence.fem.given_part import REST, GivenMesh, GivenPart
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, count_nodes, mesh
from convergence.fem.outer_facets import outer_facets
from convergence.fem.part import Part, arc
from convergence.fem.problem import AnyPart, Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import solve
from convergence.fem.stress import direct_stress

QUARTER = Part(
    points={"a": (1.0, 0.0), "b": (2.0, 0.0), "c": (0.0, 2.0), "d": (0.0, 1.0)},
    blocks=(("a", "b", "c", "d"),),
    curves={("b", "c"): arc((0.0, 0.0), 2.0, 0.0, 90.0), ("a", "d"): arc((0.0, 0.0), 1.0, 0.0, 90.0)},
    boundaries={"in": (("d", "a"),), "out": (("b", "c"),), "low": (("a", "b"),), "left": (("c", "d"),)},
)
SQUARE = Part(
    points={"a": (0.0, 0.0), "b": (1.0, 0.0), "c": (1.0, 1.0), "d": (0.0, 1.0)},
    blocks=(("a", "b", "c", "d"),),
    boundaries={"low": (("a", "b"),), "right": (("b", "c"),), "top": (("c", "d"),), "left": (("d", "a"),)},
)
SHAPES: dict[Shape, int] = {"triangle": 2, "quadrilateral": 2, "tetrahedron": 3, "hexahedron": 3, "wedge": 3}
CASES = [(shape, degree) for shape in SHAPES for degree in (1, 2)]
STEEL = Material(210000.0, 0.3)


def cut(plan: Part, shape: Shape, degree: int, divisions: int) -> Mesh:
    part: AnyPart = plan if SHAPES[shape] == 2 else SolidPart(plan, (("base", 0.0), ("lid", 1.0)))
    assert isinstance(part, Part | SolidPart)
    return mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=degree)


def given(made: Mesh, facets: dict[str, tuple[np.ndarray, ...]] | None = None) -> GivenPart:
    """Return the mesh as a part; one boundary for all its outer facets where none are given."""
    own = facets or {
        REST: tuple(nodes for nodes, _ in outer_facets(made.shape, made.degree, made.cell_nodes))
    }
    found = GivenMesh(made.shape, made.degree, made.nodes, made.cell_nodes, own, made.vertices, made.regions)
    return GivenPart((found,))


def level(part: GivenPart) -> Mesh:
    first = part.meshes[0]
    return mesh(part, {0: 0}, shape=first.shape, degree=first.degree)


@pytest.mark.parametrize(("shape", "degree"), CASES)
def test_outer_facets_close_the_part_and_point_outward(shape: Shape, degree: int) -> None:
    """Gauss: ∫ x·n over the facets is D times the volume, to round-off, as both rules are exact."""
    made = level(given(cut(QUARTER, shape, degree, 3)))
    flux = sum(float((basis.normals * basis.places * basis.dx).sum()) for basis in facet_bases(made, REST, 6))
    assert flux == pytest.approx(made.dimension * made.measure, rel=1e-12)


@pytest.mark.parametrize(("shape", "degree"), CASES)
def test_outer_facets_are_those_of_the_map(shape: Shape, degree: int) -> None:
    made = cut(QUARTER, shape, degree, 2)
    mapped = {tuple(sorted(f)) for groups in made.facets.values() for group in groups for f in group.T}
    found = outer_facets(shape, degree, made.cell_nodes)
    assert {tuple(sorted(f)) for group, _ in found for f in group.T} == mapped
    for group, cells in found:
        assert all(set(f) <= set(made.cell_nodes[:, cell]) for f, cell in zip(group.T, cells, strict=True))


@pytest.mark.parametrize(("shape", "degree"), CASES)
def test_patch_of_distorted_cells(shape: Shape, degree: int) -> None:
    """A constant stress comes out exactly, whatever the cells; 1e-8 is what the solvers leave."""
    made = cut(SQUARE, shape, degree, 3)
    inside = np.ones(made.nodes.shape[1], dtype=bool)
    for groups in made.facets.values():
        for group in groups:
            inside[group] = False
    vertex = np.zeros_like(inside)
    vertex[made.cell_nodes[: made.element.corners]] = True
    rng = np.random.default_rng(1)
    nodes = made.nodes.copy()
    nodes[:, inside & vertex] += 0.06 * rng.uniform(-1.0, 1.0, (made.dimension, int((inside & vertex).sum())))
    if degree == 2:
        weights = element(shape, 1).shapes(made.element.nodes.T)
        at = nodes[:, made.cell_nodes[: made.element.corners]]
        nodes[:, made.cell_nodes] = np.einsum("vm,dvc->dmc", weights, at)
    facets = {name: groups for name, groups in made.facets.items() if name != "right"}
    pull = {"right": made.facets["right"], **facets}
    part = given(replace(made, nodes=nodes), pull)
    solid = made.dimension == 3
    supports = [Support("l", x=0.0, boundary="left"), Support("b", y=0.0, boundary="low")]
    supports += [Support("z", z=0.0, boundary="base")] if solid else []
    problem = Problem(
        "patch",
        part,
        {"body": STEEL},
        tuple(supports),
        (Traction("right", (100.0, 0.0, 0.0)[: made.dimension]),),
        kind="solid" if solid else "plane stress",
    )
    solution = solve(problem, level(part))
    stress = direct_stress(solution, made.element.rule(2)[0], np.arange(made.cells))
    assert np.abs(stress[0] - 100.0).max() < 1e-8 * 100.0
    assert np.abs(stress[1:]).max() < 1e-8 * 100.0


@pytest.mark.parametrize(("shape", "degree"), CASES)
def test_places_in_the_part(shape: Shape, degree: int) -> None:
    """Nodes are in it; of random places those are that the true part has, but for its rim of one sixth."""
    made = cut(QUARTER, shape, degree, 3)
    part, true = given(made), made.part
    assert part.contains(made.nodes).all()
    assert part.size == pytest.approx(true.size, rel=1e-3)
    places = np.random.default_rng(2).uniform(-0.5, 2.5, (made.dimension, 2000))
    inside, found = true.contains(places), part.contains(places)
    assert found[inside].all()
    radius = np.hypot(*places[:2])
    away = (radius > 2.2) | (radius < 0.8) | (places[:2].min(axis=0) < -0.2)
    assert not found[away].any()


@pytest.mark.parametrize("shape", ["triangle", "hexahedron"])
def test_what_the_mesh_encloses_ends_at_its_facets(shape: Shape) -> None:
    """2e-5 of the size is what it may be off: places on a facet are in it, places 1e-4 above are not."""
    part = given(cut(SQUARE, shape, 1, 3))
    middle = np.full((part.dimension, 1), 0.4)
    for above, inside in ((0.0, True), (-1e-4, True), (1e-4, False)):
        place = middle.copy()
        place[0] = 1.0 + above * part.size
        assert part.encloses(place)[0] == inside


def test_the_part_tells_names_and_sizes() -> None:
    made = cut(QUARTER, "quadrilateral", 2, 3)
    part = given(made, dict(made.facets))
    assert part.points["d"] == pytest.approx((0.0, 1.0))
    assert part.boundary_points("in") == {"a", "d"}
    assert part.region_points("body") == {"a", "b", "c", "d"}
    assert count_nodes(part, {0: 0}, 2) == made.nodes.shape[1]
    assert level(part).h == pytest.approx(made.h)
    problem = Problem("p", part, {"body": STEEL}, (), ())
    assert problem.names()["boundary"] == ("in", "out", "low", "left")


def test_another_shape_is_refused() -> None:
    part = given(cut(QUARTER, "triangle", 1, 2))
    with pytest.raises(ValueError, match="triangles of degree 1"):
        mesh(part, {0: 0}, shape="triangle", degree=2)


def test_meshes_are_asked_for_one_at_a_time() -> None:
    coarse, fine = (given(cut(QUARTER, "triangle", 1, n)).meshes[0] for n in (2, 4))
    part = GivenPart((coarse, fine), (coarse.nodes.shape[1], 999), asked=1)
    assert part.finest is coarse
    assert count_nodes(part, {0: 1}, 1) == 999
