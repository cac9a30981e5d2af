"""What a solved solid leaves for the figures: its surface, closed, outward, with its edges and errors."""

from dataclasses import replace
from itertools import product

import numpy as np
import pytest
from scipy import sparse

from convergence.fem.display import display, faces
from convergence.fem.held import Held
from convergence.fem.material import Material
from convergence.fem.mesh import Shape, mesh
from convergence.fem.part import Part
from convergence.fem.problem import Problem
from convergence.fem.recovery import cell_volumes, energy_error
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution

EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("tetrahedron", "hexahedron", "wedge"), (1, 2)))
)
# an L in plan and a step in height, all faces plane: edges by hand
FLAT = Part(
    points={"a": (0, 0), "b": (3, 0), "c": (3, 2), "d": (0, 2), "e": (5, 0), "f": (5, 2)},
    blocks=(("a", "b", "c", "d"), ("b", "e", "f", "c")),
)
STEPPED = SolidPart(FLAT, (("low", 0.0), ("middle", 1.0), ("high", 4.0)), filled=((0, 1), (0,)))


def solved(shape: Shape, degree: int) -> Solution:
    """An arbitrary displacement put in by hand: every cell has another error."""
    counts = {family: 2 + n % 2 for n, family in enumerate(STEPPED.divisions(size=None, divisions=1))}
    level = mesh(STEPPED, counts, shape=shape, degree=degree)
    u = 1e-3 * np.random.default_rng(5).normal(size=level.nodes.size)
    nothing = Held(np.array([], dtype=int), np.array([]), {}, None)
    problem = Problem("step", STEPPED, {"body": Material(210000.0, 0.3)}, (), (), "solid")
    return Solution(problem, level, sparse.csr_matrix((len(u), len(u))), 0.0 * u, u, nothing)


def polygons(cells: np.ndarray) -> list[list[int]]:
    """Return the nodes of each face; triangles among quadrilaterals repeat their last node."""
    return [list(dict.fromkeys(face)) for face in cells.T.tolist()]


@EVERY_CELL
def test_the_surface_is_closed(shape: Shape, degree: int) -> None:
    """Every side of a face belongs to one other face, which runs along it the other way."""
    fields = display(solved(shape, degree))
    sides = [(p[i - 1], p[i]) for p in polygons(fields.cells) for i in range(len(p))]
    assert len(sides) == len(set(sides))
    assert set(sides) == {(b, a) for a, b in sides}
    assert sorted(np.unique(fields.cells)) == list(range(fields.points.shape[1]))


@EVERY_CELL
def test_faces_point_outward(shape: Shape, degree: int) -> None:
    """By Gauss: the sum of a·(b × c) / 6 over triangles counter-clockwise is the volume, 10 + 18 here."""
    solution = solved(shape, degree)
    fields = display(solution)
    assert faces(solution.mesh) == fields.cells.shape[1]
    triangles = [(p[0], p[i], p[i + 1]) for p in polygons(fields.cells) for i in range(1, len(p) - 1)]
    a, b, c = (fields.points[:, [t[i] for t in triangles]] for i in range(3))
    assert np.einsum("in,in->", a, np.cross(b, c, axis=0)) / 6.0 == pytest.approx(28.0, rel=1e-12)


@EVERY_CELL
def test_each_face_has_the_error_of_the_cell_behind_it(shape: Shape, degree: int) -> None:
    """The cell that has all the nodes of the face; its nodes are found by their places."""
    solution = solved(shape, degree)
    fields, level = display(solution), solution.mesh
    error = energy_error(solution) / cell_volumes(solution)
    number = {tuple(place): node for node, place in enumerate(level.nodes.T.round(9).tolist())}
    ours = [number[tuple(place)] for place in fields.points.T.round(9).tolist()]
    members = [set(nodes) for nodes in level.cell_nodes.T.tolist()]
    for face, told in zip(polygons(fields.cells), fields.error, strict=True):
        wanted = {ours[node] for node in face}
        (owner,) = (cell for cell, nodes in enumerate(members) if wanted <= nodes)
        assert told == pytest.approx(error[owner], rel=1e-12)


@EVERY_CELL
def test_sharp_edges(shape: Shape, degree: int) -> None:
    """By hand: below 2 (5 + 2); upright 2 x 4 + 2 x 1; at the high block, above the step, 2 x 3 more.

    The high block has four uprights, two of them from the bottom and two from the step: 2 x 4 + 2 x 3. The
    low block has two: 2 x 1. Around its top 2 + 2 + 2, where it meets the high block 2, above 2 (3 + 2).
    """
    fields = display(solved(shape, degree))
    start, end = fields.points[:, fields.boundary[0]], fields.points[:, fields.boundary[1]]
    assert len({frozenset(segment) for segment in fields.boundary.T.tolist()}) == fields.boundary.shape[1]
    assert np.linalg.norm(end - start, axis=0).sum() == pytest.approx(14.0 + 14.0 + 2.0 + 6.0 + 2.0 + 10.0)


@EVERY_CELL
def test_mesh_lines_lie_on_the_surface_once(shape: Shape, degree: int) -> None:
    """Euler: vertices − edges + faces = 2 of a closed surface without holes, by whole faces of cells."""
    solution = solved(shape, degree)
    fields = display(solution)
    ends = {frozenset(line) for line in fields.edges[[0, -1]].T.tolist()}
    vertices = set().union(*ends)
    whole = faces(solution.mesh) // (4 if degree == 2 else 1)
    assert len(vertices) - len(ends) + whole == 2
    assert len(ends) == fields.edges.shape[1]
    if degree == 2:
        middle = fields.points[:, fields.edges[1]]
        assert middle == pytest.approx(0.5 * fields.points[:, fields.edges[[0, 2]]].sum(axis=1))


def test_values_are_those_of_the_nodes() -> None:
    solution = solved("wedge", 2)
    fields = display(solution)
    moved = display(replace(solution, unknowns=2.0 * solution.unknowns))
    assert moved.displacement == pytest.approx(2.0 * fields.displacement)
    assert moved.von_mises == pytest.approx(2.0 * fields.von_mises)
    assert moved.error == pytest.approx(4.0 * fields.error)
