"""Multigrid takes no more iterations on fine levels than on its coarsest, from zero and from a first guess.

A fifth more is allowed, which is one iteration where few are needed.
"""

from collections.abc import Mapping

import numpy as np
import pytest

from convergence.fem.assembly import stiffness
from convergence.fem.first_guess import first_guess
from convergence.fem.held import held_by
from convergence.fem.load_vector import load_vector
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.multigrid import LARGEST_COARSEST, Multigrid
from convergence.fem.part import finer
from convergence.fem.problem import Problem
from convergence.models.hollow_cylinder import hollow_cylinder
from convergence.models.lug import lug
from convergence.models.perforated_plate import perforated_plate
from convergence.models.solid_lug import solid_lug

pytestmark = pytest.mark.slow

STEEL = Material(210000.0, 0.3)
PLATE, LUG, TUBE = (make(material=STEEL) for make in (perforated_plate, lug, hollow_cylinder))
CASES = [
    ("plate", PLATE, "triangle", 5, 4),
    ("plate", PLATE, "quadrilateral", 5, 4),
    ("lug", LUG, "triangle", 3, 4),
    ("lug", LUG, "quadrilateral", 3, 4),
    ("tube", TUBE, "hexahedron", 3, 2),
    ("tube", TUBE, "tetrahedron", 3, 2),
    ("solid lug", solid_lug(material=STEEL), "hexahedron", 2, 2),
]


def iterations(
    problem: Problem, shape: str, coarsest: Mapping[int, int], levels: int, warm: bool
) -> list[int]:
    """Return the iterations on levels of halved quadratic cells."""
    found: list[int] = []
    before: tuple[Mapping[int, int], np.ndarray] | None = None
    for number in range(levels):
        level = mesh(problem.part, finer(coarsest, 2.0, number), shape=shape, degree=2)
        start = first_guess(*before, level) if before and warm else None
        held = held_by(problem, level)
        system = Multigrid(level, stiffness(problem, level), held)
        assert len(system.levels) >= 1 and level.nodes.size > LARGEST_COARSEST
        outcome = system.solve(load_vector(problem, level), held.values, start)
        assert outcome.converged
        before = (level.counts, outcome.u)
        found.append(outcome.iterations)
    return found


@pytest.mark.parametrize("warm", [False, True], ids=["from zero", "from a first guess"])
@pytest.mark.parametrize(
    ("problem", "shape", "divisions", "levels"), [c[1:] for c in CASES], ids=[f"{c[0]}-{c[2]}" for c in CASES]
)
def test_iterations_do_not_grow(
    problem: Problem, shape: str, divisions: int, levels: int, warm: bool
) -> None:
    coarsest = problem.part.divisions(size=None, divisions=divisions)
    found = iterations(problem, shape, coarsest, levels, warm)
    assert max(found) <= 1.2 * found[0]
