"""Solids with curved boundaries: rates against Lamé's cylinder, extruded, and his sphere, revolved.

Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28 and 136. Orders as for manufactured fields; two
tenths are allowed for the next power of h: cells span a quarter to an eighth of the part.
"""

from typing import Any

import numpy as np
import pytest

from convergence.fem.loads import Pressure
from convergence.fem.material import Material
from convergence.fem.part import Part, arc
from convergence.fem.problem import Exact, Problem, Support
from convergence.fem.solid_part import REVOLVED, SolidPart
from convergence.models.thick_cylinder import thick_cylinder
from convergence.models.thick_sphere import thick_sphere

pytestmark = pytest.mark.slow

MATERIAL = Material(1000.0, 0.3)
INNER, OUTER, PRESSURE = 1.0, 2.0, 1.0
NEXT_POWER = 0.2
COARSEST = {"cylinder": 3, "sphere": 4}  # less the degree: divisions of the coarsest mesh


def sphere(guided: bool) -> Problem:
    """Return the sphere between its equator, the cone of latitude 50° and two meridians 40° apart.

    The cone carries the hoop stress; where `guided`, it slides along a rigid cone instead.
    """
    top = np.radians(50.0)
    points = {"a": (INNER, 0.0), "b": (OUTER, 0.0)}
    points |= {
        name: (float(r * np.cos(top)), float(r * np.sin(top))) for name, r in (("c", OUTER), ("d", INNER))
    }
    plan = Part(
        points,
        (("a", "b", "c", "d"),),
        {("b", "c"): arc((0.0, 0.0), OUTER, 0.0, 50.0), ("a", "d"): arc((0.0, 0.0), INNER, 0.0, 50.0)},
        {"equator": (("a", "b"),), "outside": (("b", "c"),), "cone": (("c", "d"),), "inside": (("d", "a"),)},
    )
    scale = PRESSURE * INNER**3 / (OUTER**3 - INNER**3)
    nu = MATERIAL.poisson

    def displacement(*at: np.ndarray) -> np.ndarray:
        r = np.sqrt(sum(x**2 for x in at))
        growth = scale / MATERIAL.young * ((1 - 2 * nu) + (1 + nu) * OUTER**3 / (2 * r**3))
        return np.array(at) * growth

    def stress(*at: np.ndarray) -> np.ndarray:
        r = np.sqrt(sum(x**2 for x in at))
        radial, hoop = scale * (1 - OUTER**3 / r**3), scale * (1 + OUTER**3 / (2 * r**3))
        x, y, z = (x / r for x in at)
        return np.array(
            [hoop * shear + (radial - hoop) * product for shear, product in
             ((1, x * x), (1, y * y), (1, z * z), (0, x * y), (0, y * z), (0, z * x))]
        )  # fmt: skip

    def clamping(*at: np.ndarray) -> np.ndarray:
        r = np.sqrt(sum(x**2 for x in at))
        return np.asarray(-scale * (1 + OUTER**3 / (2 * r**3)))

    names = ("equator", "first", "last", *(("cone",) if guided else ()))
    surface = np.radians(40.0) * np.sin(top) * INNER**2
    energy = 0.5 * PRESSURE * surface * float(displacement(np.array(INNER), np.array(0.0), np.array(0.0))[0])
    return Problem(
        title="Sphere",
        part=SolidPart(plan, (("first", 0.0), ("last", 40.0)), REVOLVED),
        materials={"body": MATERIAL},
        supports=tuple(Support(name, normal=0.0, boundary=name) for name in names),
        loads=(Pressure("inside", PRESSURE), *(() if guided else (Pressure("cone", clamping),))),
        kind="solid",
        exact=Exact(displacement, stress, energy),
    )


DEGREES = pytest.mark.parametrize("degree", [1, 2])
SHAPES = pytest.mark.parametrize("shape", ["tetrahedron", "hexahedron", "wedge"])


@DEGREES
@SHAPES
@pytest.mark.parametrize("part", ["cylinder", "sphere"])
def test_rates(
    climb: Any,
    displacement_error: Any,
    energy_norm: Any,
    last_order: Any,
    extruded: Any,
    part: str,
    shape: str,
    degree: int,
) -> None:
    flat = thick_cylinder(inner_radius=INNER, outer_radius=OUTER, pressure=PRESSURE, material=MATERIAL)
    problem = sphere(guided=False) if part == "sphere" else extruded(flat, 1.0)
    solutions = climb(problem, shape, degree, COARSEST[part] - degree, 3)
    assert last_order(solutions, [displacement_error(s) for s in solutions]) > degree + 1 - NEXT_POWER
    assert last_order(solutions, [energy_norm(s) for s in solutions]) == pytest.approx(degree, abs=NEXT_POWER)
    errors = [problem.exact.energy - solution.energy for solution in solutions]
    assert min(errors) > 0.0
    assert last_order(solutions, errors) == pytest.approx(2 * degree, abs=2 * NEXT_POWER)


@DEGREES
@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
def test_sphere_in_its_meridian_plane(
    climb: Any, displacement_error: Any, energy_norm: Any, last_order: Any, shape: str, degree: int
) -> None:
    """Radii 1 and 2, E = 1000, nu = 0.3: u(1) = 8e-4 and 0.0050265482457 of energy in the whole sphere."""
    problem = thick_sphere(inner_radius=INNER, outer_radius=OUTER, pressure=PRESSURE, material=MATERIAL)
    assert problem.exact is not None and problem.exact.energy is not None
    assert problem.exact.displacement(np.array(1.0), np.array(0.0))[0] == pytest.approx(8e-4, rel=1e-12)
    assert 2.0 * problem.exact.energy == pytest.approx(0.0050265482457, rel=1e-11)
    solutions = climb(problem, shape, degree, 4, 3)
    assert last_order(solutions, [displacement_error(s) for s in solutions]) > degree + 1 - NEXT_POWER
    assert last_order(solutions, [energy_norm(s) for s in solutions]) == pytest.approx(degree, abs=NEXT_POWER)
    errors = [problem.exact.energy - solution.energy for solution in solutions]
    assert last_order(solutions, errors) == pytest.approx(2 * degree, abs=2 * NEXT_POWER)


@DEGREES
def test_a_curved_guide(
    climb: Any, displacement_error: Any, energy_norm: Any, last_order: Any, degree: int
) -> None:
    """A normal held at the nodes of a curved face leaves it free between them, by O(h²) of the shear there.

    The energy norm keeps its order, the displacement keeps half an order less than on flat faces
    (Verfürth 1987, Numer. Math. 50:697, for the slip condition, from memory), and no sign of the energy's
    error is known.
    """
    problem = sphere(guided=True)
    solutions = climb(problem, "hexahedron", degree, 2, 3)
    assert last_order(solutions, [energy_norm(s) for s in solutions]) == pytest.approx(degree, abs=NEXT_POWER)
    assert last_order(solutions, [displacement_error(s) for s in solutions]) > degree + 0.5 - NEXT_POWER
