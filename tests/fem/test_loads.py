"""Loads: resultants that must be met exactly, and closed-form fields of temperature, bending and rotation."""

from dataclasses import replace

import numpy as np
import pytest

from convergence.fem.load_vector import load_vector
from convergence.fem.loads import (
    BearingLoad,
    Load,
    PointForce,
    Pressure,
    Resultant,
    TemperatureRise,
    Traction,
    centrifugal,
    gravity,
)
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part, arc
from convergence.fem.problem import AnyPart, Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution, solve, solve_cases
from convergence.fem.stress import cell_node_stress

STEEL = Material(210000.0, 0.3, expansion=1.2e-5)
PLANE = ("triangle", "quadrilateral")
SOLID = ("tetrahedron", "hexahedron", "wedge")


def bar(length: float = 6.0, depth: float = 2.0) -> Part:
    half = 0.5 * depth
    return Part(
        points={"a": (0.0, -half), "b": (length, -half), "c": (length, half), "d": (0.0, half)},
        blocks=(("a", "b", "c", "d"),),
        boundaries={
            "bottom": (("a", "b"),),
            "right": (("b", "c"),),
            "top": (("c", "d"),),
            "left": (("d", "a"),),
        },
    )


def solid_bar(width: float = 1.0) -> SolidPart:
    return SolidPart(bar(), (("back", -0.5 * width), ("front", 0.5 * width)))


def problem_of(part: AnyPart, *loads: Load) -> Problem:
    kind = "solid" if part.dimension == 3 else "plane stress"
    held = Support("left", x=0.0, y=0.0, z=0.0 if part.dimension == 3 else None, boundary="left")
    return Problem("Bar", part, {"body": STEEL}, (held,), loads, kind)  # type: ignore[arg-type]


def meshed(part: AnyPart, shape: str, degree: int, divisions: int = 2) -> Mesh:
    counts = part.divisions(size=None, divisions=divisions)
    return mesh(part, counts, shape=shape, degree=degree)  # type: ignore[arg-type]


def totals(part: AnyPart, load: Load, shape: str, degree: int, about: tuple[float, ...]) -> np.ndarray:
    """Return force and moment of the nodal forces of a load."""
    problem = problem_of(part, load)
    level = meshed(part, shape, degree)
    solution = solve(problem, level)
    return solution.resultant(load_vector(problem, level), about)


@pytest.mark.parametrize("shape", PLANE)
@pytest.mark.parametrize("degree", [1, 2])
def test_force_and_moment_on_an_edge(shape: str, degree: int) -> None:
    load = Resultant("right", (3.0, -2.0), (7.0,), about=(6.0, 0.5))
    assert totals(bar(), load, shape, degree, (6.0, 0.5)) == pytest.approx([3.0, -2.0, 7.0], abs=1e-12)


@pytest.mark.parametrize("shape", SOLID)
@pytest.mark.parametrize("degree", [1, 2])
def test_force_and_moment_on_a_face(shape: str, degree: int) -> None:
    load = Resultant("right", (3.0, -2.0, 1.0), (4.0, 5.0, -6.0), about=(6.0, 0.5, 0.2))
    wanted = [3.0, -2.0, 1.0, 4.0, 5.0, -6.0]
    assert totals(solid_bar(), load, shape, degree, (6.0, 0.5, 0.2)) == pytest.approx(wanted, abs=1e-11)


@pytest.mark.parametrize("shape", [*PLANE, *SOLID])
def test_point_force(shape: str) -> None:
    part: AnyPart = bar() if shape in PLANE else solid_bar()
    force = (1.0, -2.0, 3.0)[: part.dimension]
    point = "c" if shape in PLANE else "c_front"
    found = totals(part, PointForce(point, force), shape, 2, part.points[point])
    assert found == pytest.approx([*force, *np.zeros(len(found) - part.dimension)], abs=1e-12)


@pytest.mark.parametrize("shape", [*PLANE, *SOLID])
def test_own_weight(shape: str) -> None:
    """Density 2, acceleration 3 along -y: 6 per volume, acting in the middle of the bar."""
    part: AnyPart = bar() if shape in PLANE else solid_bar(0.5)
    volume = 12.0 if shape in PLANE else 6.0
    load = gravity(2.0, (0.0, -3.0, 0.0)[: part.dimension])
    middle = (3.0, 0.0, 0.0)[: part.dimension]
    found = totals(part, load, shape, 1, middle)
    assert found == pytest.approx([0.0, -6.0 * volume, *np.zeros(len(found) - 2)], abs=1e-10)


@pytest.mark.parametrize("shape", SOLID)
def test_centrifugal_force(shape: str) -> None:
    """Density 2, 3 rad/s about y: 18 x and 18 z per volume; over the bar 18 × 3 × 12 along x."""
    found = totals(solid_bar(), centrifugal(2.0, 3.0, axis=1), shape, 2, (0.0, 0.0, 0.0))
    assert found[:3] == pytest.approx([18.0 * 3.0 * 12.0, 0.0, 0.0], abs=1e-9)


def test_hydrostatic_pressure() -> None:
    """Pressure falling from 4 at the bottom of the right edge to 0 at its top: 4 in all, a third up."""
    load = Pressure("right", lambda x, y: 2.0 * (1.0 - y))
    found = totals(bar(), load, "triangle", 2, (6.0, -1.0))
    assert found == pytest.approx([-4.0, 0.0, 4.0 * 2.0 / 3.0], abs=1e-12)


@pytest.mark.parametrize("shape", SOLID)
def test_bearing_load_in_a_solid(shape: str) -> None:
    """A pin through half a bore, pulling at an angle to the mesh: the force along the pull is exact."""
    plan = Part(
        points={"a": (1.0, 0.0), "b": (3.0, 0.0), "c": (-3.0, 0.0), "d": (-1.0, 0.0)},
        blocks=(("a", "b", "c", "d"),),
        curves={("b", "c"): arc((0, 0), 3.0, 0.0, 180.0), ("a", "d"): arc((0, 0), 1.0, 0.0, 180.0)},
        boundaries={"foot": (("a", "b"), ("c", "d")), "rim": (("b", "c"),), "hole": (("d", "a"),)},
    )
    part = SolidPart(plan, (("back", 0.0), ("front", 0.7)))
    load = BearingLoad("hole", (0.0, 100.0, 0.0), centre=(0.0, 0.0, 0.0), axis=(0.0, 0.0, 1.0))
    problem = Problem(
        "Bore",
        part,
        {"body": STEEL},
        (Support("foot", x=0.0, y=0.0, z=0.0, boundary="foot"),),
        (load,),
        "solid",
    )
    level = meshed(part, shape, 2, divisions=8)
    found = load_vector(problem, level).reshape(-1, 3).sum(axis=0)
    assert found == pytest.approx([0.0, 100.0, 0.0], abs=1e-9)


@pytest.mark.parametrize("shape", [*PLANE, *SOLID])
def test_pure_bending(shape: str) -> None:
    """A moment on the end, the other free to bow: sigma_x = -M y / I exactly (quadratic displacements)."""
    part: AnyPart = bar() if shape in PLANE else solid_bar()
    solid = shape in SOLID
    moment = 5.0
    load = Resultant(
        "right",
        (0.0,) * part.dimension,
        (0.0, 0.0, moment) if solid else (moment,),
        (6.0, 0.0, 0.0)[: part.dimension],
    )
    corner = Support("corner", y=0.0, z=0.0 if solid else None, point="a_back" if solid else "a")
    supports = [Support("left", x=0.0, boundary="left"), corner]
    if solid:
        supports.append(Support("roll", z=0.0, point="d_back"))
    problem = replace(problem_of(part, load), supports=tuple(supports))
    solution = solve(problem, meshed(part, shape, 2))
    places = solution.mesh.nodes[:, solution.mesh.cell_nodes]
    stress = cell_node_stress(solution)
    inertia = 2.0**3 / 12.0
    wanted = np.zeros_like(stress)
    wanted[0] = -moment * places[1] / inertia
    assert stress == pytest.approx(wanted, abs=1e-9 * np.abs(wanted).max())


def heated(shape: str, kind: str, held: bool) -> Solution:
    """Return a bar heated by 40 K, free to expand or held all around."""
    part: AnyPart = bar() if shape in PLANE else solid_bar()
    solid = shape in SOLID
    if held:
        supports = [Support(name, normal=0.0, boundary=name) for name in part.boundaries]
    else:
        supports = [Support("left", x=0.0, boundary="left"), Support("bottom", y=0.0, boundary="bottom")]
        supports += [Support("back", z=0.0, boundary="back")] if solid else []
    problem = Problem("Heated", part, {"body": STEEL}, tuple(supports), (TemperatureRise(40.0),), kind)  # type: ignore[arg-type]
    return solve(problem, meshed(part, shape, 1))


@pytest.mark.parametrize(
    ("shape", "kind"), [*((s, "plane stress") for s in PLANE), *((s, "solid") for s in SOLID)]
)
def test_free_expansion_is_free_of_stress(shape: str, kind: str) -> None:
    solution = heated(shape, kind, held=False)
    assert solution.displacement[0] == pytest.approx(1.2e-5 * 40.0 * solution.mesh.nodes[0], abs=1e-14)
    assert np.abs(cell_node_stress(solution)).max() < 1e-9 * 210000.0 * 1.2e-5 * 40.0
    assert abs(solution.energy) < 1e-12 * solution.quadratic_energy


@pytest.mark.parametrize(
    ("shape", "kind", "factor"),
    [
        *((s, "plane stress", 1.0 - 0.3) for s in PLANE),
        *((s, "plane strain", 1.0 - 0.6) for s in PLANE),
        *((s, "solid", 1.0 - 0.6) for s in SOLID),
    ],
)
def test_held_expansion(shape: str, kind: str, factor: float) -> None:
    """-E a T/(1 - nu) in plane stress, -E a T/(1 - 2 nu) where nothing can move (Timoshenko & Goodier,
    Theory of Elasticity, ch. 13, from memory); energy density sigma a T over the directions held."""
    solution = heated(shape, kind, held=True)
    wanted = -210000.0 * 1.2e-5 * 40.0 / factor
    stress = cell_node_stress(solution)
    directions = 2 if kind == "plane stress" else 3
    assert stress[:2] == pytest.approx(np.full_like(stress[:2], wanted), rel=1e-10)
    if directions == 3:
        assert stress[2] == pytest.approx(np.full_like(stress[2], wanted), rel=1e-10)
    energy = -0.5 * wanted * 1.2e-5 * 40.0 * directions * solution.mesh.measure
    assert solution.energy == pytest.approx(energy, rel=1e-10)


def test_linear_temperature_bends_a_free_bar_without_stress() -> None:
    """T = 30 y in a free plane bar: linear thermal strain is compatible, no stress arises (degree 2)."""
    supports = (Support("left", x=0.0, boundary="left"), Support("corner", y=0.0, point="a"))
    problem = replace(problem_of(bar(), TemperatureRise(lambda x, y: 30.0 * y)), supports=supports)
    solution = solve(problem, meshed(bar(), "triangle", 2))
    assert np.abs(cell_node_stress(solution)).max() < 1e-8
    curvature = 1.2e-5 * 30.0
    tip = solution.displacement[1, solution.mesh.vertices["b"]]
    assert tip == pytest.approx(-0.5 * curvature * 36.0, rel=1e-9)


def test_load_cases_share_one_stiffness() -> None:
    """Three cases solved together are the cases solved one by one, and superpose."""
    part = bar()
    pull, push = Traction("right", (100.0, 0.0)), Traction("right", (0.0, -40.0))
    problems = [problem_of(part, pull), problem_of(part, push), problem_of(part, pull, push)]
    level = meshed(part, "quadrilateral", 2)
    together = solve_cases(problems, level)
    for problem, found in zip(problems, together, strict=True):
        assert found.unknowns == pytest.approx(solve(problem, level).unknowns, rel=1e-10, abs=1e-14)
    assert together[2].unknowns == pytest.approx(
        together[0].unknowns + together[1].unknowns, rel=1e-10, abs=1e-14
    )


def test_dependent_cases_need_no_iterations() -> None:
    """A case that is a sum of those before starts at its solution: its field is theirs to the last digits."""
    part = bar()
    pull, push = Traction("right", (100.0, 0.0)), Traction("right", (0.0, -40.0))
    level = mesh(part, part.divisions(size=None, divisions=40), shape="quadrilateral", degree=2)
    assert level.nodes.size > 20_000
    first, second, both = solve_cases(
        [problem_of(part, pull), problem_of(part, push), problem_of(part, pull, push)], level
    )
    scale = np.abs(both.unknowns).max()
    assert both.unknowns == pytest.approx(first.unknowns + second.unknowns, abs=1e-11 * scale)
