"""Ladders of models with an exact solution, solved once, and what the tests of quantities measure on them."""

from collections.abc import Callable
from functools import cache
from typing import Any

import numpy as np
import pytest

from convergence import rooms
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.part import finer
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve

STEEL = Material(210000.0, 0.3)


@cache
def climb(model: str, shape: str, degree: int, divisions: int, levels: int) -> tuple[Solution, ...]:
    problem: Problem = rooms.find("models", model)(material=STEEL)
    coarsest = problem.part.divisions(size=None, divisions=divisions)
    meshes = [mesh(problem.part, finer(coarsest, 2.0, n), shape=shape, degree=degree) for n in range(levels)]
    return tuple(solve(problem, level) for level in meshes)


def measure(name: str, solutions: tuple[Solution, ...], **arguments: Any) -> np.ndarray:
    found = [rooms.find("quantities", name)(solution, **arguments) for solution in solutions]
    return np.array([getattr(number, "value", number) for number in found])


def order(solutions: tuple[Solution, ...], errors: np.ndarray) -> np.ndarray:
    """Return the order between neighbouring levels."""
    h = np.array([solution.mesh.h for solution in solutions])
    return np.log(errors[:-1] / errors[1:]) / np.log(h[:-1] / h[1:])


def promised(name: str, degree: int, shape: str = "quadrilateral", **arguments: Any) -> float:
    number: float = rooms.beside("quantities", name, "formal_order")(degree, shape, arguments)
    return number


@pytest.fixture(scope="session")
def ladder_of() -> Callable[..., tuple[Solution, ...]]:
    return climb


@pytest.fixture(scope="session")
def measured() -> Callable[..., np.ndarray]:
    return measure


@pytest.fixture(scope="session")
def order_of() -> Callable[..., np.ndarray]:
    return order


@pytest.fixture(scope="session")
def formal() -> Callable[..., float]:
    return promised


@pytest.fixture(
    params=[("triangle", 1), ("triangle", 2), ("quadrilateral", 1), ("quadrilateral", 2)], ids=str
)
def element(request: pytest.FixtureRequest) -> tuple[str, int]:
    """Cell shape and degree."""
    pair: tuple[str, int] = request.param
    return pair
