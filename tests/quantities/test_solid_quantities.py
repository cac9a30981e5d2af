"""Quantities of solids: a thick cylinder of plane strain, extruded, against Lamé's field."""

from functools import cache
from typing import Any

import numpy as np
import pytest

from convergence import rooms
from convergence.errors import Unsuitable
from convergence.fem.element import element
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.part import Part, finer
from convergence.fem.problem import Exact, Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution, solve
from convergence.models.thick_cylinder import thick_cylinder
from convergence.quantities._cut import _tetrahedra

pytestmark = pytest.mark.slow

STEEL = Material(210000.0, 0.3)
BORE, RIM, LENGTH, PRESSURE = 30.0, 45.0, 30.0, 21.0
SCALE = PRESSURE * BORE**2 / (RIM**2 - BORE**2)
HOOP = SCALE * RIM**2  # hoop stress SCALE + HOOP / r²
SOLIDS = [(shape, degree) for shape in ("hexahedron", "wedge", "tetrahedron") for degree in (1, 2)]
HALF = float(np.sqrt(0.5))


@cache
def cylinders(shape: str, degree: int) -> tuple[Solution, ...]:
    plane = thick_cylinder(material=STEEL, kind="plane strain")
    part, flat = SolidPart(plane.part, (("back", 0.0), ("front", LENGTH))), plane.exact
    assert flat is not None
    exact = Exact(
        lambda x, y, z: np.array([*flat.displacement(x, y), 0.0 * z]),
        lambda x, y, z: np.array([*flat.stress(x, y), 0.0 * z, 0.0 * z]),
    )
    ends = (Support("back", z=0.0, boundary="back"), Support("front", normal=0.0, boundary="front"))
    problem = Problem(
        "cylinder", part, plane.materials, (*plane.supports, *ends), plane.loads, kind="solid", exact=exact
    )
    counts = part.divisions(size=None, divisions=1)
    levels = range(1, 4) if degree == 1 else range(3)
    return tuple(
        solve(problem, mesh(part, finer(counts, 2.0, n), shape=shape, degree=degree))  # type: ignore[arg-type]
        for n in levels
    )


@cache
def bar(shape: str, degree: int) -> Solution:
    """A bar 40 x 10 x 20 in pure shear and tension: uniform stress, exact in every cell."""
    plan = Part(
        points={"a": (0.0, 0.0), "b": (40.0, 0.0), "c": (40.0, 10.0), "d": (0.0, 10.0)},
        blocks=(("a", "b", "c", "d"),),
        boundaries={
            "left": (("d", "a"),),
            "right": (("b", "c"),),
            "low": (("a", "b"),),
            "high": (("c", "d"),),
        },
    )
    part = SolidPart(plan, (("back", 0.0), ("front", 20.0)))
    loads = (
        Traction("right", (10.0, 3.0, 0.0)),
        Traction("high", (3.0, 0.0, 0.0)),
        Traction("low", (-3.0, 0.0, 0.0)),
    )
    slope = np.array([[10.0, 2.6 * 3.0], [0.0, -3.0]]) / STEEL.young
    supports = (
        Support("left", x=lambda x, y, z: slope[0, 1] * y, boundary="left"),
        Support("root", y=0.0, z=0.0, point="a_back"),
        Support("side", z=0.0, point="d_back"),
        Support("tie", y=0.0, point="a_front"),
        Support("hold", y=lambda x, y, z: slope[1, 1] * y, boundary="left"),
    )
    problem = Problem("bar", part, {"body": STEEL}, supports, loads, kind="solid")
    counts = part.divisions(size=None, divisions=3)
    return solve(problem, mesh(part, counts, shape=shape, degree=degree))  # type: ignore[arg-type]


def measure(name: str, solution: Solution, **arguments: Any) -> float:
    found = rooms.find("quantities", name)(solution, **arguments)
    return float(getattr(found, "value", found))


@pytest.mark.parametrize(("shape", "degree"), SOLIDS)
def test_tetrahedra_fill_a_cell(shape: str, degree: int) -> None:
    kind = element(shape, degree)  # type: ignore[arg-type]
    chosen = kind.nodes[_tetrahedra(kind.shape, degree)]
    volumes = np.abs(np.linalg.det(chosen[:, 1:] - chosen[:, :1])) / 6.0
    assert volumes.sum() == pytest.approx({"hexahedron": 1.0, "wedge": 0.5, "tetrahedron": 1.0 / 6.0}[shape])


@pytest.mark.parametrize(("shape", "degree"), SOLIDS)
@pytest.mark.parametrize("recovery", ["recovered", "direct"])
def test_uniform_stress_through_any_cut(shape: str, degree: int, recovery: str) -> None:
    """Uniform stress times area, whatever the plane: upright, oblique, along cell faces.

    The plane is moved by 1e-9 of the part's size off nodes, which a moment shows: 2100 N times 5e-8 mm.
    """
    solution = bar(shape, degree)
    stress = np.array([[10.0, 3.0, 0.0], [3.0, 0.0, 0.0], [0.0, 0.0, 0.0]])
    middle, planes = (20.0, 5.0, 10.0), ((1.0, 0.0, 0.0), (2.0, 1.0, 0.0), (1.0, -0.4, 0.3), (-1.0, 0.0, 0.0))
    for normal in planes:
        n = np.array(normal) / np.linalg.norm(normal)
        force = stress @ n * 200.0 / abs(n[0])  # the plane leaves through the four long faces
        cut = {"at": middle, "normal": normal, "recovery": recovery}
        for axis, part in zip("xyz", force, strict=True):
            assert measure("cut_force", solution, **cut, component=axis) == pytest.approx(part, abs=1e-4)
            assert measure("cut_moment", solution, **cut, component=axis) == pytest.approx(0.0, abs=1e-3)
        assert measure("cut_force", solution, **cut) == pytest.approx(float(force @ n), rel=1e-9)
    away = {"at": (20.0, 0.0, 0.0), "normal": (1.0, 0.0, 0.0), "recovery": recovery}
    for axis, part in zip("xyz", np.cross([0.0, 5.0, 10.0], [2000.0, 600.0, 0.0]), strict=True):
        assert measure("cut_moment", solution, **away, component=axis) == pytest.approx(part, abs=1e-3)


def test_what_a_cut_refuses() -> None:
    solution = bar("hexahedron", 1)
    with pytest.raises(Unsuitable, match="cuts the part"):
        measure("cut_force", solution, at=(50.0, 0.0, 0.0), normal=(1.0, 0.0, 0.0))
    with pytest.raises(Unsuitable, match="not all 0"):
        measure("cut_force", solution, at=(5.0, 0.0, 0.0), normal=(1.0, 0.0))
    with pytest.raises(Unsuitable, match="a plane part; cut_force"):
        measure("section_moment", solution, start=(0.0, 0.0, 0.0), end=(0.0, 10.0, 0.0))
    small = measure("cut_force", solution, at=(20.0, 5.0, 10.0), normal=(1.0, 0.0, 0.0), radius=30.0)
    assert small == pytest.approx(2000.0, rel=1e-9), "all of the section lies within"
    inner = measure("cut_force", solution, at=(20.0, 5.0, 10.0), normal=(1.0, 0.0, 0.0), radius=4.0)
    assert inner < 2000.0


def lame_bending() -> float:
    """Six over t² times ∫ HOOP / r² (t/2 − (r − BORE)) dr, by hand."""
    t = RIM - BORE
    return 6.0 * HOOP / t**2 * (0.5 * (BORE + RIM) * (1 / BORE - 1 / RIM) - np.log(RIM / BORE))


COS, SIN = float(np.cos(np.radians(33.0))), float(np.sin(np.radians(33.0)))
WALL = {"start": (BORE * COS, BORE * SIN, 13.0), "end": (RIM * COS, RIM * SIN, 13.0)}
# what Lamé says on the cuts through the wall and across the axis, on a line, at a place, on the front
CASES = [
    ("cut_force", {"at": (27.0, 27.0, 11.0), "normal": (1.0, -1.0, 0.0)}, PRESSURE * BORE * LENGTH),
    (
        "cut_force",
        {"at": (37.0, 0.0, 11.0), "normal": (0.0, 0.0, 1.0)},
        0.15 * np.pi * SCALE * (RIM**2 - BORE**2),
    ),
    (
        "linearised_stress",
        WALL | {"share": "membrane", "component": "first_principal"},
        PRESSURE * BORE / (RIM - BORE),
    ),
    ("linearised_stress", WALL | {"share": "bending", "component": "first_principal"}, lame_bending()),
    ("mean_stress", WALL | {"component": "first_principal"}, 42.0),
    (
        "stress",
        {"at": (37.5 * HALF, 37.5 * HALF, 15.0), "component": "first_principal"},
        SCALE + HOOP / 37.5**2,
    ),
    (
        "hot_spot_stress",
        {"toe": (35.0, 0.0, 30.0), "along": (0.0, 0.0, -1.0), "thickness": 15.0},
        0.6 * SCALE,
    ),
]


@pytest.mark.parametrize(("shape", "degree"), SOLIDS)
@pytest.mark.parametrize(("name", "arguments", "exact"), CASES)
def test_values_of_the_extruded_cylinder(
    name: str, arguments: dict[str, Any], exact: float, shape: str, degree: int
) -> None:
    """On hexahedra the last halving has the formal order to 0.2, of every shape the error is small.

    The finest meshes have 8 (degree 1) and 4 (degree 2) cells over the wall: (1/8)^1 and (1/4)^2 of it.
    """
    solutions = cylinders(shape, degree)
    errors = [abs(measure(name, solution, **arguments) - exact) for solution in solutions]
    if shape == "hexahedron":
        promised = rooms.beside("quantities", name, "formal_order")(degree, shape, arguments)
        assert np.log2(errors[-2] / errors[-1]) > promised - 0.2
    assert errors[-1] < (1.0 / 8.0 if degree == 1 else 1.0 / 16.0) * abs(exact)


@pytest.mark.parametrize(("shape", "degree"), SOLIDS)
def test_means_of_the_extruded_cylinder(shape: str, degree: int) -> None:
    """Mean of u_r cos of Lamé over the outside, order 2p in the last halving; mean stress."""
    solutions = cylinders(shape, degree)
    exact = (1.3 / STEEL.young) * SCALE * (0.4 * RIM + RIM) * 2.0 / np.pi
    errors = [
        abs(measure("mean_displacement", s, boundary="outer", component="x") - exact) for s in solutions
    ]
    assert np.log2(errors[-2] / errors[-1]) > 2.0 * degree - 0.5
    mean = measure("region_stress", solutions[-1], component="xx")
    assert mean == pytest.approx(SCALE, rel=0.03 if degree == 1 else 1e-4)


def test_a_solid_that_turns() -> None:
    """A rigid turn put into the unknowns is found about each axis, on a boundary and at a point."""
    solution = bar("hexahedron", 2)
    turn = np.radians([0.1, -0.2, 0.3])
    unknowns = np.cross(turn, solution.mesh.nodes.T).ravel()
    moved = Solution(
        solution.problem, solution.mesh, solution.assembled, solution.load, unknowns, solution.held
    )
    for component, exact in zip("xyz", (0.1, -0.2, 0.3), strict=True):
        for where in ({"boundary": "right"}, {"at": (20.0, 5.0, 10.0)}):
            assert measure("rotation", moved, **where, component=component) == pytest.approx(exact, rel=1e-9)
