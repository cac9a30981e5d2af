"""Fields carried between meshes: exact for polynomials, at curved borders, on both sides of a crack."""

from itertools import product

import numpy as np
import pytest

from convergence import rooms
from convergence.bodies.carry import carry
from convergence.bodies.nodal_fields import NodalFields
from convergence.fem.element import Shape, element
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part
from convergence.fem.solid_part import SolidPart

ROUND_OFF = 1e-11  # of values near one: two Newton steps and a sum over at most 27 nodes
SHAPES = [
    *product(("triangle", "quadrilateral"), (1, 2)),
    *product(("tetrahedron", "hexahedron", "wedge"), (1, 2)),
]
SQUARE = Part(
    points={"a": (0, 0), "b": (1, 0.2), "c": (1.3, 1.2), "d": (0.3, 1)}, blocks=(("a", "b", "c", "d"),)
)


def slanted(shape: Shape, degree: int, divisions: int) -> Mesh:
    """A parallelogram, or a block on it: its cells are affine."""
    solid = element(shape, degree).dimension == 3
    part = SolidPart(SQUARE, (("bottom", 0.0), ("top", 0.7))) if solid else SQUARE
    return mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=degree)


def ring(shape: Shape, degree: int, divisions: int) -> Mesh:
    """A quarter of a ring, or of a tube."""
    plan = rooms.find("models", "thick_cylinder")(material=Material(210000.0, 0.3)).part
    solid = element(shape, degree).dimension == 3
    part = SolidPart(plan, (("near", 0.0), ("far", 20.0))) if solid else plan
    return mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=degree)


def with_field(level: Mesh, values: np.ndarray) -> NodalFields:
    return NodalFields(level.nodes, level.cell_nodes, level.element, {"field": values})


def polynomials(nodes: np.ndarray, degree: int) -> np.ndarray:
    """All monomials of total degree up to `degree`, as components."""
    powers = [p for p in product(range(degree + 1), repeat=len(nodes)) if sum(p) <= degree]
    return np.array([np.prod([x**i for x, i in zip(nodes, p, strict=True)], axis=0) for p in powers])


@pytest.mark.parametrize(("shape", "degree"), SHAPES)
def test_polynomials_of_the_degree_are_carried_exactly(shape: Shape, degree: int) -> None:
    coarse, fine = slanted(shape, degree, 2), slanted(shape, degree, 5)
    source = with_field(coarse, polynomials(coarse.nodes, degree))
    found = carry([source], with_field(fine, fine.nodes), np.arange(fine.nodes.shape[1]))
    assert (found.outside, found.missing) == (0, 0)
    assert np.abs(found.fields["field"] - polynomials(fine.nodes, degree)).max() < ROUND_OFF


@pytest.mark.parametrize(("shape", "degree"), SHAPES)
def test_linear_fields_are_carried_exactly_through_curved_cells_and_beyond_them(
    shape: Shape, degree: int
) -> None:
    """Isoparametric cells hold x itself; a node outside the coarse border is reached by the same polynomial.

    Sizes are of the order of 50.
    """
    coarse, fine = ring(shape, degree, 2), ring(shape, degree, 5)
    source = with_field(coarse, coarse.nodes)
    found = carry([source], with_field(fine, fine.nodes), np.arange(fine.nodes.shape[1]))
    assert found.missing == 0
    assert np.abs(found.fields["field"] - fine.nodes).max() < 50.0 * ROUND_OFF


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
def test_nodes_outside_a_polygon_are_counted(shape: Shape) -> None:
    """Linear cells cut the outer arc off: all its fine nodes but those on coarse ones are outside."""
    coarse, fine = ring(shape, 1, 3), ring(shape, 1, 6)
    radius = np.hypot(*fine.nodes)
    outer = int((radius > 45.0 - 1e-9).sum()), int((np.hypot(*coarse.nodes) > 45.0 - 1e-9).sum())
    found = carry(
        [with_field(coarse, coarse.nodes)], with_field(fine, fine.nodes), np.arange(fine.nodes.shape[1])
    )
    assert found.outside == outer[0] - outer[1]


def test_nodes_far_from_the_other_mesh_have_no_value() -> None:
    level = slanted("quadrilateral", 1, 3)
    apart = NodalFields(level.nodes + 0.5, level.cell_nodes, level.element, {"field": level.nodes})
    found = carry([with_field(level, level.nodes)], apart, np.arange(level.nodes.shape[1]))
    lost = np.isnan(found.fields["field"][0])
    assert 0 < found.missing == lost.sum() < len(lost)
    assert np.allclose(found.fields["field"][:, ~lost], apart.nodes[:, ~lost], rtol=0.0, atol=ROUND_OFF)


def cracked(count: int) -> NodalFields:
    """Squares of one shape on -1 … 1, slit along y = 0 for x < 0; the field is 1 above and -1 below."""
    x = np.linspace(-1.0, 1.0, 2 * count + 1)
    across, up = np.meshgrid(x, x, indexing="ij")
    numbers = np.arange(len(x) ** 2).reshape(len(x), -1)
    cells = np.array([numbers[:-1, :-1], numbers[1:, :-1], numbers[1:, 1:], numbers[:-1, 1:]]).reshape(4, -1)
    nodes = np.array([across.ravel(), up.ravel()])
    slit = numbers[:count, count]
    twins = np.full(numbers.size, -1)
    twins[slit] = numbers.size + np.arange(count)
    lower = nodes[1, cells].mean(axis=0) < 0.0
    replaced = np.where(lower & (twins[cells] >= 0), twins[cells], cells)
    nodes = np.hstack([nodes, nodes[:, slit]])
    value = np.where(nodes[1] >= 0.0, 1.0, -1.0)
    value[numbers.size :] = -1.0
    return NodalFields(nodes, replaced, element("quadrilateral", 1), {"field": value[None]})


def test_each_flank_of_a_crack_takes_its_own_side() -> None:
    """Nested levels: every fine node of a flank lies on the coarse flank; the tip's cells are left out."""
    coarse, fine = cracked(2), cracked(6)
    on_flank = np.flatnonzero((np.abs(fine.nodes[1]) == 0.0) & (fine.nodes[0] < -0.5))
    assert len(on_flank) == 6
    found = carry([coarse], fine, on_flank)
    assert np.abs(found.fields["field"] - fine.fields["field"][:, on_flank]).max() < ROUND_OFF


def test_a_node_takes_its_value_from_the_piece_that_holds_it() -> None:
    """A mesh of two kinds of cells: the left half squares, the right half triangles, of one linear field."""
    whole = slanted("quadrilateral", 1, 4)
    middles = whole.nodes[:, whole.cell_nodes].mean(axis=1)
    left = whole.cell_nodes[:, middles[0] < middles[0].mean()]
    right = whole.cell_nodes[:, middles[0] >= middles[0].mean()]
    halves = np.concatenate([right[[0, 1, 2]], right[[0, 2, 3]]], axis=1)
    field = {"field": polynomials(whole.nodes, 1)}
    pieces = [
        NodalFields(whole.nodes, left, element("quadrilateral", 1), field),
        NodalFields(whole.nodes, halves, element("triangle", 1), field),
    ]
    fine = slanted("triangle", 1, 7)
    found = carry(pieces, with_field(fine, fine.nodes), np.arange(fine.nodes.shape[1]))
    assert (found.outside, found.missing) == (0, 0)
    assert np.abs(found.fields["field"] - polynomials(fine.nodes, 1)).max() < ROUND_OFF
