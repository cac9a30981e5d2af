"""Netgen's own meshes of a lug, solved by us and by NGSolve: the same displacement on the same cells.

Schöberl 1997, NETGEN, Comput. Visual. Sci. 1:41; Schöberl 2014, C++11 implementation of finite elements in
NGSolve, ASC report 30/2014, TU Wien. Straight cells, so the integrals are exact in both; 1e-8 is asked for,
100 times what our solver leaves.
"""

from dataclasses import dataclass
from typing import Any

import numpy as np
import pytest

from convergence.bodies.boundaries import outline, with_rest
from convergence.bodies.refinement import Refined
from convergence.fem.element import Shape
from convergence.fem.given_part import GivenMesh, GivenPart
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.problem import Problem, Support
from convergence.fem.solution import solve

ngsolve = pytest.importorskip("ngsolve", reason="NGSolve has no package for this system")
geometry = pytest.importorskip("netgen.occ")

YOUNG, POISSON, PULL = 210000.0, 0.3, 40.0
SIZE = (120.0, 60.0, 20.0)
AGREEMENT = 1e-8
Case = tuple[Shape, int]
CASES: list[Case] = [("triangle", 1), ("triangle", 2), ("tetrahedron", 1), ("tetrahedron", 2)]


@dataclass(frozen=True)
class Theirs:
    """Netgen's mesh, its vertices (D, n) and cells (k, m)."""

    mesh: Any
    vertices: np.ndarray
    cells: np.ndarray


def lug(dimension: int) -> Theirs:
    """Return a plate of 120 by 60, 20 thick, with a hole of radius 15; the boundaries are root and tip."""
    if dimension == 2:
        plate = geometry.MoveTo(0.0, 0.0).Rectangle(*SIZE[:2]).Face()
        shape = plate - geometry.MoveTo(0.0, 0.0).Circle(80.0, 30.0, 15.0).Face()
        shape.edges.Min(geometry.X).name, shape.edges.Max(geometry.X).name = "root", "tip"
    else:
        hole = geometry.Cylinder((80.0, 30.0, -5.0), geometry.Z, 15.0, 30.0)
        shape = geometry.Box((0.0, 0.0, 0.0), SIZE) - hole
        shape.faces.Min(geometry.X).name, shape.faces.Max(geometry.X).name = "root", "tip"
    made = ngsolve.Mesh(geometry.OCCGeometry(shape, dim=dimension).GenerateMesh(maxh=14.0))
    vertices = np.array([vertex.point for vertex in made.vertices]).T
    cells = np.array([[v.nr for v in cell.vertices] for cell in made.Elements(ngsolve.VOL)]).T
    sides = vertices[:, cells[1:]] - vertices[:, cells[:1]]
    turned = np.linalg.det(sides.transpose(2, 0, 1)) < 0.0
    cells[:2, turned] = cells[1::-1, turned]
    return Theirs(made, vertices, cells)


def ours(theirs: Theirs, shape: Shape, degree: int) -> GivenPart:
    """Return their cells with our degree; the middles of edges lie half-way."""
    nodes, cells = theirs.vertices, theirs.cells
    outer = outline(nodes, cells, shape, 1)
    on = {name: np.flatnonzero(np.abs(nodes[0] - x) < 1e-9) for name, x in (("root", 0.0), ("tip", SIZE[0]))}
    boundaries = with_rest({name: outer.between(members) for name, members in on.items()}, outer)
    linear = GivenMesh(shape, 1, nodes, cells, boundaries, {}, {"body": np.arange(cells.shape[1])})
    return GivenPart(Refined(linear, {}, 1, degree))


def their_displacement(theirs: Theirs, degree: int) -> tuple[np.ndarray, float]:
    """Return the displacement (D, n) of their vertices, and the strain energy."""
    dimension = len(theirs.vertices)
    space = ngsolve.VectorH1(theirs.mesh, order=degree, dirichlet="root")
    u, v = space.TnT()
    shear, bulk = YOUNG / (2.0 * (1.0 + POISSON)), YOUNG * POISSON / ((1.0 + POISSON) * (1.0 - 2.0 * POISSON))

    def strain(w: Any) -> Any:
        return 0.5 * (ngsolve.Grad(w) + ngsolve.Grad(w).trans)

    form = ngsolve.BilinearForm(space, symmetric=True)
    form += (
        2.0 * shear * ngsolve.InnerProduct(strain(u), strain(v)) + bulk * ngsolve.div(u) * ngsolve.div(v)
    ) * ngsolve.dx
    load = ngsolve.LinearForm(space)
    load += ngsolve.CF((0.0, PULL, 0.0)[:dimension]) * v * ngsolve.ds("tip")
    form.Assemble()
    load.Assemble()
    found = ngsolve.GridFunction(space)
    inverse = form.mat.Inverse(space.FreeDofs(), inverse="sparsecholesky")
    found.vec.data = inverse * load.vec
    found.vec.data += inverse * (load.vec - form.mat * found.vec)
    places = [theirs.mesh(*place) for place in theirs.vertices.T]
    energy = 0.5 * ngsolve.InnerProduct(load.vec, found.vec)
    return np.array([found(place) for place in places]).T, float(energy)


@pytest.mark.parametrize(("shape", "degree"), CASES)
def test_the_same_displacement_on_the_same_cells(shape: Shape, degree: int) -> None:
    theirs = lug(2 if shape == "triangle" else 3)
    part = ours(theirs, shape, degree)
    dimension = part.dimension
    problem = Problem(
        "lug",
        part,
        {"body": Material(YOUNG, POISSON)},
        (Support("root", 0.0, 0.0, 0.0 if dimension == 3 else None, boundary="root"),),
        (Traction("tip", (0.0, PULL, 0.0)[:dimension]),),
        kind="solid" if dimension == 3 else "plane strain",
    )
    solution = solve(problem, mesh(part, {0: 0}, shape=shape, degree=degree))
    expected, energy = their_displacement(theirs, degree)
    found = solution.displacement[:, : theirs.vertices.shape[1]]
    assert np.abs(found - expected).max() < AGREEMENT * np.abs(expected).max()
    assert solution.energy == pytest.approx(energy, rel=AGREEMENT)
