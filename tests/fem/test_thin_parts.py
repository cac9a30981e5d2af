"""Parts whose cells are twenty times as long as thick, slender ones and strongly graded ones are solved.

Each is solved by multigrid within 60 cycles of one smoother, at any number of cells. The solution is the
direct one: both stop at a relative error far below 1e-6, the digits that rounding leaves to thin parts.
"""

from dataclasses import replace

import numpy as np
import pytest

from convergence.errors import SolvingError
from convergence.fem import equations, multigrid, solvers
from convergence.fem.assembly import stiffness
from convergence.fem.coarsening import coarser, family_lengths
from convergence.fem.equations import Equations
from convergence.fem.gradients import MOST_ITERATIONS
from convergence.fem.held import held_by
from convergence.fem.load_vector import load_vector
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.multigrid import Multigrid
from convergence.fem.part import Part, graded
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.fem.solvers import Factorization, factor_memory
from convergence.models.hollow_cylinder import hollow_cylinder
from convergence.models.thick_cylinder import thick_cylinder

STEEL = Material(210000.0, 0.3)
LEFT = Support("left", x=0.0, y=0.0, boundary="left")


def strip(length: float, height: float, growth: float = 1.0) -> Part:
    """Return a rectangle whose last cells along x are `growth` times as long as the first."""
    points = {"a": (0.0, 0.0), "b": (length, 0.0), "c": (length, height), "d": (0.0, height)}
    return Part(
        points,
        (("a", "b", "c", "d"),),
        {(start, end): graded(points[start], points[end], growth) for start, end in (("a", "b"), ("d", "c"))},
        {"left": (("d", "a"),), "right": (("b", "c"),)},
    )


def bent(part: Part) -> Problem:
    return Problem("strip", part, {"body": STEEL}, (LEFT,), (Traction("right", (0.0, -1.0)),))


def sheet(cells: int) -> Problem:
    """Return a sheet of so many cells of 20 × 20 × 1 along each side, pulled in its plane."""
    part = SolidPart(strip(20.0 * cells, 20.0 * cells), (("bottom", 0.0), ("top", 1.0)))
    held = (replace(LEFT, z=0.0),)
    return Problem("sheet", part, {"body": STEEL}, held, (Traction("right", (1.0, 0.0, 0.0)),), "solid")


def cells(problem: Problem, aspect: float, thickness: int) -> dict[int, int]:
    """Return the cells of a part: `thickness` along its shortest edges, `aspect` times as long elsewhere."""
    lengths = family_lengths(problem.part)
    thinnest = min(lengths.values())
    size = thinnest / thickness
    return {
        family: thickness if length == thinnest else max(1, round(length / (aspect * size)))
        for family, length in lengths.items()
    }


def solved(problem: Problem, level: Mesh) -> tuple[multigrid.Outcome, np.ndarray]:
    """Return what multigrid finds and the displacement found directly."""
    held, matrix, load = held_by(problem, level), stiffness(problem, level), load_vector(problem, level)
    expected = Factorization(matrix, held.numbers).solve(load, held.values)
    return Multigrid(level, matrix, held).solve(load, held.values), expected


WALL = thick_cylinder(inner_radius=100.0, outer_radius=101.0, material=STEEL)
BEAM, GRADED = bent(strip(400.0, 10.0)), bent(strip(100.0, 50.0, 100.0))
TUBE = hollow_cylinder(inner_radius=100.0, outer_radius=102.0, length=160.0, material=STEEL)
THIN = [
    ("wall", WALL, "quadrilateral", cells(WALL, 20.0, 12)),
    ("wall", WALL, "triangle", cells(WALL, 20.0, 12)),
    ("stretched beam", BEAM, "quadrilateral", cells(BEAM, 20.0, 40)),
    ("slender beam", BEAM, "triangle", cells(BEAM, 1.0, 5)),
    ("graded", GRADED, "triangle", dict.fromkeys(family_lengths(GRADED.part), 40)),
    ("tube", TUBE, "hexahedron", cells(TUBE, 20.0, 3)),
    ("sheet", sheet(12), "hexahedron", cells(sheet(12), 20.0, 1)),
    ("sheet", sheet(12), "tetrahedron", cells(sheet(12), 20.0, 1)),
]


@pytest.mark.slow
@pytest.mark.parametrize(
    ("problem", "shape", "counts"), [case[1:] for case in THIN], ids=[f"{c[0]}-{c[2]}" for c in THIN]
)
def test_thin_parts_are_solved(problem: Problem, shape: str, counts: dict[int, int]) -> None:
    level = mesh(problem.part, counts, shape=shape, degree=2)
    assert level.nodes.size > multigrid.LARGEST_COARSEST
    outcome, expected = solved(problem, level)
    assert outcome.converged and outcome.iterations <= MOST_ITERATIONS
    assert np.abs(outcome.u - expected).max() <= 1e-6 * np.abs(expected).max()


@pytest.mark.slow
@pytest.mark.parametrize("shape", ["quadrilateral", "triangle"])
def test_iterations_do_not_grow_on_a_thin_wall(shape: str) -> None:
    """By a fifth at most from 12 to 48 cells through the wall, 9 thousand to 150 thousand unknowns."""
    iterations = []
    for through in (12, 24, 48):
        level = mesh(WALL.part, cells(WALL, 20.0, through), shape=shape, degree=2)
        held, matrix = held_by(WALL, level), stiffness(WALL, level)
        outcome = Multigrid(level, matrix, held).solve(load_vector(WALL, level), held.values)
        assert outcome.converged
        iterations.append(outcome.iterations)
    assert max(iterations) <= 1.2 * iterations[0]


def test_the_short_direction_is_joined_first() -> None:
    lengths = {0: 100.0, 4: 10.0}
    assert coarser(lengths, {0: 10, 4: 10}) == {0: 10, 4: 5}
    assert coarser(lengths, {0: 10, 4: 1}) == {0: 5, 4: 1}
    assert coarser(lengths, {0: 9, 4: 2}) == {0: 9, 4: 1}


def test_cells_of_a_thin_part_are_not_made_much_longer_than_thick() -> None:
    lengths = {0: 100.0, 4: 1.0}
    assert coarser(lengths, {0: 40, 4: 1}) == {0: 20, 4: 1}
    assert coarser(lengths, {0: 20, 4: 1}) is None
    assert coarser(lengths, {0: 1, 4: 1}) is None


def test_lengths_of_layers_are_their_thickness() -> None:
    assert sorted(family_lengths(sheet(2).part).values()) == pytest.approx([1.0, 40.0, 40.0])


@pytest.mark.parametrize(("shape", "across"), [("hexahedron", 5), ("tetrahedron", 5)])
def test_memory_of_a_factor_is_foretold(shape: str, across: int) -> None:
    """Within a factor of 2.5 of 12 bytes an entry of SuperLU's two factors."""
    part = SolidPart(strip(50.0, 50.0), (("bottom", 0.0), ("top", 50.0)))
    held = (replace(LEFT, z=0.0),)
    block = Problem("block", part, {"body": STEEL}, held, (), "solid")
    level = mesh(part, dict.fromkeys(family_lengths(part), across), shape=shape, degree=2)
    factor = Factorization(stiffness(block, level), held_by(block, level).numbers)
    lu = solvers.splu(factor.reduced, permc_spec="MMD_AT_PLUS_A", options={"SymmetricMode": True})
    assert 0.4 < factor_memory(factor.reduced) / (12.0 * lu.nnz / 1e6) < 2.5


def test_a_factor_that_does_not_fit_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    """Where multigrid is given up, and memory is short."""
    level = mesh(GRADED.part, dict.fromkeys(family_lengths(GRADED.part), 30), shape="triangle", degree=2)
    held, matrix, load = held_by(GRADED, level), stiffness(GRADED, level), load_vector(GRADED, level)
    monkeypatch.setitem(equations.MOST_DIRECT, 2, 0)
    monkeypatch.setitem(multigrid.SMOOTHERS, 2, ((1, 2.0),))
    monkeypatch.setattr(solvers, "LEAST_LARGE", 5000)
    monkeypatch.setattr(solvers, "allowed_memory", lambda: 100.0)
    monkeypatch.setattr(solvers, "peak_memory", lambda: 99.0)
    with pytest.raises(
        SolvingError, match=r"direct solution of 7,\d+ unknowns .* memory where 1.0 MB are left"
    ):
        Equations(level, matrix, held).solve(load, held.values)
