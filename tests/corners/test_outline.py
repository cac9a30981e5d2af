"""Corners of parts that are given by meshes: those of the part itself, not of the facets of curved sides."""

from dataclasses import replace

import numpy as np
import pytest

from convergence import rooms
from convergence.corners.given_edges import with_edges
from convergence.corners.outline import true_openings
from convergence.corners.singular_corners import singular_corners
from convergence.fem.given_part import GivenMesh, GivenPart
from convergence.fem.material import Material, material_names
from convergence.fem.mesh import mesh
from convergence.fem.outer_facets import outer_facets
from convergence.fem.part import finer
from convergence.fem.problem import Problem

STEEL, BRONZE = Material(210000.0, 0.3), Material(110000.0, 0.34)


def problem_of(model: str) -> Problem:
    function = rooms.find("models", model)
    materials = zip(material_names(function), (STEEL, BRONZE), strict=False)
    problem: Problem = function(**dict(materials))
    return problem


def given(problem: Problem, shape: str, degree: int, ratio: float = 1.5) -> Problem:
    """Return the problem on a part that only has the meshes of three levels."""
    coarsest = problem.part.divisions(size=None, divisions=2)
    levels = [mesh(problem.part, finer(coarsest, ratio, n), shape=shape, degree=degree) for n in range(3)]
    bare = [GivenMesh(m.shape, m.degree, m.nodes, m.cell_nodes, m.facets, {}, m.regions) for m in levels]
    return replace(problem, part=GivenPart(with_edges(bare)))


@pytest.mark.parametrize(("shape", "degree"), [("triangle", 1), ("quadrilateral", 1), ("triangle", 2)])
@pytest.mark.parametrize(
    "model", ["lug", "l_bracket", "tapered_arm", "bonded_strip", "centre_cracked_plate", "perforated_plate"]
)
def test_the_meshes_tell_the_corners_of_the_part(model: str, shape: str, degree: int) -> None:
    """The part's own description gives the same corners, though the hole of the mesh is a polygon.

    Openings of straight sides are exact; all singular corners of these parts have straight sides.
    """
    problem = problem_of(model)
    told, known = singular_corners(given(problem, shape, degree)), singular_corners(problem)

    def sorted_by_place(corners):
        return sorted(corners, key=lambda corner: corner.path)

    assert len(told) == len(known)
    for one, other in zip(sorted_by_place(told), sorted_by_place(known), strict=True):
        np.testing.assert_allclose(one.path, other.path, atol=1e-9)
        assert one.sides == other.sides
        assert one.opening == pytest.approx(other.opening, abs=1e-6)
        assert one.exponent == pytest.approx(other.exponent, abs=1e-8)


SOLIDS = [("solid_lug", 4), ("solid_bracket", 4), ("solid_plate_with_hole", 0), ("loaded_block", 0)]


@pytest.mark.parametrize(("shape", "degree"), [("tetrahedron", 1), ("hexahedron", 1), ("hexahedron", 2)])
@pytest.mark.parametrize(("model", "sides"), SOLIDS)
def test_the_meshes_tell_the_edges_of_a_solid(model: str, sides: int, shape: str, degree: int) -> None:
    """The clamped face's edge all around, as the part itself says; the faceted bores have none.

    The parts' edges are straight and square, so openings and exponents are exact.
    """
    problem = problem_of(model)
    told, known = singular_corners(given(problem, shape, degree)), singular_corners(problem)
    assert len(told) == len(known) == min(sides, 1)
    for one, other in zip(told, known, strict=True):
        assert one.sides == other.sides and one.path[0] == one.path[-1]
        assert one.opening == pytest.approx(other.opening, abs=1e-6)
        assert one.exponent == pytest.approx(other.exponent, abs=1e-8)
        assert all(other.distance(place) < 1e-9 for place in one.path)
        assert all(one.distance(place) < 1e-9 for place in other.path)


def netgen_series(sizes: tuple[float, ...]) -> list[GivenMesh]:
    """Return meshes of a plate with a hole, a re-entrant corner and a rounded one, by another mesher."""
    geometry2d = pytest.importorskip("netgen.geom2d")
    shape = geometry2d.SplineGeometry()
    places = [(0, 0), (100, 0), (100, 40), (40, 40), (40, 90), (40, 100), (30, 100), (0, 100)]
    points = [shape.AppendPoint(*place) for place in places]
    straight = [(0, 1), (1, 2), (2, 3), (3, 4), (6, 7), (7, 0)]
    for start, end in straight:
        shape.Append(["line", points[start], points[end]])
    shape.Append(["spline3", points[4], points[5], points[6]])
    shape.AddCircle((25.0, 25.0), 10.0, leftdomain=0, rightdomain=1)
    found = []
    for size in sizes:
        made = shape.GenerateMesh(maxh=size)
        nodes = np.array([point.p[:2] for point in made.Points()]).T
        cells = np.array([[v.nr - 1 for v in e.vertices] for e in made.Elements2D()]).T
        facets = {"rest": tuple(group for group, _ in outer_facets("triangle", 1, cells))}
        everything = {"body": np.arange(cells.shape[1])}
        found.append(GivenMesh("triangle", 1, nodes, cells, facets, {}, everything))
    return found


def test_unstructured_meshes_that_are_not_nested() -> None:
    """Six corners of straight sides; the rounded one and the hole, polygons in every mesh, are none."""
    meshes = netgen_series((12.0, 6.0, 3.0))
    nodes, opening = true_openings(meshes, "body")
    sharp = opening != 180.0
    found = {
        tuple(np.round(meshes[-1].nodes[:, node], 6)): angle
        for node, angle in zip(nodes[sharp], opening[sharp], strict=True)
    }
    right = {(0, 0): 90.0, (100, 0): 90.0, (100, 40): 90.0, (40, 40): 270.0, (0, 100): 90.0}
    assert found == pytest.approx(right, abs=1e-6)


def test_names_stand_at_the_same_places_on_every_mesh() -> None:
    meshes = netgen_series((12.0, 6.0, 3.0))
    named = with_edges(meshes)
    places = [[made.nodes[:, node] for node in made.vertices.values()] for made in named]
    np.testing.assert_allclose(places[0], places[2], atol=1e-9)
    assert list(named[0].vertices) == [f"corner_{number}" for number in range(1, 6)]
    assert tuple(places[0][0]) == pytest.approx((0.0, 0.0), abs=1e-9)


def test_edges_of_unstructured_tetrahedra() -> None:
    """Of an angle with a bore, meshed by another mesher: the re-entrant edge, not the facets of the bore."""
    occ = pytest.importorskip("netgen.occ")
    angle = occ.Box((0, 0, 0), (100, 40, 30)) + occ.Box((0, 0, 0), (35, 40, 90))
    body = angle - occ.Cylinder(occ.Pnt(75, 20, -5), occ.gp_Dir(0, 0, 1), r=10, h=50)
    meshes = []
    for size in (22.0, 13.0, 8.0):
        made = occ.OCCGeometry(body).GenerateMesh(maxh=size)
        nodes = np.array([point.p for point in made.Points()]).T
        cells = np.array([[v.nr - 1 for v in e.vertices] for e in made.Elements3D()]).T
        corners = nodes[:, cells]
        volume = np.linalg.det((corners[:, 1:] - corners[:, :1]).transpose(2, 0, 1))
        cells[:2, volume < 0.0] = cells[1::-1, volume < 0.0]
        facets = {"rest": tuple(group for group, _ in outer_facets("tetrahedron", 1, cells))}
        everything = {"body": np.arange(cells.shape[1])}
        meshes.append(GivenMesh("tetrahedron", 1, nodes, cells, facets, {}, everything))
    part = GivenPart(with_edges(meshes))
    (corner,) = singular_corners(Problem("", part, {"body": STEEL}, (), (), "solid"))
    assert corner.opening == pytest.approx(270.0, abs=1e-6) and corner.sides == ("free", "free")
    assert sorted(corner.path) == [pytest.approx((35, 0, 30)), pytest.approx((35, 40, 30))]
    assert corner.exponent == pytest.approx(0.5444837, abs=1e-7)  # Williams 1952, free-free, 270°
