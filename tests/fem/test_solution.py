"""Supports and what they answer: loose parts, shared nodes, prescribed values, forces and moments by hand."""

from dataclasses import replace
from itertools import product

import numpy as np
import pytest
from scipy import sparse

from convergence.errors import SolvingError, Unsuitable
from convergence.fem.held import boundary_nodes, support_nodes
from convergence.fem.loads import Load, Traction
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.fem.solution import solve
from convergence.fem.solvers import Factorization

EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), list(product(("triangle", "quadrilateral"), (1, 2)))
)
BAR = Part(
    points={"a": (0.0, 0.0), "b": (100.0, 0.0), "c": (100.0, 40.0), "d": (0.0, 40.0)},
    blocks=(("a", "b", "c", "d"),),
    boundaries={"left": (("d", "a"),), "right": (("b", "c"),), "lower": (("a", "b"),)},
)
THICKNESS = 5.0
PULL = (Traction("right", (10.0, 0.0)),)
BALANCED = (*PULL, Traction("left", (-10.0, 0.0)))
NO = "the supports do not hold the part: it can still "


def bar(supports: tuple[Support, ...], loads: tuple[Load, ...] = PULL, poisson: float = 0.3) -> Problem:
    return Problem("bar", BAR, {"body": Material(200000.0, poisson)}, supports, loads, thickness=THICKNESS)


def level(shape: str, degree: int, divisions: int = 2) -> Mesh:
    return mesh(BAR, BAR.divisions(size=None, divisions=divisions), shape=shape, degree=degree)


LOOSE = [
    ((Support("left", x=0.0, boundary="left"),), PULL, "move along y"),
    ((Support("lower", y=0.0, boundary="lower"),), BALANCED, "move along x"),
    ((Support("pin", x=0.0, y=0.0, point="a"),), BALANCED, "turn"),
    ((Support("pin", x=0.0, y=0.0, point="a"), Support("far", x=0.0, point="b")), PULL, "turn"),
    ((Support("one", y=0.0, point="a"), Support("two", y=0.0, point="b")), BALANCED, "move along x"),
]


@EVERY_CELL
@pytest.mark.parametrize(("supports", "loads", "way"), LOOSE)
def test_a_loose_part_is_refused_even_where_its_loads_balance(
    supports: tuple, loads: tuple, way: str, shape: str, degree: int
) -> None:
    """A balanced load leaves no residual that would betray the arbitrary motion."""
    with pytest.raises(SolvingError) as caught:
        solve(bar(supports, loads), level(shape, degree))
    assert str(caught.value) == f"{NO}{way}; hold it there"


@EVERY_CELL
def test_three_single_supports_are_enough(shape: str, degree: int) -> None:
    """Pinned in one corner, rolling in another: the statically determined bar, no reaction along y."""
    supports = (Support("pin", x=0.0, y=0.0, point="a"), Support("roller", y=0.0, point="b"))
    solution = solve(bar(supports, BALANCED), level(shape, degree))
    for support in ("pin", "roller"):
        assert solution.reaction(support) == pytest.approx(0.0, abs=1e-8)
    # Hooke: 10 / 200000 over 100 mm
    assert solution.displacement[0, solution.mesh.vertices["c"]] == pytest.approx(0.005, rel=1e-9)


@EVERY_CELL
def test_reactions_of_a_lever_by_hand(shape: str, degree: int) -> None:
    """A shear of 3 MPa on the left end and a pull of 2 MPa on the right one, on two point supports."""
    supports = (
        Support("heel", x=0.0, y=0.0, point="a"),
        Support("toe", y=0.0, point="b"),
    )
    loads = (Traction("left", (0.0, 3.0)), Traction("right", (2.0, 0.0)))
    solution = solve(bar(supports, loads), level(shape, degree))
    up, along = 3.0 * 40.0 * THICKNESS, 2.0 * 40.0 * THICKNESS
    # moment about the heel: shear acts at x = 0, the pull at y = 20: toe × 100 = along × 20
    toe = along * 20.0 / 100.0
    assert solution.reaction("toe")[:2] == pytest.approx([0.0, toe], abs=1e-8)
    assert solution.reaction("heel")[:2] == pytest.approx([-along, -up - toe], abs=1e-8)
    assert solution.reaction("heel", about=(0.0, 0.0))[2] == pytest.approx(0.0, abs=1e-6)
    assert solution.reaction("toe", about=(0.0, 0.0))[2] == pytest.approx(100.0 * toe, rel=1e-9)
    assert solution.reaction("heel", about=(100.0, 0.0))[2] == pytest.approx(100.0 * (up + toe), rel=1e-9)


@EVERY_CELL
def test_of_two_supports_on_a_node_the_first_keeps_it(shape: str, degree: int) -> None:
    """Contradicting values do not add up or average: the order in the problem decides, and says so."""
    still = Support("left", x=0.0, y=0.0, boundary="left")
    moved = Support("lower", y=0.25, boundary="lower")
    mesh_ = level(shape, degree)
    corner = mesh_.vertices["a"]
    first = solve(bar((still, moved)), mesh_)
    assert first.displacement[1, corner] == 0.0
    second = solve(bar((moved, still)), mesh_)
    assert second.displacement[1, corner] == 0.25
    for solution in (first, second):
        numbers = np.concatenate(list(solution.held.by_support.values()))
        assert len(numbers) == len(set(numbers))
        assert solution.resultant(solution.load + solution.reactions) == pytest.approx(0.0, abs=1e-6)


def test_supports_act_on_their_nodes() -> None:
    mesh_ = level("triangle", 2)
    assert support_nodes(Support("pin", x=0.0, point="c"), mesh_) == [mesh_.vertices["c"]]
    left = support_nodes(Support("left", x=0.0, boundary="left"), mesh_)
    assert sorted(left) == sorted(boundary_nodes(mesh_, "left"))
    assert sorted(left) == sorted(np.flatnonzero(mesh_.nodes[0] == 0.0))


def test_a_support_that_holds_nothing_is_refused() -> None:
    supports = (Support("left", x=0.0, y=0.0, boundary="left"), Support("idle", boundary="right"))
    with pytest.raises(Unsuitable, match="idle None: a support that holds x, y, z or the normal"):
        solve(bar(supports), level("triangle", 1))


@EVERY_CELL
def test_prescribed_displacement_by_number_and_by_function(shape: str, degree: int) -> None:
    """Uniform strain of 1e-4 along x with nu = 0: force E ε A by hand, energy half of force × path."""
    ends = (
        Support("left", x=0.0, boundary="left"),
        Support("right", x=lambda x, y: 1e-4 * x, boundary="right"),
        Support("pin", y=0.0, point="a"),
    )
    solution = solve(bar(ends, (), poisson=0.0), level(shape, degree))
    force = 200000.0 * 1e-4 * 40.0 * THICKNESS
    assert solution.reaction("right", about=(100.0, 20.0)) == pytest.approx([force, 0.0, 0.0], abs=1e-6)
    assert solution.reaction("left")[0] == pytest.approx(-force, rel=1e-9)
    assert solution.energy == pytest.approx(0.5 * force * 0.01, rel=1e-9)
    assert solution.work == pytest.approx(solution.energy, rel=1e-12)
    number = replace(ends[1], x=0.01)
    same = solve(bar((ends[0], number, ends[2]), (), poisson=0.0), level(shape, degree))
    assert same.unknowns == pytest.approx(solution.unknowns, abs=1e-12)


def test_a_part_that_is_held_everywhere_needs_no_solver() -> None:
    ends = (Support("left", x=0.0, y=0.0, boundary="left"), Support("right", x=0.02, y=0.0, boundary="right"))
    counts = dict.fromkeys(BAR.families.values(), 1)
    solution = solve(bar(ends, ()), mesh(BAR, counts, shape="quadrilateral", degree=1))
    assert solution.displacement[0].max() == 0.02 and solution.energy > 0.0


def test_no_load_is_no_displacement() -> None:
    solution = solve(bar((Support("left", x=0.0, y=0.0, boundary="left"),), ()), level("triangle", 2))
    assert not solution.unknowns.any() and solution.energy == 0.0


def test_a_singular_matrix_and_a_poor_solution_are_refused() -> None:
    """A part in two pieces passes the test of rigid motion; the matrix tells."""
    none = np.array([], dtype=int)
    with pytest.raises(SolvingError, match="the stiffness matrix is singular"):
        Factorization(sparse.csr_matrix((2, 2)), none)
    nearly = sparse.csr_matrix(np.array([[1.0, 1.0], [1.0, 1.0 + 1e-16]]))
    with pytest.raises(SolvingError, match=r"stiffness matrix is singular|leaves a residual of"):
        Factorization(nearly, none).solve(np.array([1.0, 0.0]), np.array([]))
