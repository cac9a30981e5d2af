"""Straight, curved and twisted beams of MacNeal & Harder 1985 (Finite Elem. Anal. Des. 1:3-20), as solids.

Unit force on the tip, the root clamped; data from memory. Quadratic cells, two meshes. What may be left:
 - of discretisation: the last change. Its order is at least 2 × 0.5, twice the exponent of the weakest
   clamped edge, so the change still to come is no larger;
 - of the reference: for the straight beam Euler-Bernoulli-Timoshenko theory, P L^3 / 3 E I + 1.2 P L / G A,
   which leaves out that the clamped end cannot contract. That stiffens a stretch as long as the depth d by
   at most the factor 1 / (1 - nu²); seen from the tip over a length L it is nu² × 3 d / L of the
   deflection, nu² d / L of the extension. For the others the last printed digit.
"""

from typing import Any

import numpy as np
import pytest

from convergence.fem.loads import Resultant
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.part import Part, arc
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import SolidPart, Sweep
from convergence.fem.solution import solve_cases
from convergence.quantities.mean_displacement import mean_displacement

pytestmark = pytest.mark.slow

Beam = tuple[SolidPart, Material, tuple[float, float, float]]
SIDES = ("inner", "tip", "outer", "root")


def straight() -> Beam:
    plan = rectangle(0.0, 6.0, 0.0, 0.2, SIDES)
    return SolidPart(plan, (("back", -0.05), ("front", 0.05))), Material(1e7, 0.3), (6.0, 0.1, 0.0)


def curved() -> Beam:
    """Return the quarter ring between radii 4.12 and 4.32; its tip is at y = 0."""
    corners = {"a": (4.12, 0.0), "b": (4.32, 0.0), "c": (0.0, 4.32), "d": (0.0, 4.12)}
    curves = {("b", "c"): arc((0.0, 0.0), 4.32, 0.0, 90.0), ("a", "d"): arc((0.0, 0.0), 4.12, 0.0, 90.0)}
    names = {"tip": (("a", "b"),), "root": (("c", "d"),), "outer": (("b", "c"),), "inner": (("d", "a"),)}
    plan = Part(corners, (("a", "b", "c", "d"),), curves, names)
    return SolidPart(plan, (("back", -0.05), ("front", 0.05))), Material(1e7, 0.25), (4.22, 0.0, 0.0)


def twisted() -> Beam:
    def turned(x: np.ndarray, y: np.ndarray, angle: np.ndarray, s: np.ndarray) -> np.ndarray:
        cos, sin = np.cos(angle), np.sin(angle)
        return np.array(np.broadcast_arrays(x * cos - y * sin, x * sin + y * cos, s))

    rate = 0.5 * np.pi / 12.0
    sweep = Sweep(lambda x, y, s: turned(x, y, rate * s, s), lambda x, y, z: turned(x, y, -rate * z, z))
    plan = rectangle(-0.55, 0.55, -0.16, 0.16, ("side",) * 4)
    return SolidPart(plan, (("root", 0.0), ("tip", 12.0)), sweep), Material(2.9e7, 0.22), (0.0, 0.0, 12.0)


def rectangle(left: float, right: float, low: float, high: float, names: tuple[str, ...]) -> Part:
    corners = {"a": (left, low), "b": (right, low), "c": (right, high), "d": (left, high)}
    boundaries: dict[str, tuple[tuple[str, str], ...]] = {}
    for name, edge in zip(names, (("a", "b"), ("b", "c"), ("c", "d"), ("d", "a")), strict=True):
        boundaries[name] = (*boundaries.get(name, ()), edge)
    return Part(corners, (("a", "b", "c", "d"),), boundaries=boundaries)


def deflections(beam: Beam, shape: Any, axes: str, counts: tuple[int, int, int], refined: int) -> np.ndarray:
    """Return the deflection of the tip under a unit force along each of the axes, (2 meshes, axes).

    `counts` are the cells along the edges ab and bc of the plan and along the sweep.
    """
    part, material, tip = beam
    supports = (Support("root", x=0.0, y=0.0, z=0.0, boundary="root"),)
    problems = []
    for axis in axes:
        force = tuple(1.0 if name == axis else 0.0 for name in "xyz")
        load = Resultant("tip", force, (0.0, 0.0, 0.0), tip)
        problems.append(Problem("Beam", part, {"body": material}, supports, (load,), "solid"))
    families = part.plan.families
    found = []
    for times in (1, refined):
        cells = dict(
            zip((families["a", "b"], families["b", "c"], -1), (times * n for n in counts), strict=True)
        )
        solutions = solve_cases(problems, mesh(part, cells, shape=shape, degree=2))
        found.append(
            [mean_displacement(s, boundary="tip", component=c) for s, c in zip(solutions, axes, strict=True)]
        )
    return np.array(found)


@pytest.mark.parametrize("shape", ["tetrahedron", "hexahedron", "wedge"])
def test_straight_beam(shape: str) -> None:
    """Printed: extension 3.0e-5, in plane 0.1081, out of plane 0.4321."""
    coarse, fine = deflections(straight(), shape, "xyz", (12, 1, 1), 2)
    shear = 1.2 * 6.0 / (1e7 / 2.6 * 0.02)
    bending = [6.0**3 / (3 * 1e7 * width * depth**3 / 12) for width, depth in ((0.1, 0.2), (0.2, 0.1))]
    theory = np.array([6.0 / (1e7 * 0.02), bending[0] + shear, bending[1] + shear])
    assert theory == pytest.approx([3.0e-5, 0.1081, 0.4321], rel=2e-4)
    clamped = 0.3**2 / 6.0 * np.array([0.2, 3 * 0.2, 3 * 0.2])  # across the wider side out of plane too
    assert (np.abs(fine - theory) <= np.abs(fine - coarse) + clamped * theory).all()
    assert (fine < theory).all()
    assert fine == pytest.approx(theory, rel=0.01)


def test_curved_beam() -> None:
    """Converged solid: 0.0885193522 and 0.4983016366 (examples of the open library FinEALE, from memory).

    The printed 0.08734 and 0.5022 are those of shell models.
    """
    coarse, fine = deflections(curved(), "hexahedron", "xz", (1, 12, 1), 2)
    wanted = np.array([0.0885193522, 0.4983016366])
    assert (np.abs(fine - wanted) <= np.abs(fine - coarse)).all()
    assert fine == pytest.approx(wanted, rel=0.01)


def test_twisted_beam() -> None:
    """0.001753248285256 and 0.005424534868469: Zupan & Saje 2004, from memory.

    A beam theory's converged solution, whose clamped end can contract: that is below the last change here.
    """
    coarse, fine = deflections(twisted(), "hexahedron", "xy", (2, 1, 12), 2)
    wanted = np.array([0.001753248285256, 0.005424534868469])
    assert (np.abs(fine - wanted) <= np.abs(fine - coarse)).all()
    assert fine == pytest.approx(wanted, rel=0.01)
