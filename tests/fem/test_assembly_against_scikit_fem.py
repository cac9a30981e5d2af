"""Stiffness, load and solution against scikit-fem's own forms on the same mesh: an independent assembly."""

from itertools import product
from typing import Any

import numpy as np
import pytest
from scipy import sparse
from skfem import Basis, BilinearForm, ElementVector, FacetBasis, LinearForm, condense, solve
from skfem.models.elasticity import linear_elasticity

from convergence.fem import assembly
from convergence.fem.assembly import STIFFNESS_ORDER, load_vector, stiffness
from convergence.fem.material import Material, PlaneKind
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.problem import BodyForce, Problem
from convergence.fem.solution import solve as solve_problem
from convergence.models.skew_panel import skew_panel
from convergence.models.thick_cylinder import thick_cylinder

STEEL = Material(210000.0, 0.3)
EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2)))
)


def lame(kind: PlaneKind) -> tuple[float, float]:
    """Lamé's constants of the plane: in plane stress λ becomes 2 λ μ / (λ + 2 μ)."""
    young, nu = STEEL.young, STEEL.poisson
    lam, mu = young * nu / ((1 + nu) * (1 - 2 * nu)), young / (2 * (1 + nu))
    return (lam if kind == "plane strain" else 2 * lam * mu / (lam + 2 * mu)), mu


def cut(problem: Problem, shape: str, degree: int) -> Mesh:
    counts = problem.part.divisions(size=None, divisions=3)
    return mesh(problem.part, counts, shape=shape, degree=degree)


def vector_basis(level: Mesh, order: int) -> Basis:
    basis = Basis(level.skfem, ElementVector(level.skfem.elem()), intorder=order)
    places = basis.doflocs
    assert places[:, ::2] == pytest.approx(places[:, 1::2]), "components alternate"
    assert places[:, ::2] == pytest.approx(level.nodes), "nodes are numbered alike"
    return basis


def largest(matrix: Any) -> float:
    return float(abs(matrix).max())


@EVERY_CELL
@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
@pytest.mark.parametrize("model", [skew_panel, thick_cylinder])
def test_stiffness(model: Any, kind: PlaneKind, shape: str, degree: int) -> None:
    """Straight skew cells and cells with curved edges, by the same rule of quadrature: round-off only."""
    problem = model(material=STEEL, kind=kind)
    level = cut(problem, shape, degree)
    basis = vector_basis(level, STIFFNESS_ORDER[shape, degree])
    own = stiffness(problem, level)
    theirs = problem.thickness * linear_elasticity(*lame(kind)).assemble(basis)
    assert largest(own - theirs) <= 1e-12 * largest(theirs)
    assert largest(own - own.T) <= 1e-12 * largest(own)


@pytest.mark.parametrize(("shape", "degree"), [("triangle", 1), ("triangle", 2)])
def test_the_rule_of_quadrature_is_exact_on_straight_triangles(shape: str, degree: int) -> None:
    problem = skew_panel(material=STEEL)
    level = cut(problem, shape, degree)
    theirs = problem.thickness * linear_elasticity(*lame("plane stress")).assemble(vector_basis(level, 10))
    assert largest(stiffness(problem, level) - theirs) <= 1e-12 * largest(theirs)


@pytest.mark.parametrize(
    ("shape", "degree", "bound"), [("quadrilateral", 1, 2e-5), ("quadrilateral", 2, 2e-5)]
)
def test_the_rule_of_quadrature_suffices_on_skew_quadrilaterals(
    shape: str, degree: int, bound: float
) -> None:
    """There the integrand is a fraction: the energy of the solution must not feel the rule."""
    problem = skew_panel(material=STEEL)
    level = cut(problem, shape, degree)
    solution = solve_problem(problem, level)
    theirs = problem.thickness * linear_elasticity(*lame("plane stress")).assemble(vector_basis(level, 20))
    u = solution.unknowns
    assert abs(u @ ((solution.stiffness - theirs) @ u)) <= bound * abs(u @ (theirs @ u))


@EVERY_CELL
def test_solution(shape: str, degree: int) -> None:
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
    basis = vector_basis(level, STIFFNESS_ORDER[shape, degree])
    bore = FacetBasis(level.skfem, basis.elem, facets=level.facets["bore"], intorder=19)
    pressure = LinearForm(lambda v, w: -21.0 * (w.n[0] * v[0] + w.n[1] * v[1])).assemble(bore)
    weight = LinearForm(lambda v, w: -0.5 * v[1]).assemble(basis)
    load = 2.5 * (pressure + weight)
    own = load_vector(problem, level)
    # the weight's own rule has degree 2p, exact to the terms that curved cells add
    assert abs(own - load).max() <= 1e-6 * abs(load).max()
    matrix = 2.5 * linear_elasticity(*lame(problem.kind)).assemble(basis)
    x, y = level.nodes
    held = np.concatenate([2 * np.flatnonzero(abs(x) < 1e-9), 2 * np.flatnonzero(abs(y) < 1e-9) + 1])
    theirs = solve(*condense(matrix, own, D=held))
    u = solve_problem(problem, level).unknowns
    # both direct solvers lose the condition of the stiffness, below 1e4 here, times 1e-16
    assert abs(u - theirs).max() <= 1e-12 * abs(theirs).max()


@EVERY_CELL
def test_in_chunks_or_at_once(shape: str, degree: int, monkeypatch: pytest.MonkeyPatch) -> None:
    problem = thick_cylinder(material=STEEL)
    level = cut(problem, shape, degree)
    whole = stiffness(problem, level)
    monkeypatch.setattr(assembly, "CHUNK", 11)
    assert level.cells % 11, "the last chunk is a short one"
    assert largest(stiffness(problem, level) - whole) <= 1e-14 * largest(whole)


@EVERY_CELL
def test_rigid_motions_cost_nothing(shape: str, degree: int) -> None:
    problem = skew_panel(material=STEEL)
    level = cut(problem, shape, degree)
    matrix = stiffness(problem, level)
    x, y = level.nodes
    zero, one = np.zeros_like(x), np.ones_like(x)
    for motion in ((one, zero), (zero, one), (-y / 480.0, x / 480.0)):
        u = np.stack(motion, axis=1).ravel()
        assert abs(matrix @ u).max() <= 1e-12 * largest(matrix)


def test_mass_of_the_body_force() -> None:
    """Scikit-fem's mass matrix times a uniform force is the load of a body force."""
    problem = Problem(
        "weight", skew_panel(material=STEEL).part, {"body": STEEL}, (), (BodyForce((3.0, -2.0)),)
    )
    level = cut(problem, "quadrilateral", 2)
    mass = BilinearForm(lambda u, v, w: u * v).assemble(Basis(level.skfem, level.skfem.elem(), intorder=6))
    nodal = sparse.csr_matrix(mass) @ np.ones(level.nodes.shape[1])
    load = load_vector(problem, level)
    assert load[::2] == pytest.approx(3.0 * nodal, rel=1e-12)
    assert load[1::2] == pytest.approx(-2.0 * nodal, rel=1e-12)
