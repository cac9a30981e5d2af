"""Mean dilatation near incompressibility: full orders where the plain formulation locks.

Lamé's cylinder in plane strain, as a ring around its axis and as a solid. MacNeal & Harder 1985, Finite Elem.
Anal. Des. 1:3-20, thick-walled cylinder: data and printed values from memory.
"""

from typing import Any

import numpy as np
import pytest

from convergence.fem.material import Material
from convergence.fem.mesh import Formulation, Shape, mesh
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve
from convergence.models.barrel import barrel
from convergence.models.thick_cylinder import thick_cylinder
from convergence.quantities.displacement import displacement

NEARLY = 0.49999
# by Poisson's ratio the radial displacement of the bore: closed form, and as printed
BORE = {
    0.0: (0.00375, None),
    0.3: (0.0045825, 4.582e-3),
    0.49: (0.005039925, 5.0399e-3),
    0.499: (0.00506024925, 5.0602e-3),
    0.4999: (0.0050622749925, 5.0623e-3),
    0.49999: (0.005062477499925, None),
}
METHODS: tuple[tuple[int, Formulation], ...] = (
    (1, "mean dilatation"),
    (2, "mean dilatation"),
    (2, "displacement"),
)
# a solid's meshes are too coarse for plain cells near 0.5
CYLINDERS = [
    *((part, nu, *method) for part in ("plane strain", "axisymmetric") for nu in BORE for method in METHODS),
    *(("solid", nu, *method) for nu in (0.3, 0.49) for method in METHODS),
    *(("solid", nu, *method) for nu in (0.4999, NEARLY) for method in METHODS[:2]),
]
PARTS = pytest.mark.parametrize("part", ["plane strain", "axisymmetric", "solid"])
DEGREES = pytest.mark.parametrize("degree", [1, 2])


@pytest.fixture
def cylinder(extruded: Any) -> Any:
    def made(part: str, poisson: float) -> Problem:
        material = Material(1000.0, poisson)
        if part == "axisymmetric":
            return barrel(inner_radius=3.0, outer_radius=9.0, height=6.0, pressure=1.0, material=material)
        flat = thick_cylinder(inner_radius=3.0, outer_radius=9.0, pressure=1.0, material=material)
        solid: Problem = extruded(flat, 2.0)
        return solid if part == "solid" else flat

    return made


def ladder(problem: Problem, degree: int, formulation: Formulation, levels: int) -> list[Solution]:
    """Return solutions on 2, 4, 8 … cells through the wall, and one along the axis of a solid."""
    counts = problem.part.divisions(size=None, divisions=2)
    shape: Shape = "hexahedron" if problem.part.dimension == 3 else "quadrilateral"
    found = []
    for level in range(levels):
        cells = {family: 1 if family < 0 else count * 2**level for family, count in counts.items()}
        made = mesh(problem.part, cells, shape=shape, degree=degree, formulation=formulation)
        found.append(solve(problem, made))
    return found


def last_order(errors: list[float]) -> float:
    return float(np.log2(errors[-2] / errors[-1]))


@pytest.mark.slow
@DEGREES
@pytest.mark.parametrize(
    ("part", "poisson"),
    [(p, nu) for p in ("plane strain", "axisymmetric") for nu in (0.3, NEARLY)] + [("solid", NEARLY)],
)
def test_rates(
    cylinder: Any,
    displacement_error: Any,
    energy_norm: Any,
    part: str,
    degree: int,
    poisson: float,
) -> None:
    """A tenth of a power is left to the next one with sixteen cells in the wall, two tenths with eight."""
    levels, room = (3, 0.2) if part == "solid" else (4, 0.1)
    solutions = ladder(cylinder(part, poisson), degree, "mean dilatation", levels)
    assert last_order([displacement_error(s) for s in solutions]) > degree + 1 - room
    assert last_order([energy_norm(s) for s in solutions]) == pytest.approx(degree, abs=room)


@pytest.mark.slow
@PARTS
@DEGREES
def test_plain_cells_lock(cylinder: Any, energy_norm: Any, part: str, degree: int) -> None:
    """Eight cells through the wall, four in a solid: plain ones miss more than half of the answer at 0.49999.

    The error of a stable method is bounded whatever Poisson's ratio; the incompressible limit of the problem
    itself changes it by less than half.
    """
    relative = {}
    for poisson in (0.3, NEARLY):
        problem = cylinder(part, poisson)
        for formulation in ("displacement", "mean dilatation"):
            finest = ladder(problem, degree, formulation, 2 if part == "solid" else 3)[-1]
            relative[poisson, formulation] = energy_norm(finest) / np.sqrt(2.0 * problem.exact.energy)
    assert relative[NEARLY, "mean dilatation"] < 1.5 * relative[0.3, "mean dilatation"] < 0.25
    assert relative[0.3, "displacement"] < 0.25
    assert relative[NEARLY, "displacement"] > 0.5


@pytest.mark.slow
@pytest.mark.parametrize(("part", "poisson", "degree", "formulation"), CYLINDERS)
def test_thick_walled_cylinder(
    cylinder: Any, part: str, poisson: float, degree: int, formulation: Formulation
) -> None:
    """Once the order is 1 or better, what is left is no more than the last change.

    Plain cells of degree 2 get there too, slowly while they lock; mean dilatation is within a hundredth.
    """
    exact, printed = BORE[poisson]
    names = {"plane strain": "bore_x", "axisymmetric": "bore", "solid": "bore_x_back"}
    found = [
        displacement(solution, at=names[part], component="x")
        for solution in ladder(cylinder(part, poisson), degree, formulation, 3 if part == "solid" else 4)
    ]
    assert abs(found[-1] - exact) <= abs(found[-1] - found[-2])
    if formulation == "mean dilatation":
        assert found[-1] == pytest.approx(exact, rel=0.01)
    if printed is not None:
        assert exact == pytest.approx(printed, rel=2e-4)  # printed to four or five digits
