"""Supports along normals and on springs, against closed forms."""

from dataclasses import replace

import numpy as np
import pytest

from convergence.errors import SolvingError, Unsuitable
from convergence.fem.loads import Pressure, Traction
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part, arc
from convergence.fem.problem import AnyPart, ElasticSupport, Exact, Problem, Support
from convergence.fem.recovery import exact_energy_error
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution, solve
from convergence.models.thick_cylinder import thick_cylinder

STEEL = Material(210000.0, 0.3)
INNER, OUTER, PRESSURE = 20.0, 40.0, 50.0


def sector(start: float, end: float) -> Part:
    """Return a sector of a ring between two angles in degrees."""
    corners = {}
    for name, radius, angle in (
        ("a", INNER, start),
        ("b", OUTER, start),
        ("c", OUTER, end),
        ("d", INNER, end),
    ):
        at = np.radians(angle)
        corners[name] = (float(radius * np.cos(at)), float(radius * np.sin(at)))
    return Part(
        points=corners,
        blocks=(("a", "b", "c", "d"),),
        curves={("b", "c"): arc((0, 0), OUTER, start, end), ("a", "d"): arc((0, 0), INNER, start, end)},
        boundaries={
            "first": (("a", "b"),),
            "outer": (("b", "c"),),
            "last": (("c", "d"),),
            "bore": (("d", "a"),),
        },
    )


def ring_sector(start: float, end: float) -> Problem:
    exact = thick_cylinder(
        inner_radius=INNER, outer_radius=OUTER, pressure=PRESSURE, kind="plane strain", material=STEEL
    ).exact
    return Problem(
        title="Sector",
        part=sector(start, end),
        materials={"body": STEEL},
        supports=(
            Support("first", normal=0.0, boundary="first"),
            Support("last", normal=0.0, boundary="last"),
        ),
        loads=(Pressure("bore", PRESSURE),),
        kind="plane strain",
        exact=exact,
    )


def meshed(part: AnyPart, divisions: int, shape: str = "quadrilateral", degree: int = 2) -> Mesh:
    counts = part.divisions(size=None, divisions=divisions)
    return mesh(part, counts, shape=shape, degree=degree)  # type: ignore[arg-type]


def test_symmetry_planes_at_any_angle_give_the_ring() -> None:
    """Between planes of symmetry at 20° and 65° a sector of a ring is the ring: energy error of order 2."""
    problem = ring_sector(20.0, 65.0)
    errors = []
    for divisions in (2, 4, 8):
        errors.append(
            float(np.sqrt(exact_energy_error(solve(problem, meshed(problem.part, divisions))).sum()))
        )
    rates = np.log2(np.array(errors[:-1]) / errors[1:])
    assert rates[-1] == pytest.approx(2.0, abs=0.1)


def test_turning_a_problem_turns_its_answer() -> None:
    """The same sector along the axes and turned by 25°: equal energies, and reactions turned with it."""
    straight, turned = ring_sector(0.0, 40.0), ring_sector(25.0, 65.0)
    first = solve(straight, meshed(straight.part, 2))
    second = solve(turned, meshed(turned.part, 2))
    assert second.energy == pytest.approx(first.energy, rel=1e-11)
    angle = np.radians(25.0)
    turn = np.array([[np.cos(angle), -np.sin(angle)], [np.sin(angle), np.cos(angle)]])
    for support in ("first", "last"):
        wanted = turn @ first.reaction(support)[:2]
        assert second.reaction(support)[:2] == pytest.approx(wanted, abs=1e-9 * np.abs(wanted).max())


def test_multigrid_takes_turned_supports() -> None:
    """The turned sector on a mesh of multigrid's size agrees with the straight one, solved by it too."""
    energies = []
    for start in (0.0, 25.0):
        problem = ring_sector(start, start + 40.0)
        level = meshed(problem.part, 44)
        assert 2 * level.nodes.shape[1] > 20_000
        energies.append(solve(problem, level).energy)
    assert energies[1] == pytest.approx(energies[0], rel=1e-9)


def box(width: float, depth: float) -> Part:
    return Part(
        points={"a": (0.0, 0.0), "b": (width, 0.0), "c": (width, depth), "d": (0.0, depth)},
        blocks=(("a", "b", "c", "d"),),
        boundaries={
            "bottom": (("a", "b"),),
            "right": (("b", "c"),),
            "top": (("c", "d"),),
            "left": (("d", "a"),),
        },
    )


def on_springs(tangential: float) -> Solution:
    part = SolidPart(box(3.0, 2.0), (("back", 0.0), ("front", 4.0)))
    supports: list[Support | ElasticSupport] = [
        ElasticSupport("ground", "bottom", normal=80.0, tangential=tangential),
        Support("left", x=0.0, boundary="left"),
    ]
    if not tangential:
        supports.append(Support("back", z=0.0, boundary="back"))
    problem = Problem(
        "Block on springs",
        part,
        {"body": Material(1000.0, 0.0)},
        tuple(supports),
        (Pressure("top", 5.0),),
        "solid",
    )
    return solve(problem, meshed(part, 2, "hexahedron"))


@pytest.mark.parametrize("tangential", [0.0, 10.0])
def test_a_block_sinks_into_its_foundation(tangential: float) -> None:
    """Poisson's ratio 0, pressure 5: u = -5/80 below, and 5 × 2/1000 more on top; the ground bears 60."""
    solution = on_springs(tangential)
    y = solution.mesh.nodes[1]
    assert solution.displacement[1] == pytest.approx(-5.0 / 80.0 - 5.0 * y / 1000.0, rel=1e-10)
    assert solution.reaction("ground")[:3] == pytest.approx([0.0, 60.0, 0.0], abs=1e-9)
    assert solution.energy == pytest.approx(0.5 * 5.0**2 / 1000.0 * 24.0, rel=1e-10)
    assert solution.quadratic_energy == pytest.approx(solution.work, rel=1e-10)
    assert np.abs(solution.resultant(solution.load + solution.reactions)).max() < 1e-9


def test_loose_parts_are_named() -> None:
    """Springs across the bottom leave a block free to slide; a guide leaves a ring to turn."""
    part = box(3.0, 2.0)
    loose = Problem(
        "Sliding",
        part,
        {"body": STEEL},
        (ElasticSupport("ground", "bottom", normal=80.0),),
        (Pressure("top", 5.0),),
    )
    with pytest.raises(SolvingError, match="move along x"):
        solve(loose, meshed(part, 1))
    guided = replace(ring_sector(0.0, 40.0), supports=(Support("outer", normal=0.0, boundary="outer"),))
    with pytest.raises(SolvingError, match="do not hold"):
        solve(guided, meshed(guided.part, 1))


def test_a_support_that_holds_nothing_is_refused() -> None:
    part = box(3.0, 2.0)
    problem = Problem("Free", part, {"body": STEEL}, (Support("left", boundary="left"),), ())
    with pytest.raises(Unsuitable, match="left"):
        solve(problem, meshed(part, 1))


def test_meeting_supports_hold_each_direction_once() -> None:
    """Where an inclined plane meets a held edge the corner keeps both values.

    The displacement u = (c x, 0) on a unit box: its left edge is held at 0, its top and bottom by their
    normals, its right edge at c. The corners have two supports each; the field is held exactly.
    """
    part = box(1.0, 1.0)
    supports = (
        Support("bottom", normal=0.0, boundary="bottom"),
        Support("top", normal=0.0, boundary="top"),
        Support("left", normal=0.0, boundary="left"),
        Support("right", normal=1e-3, boundary="right"),
    )
    problem = Problem("Pulled", part, {"body": STEEL}, supports, (), "plane strain")
    solution = solve(problem, meshed(part, 3))
    assert solution.displacement == pytest.approx(
        np.array([1e-3 * solution.mesh.nodes[0], np.zeros(solution.mesh.nodes.shape[1])]), abs=1e-15
    )


def test_exact_takes_three_coordinates() -> None:
    """A bar of solids in tension: every field of the problem is asked for with (x, y, z)."""
    part = SolidPart(box(2.0, 1.0), (("back", 0.0), ("front", 1.0)))
    young = STEEL.young

    def displacement(x: np.ndarray, y: np.ndarray, z: np.ndarray) -> np.ndarray:
        return np.array([x, -0.3 * y, -0.3 * z]) * 100.0 / young

    def stress(x: np.ndarray, y: np.ndarray, z: np.ndarray) -> np.ndarray:
        none = 0.0 * x
        return np.array([100.0 + none, none, none, none, none, none])

    problem = Problem(
        title="Bar",
        part=part,
        materials={"body": STEEL},
        supports=(
            Support("left", x=0.0, boundary="left"),
            Support("bottom", y=0.0, boundary="bottom"),
            Support("back", z=0.0, boundary="back"),
        ),
        loads=(Traction("right", (100.0, 0.0, 0.0)),),
        kind="solid",
        exact=Exact(displacement, stress),
    )
    for shape in ("tetrahedron", "hexahedron", "wedge"):
        solution = solve(problem, meshed(part, 1, shape, 1))
        assert solution.displacement == pytest.approx(displacement(*solution.mesh.nodes), abs=1e-15)
        assert float(exact_energy_error(solution).sum()) < 1e-20 * solution.energy
