"""Displacements of files as solutions: what was written by one program is read as if it were solved here."""

from collections.abc import Callable
from pathlib import Path

import meshio
import numpy as np
import pytest

from convergence import rooms
from convergence.bodies.boundaries import given_mesh
from convergence.bodies.conventions import KINDS, positions
from convergence.bodies.field_names import displacement
from convergence.bodies.field_solution import field_solution, imbalance
from convergence.bodies.file_mesh import read_file_mesh
from convergence.fem import assembly
from convergence.fem.assembly import stiffness, stretching
from convergence.fem.given_part import GivenPart
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve

STEEL = Material(210000.0, 0.3)
SAME = 1e-12  # round-off of sums in another order
CELLS = [
    ("lug", "triangle", 1),
    ("lug", "triangle", 2),
    ("lug", "quadrilateral", 1),
    ("lug", "quadrilateral", 2),
    ("solid_lug", "tetrahedron", 1),
    ("solid_lug", "tetrahedron", 2),
    ("solid_lug", "hexahedron", 2),
    ("solid_lug", "wedge", 2),
]


def solved(model: str, shape: str, degree: int) -> Solution:
    problem: Problem = rooms.find("models", model)(material=STEEL)
    counts = problem.part.divisions(size=None, divisions=1)
    return solve(problem, mesh(problem.part, counts, shape=shape, degree=degree))


def written(solution: Solution, path: Path) -> Path:
    """Write mesh and displacement as another program would: three coordinates, its own order of nodes."""
    made = solution.mesh
    cells = np.empty_like(made.cell_nodes)
    cells[positions(made.shape, made.degree)] = made.cell_nodes
    kinds = ((name, kind) for name, kind in KINDS.items() if kind.nodes == len(cells))
    name = next(name for name, kind in kinds if (kind.shape, kind.degree) == (made.shape, made.degree))
    space = np.zeros((2, made.nodes.shape[1], 3))
    space[0, :, : made.dimension], space[1, :, : made.dimension] = made.nodes.T, solution.displacement.T
    meshio.write(path, meshio.Mesh(space[0], [(name, cells.T)], point_data={"u": space[1]}))
    return path


def read(path: Path, problem: Problem) -> Solution:
    found = read_file_mesh(path)
    made = given_mesh(found, found.groups[0], {})
    part = GivenPart([made])
    own = Problem("", part, {"body": STEEL}, (), (), problem.kind, problem.thickness)
    level = mesh(part, {0: 0}, shape=made.shape, degree=made.degree)
    return field_solution(own, level, displacement(found))


@pytest.mark.parametrize(("model", "shape", "degree"), CELLS)
def test_what_we_solved_is_read_back_the_same(model: str, shape: str, degree: int, tmp_path: Path) -> None:
    """Peak, displacement and energy to round-off; every node of the cells in its place."""
    own = solved(model, shape, degree)
    found = read(written(own, tmp_path / "field.vtu"), own.problem)
    assert found.mesh.cells == own.mesh.cells and found.mesh.h == pytest.approx(own.mesh.h, rel=SAME)
    for measure, arguments in (
        ("peak_stress", {"component": "von_mises"}),
        ("peak_stress", {"component": "xy", "recovery": "direct"}),
        ("largest_displacement", {}),
        ("strain_energy", {}),
    ):
        function: Callable[..., object] = rooms.find("quantities", measure)
        here, there = (function(solution, **arguments) for solution in (own, found))
        a, b = (float(getattr(value, "value", value)) for value in (here, there))
        assert b == pytest.approx(a, rel=1e-10 if measure == "peak_stress" else SAME)


@pytest.mark.parametrize(("model", "shape", "degree"), CELLS[1::3])
def test_forces_without_a_stiffness(model: str, shape: str, degree: int) -> None:
    """K u summed cell by cell is that of the assembled matrix, to round-off."""
    own = solved(model, shape, degree)
    expected = stiffness(own.problem, own.mesh) @ own.unknowns
    forces = stretching(own.problem, own.mesh, own.unknowns)
    assert np.abs(forces - expected).max() <= SAME * np.abs(expected).max()


def test_no_stiffness_is_assembled(monkeypatch: pytest.MonkeyPatch) -> None:
    own = solved("lug", "triangle", 2)

    def refuse(*arguments: object) -> None:
        raise AssertionError("assembled")

    monkeypatch.setattr(assembly, "_blocks", refuse)
    found = field_solution(own.problem, own.mesh, own.displacement)
    assert found.energy == pytest.approx(own.energy, rel=SAME)
    load = float(np.abs(own.load).sum())
    assert found.reaction("base") == pytest.approx(own.reaction("base"), abs=1e-9 * load)


def test_the_equations_hold_for_what_we_solved_and_for_nothing_else() -> None:
    """The limit is that of the solver; a load of another size, or a softer material, is seen at once."""
    own = solved("lug", "quadrilateral", 2)
    found = imbalance(field_solution(own.problem, own.mesh, own.displacement))
    assert max(found.values()) <= 1e-8
    wrong = imbalance(field_solution(own.problem, own.mesh, 1.2 * own.displacement))
    assert wrong["energy"] == pytest.approx(0.2 / 1.2, rel=1e-6)
    assert 0.1 < wrong["resultant"] <= 0.2  # over the sum of nodal forces, which do not all point one way
