"""Multigrid against the direct solution; iterations under refinement; what happens where it fails.

Both solutions stop at a residual of 1e-10 of the load or below. The energy differs by the square of the
error, the displacement by the error itself; 1e-8 and 1e-7 leave room for the conditioning of the parts.
"""

from collections.abc import Mapping
from dataclasses import replace
from itertools import pairwise, product

import numpy as np
import pytest
from scipy import sparse

from convergence.errors import SolvingError
from convergence.fem import equations, gradients, multigrid
from convergence.fem.assembly import stiffness
from convergence.fem.equations import Equations
from convergence.fem.grid import Grids
from convergence.fem.held import Held, boundary_nodes
from convergence.fem.load_vector import load_vector
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.multigrid import Multigrid
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.fem.solvers import Factorization, residual_limit
from convergence.fem.transfer import prolongation
from convergence.models.l_bracket import l_bracket
from convergence.models.lug import lug
from convergence.models.perforated_plate import perforated_plate
from convergence.models.skew_panel import skew_panel
from convergence.models.tapered_arm import tapered_arm

pytestmark = pytest.mark.slow

STEEL = Material(210000.0, 0.3)
EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2)))
)
PARTS = {
    "plate": (perforated_plate(material=STEEL), {1: 14, 2: 7}),
    "lug": (lug(material=STEEL), {1: 8, 2: 4}),
    "bracket": (l_bracket(material=STEEL), {1: 9, 2: 5}),
}
PANEL = skew_panel(material=STEEL)
# two parallelograms that share an edge, one of them turned: every block's map is affine
TWO = Part(
    points={"a": (0, 0), "b": (3, 1), "c": (4, 4), "d": (1, 3), "e": (5, 5), "f": (2, 4)},
    blocks=(("a", "b", "c", "d"), ("c", "e", "f", "d")),
)
System = tuple[Mesh, sparse.csr_matrix, np.ndarray, Held]


def system(problem: Problem, counts: Mapping[int, int], shape: str, degree: int) -> System:
    """Return the mesh, K, f, and what is held of a problem."""
    level = mesh(problem.part, counts, shape=shape, degree=degree)
    held: dict[int, float] = {}
    for support in problem.supports:
        assert support.boundary is not None
        for component, value in enumerate((support.x, support.y)):
            if value is not None:
                numbers = 2 * boundary_nodes(level, support.boundary) + component
                held |= dict.fromkeys(numbers.tolist(), value)
    numbers, values = np.array(sorted(held)), np.array([held[n] for n in sorted(held)])
    return level, stiffness(problem, level), load_vector(problem, level), Held(numbers, values, {}, None)


def direct(matrix: sparse.csr_matrix, load: np.ndarray, held: Held) -> np.ndarray:
    return Factorization(matrix, held.numbers).solve(load, held.values)


def divided(problem: Problem, divisions: int) -> dict[int, int]:
    return problem.part.divisions(size=None, divisions=divisions)


def assert_agree(matrix: sparse.csr_matrix, found: np.ndarray, expected: np.ndarray) -> None:
    energies = [u @ (matrix @ u) for u in (found, expected)]
    assert energies[0] == pytest.approx(energies[1], rel=1e-8)
    assert np.abs(found - expected).max() <= 1e-7 * np.abs(expected).max()


@EVERY_CELL
@pytest.mark.parametrize("name", PARTS)
def test_the_solution_is_the_direct_one(name: str, shape: str, degree: int) -> None:
    problem, divisions = PARTS[name]
    level, matrix, load, held = system(problem, divided(problem, divisions[degree]), shape, degree)
    assert len(load) > multigrid.LARGEST_COARSEST
    outcome = Multigrid(level, matrix, held).solve(load, held.values)
    assert outcome.converged and outcome.iterations <= 40
    assert_agree(matrix, outcome.u, direct(matrix, load, held))


@EVERY_CELL
@pytest.mark.parametrize(
    ("problem", "coarsest"), [(PARTS["plate"][0], 12), (PANEL, 40)], ids=["plate", "panel"]
)
def test_iterations_stay_bounded(problem: Problem, coarsest: int, shape: str, degree: int) -> None:
    """Under halving of the cells; the coarsest mesh has two levels at least."""
    iterations = []
    for divisions in (coarsest, 2 * coarsest, 4 * coarsest):
        level, matrix, load, held = system(problem, divided(problem, divisions // degree), shape, degree)
        outcome = Multigrid(level, matrix, held).solve(load, held.values)
        assert outcome.converged
        iterations.append(outcome.iterations)
    assert max(iterations) <= 40
    assert all(fine < 1.5 * coarse for coarse, fine in pairwise(iterations))


@EVERY_CELL
def test_cells_need_not_be_even_in_number(shape: str, degree: int) -> None:
    problem = PARTS["plate"][0]
    counts = {family: count + 1 - count % 2 for family, count in divided(problem, 27 // degree).items()}
    level, matrix, load, held = system(problem, counts, shape, degree)
    outcome = Multigrid(level, matrix, held).solve(load, held.values)
    assert outcome.converged and outcome.iterations <= 40
    assert_agree(matrix, outcome.u, direct(matrix, load, held))


def test_prescribed_displacements_are_kept() -> None:
    level, matrix, load, held = system(PANEL, divided(PANEL, 45), "quadrilateral", 1)
    held = replace(held, values=1e-3 * level.nodes.T.ravel()[held.numbers])
    outcome = Multigrid(level, matrix, held).solve(load, held.values)
    assert outcome.converged and np.array_equal(outcome.u[held.numbers], held.values)
    assert_agree(matrix, outcome.u, direct(matrix, load, held))


def test_no_load_is_no_displacement() -> None:
    level, matrix, load, held = system(PANEL, divided(PANEL, 4), "triangle", 1)
    outcome = Multigrid(level, matrix, held).solve(0.0 * load, held.values)
    assert outcome.converged and outcome.iterations == 0 and not outcome.u.any()


@pytest.mark.parametrize("missing", [1, 10])
def test_an_unconverged_solution_is_never_used(missing: int, monkeypatch: pytest.MonkeyPatch) -> None:
    level, matrix, load, held = system(PANEL, divided(PANEL, 45), "quadrilateral", 1)
    most = Multigrid(level, matrix, held).solve(load, held.values).iterations - missing
    monkeypatch.setattr(gradients, "MOST_ITERATIONS", most)
    monkeypatch.setitem(multigrid.SMOOTHERS, 2, multigrid.SMOOTHERS[2][:1])
    monkeypatch.setitem(equations.MOST_DIRECT, 2, 0)
    outcome = Multigrid(level, matrix, held).solve(load, held.values)
    assert not outcome.converged and outcome.iterations == most
    used = Equations(level, matrix, held).solve(load, held.values)
    assert np.array_equal(used, direct(matrix, load, held))


def test_many_unknowns_are_solved_by_multigrid(monkeypatch: pytest.MonkeyPatch) -> None:
    level, matrix, load, held = system(PANEL, divided(PANEL, 45), "quadrilateral", 1)
    few = Equations(level, matrix, held).solve(load, held.values)
    assert np.array_equal(few, direct(matrix, load, held))
    monkeypatch.setitem(equations.MOST_DIRECT, 2, len(few) - 1)
    many = Equations(level, matrix, held).solve(load, held.values)
    assert np.array_equal(many, Multigrid(level, matrix, held).solve(load, held.values).u)


@pytest.mark.parametrize("divisions", [20, 60])
def test_a_piece_that_nothing_holds_is_refused(divisions: int, monkeypatch: pytest.MonkeyPatch) -> None:
    """Two separate pieces, one of them held: directly on the coarsest level, and by cycles above it."""
    square = (("a", (0, 0)), ("b", (1, 0)), ("c", (1, 1)), ("d", (0, 1)))
    points = {f"{name}{piece}": (x + 3 * piece, y) for piece in (0, 1) for name, (x, y) in square}
    part = Part(
        points=points,
        blocks=(("a0", "b0", "c0", "d0"), ("a1", "b1", "c1", "d1")),
        boundaries={"left": (("d0", "a0"),)},
    )
    problem = Problem("pieces", part, {"body": STEEL}, (Support("left", 0.0, 0.0, boundary="left"),), ())
    level, matrix, load, held = system(problem, divided(problem, divisions), "quadrilateral", 1)
    load[2 * level.vertices["c1"]] = 1.0
    monkeypatch.setitem(equations.MOST_DIRECT, 2, 0)
    assert not Multigrid(level, matrix, held).solve(load, held.values).converged
    with pytest.raises(SolvingError, match=r"singular|leaves a residual"):
        Equations(level, matrix, held).solve(load, held.values)


def test_a_slender_part_is_solved() -> None:
    """An aspect of 40, 200 cells long: rounding leaves eps × 40² × 200², about 1e-8, to the displacement.

    The condition of bending is the square of both; 1e-6 leaves room for its factor.
    """
    arm = tapered_arm(depth_root=40.0, depth_tip=20.0, material=STEEL)
    level, matrix, load, held = system(arm, divided(arm, 10), "quadrilateral", 1)
    outcome = Multigrid(level, matrix, held).solve(load, held.values)
    assert outcome.converged
    expected = direct(matrix, load, held)
    assert np.abs(outcome.u - expected).max() <= 1e-6 * np.abs(expected).max()


def test_the_residual_accepted() -> None:
    """1e-8 of the load for a stiff part; what rounding leaves for a soft one, up to 1e-5."""
    matrix = stiffness(PANEL, mesh(PANEL.part, divided(PANEL, 2), shape="triangle", degree=1))
    right = np.ones(matrix.shape[0])
    size = float(np.linalg.norm(right))
    assert residual_limit(matrix, 0.0 * right, size) == pytest.approx(1e-8 * size)
    assert residual_limit(matrix, 1e30 * right, size) == pytest.approx(1e-5 * size)


@pytest.mark.parametrize(("coarse", "fine"), [(2, 4), (2, 3), (3, 5), (1, 1), (1, 2)])
def test_linear_fields_pass_between_numbers_of_cells(coarse: int, fine: int) -> None:
    """Places are linear in an affine block's parameters, so they are carried exactly, to round-off."""
    counts = [dict.fromkeys(TWO.families.values(), n) for n in (coarse, fine)]
    low, high = (mesh(TWO, count, shape="quadrilateral", degree=1) for count in counts)
    up = prolongation(TWO, (counts[0], 1), (counts[1], 1))
    np.testing.assert_allclose(up @ low.nodes.T, high.nodes.T, atol=1e-14)


@pytest.mark.parametrize(("shape", "degree"), [("quadrilateral", 1), ("quadrilateral", 2)])
def test_coarse_fields_are_fine_fields_where_the_meshes_are_nested(shape: str, degree: int) -> None:
    """On straight sides the projected matrix is the coarse mesh's own, to round-off.

    Not so on triangles, between which fields pass bilinear in each block.
    """
    counts = [dict.fromkeys(TWO.families.values(), n) for n in (3, 6 // degree)]
    low, high = (
        mesh(TWO, count, shape=shape, degree=k) for count, k in zip(counts, (1, degree), strict=True)
    )
    up = prolongation(TWO, (counts[0], 1), (counts[1], degree))
    both = sparse.kron(up, sparse.identity(2))
    problem = Problem("two", TWO, {"body": STEEL}, (), ())
    own, projected = stiffness(problem, low), both.T @ stiffness(problem, high) @ both
    np.testing.assert_allclose(projected.toarray(), own.toarray(), atol=1e-12 * STEEL.young)


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
def test_linear_fields_pass_from_degree_1_to_degree_2(shape: str) -> None:
    """A mesh of degree 2 with straight sides has its nodes half-way between its vertices."""
    counts = dict.fromkeys(TWO.families.values(), 3)
    low, high = (mesh(TWO, counts, shape=shape, degree=degree) for degree in (1, 2))
    up = prolongation(TWO, (counts, 1), (counts, 2))
    np.testing.assert_allclose(up @ low.nodes.T, high.nodes.T, atol=1e-14)


def test_the_grids_are_those_of_the_mesh() -> None:
    counts = dict.fromkeys(TWO.families.values(), 3)
    level = mesh(TWO, counts, shape="quadrilateral", degree=1)
    for index, ids in enumerate(Grids(TWO, level.counts).blocks):
        steps = [np.linspace(0.0, 1.0, n) for n in ids.shape]
        np.testing.assert_allclose(level.nodes[:, ids], TWO.block(index, *steps), atol=1e-14)
