"""Solved ladders and what climbing makes of them, for the tests of checks."""

from collections.abc import Callable, Iterable
from functools import cache
from typing import Any

import pytest

from convergence import rooms
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.part import finer
from convergence.fem.solution import Solution, solve
from convergence.results import Ladder, Level


@cache
def solve_ladder(
    model: str, shape: str, degree: int, divisions: int, levels: int, **arguments: Any
) -> tuple[Solution, ...]:
    problem = rooms.find("models", model)(material=Material(210000.0, 0.3), **arguments)
    coarsest = problem.part.divisions(size=None, divisions=divisions)
    return tuple(
        solve(problem, mesh(problem.part, finer(coarsest, 2.0, n), shape=shape, degree=degree))
        for n in range(levels)
    )


def record(solutions: Iterable[Solution], *checks: str, **measures: Callable[[Solution], Any]) -> Ladder:
    """Return the ladder with the records of these checks and these quantities, with their places."""
    levels = []
    for solution in solutions:
        values: dict[str, float] = {}
        for name, measure in measures.items():
            found = measure(solution)
            values |= {name: float(getattr(found, "value", found))}
            if hasattr(found, "x"):
                values |= {f"{name}.x": found.x, f"{name}.y": found.y}
        for check in checks:
            numbers = rooms.beside("checks", check, "record")(solution)
            values |= {f"{check}.{name}": value for name, value in numbers.items()}
        levels.append(Level(solution.mesh.h, solution.mesh.cells, len(solution.load), 0.1, values))
    return Ladder(tuple(levels), "test")


@pytest.fixture(scope="session")
def solved() -> Callable[..., tuple[Solution, ...]]:
    return solve_ladder


@pytest.fixture(scope="session")
def recorded() -> Callable[..., Ladder]:
    return record
