"""The same mesh, material, supports and loads given to NGSolve, an independent open finite element library.

Schöberl 2014, C++11 implementation of finite elements in NGSolve, ASC report 30/2014, TU Wien. Its elements
are hierarchical, ours nodal; they span the same spaces: complete polynomials on triangles and tetrahedra,
tensor products on quadrilaterals and hexahedra, both on wedges. Bent cells are given to it as a deformation
of straight ones by a quadratic map. It takes our quadrature rules for the stiffness, so that what is left is
round-off: 1e-9 of the largest value.
"""

from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
import pytest

from convergence.fem.cell_matrices import stiffness_rule
from convergence.fem.loads import BodyForce, Pressure, Traction
from convergence.fem.material import Material, ProblemKind
from convergence.fem.mesh import Mesh, Shape, mesh
from convergence.fem.part import Part, finer
from convergence.fem.problem import AnyPart, Problem, Support
from convergence.fem.solid_part import SolidPart, Sweep
from convergence.fem.solution import solve
from convergence.intervals import interval

ngsolve = pytest.importorskip("ngsolve", reason="NGSolve has no package for this system")
netgen = pytest.importorskip("netgen.meshing")

Form = Literal["irregular", "straight", "bent"]
SOLVER_PRECISION = 1e-9
TURNED = Material(
    young=1000.0, poisson=0.25, young_y=400.0, young_z=150.0, poisson_yz=0.2, poisson_zx=0.05,
    shear_xy=200.0, shear_yz=90.0, shear_zx=120.0, angle=30.0,
)  # fmt: skip
ISOTROPIC = Material(1000.0, 0.3)
# vertices in NGSolve's order, by their places in the reference cell
ORDER = {
    "triangle": ((0, 0), (1, 0), (0, 1)),
    "quadrilateral": ((0, 0), (1, 0), (1, 1), (0, 1)),
    "tetrahedron": ((0, 0, 0), (1, 0, 0), (0, 1, 0), (0, 0, 1)),
    "wedge": ((0, 0, 0), (1, 0, 0), (0, 1, 0), (0, 0, 1), (1, 0, 1), (0, 1, 1)),
    "hexahedron": ((0, 0, 0), (1, 0, 0), (1, 1, 0), (0, 1, 0), (0, 0, 1), (1, 0, 1), (1, 1, 1), (0, 1, 1)),
}
TYPES = {
    "triangle": "TRIG",
    "quadrilateral": "QUAD",
    "tetrahedron": "TET",
    "wedge": "PRISM",
    "hexahedron": "HEX",
}
BEND = 0.08
FORCE = (0.3, -0.7, 0.2)
PULL = (5.0, 2.0, -1.0)
MOVED = (0.002, -0.001, 0.003)
FACET_VERTICES = {(2, 2): 2, (2, 3): 2, (3, 3): 3, (3, 6): 3, (3, 4): 4, (3, 9): 4}
CASES = [
    *(
        (kind, shape)
        for kind in ("plane stress", "plane strain", "axisymmetric")
        for shape in ("triangle", "quadrilateral")
    ),
    *(("solid", shape) for shape in ("tetrahedron", "hexahedron", "wedge")),
]


@dataclass(frozen=True)
class Outcome:
    """Energy, and the displacement (D, vertices) of the nodes that are vertices."""

    energy: float
    nodes: np.ndarray
    displacement: np.ndarray


def plan(bent: float, shift: float) -> Part:
    """Return a square whose sides are parabolas, straight where `bent` is 0."""
    square = {"a": (0.0, 0.0), "b": (1.0, 0.0), "c": (1.0, 1.0), "d": (0.0, 1.0)}
    pairs = {"bottom": ("a", "b"), "right": ("b", "c"), "top": ("c", "d"), "left": ("d", "a")}

    def place(x: Any, y: Any) -> np.ndarray:
        return np.array([shift + x + bent * y * y, y - bent * x * x])

    def side(start: str, end: str) -> Any:
        a, b = np.array(square[start]), np.array(square[end])
        return lambda s: place(*(a[:, None] * (1.0 - s) + b[:, None] * s))

    points = {name: tuple(float(v) for v in place(*at)) for name, at in square.items()}
    curves = {pair: side(*pair) for pair in pairs.values()}
    return Part(points, (("a", "b", "c", "d"),), curves, {name: (pair,) for name, pair in pairs.items()})  # type: ignore[arg-type]


def irregular(shift: float) -> Part:
    """Return two irregular blocks."""
    corners = {
        "a": (0.0, 0.0), "b": (1.2, 0.1), "c": (2.1, -0.1), "d": (2.0, 1.2), "e": (1.0, 0.9), "f": (0.1, 1.1),
    }  # fmt: skip
    sides = {
        "left": (("f", "a"),),
        "bottom": (("a", "b"), ("b", "c")),
        "right": (("c", "d"),),
        "top": (("d", "e"), ("e", "f")),
    }
    blocks = (("a", "b", "e", "f"), ("b", "c", "d", "e"))
    return Part({name: (x + shift, y) for name, (x, y) in corners.items()}, blocks, boundaries=sides)


def part_of(kind: ProblemKind, form: Form) -> AnyPart:
    """Return a part in one of its forms; the bent square differs from the straight one by `bending`."""
    shift, bent = 1.0 if kind == "axisymmetric" else 0.0, BEND if form == "bent" else 0.0
    flat = irregular(shift) if form == "irregular" else plan(bent, shift)
    if kind != "solid":
        return flat
    lean = 0.2 if form == "irregular" else 0.0

    def place(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
        return np.array(np.broadcast_arrays(x + lean * s + bent * s * s, y, s))

    return SolidPart(flat, (("back", 0.0), ("front", 0.8)), Sweep(place, place))  # nothing asks for a plan


def bending(kind: ProblemKind) -> tuple[Any, ...]:
    """Return the displacement that bends the straight square, in NGSolve's coordinates."""
    x, y, z = (ngsolve.x - 1.0 if kind == "axisymmetric" else ngsolve.x), ngsolve.y, ngsolve.z
    flat = (BEND * y * y, -BEND * x * x)
    return (flat[0] + BEND * z * z, flat[1], 0.0) if kind == "solid" else flat


def problem_of(kind: ProblemKind, material: Material, form: Form) -> Problem:
    """Return a part pulled at its right, under pressure on top and a body force; its left side is moved."""
    dimension = 3 if kind == "solid" else 2
    return Problem(
        title="Patch",
        part=part_of(kind, form),
        materials={"body": material},
        supports=(Support("left", **dict(zip("xyz"[:dimension], MOVED, strict=False)), boundary="left"),),
        loads=(Traction("right", PULL[:dimension]), Pressure("top", 4.0), BodyForce(FORCE[:dimension])),
        kind=kind,
        thickness=1.5 if kind in ("plane stress", "plane strain") else 1.0,
    )


def given(level: Mesh) -> Any:
    """Return the mesh of the cells' vertices as NGSolve's, straight-sided, and the nodes it keeps."""
    made, dimension = netgen.Mesh(dim=level.dimension), level.dimension
    cell = netgen.Element2D if dimension == 2 else netgen.Element3D
    facet = (lambda region, ids: netgen.Element1D(ids, index=region)) if dimension == 2 else netgen.Element2D
    corners = level.cell_nodes[: level.element.corners]
    nodes = np.unique(corners)
    places = np.vstack([level.nodes[:, nodes], np.zeros((3 - dimension, len(nodes)))]).T.tolist()
    number = {
        int(node): made.Add(netgen.MeshPoint(netgen.Pnt(*at))) for node, at in zip(nodes, places, strict=True)
    }
    local = level.element.nodes[: level.element.corners]
    order = [int(np.linalg.norm(local - np.array(at), axis=1).argmin()) for at in ORDER[level.shape]]
    body = made.AddRegion("body", dim=dimension)
    for vertices in corners[order].T:
        made.Add(cell(body, [number[int(v)] for v in vertices]))
    for name, groups in level.facets.items():
        region = made.AddRegion(name, dim=dimension - 1)
        for group in groups:
            for vertices in group[: FACET_VERTICES[dimension, len(group)]].T:
                made.Add(facet(region, [number[int(v)] for v in vertices]))
    return ngsolve.Mesh(made), nodes


def solved(problem: Problem, level: Mesh, degree: int, rule: Any = None, bent: bool = False) -> Outcome:
    """Return NGSolve's answer of a degree; with our quadrature rule where one is given."""
    ng, dimension = ngsolve, level.dimension
    made, nodes = given(level)
    if bent:
        deformation = ng.GridFunction(ng.VectorH1(made, order=2))
        deformation.Set(ng.CoefficientFunction(bending(problem.kind)))
        made.SetDeformation(deformation)
    space = ng.VectorH1(made, order=degree, dirichlet="left")
    u, v = space.TnT()
    depth = 2.0 * np.pi * ng.x if problem.kind == "axisymmetric" else problem.thickness
    matrix = problem.materials["body"].elasticity(problem.kind)
    elasticity = ng.CoefficientFunction(tuple(matrix.ravel()), dims=matrix.shape)
    dx = ng.dx if rule is None else ng.dx(intrules={getattr(ng, TYPES[level.shape]): rule})
    stress = elasticity * strain(u, problem.kind)
    stiffness = ng.BilinearForm(depth * ng.InnerProduct(stress, strain(v, problem.kind)) * dx).Assemble()
    normal = ng.specialcf.normal(dimension)
    force, pull = (ng.CoefficientFunction(value[:dimension]) for value in (FORCE, PULL))
    load = ng.LinearForm(space)
    load += depth * ng.InnerProduct(force, v) * ng.dx(bonus_intorder=4)
    load += depth * ng.InnerProduct(pull, v) * ng.ds("right", bonus_intorder=4)
    load += -4.0 * depth * ng.InnerProduct(normal, v) * ng.ds("top", bonus_intorder=4)
    load.Assemble()
    found = ng.GridFunction(space)
    found.Set(ng.CoefficientFunction(MOVED[:dimension]), definedon=made.Boundaries("left"))
    rest = load.vec - stiffness.mat * found.vec
    found.vec.data += stiffness.mat.Inverse(space.FreeDofs(), inverse="sparsecholesky") * rest
    energy = 0.5 * ng.InnerProduct(found.vec, stiffness.mat * found.vec)
    values = np.array([part.vec.FV().NumPy()[: len(nodes)] for part in found.components])
    return Outcome(float(energy), nodes, values)


def strain(u: Any, kind: ProblemKind) -> Any:
    ng, g = ngsolve, ngsolve.Grad(u)
    if kind == "solid":
        shear = (g[0, 1] + g[1, 0], g[1, 2] + g[2, 1], g[2, 0] + g[0, 2])
        return ng.CoefficientFunction((g[0, 0], g[1, 1], g[2, 2], *shear))
    hoop = u[0] / ng.x if kind == "axisymmetric" else ng.CoefficientFunction(0.0)
    return ng.CoefficientFunction((g[0, 0], g[1, 1], hoop, g[0, 1] + g[1, 0]))


@pytest.mark.parametrize("material", [ISOTROPIC, TURNED], ids=["isotropic", "orthotropic"])
@pytest.mark.parametrize(("degree", "form"), [(1, "irregular"), (2, "irregular"), (2, "bent")])
@pytest.mark.parametrize(("kind", "shape"), CASES)
def test_the_same_mesh_gives_the_same_answer(
    kind: ProblemKind, shape: Shape, degree: int, material: Material, form: Form
) -> None:
    problem = problem_of(kind, material, form)
    counts = problem.part.divisions(size=None, divisions=2)
    level = mesh(problem.part, counts, shape=shape, degree=degree)
    ours = solve(problem, level)
    local, weights = stiffness_rule(problem, level)
    rule = ngsolve.IntegrationRule(points=[tuple(at) for at in local.T.tolist()], weights=weights.tolist())
    bent = form == "bent"
    before = mesh(part_of(kind, "straight"), counts, shape=shape, degree=degree) if bent else level
    theirs = solved(problem, before, degree, rule, bent)
    assert ours.energy == pytest.approx(theirs.energy, rel=SOLVER_PRECISION)
    largest = np.abs(theirs.displacement).max()
    assert ours.displacement[:, theirs.nodes] == pytest.approx(
        theirs.displacement, abs=SOLVER_PRECISION * largest
    )


@pytest.mark.slow
@pytest.mark.parametrize(
    ("kind", "shape", "degree", "levels", "fine", "order"),
    [
        ("plane strain", "triangle", 1, 5, 12, 6),
        ("plane stress", "quadrilateral", 2, 4, 12, 6),
        ("axisymmetric", "triangle", 2, 4, 12, 6),
        ("solid", "hexahedron", 1, 4, 2, 5),
        ("solid", "tetrahedron", 2, 3, 2, 6),
    ],
)
def test_an_overkill_solution_lies_in_the_interval(
    kind: ProblemKind, shape: Shape, degree: int, levels: int, fine: int, order: int
) -> None:
    """Energy of a ladder against polynomials of degree 5 and 6 on one mesh.

    How far those have come themselves, by the change from one degree less, must be far inside the interval.
    """
    problem = problem_of(kind, ISOTROPIC, "irregular")
    part = problem.part
    counts = part.divisions(size=None, divisions=1)
    meshes = [mesh(part, finer(counts, 2.0, n), shape=shape, degree=degree) for n in range(levels)]
    energies = np.array([solve(problem, level).energy for level in meshes])
    stated = interval(np.array([level.h for level in meshes]), energies)
    overkill = mesh(part, part.divisions(size=None, divisions=fine), shape=shape, degree=1)
    before, best = (solved(problem, overkill, polynomial).energy for polynomial in (order - 1, order))
    assert stated.flaw == ""
    assert abs(best - before) < 0.1 * stated.half_width
    assert stated.low <= best <= stated.high
