"""Ladders of solutions, their errors against exact fields, and orders of convergence."""

from collections.abc import Callable, Mapping, Sequence

import numpy as np
import pytest

from convergence.fem.mesh import Formulation, Shape, mesh
from convergence.fem.part import Part, finer
from convergence.fem.problem import Exact, Problem, Support
from convergence.fem.recovery import exact_energy_error
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution, solve

Climb = Callable[..., list[Solution]]


@pytest.fixture(scope="session")
def climb() -> Climb:
    def solutions(
        problem: Problem,
        shape: Shape,
        degree: int,
        counts: int | Mapping[int, int],
        levels: int,
        ratio: float = 2.0,
        formulation: Formulation = "displacement",
    ) -> list[Solution]:
        """Solve on `levels` meshes, coarse to fine; `counts` is divisions or cells per family."""
        part = problem.part
        coarsest = part.divisions(size=None, divisions=counts) if isinstance(counts, int) else counts
        return [
            solve(
                problem,
                mesh(
                    part, finer(coarsest, ratio, level), shape=shape, degree=degree, formulation=formulation
                ),
            )
            for level in range(levels)
        ]

    return solutions


@pytest.fixture(scope="session")
def energy_norm() -> Callable[[Solution], float]:
    """Return a function for the energy norm of the error."""
    return lambda solution: float(np.sqrt(exact_energy_error(solution).sum()))


@pytest.fixture(scope="session")
def last_order() -> Callable[[Sequence[Solution], Sequence[float]], float]:
    def order(solutions: Sequence[Solution], errors: Sequence[float]) -> float:
        """Return the order seen on the two finest levels."""
        sizes = [solution.mesh.h for solution in solutions]
        return float(np.log(errors[-2] / errors[-1]) / np.log(sizes[-2] / sizes[-1]))

    return order


@pytest.fixture(scope="session")
def extruded() -> Callable[[Problem, float], Problem]:
    def solid(flat: Problem, length: float) -> Problem:
        """Return a problem of plane strain and thickness 1 as a solid between two smooth planes."""
        assert flat.kind == "plane strain" and isinstance(flat.part, Part)
        exact = flat.exact
        ends = (Support("back", z=0.0, boundary="back"), Support("front", z=0.0, boundary="front"))

        def displacement(x: np.ndarray, y: np.ndarray, z: np.ndarray) -> np.ndarray:
            assert exact is not None
            return np.array([*exact.displacement(x, y), 0.0 * z])

        def stress(x: np.ndarray, y: np.ndarray, z: np.ndarray) -> np.ndarray:
            assert exact is not None
            return np.array([*exact.stress(x, y), 0.0 * z, 0.0 * z])

        energy = exact.energy * length if exact is not None and exact.energy is not None else None
        return Problem(
            title=flat.title,
            part=SolidPart(flat.part, (("back", 0.0), ("front", length))),
            materials=flat.materials,
            supports=(*flat.supports, *ends),
            loads=flat.loads,
            kind="solid",
            exact=Exact(displacement, stress, energy),
        )

    return solid
