"""The parts of the models: cell shapes, odd proportions, conflicts, singular corners, bearing load."""

from typing import Any

import numpy as np
import pytest

from convergence import rooms
from convergence.corners.singular_corners import singular_corners
from convergence.errors import Unsuitable
from convergence.fem.held import boundary_nodes
from convergence.fem.loads import BearingLoad
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.problem import Problem
from convergence.fem.solution import solve

STEEL = Material(210000.0, 0.3)
FIXED_SHAPE = ("patch_test", "skew_panel")  # distorted as published
ASPECT = 4.0


def problem_of(name: str, **arguments: Any) -> Problem:
    problem: Problem = rooms.find("models", name)(material=STEEL, **arguments)
    return problem


def cells_of(problem: Problem, divisions: int, shape: Any, degree: int) -> Mesh:
    counts = problem.part.divisions(size=None, divisions=divisions)
    return mesh(problem.part, counts, shape=shape, degree=degree)


PLANE = [name for name in rooms.names("models") if problem_of(name).part.dimension == 2]


@pytest.mark.parametrize("name", [name for name in PLANE if name not in FIXED_SHAPE])
@pytest.mark.parametrize("divisions", [2, 3, 4])
def test_default_cells_are_not_slender(name: str, divisions: int) -> None:
    cells = cells_of(problem_of(name), divisions, "quadrilateral", 1)
    corners = cells.nodes[:, cells.cell_nodes]
    lengths = np.hypot(*(np.roll(corners, -1, axis=1) - corners))
    assert (lengths.max(axis=0) / lengths.min(axis=0)).max() < ASPECT


ODD = [
    ("lug", {"angle": angle, "hole_radius": radius, "height": height})
    for angle in (-180.0, -101.25, -33.0, 11.25, 78.7, 135.0)
    for radius in (4.0, 34.0)
    for height in (41.0, 300.0)
] + [
    ("l_bracket", {"fillet_radius": 2.0}),
    ("l_bracket", {"fillet_radius": 119.0}),
    ("l_bracket", {"fillet_radius": 30.0, "post_width": 30.0}),
    ("l_bracket", {"fillet_radius": 30.0, "arm_depth": 20.0}),
    ("l_bracket", {"fillet_radius": 0.0, "post_width": 20.0}),
    ("holed_strip", {"hole_diameter": 3.0}),
    ("holed_strip", {"hole_diameter": 57.0}),
    ("holed_strip", {"half_length": 31.0}),
    ("perforated_plate", {"hole_radius": 1.0}),
    ("perforated_plate", {"hole_radius": 38.0}),
    ("elliptic_panel", {"opening_half_x": 300.0, "opening_half_y": 40.0}),
    ("tapered_arm", {"depth_tip": 20.0}),
    ("skew_panel", {"rise": -440.0}),
    ("thick_cylinder", {"inner_radius": 2.0}),
    ("thick_cylinder", {"sector": 5.0}),
    ("thick_cylinder", {"sector": 175.0, "inner_radius": 5.0}),
]


@pytest.mark.parametrize(("name", "arguments"), ODD)
@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
def test_odd_proportions_have_no_inverted_cells(name: str, arguments: Any, shape: str) -> None:
    for divisions in (1, 2):
        cells_of(problem_of(name, **arguments), divisions, shape, 2)  # raises on an inverted cell


CONFLICTS = [
    ("thick_cylinder", {"inner_radius": 50.0}, ["outer_radius"]),
    ("thick_cylinder", {"sector": 180.0}, ["sector"]),
    ("perforated_plate", {"hole_radius": 40.0}, ["half_width"]),
    ("holed_strip", {"hole_diameter": 61.0, "half_length": 20.0}, ["hole_diameter", "half_length"]),
    ("elliptic_panel", {"outer_half_x": 90.0, "outer_half_y": 90.0}, ["outer_half_x", "outer_half_y"]),
    ("l_bracket", {"post_height": 90.0, "arm_length": 100.0}, ["post_height", "arm_length"]),
    ("lug", {"hole_radius": 41.0, "height": 30.0, "force": -1.0}, ["hole_radius", "height", "force"]),
]


@pytest.mark.parametrize(("name", "arguments", "keys"), CONFLICTS)
def test_conflicts_are_all_named(name: str, arguments: Any, keys: list[str]) -> None:
    with pytest.raises(Unsuitable) as caught:
        problem_of(name, **arguments)
    assert [key for key, _, _ in caught.value.problems] == keys


CORNERS: dict[str, dict[str, float | None]] = {
    "elliptic_panel": {},
    "exact_cantilever": {},
    "holed_strip": {},
    "l_bracket": {"top_left": 0.7583491579, "top_right": 0.7583491579},
    "l_domain": {"inner_corner": 0.5444837368},
    "lug": {"base_left": 0.7583491579, "base_right": 0.7583491579},
    "patch_test": {},
    "perforated_plate": {},
    "tapered_arm": {"root_lower": None, "root_upper": None},
    "thick_cylinder": {},
}


@pytest.mark.parametrize("name", sorted(CORNERS))
def test_singular_corners(name: str) -> None:
    """Williams 1952, plane stress (l_domain is free on both sides), Poisson's ratio 0.3."""
    found = {corner.name: corner.exponent for corner in singular_corners(problem_of(name))}
    assert set(found) == set(CORNERS[name])
    for corner, exponent in CORNERS[name].items():
        assert exponent is None or found[corner] == pytest.approx(exponent, abs=5.1e-11)


def test_fillet_takes_the_inner_corner_away() -> None:
    sharp = {
        corner.name: corner.exponent
        for corner in singular_corners(problem_of("l_bracket", fillet_radius=0.0))
    }
    assert sharp["inner_corner"] == pytest.approx(0.5444837367825, abs=5.1e-11)


@pytest.mark.parametrize("divisions", [1, 2, 3])
def test_fillet_is_resolved(divisions: int) -> None:
    problem = problem_of("l_bracket", fillet_radius=3.0)
    cells = cells_of(problem, divisions, "quadrilateral", 1)
    (fillet,) = cells.facets["fillet"]
    assert fillet.shape[1] >= 4 * divisions
    centre = np.array([80.0 + 3.0, 80.0 + 3.0])
    for degree in (1, 2):
        level = cells_of(problem, divisions, "quadrilateral", degree)
        on_arc = level.nodes[:, boundary_nodes(level, "fillet")] - centre[:, None]
        assert np.hypot(*on_arc) == pytest.approx(3.0, rel=1e-12)


@pytest.mark.parametrize("angle", [0.0, 30.0, -101.0])
@pytest.mark.parametrize("degree", [1, 2])
def test_lug_carries_the_pull(angle: float, degree: int) -> None:
    """The base's reaction is the pull itself, whatever the thickness; the pin's half begins at nodes."""
    problem = problem_of("lug", angle=angle, force=1000.0, thickness=7.0)
    solution = solve(problem, cells_of(problem, 1, "triangle", degree))
    direction = np.radians(90.0 + angle)
    pull = 1000.0 * np.array([np.cos(direction), np.sin(direction)])
    assert solution.reaction("base")[:2] == pytest.approx(-pull, abs=1e-6)
    (load,) = problem.loads
    assert isinstance(load, BearingLoad)
    for name in ("hole_90", "hole_270"):
        assert np.dot(problem.part.points[name], load.force) == pytest.approx(0.0, abs=1e-9)
    assert np.dot(problem.part.points["hole_0"], load.force) == pytest.approx(16.0 * 1000.0)


def test_lug_pulled_straight_is_symmetric() -> None:
    solution = solve(problem_of("lug"), cells_of(problem_of("lug"), 2, "triangle", 2))
    nodes, moved = solution.mesh.nodes, solution.displacement
    mirrored = [int(np.hypot(nodes[0] + x, nodes[1] - y).argmin()) for x, y in nodes.T]
    assert np.abs(nodes[0, mirrored] + nodes[0]).max() < 1e-9
    largest = np.abs(moved).max()
    assert np.abs(moved[0, mirrored] + moved[0]).max() < 1e-9 * largest
    assert np.abs(moved[1, mirrored] - moved[1]).max() < 1e-9 * largest
