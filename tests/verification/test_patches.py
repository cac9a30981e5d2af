"""Patch tests: a linear displacement held on the boundary gives the exact constant stress in distorted cells.

MacNeal & Harder 1985, Finite Elem. Anal. Des. 1:3-20, membrane and solid patch: data and stresses from
memory; the stresses follow from Hooke's law. Tolerances are round-off: 1e-16 times a condition number
below 1e6.
"""

from typing import Any

import numpy as np
import pytest

from convergence.fem.material import Material, ProblemKind
from convergence.fem.mesh import mesh
from convergence.fem.part import Part
from convergence.fem.problem import AnyPart, Exact, Problem, Support
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_part import SolidPart, Sweep
from convergence.fem.solution import solve
from convergence.fem.stress import cell_node_stress

MATERIAL = Material(1e6, 0.25)
ROUND_OFF = 1e-10
SIDES = {"south": ("a", "b"), "east": ("b", "c"), "north": ("c", "d"), "west": ("d", "a")}
BLOCKS = (
    ("a", "b", "f", "e"),
    ("b", "c", "g", "f"),
    ("c", "d", "h", "g"),
    ("d", "a", "e", "h"),
    ("e", "f", "g", "h"),
)
MEMBRANE = {
    "a": (0.0, 0.0), "b": (0.24, 0.0), "c": (0.24, 0.12), "d": (0.0, 0.12),
    "e": (0.04, 0.02), "f": (0.18, 0.03), "g": (0.16, 0.08), "h": (0.08, 0.08),
}  # fmt: skip


def membrane(curved: bool = False) -> Part:
    """Return the patch of five irregular blocks; where `curved`, one outer and one inner side are bent."""
    bent = {("a", "b"): bow("a", "b", -0.01), ("f", "g"): bow("f", "g", 0.006)} if curved else {}
    return Part(MEMBRANE, BLOCKS, bent, {name: (side,) for name, side in SIDES.items()})


def bow(start: str, end: str, depth: float) -> Any:
    a, b = np.array(MEMBRANE[start]), np.array(MEMBRANE[end])
    across = np.array([b[1] - a[1], a[0] - b[0]]) / np.linalg.norm(b - a)

    def curve(s: np.ndarray) -> np.ndarray:
        along = a[:, None] * (1.0 - s) + b[:, None] * s
        return np.asarray(along + across[:, None] * depth * np.sin(np.pi * s))

    return curve


def _twist(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
    turn, shift = 0.4 * s, 0.2 * s**2
    places = x * np.cos(turn) - y * np.sin(turn) + shift, x * np.sin(turn) + y * np.cos(turn), s + 0.1 * x * s
    return np.array(np.broadcast_arrays(*places))


def _shear(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
    return np.array(np.broadcast_arrays(x + 0.3 * s, y - 0.2 * s, s + 0.1 * x))


TWISTED, SHEARED = Sweep(_twist, _twist), Sweep(_shear, _shear)  # nothing here asks for a plan


def cube(sweep: Sweep) -> SolidPart:
    """Return a block of two layers over the patch, stretched to the unit square."""
    plan = Part(
        {name: (x / 0.24, y / 0.12) for name, (x, y) in MEMBRANE.items()},
        BLOCKS,
        boundaries={name: (side,) for name, side in SIDES.items()},
    )
    return SolidPart(plan, (("back", 0.0), ("inside", 0.35), ("front", 1.0)), sweep)


def held(part: AnyPart, kind: ProblemKind, displacement: Any, stress: list[float]) -> Problem:
    """Return a part whose whole boundary is moved as `displacement` says."""
    components = [lambda *at, c=c: displacement(*at)[c] for c in range(part.dimension)]
    values = dict(zip("xyz", components, strict=False))

    def constant(*at: np.ndarray) -> np.ndarray:
        return np.multiply.outer(stress, np.ones_like(at[0]))

    supports = tuple(Support(name, **values, boundary=name) for name in part.boundaries)
    return Problem("Patch", part, {"body": MATERIAL}, supports, (), kind, 1.0, Exact(displacement, constant))


def assert_exact(problem: Problem, shape: str, degree: int, formulation: str = "displacement") -> None:
    counts = problem.part.divisions(size=None, divisions=1)
    level = mesh(problem.part, counts, shape=shape, degree=degree, formulation=formulation)  # type: ignore[arg-type]
    solution = solve(problem, level)
    exact = problem.exact
    assert exact is not None
    moved = exact.displacement(*level.nodes)
    assert solution.displacement == pytest.approx(moved, abs=ROUND_OFF * np.abs(moved).max())
    stress = cell_node_stress(solution)
    wanted = exact.stress(*level.nodes[:, level.cell_nodes])
    assert stress == pytest.approx(wanted, abs=ROUND_OFF * np.abs(wanted).max())


def stretched(x: np.ndarray, y: np.ndarray) -> np.ndarray:
    return 1e-3 * np.array([x + y / 2, y + x / 2])


def stretched_solid(x: np.ndarray, y: np.ndarray, z: np.ndarray) -> np.ndarray:
    return 0.5e-3 * np.array([2 * x + y + z, x + 2 * y + z, x + y + 2 * z])


DEGREES = pytest.mark.parametrize("degree", [1, 2])
PLANE = pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])


@DEGREES
def test_rod(degree: int) -> None:
    part = RodPart({"left": (0.0,), "at": (0.7,), "right": (2.0,)})
    assert_exact(held(part, "rod", lambda x: np.array([1e-3 * x]), [1000.0]), "line", degree)


@DEGREES
@PLANE
@pytest.mark.parametrize("curved", [False, True])
def test_membrane(shape: str, degree: int, curved: bool) -> None:
    """Printed: 1333 and 400. A linear field is also met exactly in bent cells of degree 2."""
    problem = held(membrane(curved), "plane stress", stretched, [4000 / 3, 4000 / 3, 0.0, 400.0])
    assert_exact(problem, shape, degree)


@DEGREES
@PLANE
@pytest.mark.parametrize("curved", [False, True])
def test_plane_strain(shape: str, degree: int, curved: bool) -> None:
    """Hooke: lambda = 2 G = 4e5 here and 2 G ex = 800, so 4e5 × 2e-3 + 800, and 800 out of the plane."""
    problem = held(membrane(curved), "plane strain", stretched, [1600.0, 1600.0, 800.0, 400.0])
    assert_exact(problem, shape, degree)


@DEGREES
@PLANE
def test_around_an_axis(shape: str, degree: int) -> None:
    """u = (1e-3 r, -2e-3 z), the patch touching the axis: strains 1, -2, 1 per mille, dilatation 0."""
    problem = held(
        membrane(True),
        "axisymmetric",
        lambda x, y: 1e-3 * np.array([x, -2.0 * y]),
        [800.0, -1600.0, 800.0, 0.0],
    )
    assert_exact(problem, shape, degree)


@DEGREES
@pytest.mark.parametrize(
    ("shape", "sweep"), [("hexahedron", TWISTED), ("wedge", TWISTED), ("tetrahedron", SHEARED)]
)
def test_solid(shape: str, degree: int, sweep: Sweep) -> None:
    """Printed: 2000 and 400."""
    problem = held(cube(sweep), "solid", stretched_solid, [2000.0] * 3 + [400.0] * 3)
    assert_exact(problem, shape, degree)


@DEGREES
@pytest.mark.parametrize("kind", ["plane strain", "axisymmetric", "solid"])
def test_mean_dilatation(kind: ProblemKind, degree: int) -> None:
    """The projection of a constant volume strain is that constant."""
    if kind == "solid":
        problem = held(cube(TWISTED), kind, stretched_solid, [2000.0] * 3 + [400.0] * 3)
        assert_exact(problem, "hexahedron", degree, "mean dilatation")
        return
    if kind == "axisymmetric":
        field, stress = lambda x, y: 1e-3 * np.array([x, y]), [2000.0, 2000.0, 2000.0, 0.0]
        problem = held(membrane(), kind, field, stress)
    else:
        problem = held(membrane(True), kind, stretched, [1600.0, 1600.0, 800.0, 400.0])
    assert_exact(problem, "quadrilateral", degree, "mean dilatation")
