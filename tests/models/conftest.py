"""Ladders of solutions, errors against exact fields, and the published values."""

import tomllib
from collections.abc import Callable
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from convergence.fem.element import Shape
from convergence.fem.geometry import at_rule, interpolate
from convergence.fem.mesh import mesh
from convergence.fem.part import finer
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve

REFERENCE = Path(__file__).parents[1] / "reference"


@pytest.fixture(scope="session")
def published() -> dict[str, Any]:
    return tomllib.loads((REFERENCE / "solids_benchmarks.toml").read_text(encoding="utf-8"))


@pytest.fixture(scope="session")
def sequences() -> dict[str, Any]:
    return tomllib.loads((REFERENCE / "solids_sequences.toml").read_text(encoding="utf-8"))


@pytest.fixture(scope="session")
def climb() -> Callable[..., list[Solution]]:
    def solutions(problem: Problem, shape: Shape, degree: int, divisions: int, levels: int) -> list[Solution]:
        """Solve on `levels` nested meshes, each with half the cell size of the one before."""
        counts = problem.part.divisions(size=None, divisions=divisions)
        return [
            solve(problem, mesh(problem.part, finer(counts, 2.0, level), shape=shape, degree=degree))
            for level in range(levels)
        ]

    return solutions


@pytest.fixture(scope="session")
def displacement_error() -> Callable[[Solution], float]:
    def error(solution: Solution) -> float:
        """Return the L2 norm of the displacement's error."""
        level, exact = solution.mesh, solution.problem.exact
        assert exact is not None
        at = at_rule(level, 8)
        found = interpolate(solution.displacement[:, level.cell_nodes], at.shapes)
        squares = ((exact.displacement(*at.x) - found) ** 2).sum(axis=0)
        return float(np.sqrt((squares * at.dx).sum()))

    return error
