"""The locking check speaks up where linear cells are too stiff, and only there."""

from collections.abc import Callable

import numpy as np
import pytest

from convergence.checks.locking import locking
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.solution import Solution, solve
from convergence.models.thick_cylinder import thick_cylinder
from convergence.results import Facts, Ladder


def cylinder(poisson: float, degree: int, kind: str = "plane strain") -> Solution:
    problem = thick_cylinder(material=Material(210000.0, poisson), kind=kind)  # type: ignore[arg-type]
    counts = problem.part.divisions(size=None, divisions=2)
    return solve(problem, mesh(problem.part, counts, shape="triangle", degree=degree))


def share_of_exact(solution: Solution) -> float:
    exact = solution.problem.exact
    assert exact is not None
    moved = exact.displacement(np.array(30.0), np.array(0.0))[0]
    return float(solution.displacement[0, solution.mesh.vertices["bore_x"]] / moved)


@pytest.mark.parametrize(
    ("poisson", "degree", "kind", "passed"),
    [
        (0.3, 1, "plane strain", True),
        (0.49, 1, "plane strain", False),
        (0.4999, 1, "plane strain", False),
        (0.4999, 2, "plane strain", True),
        (0.4999, 1, "plane stress", True),
    ],
)
def test_locking(poisson: float, degree: int, kind: str, passed: bool, recorded: Callable) -> None:
    """Where it passes the coarse displacement is within 15 % of Lamé's, where it fails below 50 %."""
    solution = cylinder(poisson, degree, kind)
    check = locking(recorded((solution,), "locking"), Facts())
    assert check.passed is passed and not check.spoils
    assert (share_of_exact(solution) > 0.85) is passed
    assert (share_of_exact(solution) < 0.5) is not passed
    assert ("use degree 2" in check.finding) is not passed


def test_a_bare_table_has_no_statement() -> None:
    assert locking(Ladder((), "table"), Facts()).passed is None
