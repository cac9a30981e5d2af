"""The sharp edge of an L, extruded between smooth planes: the rate of the energy is that of the corner.

Szabó & Babuška 1991, Finite Element Analysis, the L-shaped domain, mode I in plane strain. The error of the
energy has the corner's part h^(2 lambda), lambda = 0.544484 (Williams 1952, J. Appl. Mech. 19:526), and the
smooth part h^(2k), which is eliminated between neighbouring levels. A tenth of a power is left for the next
terms.
"""

from typing import Any

import numpy as np
import pytest

from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.models.l_domain import EXPONENTS, l_domain

pytestmark = pytest.mark.slow

DEPTH = 0.5


def edge() -> tuple[Problem, float]:
    """Return the solid with legs of length 1, and its exact energy."""
    flat = l_domain(leg=1.0, thickness=DEPTH, stress=1.0, mode="I", material=Material(1.0, 0.3))
    assert isinstance(flat.part, Part) and flat.exact is not None and flat.exact.energy is not None

    def spread(load: Any) -> Traction:
        return Traction(load.boundary, lambda x, y, z: np.array([*load.value(x, y), 0.0 * z]))

    def held(support: Any) -> Support:
        x, y = (f and (lambda x, y, z, f=f: f(x, y)) for f in (support.x, support.y))
        return Support(support.name, x=x, y=y, point=f"{support.point}_back")

    planes = tuple(Support(name, z=0.0, boundary=name) for name in ("back", "front"))
    problem = Problem(
        title=flat.title,
        part=SolidPart(flat.part, (("back", 0.0), ("front", DEPTH))),
        materials=flat.materials,
        supports=(*(held(support) for support in flat.supports), *planes),
        loads=tuple(spread(load) for load in flat.loads),
        kind="solid",
    )
    return problem, flat.exact.energy


@pytest.mark.parametrize("degree", [1, 2])
@pytest.mark.parametrize("shape", ["tetrahedron", "hexahedron", "wedge"])
def test_energy_rate(climb: Any, shape: str, degree: int) -> None:
    problem, energy = edge()
    solutions = climb(problem, shape, degree, 3 - degree, 3)
    errors = np.array([energy - solution.energy for solution in solutions])
    assert (errors > 0.0).all()
    singular = errors[:-1] - 4.0**degree * errors[1:]
    order = np.log2(singular[:-1] / singular[1:])[-1]
    assert order == pytest.approx(2.0 * EXPONENTS["I"], abs=0.1)
