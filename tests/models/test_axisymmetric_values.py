"""Published values of axisymmetric parts and of the rotating disc."""

import numpy as np
import pytest

from convergence.checks.equilibrium import record
from convergence.errors import SolvingError
from convergence.fem.material import Material
from convergence.fem.mesh import Shape, mesh
from convergence.fem.part import finer
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve
from convergence.models.barrel import barrel
from convergence.models.pressure_vessel import pressure_vessel
from convergence.models.rotating_disc import rotating_disc
from convergence.models.stepped_pin import stepped_pin
from convergence.models.thick_sphere import thick_sphere
from convergence.quantities.peak_stress import peak_stress
from convergence.quantities.stress import stress

pytestmark = pytest.mark.slow

SOFT = Material(1000.0, 0.3)
STEEL = Material(210000.0, 0.3)


def cut(problem: Problem, shape: Shape, degree: int, divisions: int) -> Solution:
    counts = problem.part.divisions(size=None, divisions=divisions)
    return solve(problem, mesh(problem.part, counts, shape=shape, degree=degree))


@pytest.mark.parametrize(
    ("poisson", "bore"), [(0.0, 0.00375), (0.3, 0.0045825), (0.49, 0.005039925), (0.499, 0.00506024925)]
)
def test_barrel_exact_field(poisson: float, bore: float) -> None:
    """MacNeal & Harder 1985 (Finite Elem. Anal. Des. 1:3), thick-walled cylinder; Lame in closed form."""
    exact = barrel(
        inner_radius=3.0, outer_radius=9.0, height=1.0, pressure=1.0, material=Material(1000.0, poisson)
    ).exact
    assert exact is not None
    moved = exact.displacement(np.array([3.0, 9.0]), np.zeros(2))
    assert moved[0, 0] == pytest.approx(bore, rel=1e-12)
    assert exact.stress(np.array([3.0, 6.0]), np.zeros(2))[2] == pytest.approx([1.25, 0.40625], rel=1e-12)


@pytest.mark.parametrize(
    ("cells", "displacement", "hoop"),
    [
        (2, 0.004096869398, 1.50516174),
        (4, 0.004425525062, 1.48503242),
        (8, 0.004539572450, 1.40807318),
        (16, 0.004571490053, 1.34138565),
        (32, 0.004579729127, 1.29909623),
        (64, 0.004581806115, 1.27544224),
    ],
)
def test_barrel_sequence(cells: int, displacement: float, hoop: float) -> None:
    """Own computation: one-dimensional axisymmetric elements, 4 Gauss points; here one bilinear cell high.

    Held along the axis, the bilinear cells are those elements; all printed digits agree.
    """
    problem = barrel(inner_radius=3.0, outer_radius=9.0, height=1.0, pressure=1.0, material=SOFT)
    radial = problem.part.families["bore", "outer"]
    counts = {family: cells if family == radial else 1 for family in problem.part.families.values()}
    solution = solve(problem, mesh(problem.part, counts, shape="quadrilateral", degree=1))
    found = solution.displacement[0, solution.mesh.vertices["bore"]]
    assert found == pytest.approx(displacement, abs=1e-12)
    assert stress(solution, at="bore", component="zz", recovery="direct").value == pytest.approx(
        hoop, abs=1e-8
    )


def test_sphere_exact_field() -> None:
    """a = 1, b = 2, p = 1, E = 1000, nu = 0.3: closed form (Timoshenko & Goodier, art. 136)."""
    problem = thick_sphere(inner_radius=1.0, outer_radius=2.0, pressure=1.0, material=SOFT)
    exact = problem.exact
    assert exact is not None and exact.energy is not None
    assert exact.displacement(np.array(1.0), np.array(0.0))[0] == pytest.approx(8.0e-4, rel=1e-12)
    hoop = exact.stress(np.array([1.0, 2.0]), np.zeros(2))[2]
    assert hoop == pytest.approx([0.7142857143, 0.2142857143], abs=1e-10)
    assert 2.0 * exact.energy == pytest.approx(0.0050265482457, abs=1e-13)


def test_disc_exact_field() -> None:
    """rho w^2 = 1, a = 1, b = 5, nu = 0.3 (Timoshenko & Goodier, art. 32): closed form."""
    exact = rotating_disc(bore_radius=1.0, rim_radius=5.0, inertia=25.0, material=SOFT).exact
    assert exact is not None
    x = np.array([1.0, 5.0, np.sqrt(5.0)])
    xx, yy, _, _ = exact.stress(x, np.zeros(3))
    assert yy[:2] == pytest.approx([20.8, 5.2], rel=1e-12) and xx[2] == pytest.approx(6.6, rel=1e-12)
    moved = 1000.0 * exact.displacement(x, np.zeros(3))[0]
    assert moved[:2] == pytest.approx([20.8, 26.0], rel=1e-12)


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
def test_vessel_far_from_its_end(shape: Shape) -> None:
    """Lame's closed cylinder: hoop p (a^2 + b^2)/(b^2 - a^2), axial p a^2/(b^2 - a^2), end force pi a^2 p.

    The junction's bending decays as exp(-1.285 s / sqrt(R t)) (Timoshenko, Plates and Shells, art. 114):
    below 1e-7 at 400 mm. Quadratic cells, 8 over the wall: the stress is off by less than (1/8)^3.
    """
    a, b, p = 80.0, 92.0, 20.0
    problem = pressure_vessel(half_length=400.0, material=STEEL)
    solution = cut(problem, shape, 2, 8)
    inside = {name: stress(solution, at="inner_middle", component=name).value for name in ("zz", "yy", "xx")}
    share = p * a**2 / (b**2 - a**2)
    assert inside["zz"] == pytest.approx(share * (1 + b**2 / a**2), rel=0.125**3)
    assert inside["yy"] == pytest.approx(share, rel=0.125**3)
    assert inside["xx"] == pytest.approx(-p, abs=0.125**3 * inside["zz"])
    assert solution.reaction("symmetry")[1] == pytest.approx(-np.pi * a**2 * p, rel=1e-6)


def test_pin_peak_agrees_between_cells() -> None:
    """No closed form: triangles and quadrilaterals meet within the last changes of both."""
    peaks = {}
    for shape in ("quadrilateral", "triangle"):
        problem = stepped_pin(
            thick_radius=30.0, fillet_radius=4.0, thick_length=60.0, length=140.0, material=STEEL
        )
        counts = problem.part.divisions(size=None, divisions=1)
        found = [
            peak_stress(
                solve(problem, mesh(problem.part, finer(counts, 2.0, n), shape=shape, degree=2)),
                boundary="fillet",
                component="first_principal",
            ).value
            for n in (1, 2)
        ]
        peaks[shape] = found
    changes = [abs(one - other) for one, other in peaks.values()]
    assert abs(peaks["quadrilateral"][1] - peaks["triangle"][1]) <= sum(changes)
    # a flat bar of these proportions has 2.2947 (own computation: p-version, graded mesh), a ring less
    assert 1.5 * 100.0 < peaks["triangle"][1] < 2.29 * 100.0


def test_a_ring_balances_along_its_axis_only() -> None:
    """The pressure of a barrel pushes every part of the ring outward: no resultant, and none is invented."""
    solution = cut(barrel(material=STEEL), "triangle", 2, 2)
    found = record(solution)
    assert found["force"] < 1e-9 and found["load_x"] == 0.0 and found["moment"] == 0.0


def test_a_ring_free_along_its_axis_is_loose() -> None:
    problem = barrel(material=STEEL)
    loose = Problem(
        problem.title, problem.part, problem.materials, (problem.supports[0],), problem.loads, problem.kind
    )
    assert cut(loose, "triangle", 1, 2).energy > 0.0
    free = Problem(
        problem.title,
        problem.part,
        problem.materials,
        (type(problem.supports[0])("bore", x=0.0, boundary="bore"),),
        problem.loads,
        problem.kind,
    )
    with pytest.raises(SolvingError, match="it can still move along y"):
        cut(free, "triangle", 1, 2)
