"""Strain energy, mean displacement and reactions on exact solutions: order 2p, and values by hand."""

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.fem.problem import Support
from convergence.fem.solution import solve
from convergence.sequences import observed_order

# thick cylinder: Lamé, bore 30, outer radius 45, pressure 21, length 1; E 210000, nu 0.3, plane strain
BORE, OUTER, PRESSURE, YOUNG, NU = 30.0, 45.0, 21.0, 210000.0, 0.3
SCALE = PRESSURE * BORE**2 / (OUTER**2 - BORE**2)


def radial(r: float) -> float:
    """Lamé's displacement, Timoshenko & Goodier, Theory of Elasticity, art. 28, plane strain."""
    return (1 + NU) / YOUNG * SCALE * ((1 - 2 * NU) * r + OUTER**2 / r)


ENERGY = 0.25 * np.pi * BORE * PRESSURE * radial(BORE)  # half the work of the pressure on the quarter
MEAN = radial(OUTER) * 2.0 / np.pi  # mean of cos over the quarter
MOMENT = SCALE * (0.5 * (OUTER**2 - BORE**2) + OUTER**2 * np.log(OUTER / BORE))  # ∫ y σ_θθ dy on x = 0
CASES = [
    ("strain_energy", {}, ENERGY),
    ("mean_displacement", {"boundary": "outer", "component": "x"}, MEAN),
    ("mean_displacement", {"boundary": "outer", "component": "y"}, MEAN),
    ("reaction_moment", {"support": "symmetry_x", "about": (0.0, 0.0)}, MOMENT),
    ("reaction_moment", {"support": "symmetry_y", "about": (0.0, 0.0)}, -MOMENT),
]


@pytest.mark.parametrize(("name", "arguments", "exact"), CASES)
def test_order_two_p(
    name: str,
    arguments: dict,
    exact: float,
    element: tuple[str, int],
    ladder_of: Callable,
    measured: Callable,
    order_of: Callable,
    formal: Callable,
) -> None:
    """The loads and weights are smooth: 2p (Babuska & Miller 1984). On four levels within 0.1 of it."""
    shape, degree = element
    solutions = ladder_of("thick_cylinder", shape, degree, 2, 4)
    values = measured(name, solutions, **arguments)
    assert formal(name, degree, **arguments) == 2.0 * degree
    assert order_of(solutions, abs(values - exact))[-1] == pytest.approx(2.0 * degree, abs=0.1)
    # 16 cells on the quarter's bore: (pi/32)^2 / 2 = 5e-3 is the scale of the relative error of degree 1
    assert values[-1] == pytest.approx(exact, rel=5e-3 if degree == 1 else 1e-6)


def test_a_reaction_fixed_by_equilibrium_is_right_on_every_mesh(
    element: tuple[str, int], ladder_of: Callable, measured: Callable
) -> None:
    """Pressure × projected bore; chords have the projection of their arc."""
    solutions = ladder_of("thick_cylinder", *element, 2, 4)
    for support, component in (("symmetry_x", "x"), ("symmetry_y", "y")):
        force = measured("reaction_force", solutions, support=support, component=component)
        assert force == pytest.approx(-PRESSURE * BORE, rel=1e-9)
    other = measured("reaction_force", solutions, support="symmetry_x", component="y")
    assert other == pytest.approx(0.0, abs=1e-12)


def test_a_reaction_that_the_mesh_decides_has_order_two_p(
    element: tuple[str, int], ladder_of: Callable, measured: Callable, formal: Callable
) -> None:
    """A quarter plate with hole, pulled by a given displacement of its side; all corners are regular."""
    shape, degree = element
    free = ladder_of("perforated_plate", shape, degree, 1, 5)
    problem = free[0].problem
    supports = (*problem.supports, Support("side", x=0.1, boundary="side"))
    pulled = replace(problem, loads=(), supports=supports, exact=None)
    solutions = tuple(solve(pulled, solution.mesh) for solution in free)
    side = measured("reaction_force", solutions, support="side", component="x")
    middle = measured("reaction_force", solutions, support="symmetry_x", component="x")
    assert side == pytest.approx(-middle, rel=1e-9)
    assert np.all(np.diff(side) < 0.0), "a stiffer, coarser mesh resists more"
    h = np.array([solution.mesh.h for solution in solutions])
    assert observed_order(h, side) == pytest.approx(formal("reaction_force", degree), abs=0.15)


def test_moment_about_another_point_follows_statics(ladder_of: Callable, measured: Callable) -> None:
    """M about (0, 40) = M about the origin − r × F, with F = −pressure × bore along x."""
    solutions = ladder_of("thick_cylinder", "quadrilateral", 2, 2, 4)[:1]
    about = measured("reaction_moment", solutions, support="symmetry_x", about=(0.0, 0.0))
    higher = measured("reaction_moment", solutions, support="symmetry_x", about=(0.0, 40.0))
    named = measured("reaction_moment", solutions, support="symmetry_x", about="outer_y")
    assert higher == pytest.approx(about + 40.0 * -PRESSURE * BORE, rel=1e-9)
    assert named == pytest.approx(about + 45.0 * -PRESSURE * BORE, rel=1e-9)


def test_energy_and_mean_of_the_patch_are_exact(
    element: tuple[str, int], ladder_of: Callable, measured: Callable
) -> None:
    """A linear field is in every space: mean of u = strain (x + y/2, y + x/2) over the rim by hand."""
    solutions = ladder_of("patch_test", *element, 1, 1)
    assert measured("strain_energy", solutions) == pytest.approx(solutions[0].problem.exact.energy, rel=1e-12)
    rim = {"boundary": "rim"}
    assert measured("mean_displacement", solutions, **rim, component="x") == pytest.approx(0.15, rel=1e-12)
    assert measured("mean_displacement", solutions, **rim, component="y") == pytest.approx(0.12, rel=1e-12)
