"""Solid parts against their plane models, their symmetries, and what is asked of their proportions."""

from collections.abc import Callable

import numpy as np
import pytest

from convergence.corners.singular_corners import singular_corners
from convergence.errors import Unsuitable
from convergence.fem.element import Shape
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve
from convergence.models.elliptic_plate import elliptic_plate
from convergence.models.heated_taper import heated_taper
from convergence.models.holed_strip import holed_strip
from convergence.models.hollow_cylinder import hollow_cylinder
from convergence.models.l_bracket import l_bracket
from convergence.models.loaded_block import loaded_block
from convergence.models.lug import lug
from convergence.models.solid_bracket import solid_bracket
from convergence.models.solid_lug import solid_lug
from convergence.models.solid_plate_with_hole import solid_plate_with_hole
from convergence.models.thick_cylinder import thick_cylinder

Climb = Callable[..., list[Solution]]
STEEL = Material(210000.0, 0.3)
NO_CONTRACTION = Material(210000.0, 0.0)
UNIT = Material(1.0, 0.3)
LOOSE = 0.1  # of the order 2 l, by the next powers of h on these meshes
SOLID_SHAPES: tuple[Shape, ...] = ("tetrahedron", "wedge", "hexahedron")


def coarse(problem: Problem, shape: Shape, degree: int, divisions: int = 1) -> Solution:
    counts = problem.part.divisions(size=None, divisions=divisions)
    return solve(problem, mesh(problem.part, counts, shape=shape, degree=degree))


PAIRS = {
    "strip": (
        holed_strip(half_length=90.0, thickness=18.0, material=NO_CONTRACTION),
        solid_plate_with_hole(material=NO_CONTRACTION),
        0.5,
    ),
    "lug": (lug(angle=20.0, material=NO_CONTRACTION), solid_lug(angle=20.0, material=NO_CONTRACTION), 1.0),
    "sharp bracket": (
        l_bracket(fillet_radius=0.0, thickness=40.0, material=NO_CONTRACTION),
        solid_bracket(fillet_radius=0.0, material=NO_CONTRACTION),
        1.0,
    ),
    "filleted bracket": (
        l_bracket(thickness=40.0, material=NO_CONTRACTION),
        solid_bracket(material=NO_CONTRACTION),
        1.0,
    ),
}


@pytest.mark.parametrize("name", PAIRS)
def test_without_contraction_a_solid_is_its_plane_model(name: str) -> None:
    """At Poisson's ratio 0 plane stress is exact through any thickness, also for the discrete solutions.

    Linear wedges over linear triangles have the same integrals, so nothing is left but rounding, 1e-16 times
    a condition number below 1e6.
    """
    flat, solid, share = PAIRS[name]
    counts = solid.part.divisions(size=None, divisions=1)
    plan = {family: count for family, count in counts.items() if family >= 0}
    plane = solve(flat, mesh(flat.part, plan, shape="triangle", degree=1))
    swept = solve(solid, mesh(solid.part, counts, shape="wedge", degree=1))
    assert swept.energy == pytest.approx(share * plane.energy, rel=1e-9)
    largest = np.abs(plane.displacement).max()
    for point, node in swept.mesh.vertices.items():
        below = plane.mesh.vertices[point.rpartition("_")[0]]
        assert np.abs(swept.displacement[:2, node] - plane.displacement[:, below]).max() < 1e-9 * largest
        assert abs(swept.displacement[2, node]) < 1e-9 * largest


def test_a_clamped_bottom_is_stiffer() -> None:
    roller, clamped = (
        coarse(loaded_block(bottom=bottom, material=STEEL), "hexahedron", 2).energy
        for bottom in ("roller", "clamped")
    )
    assert clamped < roller


def test_boss() -> None:
    """Volume to the area quadratic arcs lose (below 1e-4 of a circle in 16), and a singular foot."""
    problem = solid_lug(boss_height=6.0, angle=20.0, material=STEEL)
    assert {"boss", "boss_back", "boss_front"} <= set(problem.part.boundaries)
    hole, boss = np.pi * 16.0**2, np.pi * 26.0**2
    volume = 20.0 * (0.5 * np.pi * 40.0**2 + 90.0 * 80.0 - hole) + 2.0 * 6.0 * (boss - hole)
    for shape in SOLID_SHAPES:
        solution = coarse(problem, shape, 2)
        assert solution.mesh.measure == pytest.approx(volume, rel=1e-4)
        balance = solution.resultant(solution.load + solution.reactions)
        assert np.abs(balance[:3]).max() < 1e-9 * 25000.0
    feet = [corner for corner in singular_corners(problem) if corner.name.startswith("boss")]
    assert len(feet) == 2 and all(corner.opening == pytest.approx(270.0) for corner in feet)
    plain = coarse(solid_lug(angle=20.0, material=STEEL), "hexahedron", 2)
    assert coarse(problem, "hexahedron", 2).energy < plain.energy


def test_bracket_in_and_out_of_its_plane() -> None:
    """By symmetry in z the tip moves in the plane under one load, across it under the other."""
    down = coarse(solid_bracket(material=STEEL), "hexahedron", 2)
    across = coarse(solid_bracket(end_shear=0.0, side_shear=5.0, material=STEEL), "hexahedron", 2)
    moved = [s.displacement[:, s.mesh.vertices["tip_middle"]] for s in (down, across)]
    assert abs(moved[0][2]) < 1e-9 * np.abs(moved[0]).max()
    assert np.abs(moved[1][:2]).max() < 1e-9 * np.abs(moved[1]).max()
    assert across.reaction("top")[:3] == pytest.approx([0.0, 0.0, -5.0 * 80.0 * 40.0], abs=1e-9 * 16000.0)


@pytest.mark.parametrize(
    ("model", "arguments", "wrong"),
    [
        (hollow_cylinder, {"outer_radius": 20.0}, "outer_radius 20"),
        (hollow_cylinder, {"sector": 4.0}, "sector 4"),
        (solid_lug, {"boss_height": 5.0, "boss_radius": 50.0}, "boss_radius 50"),
        (solid_lug, {"height": 30.0}, "height 30"),
        (solid_bracket, {"grading": 2.0}, "grading 2"),
        (solid_plate_with_hole, {"hole_diameter": 70.0}, "hole_diameter 70"),
        (loaded_block, {"patch_half_y": 700.0}, "patch_half_y 700"),
        (loaded_block, {"probe_depth": 700.0}, "probe_depth 700"),
        (loaded_block, {"bottom": "bedded", "bedding": 0.0}, "bedding 0"),
        (elliptic_plate, {"outer_half_y": 90.0}, "outer_half_y 90"),
        (heated_taper, {"cone_end": 60.0}, "cone_end 60"),
        (heated_taper, {"bore_radius": 100.0}, "bore_radius 100"),
    ],
)
def test_unsuitable_proportions(
    model: Callable[..., Problem], arguments: dict[str, float], wrong: str
) -> None:
    with pytest.raises(Unsuitable, match=wrong):
        model(material=STEEL, **arguments)


def test_hollow_cylinder_is_the_plane_one() -> None:
    """Lamé's field of plane strain in every section, and the energy of the length."""
    solid = hollow_cylinder(length=15.0, material=STEEL).exact
    plane = thick_cylinder(length=15.0, kind="plane strain", material=STEEL).exact
    assert solid is not None and plane is not None
    assert solid.energy == plane.energy
    x, y, z = np.array([[30.0, 20.0], [10.0, 35.0], [0.0, 7.0]])
    assert (solid.displacement(x, y, z) == [*plane.displacement(x, y), [0.0, 0.0]]).all()
    assert (solid.stress(x, y, z)[:4] == plane.stress(x, y)).all()
    assert (solid.stress(x, y, z)[4:] == 0.0).all()
