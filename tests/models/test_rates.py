"""Rates of convergence against every exact solution, for every cell shape and degree k.

Theory for a smooth solution (Strang & Fix 1973, An Analysis of the Finite Element Method, ch. 3):
displacement h^(k+1) in L2, stress h^k in the energy norm, strain energy h^(2k). With a corner of
exponent l (Szabo & Babuska 1991, ch. 10): 2 min(k, l) for the energy, min(k, l) + l for the
displacement. The order seen on the two finest of four meshes (three of quadratic solids) is off by what
the next power of h leaves: a term of relative size c h changes it by c h / ln 2, below 0.1 here once meshes
have 500 cells, and solids eight over the wall.
"""

from collections.abc import Callable
from inspect import signature
from typing import Any

import numpy as np
import pytest

from convergence import rooms
from convergence.fem.loads import TemperatureRise
from convergence.fem.material import Material, PlaneKind
from convergence.fem.mesh import Shape
from convergence.fem.problem import Problem, Support
from convergence.fem.recovery import exact_energy_error
from convergence.fem.solution import Solution
from convergence.models.hollow_cylinder import hollow_cylinder
from convergence.models.lined_cylinder import lined_cylinder
from convergence.models.thick_cylinder import thick_cylinder

pytestmark = pytest.mark.slow

Climb = Callable[..., list[Solution]]
SHAPES: tuple[Shape, ...] = ("triangle", "quadrilateral")
SHAPES_OF: dict[int, tuple[Shape, ...]] = {1: ("line",), 2: SHAPES, 3: ("tetrahedron", "wedge", "hexahedron")}
STEEL = Material(210000.0, 0.3)
EXACT_EVERYWHERE = "patch_test"
SINGULAR = "l_domain"
NEXT_POWER = 0.1


def with_exact() -> list[str]:
    return [
        name for name in rooms.names("models") if rooms.find("models", name)(material=STEEL).exact is not None
    ]


def has_kinds(name: str) -> bool:
    return "kind" in signature(rooms.find("models", name)).parameters


SMOOTH = [name for name in with_exact() if name not in (EXACT_EVERYWHERE, SINGULAR)]
SMOOTH_KINDS = [
    (name, kind, shape)
    for name in SMOOTH
    for kind in (("plane stress", "plane strain") if has_kinds(name) else (None,))
    for shape in SHAPES_OF[rooms.find("models", name)(material=STEEL).part.dimension]
]
WARM = Material(210000.0, 0.3, expansion=1.2e-5)
VARIANTS = {  # what the sweep with default values does not reach
    "sector of 40°": thick_cylinder(sector=40.0, material=STEEL),
    "solid sector of 40°": hollow_cylinder(sector=40.0, material=STEEL),
    "warm, plane stress": lined_cylinder(warmth=60.0, kind="plane stress", material=WARM),
    "warm, plane strain": lined_cylinder(warmth=60.0, kind="plane strain", material=WARM),
}
BOTH_KINDS = pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
BOTH_SHAPES = pytest.mark.parametrize("shape", SHAPES)
BOTH_DEGREES = pytest.mark.parametrize("degree", [1, 2])


def model(name: str, kind: PlaneKind | None, **arguments: Any) -> Problem:
    said = arguments if kind is None else {**arguments, "kind": kind}
    problem: Problem = rooms.find("models", name)(material=STEEL, **said)
    return problem


def exact_energy(problem: Problem) -> float:
    assert problem.exact is not None
    assert problem.exact.energy is not None
    return problem.exact.energy


def last_order(solutions: list[Solution], errors: list[float]) -> float:
    coarse, fine = errors[-2:]
    return float(np.log(coarse / fine) / np.log(solutions[-2].mesh.h / solutions[-1].mesh.h))


def test_the_sweep_has_every_exact_solution() -> None:
    assert {"thick_cylinder", "perforated_plate", "exact_cantilever"} <= set(SMOOTH)
    assert {EXACT_EVERYWHERE, SINGULAR} <= set(with_exact())


def test_last_order_tells_orders_apart() -> None:
    class Fake:
        def __init__(self, h: float):
            self.mesh = type("M", (), {"h": h})

    levels: Any = [Fake(0.4), Fake(0.2)]
    assert last_order(levels, [0.4**2, 0.2**2]) == pytest.approx(2.0)
    assert abs(last_order(levels, [0.4**1.8, 0.2**1.8]) - 2.0) > NEXT_POWER


@BOTH_DEGREES
@BOTH_SHAPES
@BOTH_KINDS
def test_patch_test_is_exact(
    climb: Climb, displacement_error: Any, kind: PlaneKind, shape: Shape, degree: int
) -> None:
    problem = model(EXACT_EVERYWHERE, kind)
    largest = 1e-3 * 1.5 * 240.0
    for solution in climb(problem, shape, degree, 1, 2):
        # rounding: 1e-16 times a condition number below 1e4
        assert displacement_error(solution) < 1e-12 * largest * np.sqrt(solution.mesh.measure)
        assert exact_energy_error(solution).sum() < 1e-20 * exact_energy(problem)
        assert solution.energy == pytest.approx(exact_energy(problem), rel=1e-12)


@BOTH_DEGREES
@pytest.mark.parametrize(("name", "kind", "shape"), SMOOTH_KINDS)
def test_smooth_rates(
    climb: Climb, displacement_error: Any, name: str, kind: PlaneKind | None, shape: Shape, degree: int
) -> None:
    check_rates(climb, displacement_error, model(name, kind), shape, degree)


@BOTH_DEGREES
@pytest.mark.parametrize(
    ("name", "shape"), [(name, s) for name, p in VARIANTS.items() for s in SHAPES_OF[p.part.dimension]]
)
def test_smooth_rates_of_variants(
    climb: Climb, displacement_error: Any, name: str, shape: Shape, degree: int
) -> None:
    check_rates(climb, displacement_error, VARIANTS[name], shape, degree)


def check_rates(climb: Climb, displacement_error: Any, problem: Problem, shape: Shape, degree: int) -> None:
    solutions = climb(problem, shape, degree, 2, 3 if problem.kind == "solid" and degree == 2 else 4)
    norms = [float(np.sqrt(exact_energy_error(solution).sum())) for solution in solutions]
    assert last_order(solutions, norms) == pytest.approx(degree, abs=NEXT_POWER)
    found = last_order(solutions, [displacement_error(solution) for solution in solutions])
    # from above: bending moves a slender part as a whole, by h^(2k), which is large on the coarse meshes
    assert degree + 1 - NEXT_POWER < found < 2 * degree + 3 * NEXT_POWER
    exact = exact_energy(problem)
    errors = [exact - solution.energy for solution in solutions]
    if two_signs(problem):
        # two parts of opposite sign: the bound O(h^(2k)) holds for the ladder, not from level to level
        mean_order = np.log2(abs(errors[0] / errors[-1])) / (len(errors) - 1)
        assert mean_order > 2 * degree - 2 * NEXT_POWER
    else:
        assert min(errors) > 0
        assert last_order(solutions, errors) == pytest.approx(2 * degree, abs=NEXT_POWER)


def two_signs(problem: Problem) -> bool:
    """Return whether displacements other than zero are held, or a temperature acts: the energy's error then
    has two signs."""
    held = [(s.x, s.y) for s in problem.supports if isinstance(s, Support)]
    warm = any(load.value for load in problem.loads if isinstance(load, TemperatureRise))
    return warm or any(callable(x) or callable(y) for x, y in held)


@BOTH_DEGREES
@BOTH_SHAPES
@BOTH_KINDS
@pytest.mark.parametrize("mode", ["I", "II"])
def test_singular_rates(
    climb: Climb, published: Any, mode: str, kind: PlaneKind, shape: Shape, degree: int
) -> None:
    """The corner's h^(2 l) after the smooth part's h^(2k), known in power, is eliminated."""
    exponent = published["l_domain"]["exponents"][mode]
    problem = model(SINGULAR, kind, mode=mode)
    solutions = climb(problem, shape, degree, 2, 5)
    errors = np.array([exact_energy(problem) - solution.energy for solution in solutions])
    assert (errors > 0).all()
    assert (np.diff(errors) < 0).all()
    singular = errors[:-1] - 4.0**degree * errors[1:]
    order = np.log2(singular[:-1] / singular[1:])
    # what is left are powers 2 l + 1 and above: a tenth of a power on meshes of 1536 cells
    assert order[-1] == pytest.approx(2 * min(degree, exponent), abs=NEXT_POWER)


@BOTH_SHAPES
@BOTH_KINDS
@pytest.mark.parametrize("mode", ["I", "II"])
def test_singular_displacement(
    climb: Climb, displacement_error: Any, published: Any, mode: str, kind: PlaneKind, shape: Shape
) -> None:
    """Quadratic cells only: with linear ones h^2 and h^(2 l) cannot be told apart on these meshes."""
    exponent = published["l_domain"]["exponents"][mode]
    solutions = climb(model(SINGULAR, kind, mode=mode), shape, 2, 2, 4)
    found = last_order(solutions, [displacement_error(solution) for solution in solutions])
    assert found == pytest.approx(2 * exponent, abs=NEXT_POWER)
