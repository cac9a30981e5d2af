"""Stiffness, load and solution against scikit-fem's own forms on the same mesh: an independent assembly."""

from collections.abc import Callable
from dataclasses import replace
from itertools import product
from typing import Any

import numpy as np
import pytest
from scipy import sparse
from skfem import BilinearForm, FacetBasis, LinearForm, condense, solve
from skfem.models.elasticity import linear_elasticity

from convergence.fem import assembly
from convergence.fem.assembly import stiffness
from convergence.fem.cell_matrices import ORDER
from convergence.fem.load_vector import load_vector
from convergence.fem.loads import BodyForce, Pressure
from convergence.fem.material import Material, PlaneKind
from convergence.fem.mesh import Mesh, Shape, mesh
from convergence.fem.part import Part
from convergence.fem.problem import Problem
from convergence.fem.solid_part import SolidPart, Sweep
from convergence.fem.solution import solve as solve_problem
from convergence.models.skew_panel import skew_panel
from convergence.models.thick_cylinder import thick_cylinder

STEEL = Material(210000.0, 0.3)
EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2)))
)
# scikit-fem has no wedges of degree 2
EVERY_SOLID = pytest.mark.parametrize(
    ("shape", "degree"), [*product(("tetrahedron", "hexahedron"), (1, 2)), ("wedge", 1)]
)
AsSkfem = Callable[[Mesh], Any]


def lame(kind: PlaneKind) -> tuple[float, float]:
    """Lamé's constants of the plane: in plane stress λ becomes 2 λ μ / (λ + 2 μ)."""
    young, nu = STEEL.young, STEEL.poisson
    lam, mu = young * nu / ((1 + nu) * (1 - 2 * nu)), young / (2 * (1 + nu))
    return (lam if kind == "plane strain" else 2 * lam * mu / (lam + 2 * mu)), mu


def cut(problem: Problem, shape: Shape, degree: int) -> Mesh:
    counts = problem.part.divisions(size=None, divisions=3)
    return mesh(problem.part, counts, shape=shape, degree=degree)


def twisted(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
    """A sweep whose layers turn and lean, so that no face of a cell is a parallelogram."""
    x, y, s = np.broadcast_arrays(x, y, s)
    c, t = np.cos(0.01 * s), np.sin(0.01 * s)
    return np.array([x * c - y * t, x * t + y * c, s + 0.1 * x + 0.002 * x * y])


def solid() -> Problem:
    """Two skew blocks on the lower layer, one of them on the upper, twisted."""
    plan = Part(
        points={"a": (0, 0), "b": (30, 4), "c": (36, 25), "d": (-3, 20), "e": (60, 0), "f": (58, 22)},
        blocks=(("a", "b", "c", "d"), ("b", "e", "f", "c")),
        boundaries={"side": (("d", "a"), ("c", "d"))},
    )
    planes = (("floor", 0.0), ("ledge", 10.0), ("roof", 25.0))
    part = SolidPart(plan, planes, Sweep(twisted, twisted), filled=((0, 1), (0,)))
    return Problem("solid", part, {"body": STEEL}, (), (), "solid")


def ours(native: Any, theirs: Any) -> sparse.csr_matrix:
    """Return scikit-fem's matrix in our numbers of the unknowns."""
    back = np.argsort(native.unknowns)
    return sparse.csr_matrix(theirs)[back][:, back]


def largest(matrix: Any) -> float:
    return float(abs(matrix).max())


@EVERY_CELL
@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
@pytest.mark.parametrize("model", [skew_panel, thick_cylinder])
def test_stiffness(model: Any, kind: PlaneKind, shape: Shape, degree: int, as_skfem: AsSkfem) -> None:
    """Straight skew cells and cells with curved edges, by the same rule of quadrature: round-off only."""
    problem = model(material=STEEL, kind=kind)
    level = cut(problem, shape, degree)
    native = as_skfem(level)
    basis = native.vector_basis(ORDER[shape, degree])
    own = stiffness(problem, level)
    theirs = ours(native, problem.thickness * linear_elasticity(*lame(kind)).assemble(basis))
    assert largest(own - theirs) <= 1e-12 * largest(theirs)
    assert largest(own - own.T) <= 1e-12 * largest(own)


@EVERY_SOLID
def test_stiffness_of_solids(shape: Shape, degree: int, as_skfem: AsSkfem) -> None:
    """Twisted and leaning cells, by the same rule of quadrature: round-off only."""
    problem = solid()
    level = cut(problem, shape, degree)
    native = as_skfem(level)
    own = stiffness(problem, level)
    basis = native.vector_basis(ORDER[shape, degree])
    theirs = ours(native, linear_elasticity(*lame("plane strain")).assemble(basis))
    assert largest(own - theirs) <= 1e-12 * largest(theirs)
    assert largest(own - own.T) <= 1e-12 * largest(own)


@EVERY_SOLID
def test_pressure_and_weight_of_solids(shape: Shape, degree: int, as_skfem: AsSkfem) -> None:
    """A pressure that varies on twisted faces, and a body force that varies inside."""
    problem = replace(
        solid(),
        loads=(
            Pressure("side", lambda x, y, z: 1.0 + 0.01 * x + 0.02 * z),
            BodyForce(lambda x, y, z: np.array([0.0 * x, 0.1 * z, -0.5 + 0.0 * x])),
        ),
    )
    level = cut(problem, shape, degree)
    native = as_skfem(level)
    basis = native.vector_basis(2 * degree + 2)
    theirs = LinearForm(lambda v, w: 0.1 * w.x[2] * v[1] - 0.5 * v[2]).assemble(basis)
    own = load_vector(replace(problem, loads=problem.loads[1:]), level)
    back = np.argsort(native.unknowns)
    assert abs(own - theirs[back]).max() <= 1e-12 * abs(theirs).max()
    if shape == "wedge":
        return  # scikit-fem has no basis on the facets of wedges
    (facets,) = native.facets("side")
    side = FacetBasis(native.mesh, basis.elem, facets=facets, intorder=9)
    push = LinearForm(
        lambda v, w: -(1.0 + 0.01 * w.x[0] + 0.02 * w.x[2]) * sum(w.n[i] * v[i] for i in range(3))
    )
    theirs = push.assemble(side)[back]
    own = load_vector(replace(problem, loads=problem.loads[:1]), level)
    assert abs(own - theirs).max() <= 1e-12 * abs(theirs).max()


@pytest.mark.parametrize(("shape", "degree"), [("triangle", 1), ("triangle", 2)])
def test_the_rule_of_quadrature_is_exact_on_straight_triangles(
    shape: Shape, degree: int, as_skfem: AsSkfem
) -> None:
    problem = skew_panel(material=STEEL)
    level = cut(problem, shape, degree)
    native = as_skfem(level)
    form = linear_elasticity(*lame("plane stress"))
    theirs = ours(native, problem.thickness * form.assemble(native.vector_basis(10)))
    assert largest(stiffness(problem, level) - theirs) <= 1e-12 * largest(theirs)


@pytest.mark.parametrize(
    ("shape", "degree", "bound"), [("quadrilateral", 1, 2e-5), ("quadrilateral", 2, 2e-5)]
)
def test_the_rule_of_quadrature_suffices_on_skew_quadrilaterals(
    shape: Shape, degree: int, bound: float, as_skfem: AsSkfem
) -> None:
    """There the integrand is a fraction: the energy of the solution must not feel the rule."""
    problem = skew_panel(material=STEEL)
    level = cut(problem, shape, degree)
    solution = solve_problem(problem, level)
    native = as_skfem(level)
    form = linear_elasticity(*lame("plane stress"))
    theirs = ours(native, problem.thickness * form.assemble(native.vector_basis(20)))
    u = solution.unknowns
    assert abs(u @ ((solution.assembled - theirs) @ u)) <= bound * abs(u @ (theirs @ u))


@EVERY_CELL
def test_solution(shape: Shape, degree: int, as_skfem: AsSkfem) -> None:
    """The thick cylinder with its weight: pressure on a curved edge, body force, two supports."""
    base = thick_cylinder(material=STEEL)
    problem = Problem(
        base.title,
        base.part,
        base.materials,
        base.supports,
        (*base.loads, BodyForce((0.0, -0.5))),
        base.kind,
        2.5,
    )
    level = cut(problem, shape, degree)
    native = as_skfem(level)
    basis = native.vector_basis(ORDER[shape, degree])
    (facets,) = native.facets("bore")
    bore = FacetBasis(native.mesh, basis.elem, facets=facets, intorder=19)
    pressure = LinearForm(lambda v, w: -21.0 * (w.n[0] * v[0] + w.n[1] * v[1])).assemble(bore)
    weight = LinearForm(lambda v, w: -0.5 * v[1]).assemble(native.vector_basis(2 * degree + 2))
    load = (2.5 * (pressure + weight))[np.argsort(native.unknowns)]
    own = load_vector(problem, level)
    assert abs(own - load).max() <= 1e-12 * abs(load).max()
    matrix = ours(native, 2.5 * linear_elasticity(*lame(problem.kind)).assemble(basis))
    x, y = level.nodes
    held = np.concatenate([2 * np.flatnonzero(abs(x) < 1e-9), 2 * np.flatnonzero(abs(y) < 1e-9) + 1])
    theirs = solve(*condense(matrix, own, D=held))
    u = solve_problem(problem, level).unknowns
    # both direct solvers lose the condition of the stiffness, below 1e4 here, times 1e-16
    assert abs(u - theirs).max() <= 1e-12 * abs(theirs).max()


@EVERY_CELL
def test_in_chunks_or_at_once(shape: Shape, degree: int, monkeypatch: pytest.MonkeyPatch) -> None:
    problem = thick_cylinder(material=STEEL)
    level = cut(problem, shape, degree)
    whole = stiffness(problem, level)
    monkeypatch.setattr(assembly, "ENTRIES", 11 * level.cell_nodes.shape[0] ** 2)
    assert 0 < level.cells % 11 < level.cells, "there are some chunks, and the last is a short one"
    assert largest(stiffness(problem, level) - whole) <= 1e-14 * largest(whole)


@EVERY_CELL
def test_rigid_motions_cost_nothing(shape: Shape, degree: int) -> None:
    problem = skew_panel(material=STEEL)
    level = cut(problem, shape, degree)
    matrix = stiffness(problem, level)
    x, y = level.nodes
    zero, one = np.zeros_like(x), np.ones_like(x)
    for motion in ((one, zero), (zero, one), (-y / 480.0, x / 480.0)):
        u = np.stack(motion, axis=1).ravel()
        assert abs(matrix @ u).max() <= 1e-12 * largest(matrix)


@EVERY_SOLID
def test_rigid_motions_of_solids_cost_nothing(shape: Shape, degree: int) -> None:
    problem = solid()
    level = cut(problem, shape, degree)
    matrix = stiffness(problem, level)
    x, y, z = level.nodes / level.part.size
    zero, one = np.zeros_like(x), np.ones_like(x)
    turns = ((zero, -z, y), (z, zero, -x), (-y, x, zero))
    for motion in ((one, zero, zero), (zero, one, zero), (zero, zero, one), *turns):
        u = np.stack(motion, axis=1).ravel()
        assert abs(matrix @ u).max() <= 1e-12 * largest(matrix)


def test_mass_of_the_body_force(as_skfem: AsSkfem) -> None:
    """Scikit-fem's mass matrix times a uniform force is the load of a body force."""
    problem = Problem(
        "weight", skew_panel(material=STEEL).part, {"body": STEEL}, (), (BodyForce((3.0, -2.0)),)
    )
    level = cut(problem, "quadrilateral", 2)
    native = as_skfem(level)
    mass = BilinearForm(lambda u, v, w: u * v).assemble(native.basis(6))
    nodal = np.empty(level.nodes.shape[1])
    nodal[native.numbers] = sparse.csr_matrix(mass) @ np.ones(len(nodal))
    load = load_vector(problem, level)
    assert load[::2] == pytest.approx(3.0 * nodal, rel=1e-12)
    assert load[1::2] == pytest.approx(-2.0 * nodal, rel=1e-12)
