"""Loads, reactions, energies and refusals of the solver, on a block with known answers."""

from dataclasses import replace

import numpy as np
import pytest

from convergence.errors import SolvingError
from convergence.fem.loads import BearingLoad, BodyForce, Load, Pressure, Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.mesh import Mesh, Shape, mesh
from convergence.fem.part import Part, arc
from convergence.fem.problem import Problem, Support
from convergence.fem.solution import Solution, solve
from convergence.fem.stress import cell_node_stress

EVERY_CELL = pytest.mark.parametrize(
    ("shape", "degree"), [(shape, degree) for shape in ("triangle", "quadrilateral") for degree in (1, 2)]
)
WIDTH, HEIGHT, THICKNESS = 4.0, 3.0, 0.7
BLOCK = Part(
    points={"a": (0.0, 0.0), "b": (WIDTH, 0.0), "c": (WIDTH, HEIGHT), "d": (0.0, HEIGHT)},
    blocks=(("a", "b", "c", "d"),),
    boundaries={
        "bottom": (("a", "b"),),
        "right": (("b", "c"),),
        "top": (("c", "d"),),
        "left": (("d", "a"),),
    },
)
CLAMPED = (Support("left", x=0.0, y=0.0, boundary="left"),)


def block(*loads: Load, supports: tuple[Support, ...] = CLAMPED, kind: PlaneKind = "plane stress") -> Problem:
    return Problem("block", BLOCK, {"body": Material(1000.0, 0.3)}, supports, loads, kind, THICKNESS)


def level(shape: Shape, degree: int, divisions: int = 2) -> Mesh:
    return mesh(BLOCK, BLOCK.divisions(size=None, divisions=divisions), shape=shape, degree=degree)


def total(solution: Solution) -> np.ndarray:
    return solution.resultant(solution.load)


LOADS: list[tuple[Load, tuple[float, float, float]]] = [
    (Traction("right", (2.0, -1.0)), (6.0, -3.0, -21.0)),
    (Traction("right", lambda x, y: np.array([y, 0.0 * y])), (4.5, 0.0, -9.0)),
    (Pressure("top", 5.0), (0.0, -20.0, -40.0)),
    (BodyForce((0.0, -2.0)), (0.0, -24.0, -48.0)),
]


@EVERY_CELL
@pytest.mark.parametrize(("load", "wanted"), LOADS)
def test_resultant_of_each_load(
    shape: Shape, degree: int, load: Load, wanted: tuple[float, float, float]
) -> None:
    """Force x, force y and moment about the origin, per thickness, integrated by hand."""
    solution = solve(block(load), level(shape, degree))
    assert total(solution) == pytest.approx(THICKNESS * np.array(wanted), abs=1e-11)
    assert solution.reaction("left") == pytest.approx(-total(solution), abs=1e-9)
    assert solution.energy == pytest.approx(solution.work, rel=1e-10)


@EVERY_CELL
def test_bearing_load_has_the_force_itself_as_resultant(shape: Shape, degree: int) -> None:
    """Whatever the thickness and the mesh; it is largest straight ahead and presses outward only."""
    ring = Part(
        points={"a": (1.0, 0.0), "b": (2.0, 0.0), "c": (-2.0, 0.0), "d": (-1.0, 0.0)},
        blocks=(("a", "b", "c", "d"),),
        curves={("a", "d"): arc((0.0, 0.0), 1.0, 0.0, 180.0), ("b", "c"): arc((0.0, 0.0), 2.0, 0.0, 180.0)},
        boundaries={"hole": (("a", "d"),), "ends": (("a", "b"), ("c", "d"))},
    )
    problem = Problem(
        title="half ring",
        part=ring,
        materials={"body": Material(1000.0, 0.3)},
        supports=(Support("ends", x=0.0, y=0.0, boundary="ends"),),
        loads=(BearingLoad("hole", (0.0, 50.0), (0.0, 0.0)),),
        thickness=THICKNESS,
    )
    solution = solve(problem, mesh(ring, ring.divisions(size=None, divisions=4), shape=shape, degree=degree))
    assert total(solution)[:2] == pytest.approx([0.0, 50.0], abs=1e-10)
    x, y = solution.mesh.nodes
    forces = solution.load.reshape(-1, 2).T
    loaded = (
        np.hypot(*forces) > 1e-12 * 50.0
    )  # the others have shape functions of value zero, but for rounding
    assert (np.hypot(x, y)[loaded] < 1.0 + 1e-9).all()
    assert (x[loaded] * forces[0, loaded] + y[loaded] * forces[1, loaded] > 0).all()
    assert np.abs(x[np.hypot(*forces).argmax()]) < 0.2


@EVERY_CELL
@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
def test_uniform_tension_is_exact(shape: Shape, degree: int, kind: PlaneKind) -> None:
    """Hooke's law: stress 5 along x on rollers; out of plane 0 or nu times it; energy s²/(2E') per volume."""
    rollers = (Support("left", x=0.0, boundary="left"), Support("corner", y=0.0, point="a"))
    solution = solve(block(Traction("right", (5.0, 0.0)), supports=rollers, kind=kind), level(shape, degree))
    stress = cell_node_stress(solution).reshape(4, -1)
    out = 1.5 if kind == "plane strain" else 0.0
    assert np.abs(stress - np.array([5.0, 0.0, out, 0.0])[:, None]).max() < 1e-10
    young = 1000.0 / (1 - 0.09) if kind == "plane strain" else 1000.0
    assert solution.energy == pytest.approx(12.0 * THICKNESS * 25.0 / (2 * young), rel=1e-12)
    assert solution.displacement[0, solution.mesh.vertices["c"]] == pytest.approx(20.0 / young)


@EVERY_CELL
def test_prescribed_displacement_does_the_work(shape: Shape, degree: int) -> None:
    """A pull by displacement gives the reactions of the same pull by force, and their work as energy."""
    supports = (*CLAMPED, Support("right", x=0.01, y=lambda x, y: 0.002 * y, boundary="right"))
    solution = solve(block(supports=supports), level(shape, degree))
    assert solution.reaction("right")[0] > 0
    assert solution.reaction("left") == pytest.approx(-solution.reaction("right"), abs=1e-9)
    assert solution.energy == pytest.approx(solution.work, rel=1e-12)


def test_the_first_support_keeps_a_shared_node() -> None:
    supports = (*CLAMPED, Support("bottom", y=0.5, boundary="bottom"))
    solution = solve(block(supports=supports), level("quadrilateral", 1))
    assert solution.displacement[1, solution.mesh.vertices["a"]] == 0.0
    assert not set(solution.held.by_support["left"]) & set(solution.held.by_support["bottom"])


def test_energy_rises_on_nested_meshes() -> None:
    energies = [
        solve(block(Traction("right", (0.0, 1.0))), level("triangle", 1, n)).energy for n in (1, 2, 4, 8)
    ]
    assert (np.diff(energies) > 0).all()


def test_a_loose_part_is_refused() -> None:
    roller = (Support("left", x=0.0, boundary="left"),)
    loose = block(Traction("right", (0.0, 1.0)), supports=roller)
    with pytest.raises(SolvingError, match="supports"):
        solve(loose, level("triangle", 1))
    free = replace(loose, supports=(Support("corner", x=0.0, point="a"),))
    with pytest.raises(SolvingError, match="supports"):
        solve(free, level("quadrilateral", 2))
