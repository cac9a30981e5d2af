"""Ladders of solutions, errors against exact fields, and the published values."""

import tomllib
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from convergence.fem.element import Shape
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
