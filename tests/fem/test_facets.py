"""Integration along boundaries: against scikit-fem's own facet basis, and where that one gives up."""

from collections.abc import Callable
from itertools import product
from typing import Any

import numpy as np
import pytest
from skfem import FacetBasis

from convergence import rooms
from convergence.fem.facets import facet_bases
from convergence.fem.loads import Pressure, Traction
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, Shape, mesh
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import SolidPart, Sweep
from convergence.fem.solution import solve

STEEL = Material(210000.0, 0.3)
POINTS, ORDER = 4, 7  # Gauss points on an edge, and the degree they integrate exactly
EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), [("triangle", 1), ("triangle", 2), ("quadrilateral", 1), ("quadrilateral", 2)]
)


def twisted(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
    x, y, s = np.broadcast_arrays(x, y, s)
    c, t = np.cos(0.02 * s), np.sin(0.02 * s)
    return np.array([x * c - y * t, x * t + y * c, s])


TWIST = Sweep(twisted, twisted)


def plate(shape: Shape, degree: int) -> Mesh:
    part = rooms.find("models", "perforated_plate")(material=STEEL).part
    return mesh(part, part.divisions(size=None, divisions=3), shape=shape, degree=degree)


@EVERY_CELL
@pytest.mark.parametrize("boundary", ["hole", "side", "symmetry_x"])
def test_the_same_integrals_as_the_facet_basis(
    shape: Shape, degree: int, boundary: str, as_skfem: Callable[[Mesh], Any]
) -> None:
    """The moments of the places, of the normals and of the shapes agree to rounding, edge by edge."""
    level = plate(shape, degree)
    native = as_skfem(level)
    (ours,) = facet_bases(level, boundary, ORDER)
    (facets,) = native.facets(boundary)
    theirs = FacetBasis(native.mesh, native.mesh.elem(), facets=facets, intorder=ORDER)
    x = np.asarray(theirs.global_coordinates())
    scale = level.part.size
    for power in (0, 1, 2):
        mine = (ours.places**power * ours.dx).sum(axis=2)
        other = (x**power * theirs.dx).sum(axis=2)
        assert np.abs(mine - other).max() < 1e-12 * scale ** (power + 1)
    normals = (np.asarray(theirs.normals) * theirs.dx).sum(axis=2)
    assert np.abs((ours.normals * ours.dx).sum(axis=2) - normals).max() < 1e-12 * scale
    assert ours.shapes.sum(axis=0) == pytest.approx(np.ones(POINTS), rel=1e-14)
    field = level.nodes[0] ** degree
    along = np.einsum("ne,nq->eq", field[ours.nodes], ours.shapes)
    total = float((np.asarray(theirs.interpolate(field[native.numbers])) * theirs.dx).sum())
    assert float((along * ours.dx).sum()) == pytest.approx(total, rel=1e-12)


@EVERY_CELL
def test_normals_point_outward_and_enclose_the_part(shape: Shape, degree: int) -> None:
    """Gauss's theorem: the flux of (x, y) through the whole outline is twice the area."""
    level = plate(shape, degree)
    flux = 0.0
    for boundary in level.part.boundaries:
        for edges in facet_bases(level, boundary, ORDER):
            flux += float(((edges.places * edges.normals).sum(axis=0) * edges.dx).sum())
    assert flux == pytest.approx(2.0 * level.measure, rel=1e-12)


SOLIDS = list(product(("tetrahedron", "hexahedron", "wedge"), (1, 2)))


def stepped(shape: Shape, degree: int) -> Mesh:
    """A quarter of a ring, a step on one of its halves, turned about its axis."""
    plan = rooms.find("models", "perforated_plate")(material=STEEL).part
    part = SolidPart(plan, (("floor", 0.0), ("ledge", 8.0), ("roof", 20.0)), TWIST, filled=((0, 1), (1,)))
    return mesh(part, part.divisions(size=None, divisions=2), shape=shape, degree=degree)


@pytest.mark.parametrize(("shape", "degree"), SOLIDS)
def test_normals_of_a_solid_point_outward_and_enclose_it(shape: Shape, degree: int) -> None:
    """Gauss's theorem for (x, y, z) and for each direction; the facets' own rule is exact on flat maps."""
    level = stepped(shape, degree)
    flux, closed = 0.0, np.zeros(3)
    for boundary in level.part.boundaries:
        for faces in facet_bases(level, boundary, 4 * degree):
            flux += float(((faces.places * faces.normals).sum(axis=0) * faces.dx).sum())
            closed += (faces.normals * faces.dx).sum(axis=(1, 2))
    assert flux == pytest.approx(3.0 * level.measure, rel=1e-12)
    assert np.abs(closed).max() < 1e-12 * level.part.size**2


@pytest.mark.parametrize(("shape", "degree"), [case for case in SOLIDS if case[0] != "wedge"])
def test_faces_of_solids_as_the_facet_basis(
    shape: Shape, degree: int, as_skfem: Callable[[Mesh], Any]
) -> None:
    """Facet by facet the same area and the same area times normal; scikit-fem has none for wedges."""
    level = stepped(shape, degree)
    native = as_skfem(level)
    for boundary in level.part.boundaries:
        bases = facet_bases(level, boundary, 6)
        for ours, facets in zip(bases, native.facets(boundary), strict=True):
            theirs = FacetBasis(native.mesh, native.mesh.elem(), facets=facets, intorder=6)
            assert np.abs(ours.dx.sum(axis=1) - theirs.dx.sum(axis=1)).max() < 1e-12 * level.part.size**2
            normals = (np.asarray(theirs.normals) * theirs.dx).sum(axis=2)
            assert np.abs((ours.normals * ours.dx).sum(axis=2) - normals).max() < 1e-12 * level.part.size**2


def test_small_cells_of_a_large_part_are_loaded() -> None:
    """Coordinates of 1e7, cells of 1: an inverse map with a fixed tolerance of 1e-12 does not end there."""
    low, high = 1e7, 1e7 + 8.0
    part = Part(
        points={"a": (low, low), "b": (high, low), "c": (high, high - 1.0), "d": (low, high)},
        blocks=(("a", "b", "c", "d"),),
        boundaries={"left": (("d", "a"),), "right": (("b", "c"),), "top": (("c", "d"),)},
    )
    problem = Problem(
        "block",
        part,
        {"body": STEEL},
        (Support("left", x=0.0, y=0.0, boundary="left"),),
        (Traction("right", (2.0, 0.0)), Pressure("top", 1.0)),
    )
    level = mesh(part, part.divisions(size=1.0, divisions=None), shape="quadrilateral", degree=1)
    force = solve(problem, level).reaction("left")
    # 7 mm of traction 2 to the right; pressure 1 on an edge that falls by 1 over 8: (-1, -8)
    assert force[:2] == pytest.approx([-(2.0 * 7.0 - 1.0), 8.0], rel=1e-6)
