"""Multigrid over given meshes: the solution of a factorization, in few steps, or none at all."""

import numpy as np
import pytest

from convergence.fem.aggregation import from_vertices, vertices
from convergence.fem.assembly import stiffness
from convergence.fem.element import Shape
from convergence.fem.given_part import GivenMesh, GivenPart
from convergence.fem.gradients import MOST_ITERATIONS
from convergence.fem.held import held_by
from convergence.fem.load_vector import load_vector
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.multigrid import Multigrid
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.fem.solvers import Factorization

BRACKET = Part(  # an L whose foot stands at 20° to the axes
    points={
        "a": (0.0, 0.0), "b": (40.0, 0.0), "c": (40.0, 20.0), "d": (20.0, 20.0), "e": (20.0, 60.0),
        "f": (0.0, 67.28), "g": (0.0, 20.0),
    },
    blocks=(("a", "b", "c", "d"), ("a", "d", "e", "f")),
    boundaries={"end": (("b", "c"),), "slope": (("e", "f"),), "low": (("a", "b"),)},
)  # fmt: skip


def part_of(shape: Shape, degree: int, divisions: int) -> tuple[GivenPart, Mesh]:
    solid = shape in ("tetrahedron", "hexahedron", "wedge")
    part = SolidPart(BRACKET, (("back", 0.0), ("front", 15.0))) if solid else BRACKET
    made = mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=degree)
    given = GivenMesh(shape, degree, made.nodes, made.cell_nodes, made.facets, {}, made.regions)
    return GivenPart((given,)), made


@pytest.mark.parametrize(
    ("shape", "degree", "divisions"),
    [
        ("triangle", 1, 24),
        ("triangle", 2, 12),
        ("quadrilateral", 2, 12),
        ("tetrahedron", 1, 6),
        ("tetrahedron", 2, 3),
        ("hexahedron", 2, 3),
        ("wedge", 1, 6),
    ],
)
def test_solution_is_that_of_a_factorization(shape: Shape, degree: int, divisions: int) -> None:
    """The multigrid's own tolerance is 1e-10 in the energy norm; 1e-8 leaves room for the norm of nodes."""
    part, _ = part_of(shape, degree, divisions)
    solid = part.dimension == 3
    problem = Problem(
        "bracket",
        part,
        {"body": Material(210000.0, 0.3)},
        (Support("slope", boundary="slope", normal=0.0), Support("low", x=0.0, y=0.0, boundary="low"))
        + ((Support("back", z=0.0, boundary="back"),) if solid else ()),
        (Traction("end", (0.0, -5.0, 0.0)[: part.dimension]),),
        kind="solid" if solid else "plane strain",
    )
    made = mesh(part, {0: 0}, shape=shape, degree=degree)
    held = held_by(problem, made)
    assert held.frame is not None
    matrix = (held.frame.T @ stiffness(problem, made) @ held.frame).tocsr()
    load = held.turned(load_vector(problem, made))
    outcome = Multigrid(made, matrix, held).solve(load, held.values)
    assert outcome.converged and outcome.iterations <= MOST_ITERATIONS  # the first smoother does it
    direct = Factorization(matrix, held.numbers).solve(load, held.values)
    assert np.abs(outcome.u - direct).max() < 1e-8 * np.abs(direct).max()


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral", "tetrahedron", "hexahedron", "wedge"])
def test_vertices_give_linear_fields(shape: Shape) -> None:
    """Straight cells: a linear field of the vertices is the same linear field at all nodes, to round-off."""
    part, _ = part_of(shape, 2, 2)
    made = mesh(part, {0: 0}, shape=shape, degree=2)
    field = np.arange(1.0, made.dimension + 1.0) @ made.nodes
    up = from_vertices(made)
    assert up.shape == (made.nodes.shape[1], len(vertices(made)))
    assert np.abs(up @ field[vertices(made)] - field).max() < 1e-12 * np.abs(field).max()
    one = from_vertices(mesh(part_of(shape, 1, 2)[0], {0: 0}, shape=shape, degree=1))
    assert (one != np.eye(one.shape[0])).sum() == 0
