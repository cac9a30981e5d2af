"""Reference cells, rules, maps, strains and sums of cell matrices, each against another way to get them."""

from itertools import product
from math import factorial

import numpy as np
import pytest
from scipy import sparse

from convergence.fem.calculus import determinant, inverse
from convergence.fem.element import Shape, element
from convergence.fem.geometry import at_rule, geometry
from convergence.fem.grid import cut
from convergence.fem.material import Material, ProblemKind
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part
from convergence.fem.pattern import pairs, pattern
from convergence.fem.problem import AnyPart, Problem
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_part import SolidPart
from convergence.fem.strain import strain_forms, strain_gradients, strain_maps, strain_operator

SHAPES: tuple[Shape, ...] = ("line", "triangle", "quadrilateral", "tetrahedron", "hexahedron", "wedge")
EVERY_CELL = pytest.mark.parametrize(("shape", "degree"), list(product(SHAPES, (1, 2))))
EVERY_SHAPE = pytest.mark.parametrize("shape", SHAPES)
RANDOM = np.random.default_rng(11)
TRAPEZE = Part({"a": (1, 0), "b": (4, 0.5), "c": (3.5, 2), "d": (1.2, 1.6)}, (("a", "b", "c", "d"),))
PARTS: dict[int, AnyPart] = {
    1: RodPart({"a": (1.0,), "b": (4.0,)}),
    2: TRAPEZE,
    3: SolidPart(TRAPEZE, (("low", 0.0), ("high", 1.5))),
}


def integral(shape: Shape, power: tuple[int, ...]) -> float:
    """Return the integral of a monomial over the reference cell.

    i! j! k! / (i + j + k + 3)! over a tetrahedron, likewise a triangle; 1/(i + 1) along an edge of a cube.
    """

    def simplex(*exponents: int) -> float:
        return np.prod([factorial(e) for e in exponents]) / factorial(sum(exponents) + len(exponents))

    if shape in ("triangle", "tetrahedron"):
        return float(simplex(*power))
    if shape == "wedge":
        return float(simplex(*power[:2]) / (power[2] + 1))
    return float(np.prod([1.0 / (e + 1) for e in power]))


@EVERY_SHAPE
def test_rules_are_exact_to_their_order(shape: Shape) -> None:
    """All monomials up to that total degree. Scikit-fem's own for tetrahedra are not, from order 5 on."""
    for order in range(1, 9):
        local, weights = element(shape, 1).rule(order)
        for power in product(range(order + 1), repeat=len(local)):
            if sum(power) <= order:
                values = np.prod([x**e for x, e in zip(local, power, strict=True)], axis=0)
                assert values @ weights == pytest.approx(integral(shape, power), rel=1e-11, abs=1e-14)
        assert element(shape, 1).outside(local).max() <= 1e-12


@EVERY_CELL
def test_shapes_are_one_at_their_node_and_their_sum_is_one(shape: Shape, degree: int) -> None:
    kind = element(shape, degree)
    assert kind.shapes(kind.nodes.T) == pytest.approx(np.eye(len(kind.nodes)), abs=1e-12)
    local = RANDOM.uniform(0.0, 0.5, (kind.dimension, 7))
    assert kind.shapes(local).sum(axis=0) == pytest.approx(1.0)
    assert kind.gradients(local).sum(axis=0) == pytest.approx(0.0, abs=1e-12)


@EVERY_CELL
def test_slopes_are_those_of_the_shapes(shape: Shape, degree: int) -> None:
    """Central differences of polynomials up to degree 2 per direction have no error but round-off."""
    kind, step = element(shape, degree), 1e-3
    local = RANDOM.uniform(0.1, 0.3, (kind.dimension, 5))
    for way in range(kind.dimension):
        move = step * np.eye(kind.dimension)[way][:, None]
        numeric = (kind.shapes(local + move) - kind.shapes(local - move)) / (2.0 * step)
        assert kind.gradients(local)[:, way] == pytest.approx(numeric, abs=1e-11)


def test_a_wedge_is_the_product_of_triangle_and_line() -> None:
    for degree in (1, 2):
        wedge, flat, along = (element(shape, degree) for shape in ("wedge", "triangle", "line"))
        local = RANDOM.uniform(0.1, 0.4, (3, 6))
        triangle, line = flat.shapes(local[:2]), along.shapes(local[2:])
        for node, place in enumerate(wedge.nodes):
            t = int(np.hypot(*(flat.nodes - place[:2]).T).argmin())
            s = int(np.abs(along.nodes[:, 0] - place[2]).argmin())
            assert wedge.shapes(local)[node] == pytest.approx(triangle[t] * line[s])


@EVERY_SHAPE
def test_faces(shape: Shape) -> None:
    """Their number by Euler; every vertex is on as many as its dimension; each lies in the cell's hull."""
    kind = element(shape, 1)
    number = {"line": 2, "triangle": 3, "quadrilateral": 4, "tetrahedron": 4, "hexahedron": 6, "wedge": 5}
    assert len(set(kind.faces)) == len(kind.faces) == number[shape]
    assert list(np.bincount(np.concatenate(kind.faces))) == [kind.dimension] * kind.corners
    for face in kind.faces:
        middle = kind.nodes[list(face)].mean(axis=0)
        away = middle + 0.01 * (middle - kind.nodes[: kind.corners].mean(axis=0))
        assert kind.outside(away[:, None])[0] > 0.0 and kind.outside(middle[:, None])[0] <= 1e-12


@pytest.mark.parametrize("d", [1, 2, 3])
def test_determinants_and_inverses(d: int) -> None:
    j = RANDOM.normal(size=(d, d, 4, 5))
    matrices = np.moveaxis(j, (0, 1), (-2, -1))
    det, inward = inverse(j)
    assert determinant(j) == pytest.approx(np.linalg.det(matrices), rel=1e-10)
    assert det == pytest.approx(np.linalg.det(matrices), rel=1e-10)
    assert np.moveaxis(inward, (0, 1), (-2, -1)) == pytest.approx(np.linalg.inv(matrices), rel=1e-8)


def cells_of(shape: Shape, degree: int) -> Mesh:
    part = PARTS[element(shape, 1).dimension]
    counts = dict.fromkeys(part.divisions(size=None, divisions=1), 2)
    return mesh(part, counts, shape=shape, degree=degree)


@EVERY_CELL
def test_gradients_of_a_field_in_space(shape: Shape, degree: int) -> None:
    """Linear fields lie in every isoparametric cell: their gradient is exact, shapes on all cells or each."""
    level = cells_of(shape, degree)
    slope = RANDOM.normal(size=(level.dimension, level.dimension))
    values = (slope @ level.nodes)[:, level.cell_nodes]
    at = at_rule(level, 3)
    each = np.repeat(level.element.rule(3)[0][:, None, :], level.cells, axis=1)
    for points in (at, geometry(level, each)):
        found = points.gradient(values)
        assert found == pytest.approx(np.broadcast_to(slope[:, :, None, None], found.shape), abs=1e-10)
        by_shapes = np.einsum("inm,ndmq->idmq", values, points.gradients)
        assert by_shapes == pytest.approx(found, abs=1e-10)
    assert at.dx.sum() == pytest.approx(level.measure)


@pytest.mark.parametrize(("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2))))
def test_a_grid_is_cut_without_gaps(shape: Shape, degree: int) -> None:
    """On a grid of unit cells: areas 1 or 1/2, counter-clockwise, nodes at the places of the element."""
    i, j = np.meshgrid(np.arange(2 * degree + 1), np.arange(3 * degree + 1), indexing="ij")
    places = np.array([i.ravel(), j.ravel()]) / degree
    kind = element(shape, degree)
    cells = cut(np.arange(i.size).reshape(i.shape), kind)
    pieces = 2 if shape == "triangle" else 1
    assert cells.shape == (len(kind.nodes), 6 * pieces)
    corners = places[:, cells[: kind.corners]]
    x, y = corners
    areas = 0.5 * (x * np.roll(y, -1, axis=0) - y * np.roll(x, -1, axis=0)).sum(axis=0)
    assert areas == pytest.approx(1.0 / pieces)
    linear = element(shape, 1).shapes(kind.nodes.T)
    assert places[:, cells] == pytest.approx(np.einsum("dkm,kn->dnm", corners, linear))


@pytest.mark.parametrize("dimension", [1, 2, 3])
def test_sums_of_cell_matrices(dimension: int) -> None:
    """Random symmetric cells, some nodes in none of them, against scipy's sum of triplets."""
    nodes, k, m = 40, 4, 30
    used = RANDOM.choice(nodes, 25, replace=False)
    cell_nodes = np.array([RANDOM.choice(used, k, replace=False) for _ in range(m)]).T
    blocks = RANDOM.normal(size=(m, k * dimension, k * dimension))
    blocks += blocks.transpose(0, 2, 1)
    a, b = pairs(k)
    of_pairs = blocks.reshape(m, k, dimension, k, dimension)[:, a, :, b].transpose(2, 3, 0, 1)
    on = pattern(cell_nodes, nodes)
    unknowns = (dimension * cell_nodes.T[:, :, None] + np.arange(dimension)).reshape(m, -1)
    rows = np.repeat(unknowns, k * dimension, axis=1).ravel()
    columns = np.tile(unknowns, (1, k * dimension)).ravel()
    size = nodes * dimension
    other = sparse.coo_matrix((blocks.ravel(), (rows, columns)), shape=(size, size)).tocsr()
    found = on.matrix(on.summed(of_pairs))
    assert abs(found - other).max() <= 1e-13
    assert found.nnz == other.nnz
    assert all(
        (np.diff(found.indices[a:b]) > 0).all() for a, b in zip(found.indptr, found.indptr[1:], strict=False)
    )


@pytest.mark.parametrize(
    ("kind", "shape"),
    [
        ("rod", "line"),
        ("plane stress", "triangle"),
        ("plane strain", "quadrilateral"),
        ("axisymmetric", "quadrilateral"),
        ("solid", "wedge"),
        ("solid", "hexahedron"),
    ],
)
def test_strains_against_a_plain_loop(kind: ProblemKind, shape: Shape) -> None:
    """The strain of each single unknown, from the symmetric gradient written out."""
    level = cells_of(shape, 2)
    problem = Problem("cell", level.part, {"body": Material(1.0, 0.3)}, (), (), kind)
    at, d = at_rule(level, 2), level.dimension
    operator = strain_operator(problem, level, at, np.arange(level.cells))
    forms, pieces = strain_forms(kind, d), strain_gradients(problem, at)
    for node, component in product(range(len(level.element.nodes)), range(d)):
        gradient = np.zeros((3, 3, *at.det.shape))
        gradient[component, :d] = at.gradients[node]
        hoop = at.shapes[node] / at.x[0] if kind == "axisymmetric" and component == 0 else 0.0 * at.det
        direct = [gradient[0, 0], gradient[1, 1], gradient[2, 2] + hoop]
        shear = [gradient[i, j] + gradient[j, i] for i, j in ((0, 1), (1, 2), (2, 0))]
        expected = {1: direct[:1], 2: [*direct, shear[0]], 3: [*direct, *shear]}[d]
        assert operator[:, d * node + component] == pytest.approx(np.array(expected), abs=1e-14)
        formed = np.einsum("sk,kmq->smq", forms[:, component], pieces[node])
        assert formed == pytest.approx(np.array(expected), abs=1e-14)


def test_gradients_around_an_axis_are_maps_of_slopes_and_shapes() -> None:
    """Off the axis N/x is a gradient of its own; on it du/dx stands in."""
    level = cells_of("quadrilateral", 2)
    problem = Problem("cell", level.part, {"body": Material(1.0, 0.3)}, (), (), "axisymmetric")
    at = at_rule(level, 4)
    at.x[0, :, 0] = 0.0
    kinds = np.concatenate([at.slopes, at.shapes[:, None]], axis=1)
    found = np.einsum("nkq,kgmq->ngmq", kinds, strain_maps(problem, at))
    assert found == pytest.approx(strain_gradients(problem, at), abs=1e-13)
