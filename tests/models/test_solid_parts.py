"""Solid parts against their plane models, closed forms and published values; a heated ring."""

from collections.abc import Callable

import numpy as np
import pytest

from convergence.errors import Unsuitable
from convergence.fem.corners import singular_corners
from convergence.fem.material import Material
from convergence.fem.mesh import Shape, mesh
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
from convergence.quantities.displacement import displacement
from convergence.quantities.stress import stress

Climb = Callable[..., list[Solution]]
STEEL = Material(210000.0, 0.3)
NO_CONTRACTION = Material(210000.0, 0.0)
UNIT = Material(1.0, 0.3)
SOLID_SHAPES: tuple[Shape, ...] = ("tetrahedron", "wedge", "hexahedron")


def coarse(problem: Problem, shape: Shape, degree: int, divisions: int = 1) -> Solution:
    counts = problem.part.divisions(size=None, divisions=divisions)
    return solve(problem, mesh(problem.part, counts, shape=shape, degree=degree))


def read(solutions: list[Solution], at: str, component: str) -> np.ndarray:
    """Return a recovered stress, or a displacement where the component is x, y or z, on every level."""
    if component in ("x", "y", "z"):
        return np.array([displacement(s, at=at, component=component) for s in solutions])  # type: ignore[arg-type]
    return np.array([stress(s, at=at, component=component).value for s in solutions])  # type: ignore[arg-type]


def shown(values: np.ndarray, order: float) -> float:
    """Return what the last two changes say of the error of the finest value, the larger of both."""
    before, last = np.abs(np.diff(values[-3:]))
    return float(max(last, before / 2.0**order) / (2.0**order - 1.0))


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


@pytest.mark.slow
def test_hole_in_a_thin_and_in_a_thick_strip(climb: Climb) -> None:
    """Thin, the hoop stress is that of plane stress; thick, larger in the middle, smaller at the face.

    Sternberg & Sadowsky 1949, J. Appl. Mech. 16:27, from memory, for the signs at a thickness of three
    quarters of the diameter. Howland's value: own computation (p-version). In a thin plate what is
    left falls with its thickness over the radius.
    """
    howland, order = 50.0 * 3.74716, 2
    places = ("hole_top_middle", "hole_top_face")
    thin = climb(solid_plate_with_hole(thickness=2.0, material=STEEL), "hexahedron", 2, 1, 3)
    for place in places:
        found = read(thin, place, "xx")
        assert abs(found[-1] - howland) < shown(found, order) + 0.5 * 2.0 / 12.0 * howland
    thick = climb(solid_plate_with_hole(material=STEEL), "hexahedron", 2, 1, 3)
    middle, face = (read(thick, place, "xx") for place in places)
    assert middle[-1] - shown(middle, order) > howland > face[-1] + shown(face, order)


def influence(m: float, n: float) -> float:
    """Return the vertical stress below the corner of a loaded rectangle m z × n z at depth z, over the load.

    Newmark 1935, Univ. of Illinois Eng. Exp. Station Circ. 24, from memory.
    """
    v = m**2 + n**2 + 1.0
    across = 2.0 * m * n * np.sqrt(v)
    return float(
        (across / (v + (m * n) ** 2) * (v + 1.0) / v + np.arctan2(across, v - (m * n) ** 2)) / (4.0 * np.pi)
    )


def test_influence_values() -> None:
    """The printed table: 0.175 at m = n = 1, 0.232 at m = n = 2; 0.25 close under a wide load."""
    assert influence(1.0, 1.0) == pytest.approx(0.175, abs=0.0005)
    assert influence(2.0, 2.0) == pytest.approx(0.232, abs=0.0005)
    assert influence(1e4, 1e4) == pytest.approx(0.25, abs=1e-6)


@pytest.mark.slow
@pytest.mark.parametrize("shape", SOLID_SHAPES)
def test_block_is_nearly_a_half_space(climb: Climb, shape: Shape) -> None:
    """Below the middle and the corner of the patch, for a block of 8 half sides to each side and down.

    Sides and bottom change the stress as the square of the distance at least (the stress of a point force,
    Boussinesq), so by a third of what going from 4 to 8 half sides changes, or less. On the mesh: what the
    last change leaves at order 1, one below that of the recovered stress on any shape.
    """
    exact = np.array([-4.0 * influence(1.0, 1.0), -influence(2.0, 2.0)])
    found = []
    for reach in (4.0, 8.0):
        problem = loaded_block(
            **dict.fromkeys(("patch_half_x", "patch_half_y", "probe_depth", "pressure"), 1.0),
            **dict.fromkeys(("half_width", "depth"), reach),
            material=UNIT,
        )
        solutions = climb(problem, shape, 2, 1, 2)
        found.append([read(solutions, f"{name}_below", "zz") for name in ("centre", "patch_corner")])
    values = np.array(found)
    mesh_error = np.abs(values[:, :, 1] - values[:, :, 0]).max(axis=0)
    finite = np.abs(values[1, :, 1] - values[0, :, 1]) / 3.0
    assert (np.abs(values[1, :, 1] - [exact[0], -influence(1.0, 1.0)]) < mesh_error + finite).all()


def test_a_clamped_bottom_is_stiffer() -> None:
    roller, clamped = (
        coarse(loaded_block(bottom=bottom, material=STEEL), "hexahedron", 2).energy  # type: ignore[arg-type]
        for bottom in ("roller", "clamped")
    )
    assert clamped < roller


@pytest.mark.slow
@pytest.mark.parametrize("shape", ["tetrahedron", "hexahedron"])
def test_thick_elliptic_plate(climb: Climb, shape: Shape) -> None:
    """LE10 of the NAFEMS benchmarks with the whole outer face held; own computation.

    Tetrahedra of degree 5 and 6 gave sigma_yy -5.2371 and -5.2421, w -0.91865 and -0.91967 (1e-4 m), energy
    1.54475 and 1.54681 (1e-4 MJ). What is left there: the degree's power 4 l of the clamped edge's
    exponent l = 0.711, that is 1.5 times the last change for energy and w; the power 2 l, 3.5 times, for the
    stress. Here: order 2 l. The published -5.38 belongs to the line support and has no limit.
    """
    solutions = climb(elliptic_plate(material=STEEL), shape, 2, 2, 3)
    order = 2 * 0.711
    yy = read(solutions, "opening_x_upper", "yy")
    assert abs(yy[-1] + 5.2421) < shown(yy, order) + 3.5 * 0.0050
    sag = read(solutions, "opening_x_upper", "z")
    assert abs(sag[-1] + 0.91967e-2) < shown(sag, order) + 1.5 * 0.00102e-2
    energy = np.array([solution.energy for solution in solutions])
    assert abs(energy[-1] - 154.681) < shown(energy, order) + 1.5 * 0.206


@pytest.mark.slow
@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
def test_heated_taper(climb: Climb, shape: Shape) -> None:
    """LE11 of the NAFEMS benchmarks at a tenth of its size: -105 MPa; more digits: own computation.

    The own values are of degree 8 on a graded mesh with a bore of sqrt(0.5) m. Where the equator meets the
    inside, the rise mirrored at the equator has a kink: the stress there errs by h log h.
    """
    problem = heated_taper(
        bore_radius=100.0 * np.sqrt(0.5),
        warmth=1.0,
        pressure=0.0,
        material=Material(210000.0, 0.3, expansion=2.3e-4),
    )
    solutions = climb(problem, shape, 2, 2, 5)
    fine = solutions[-1].mesh.h / problem.part.points["inner"][0]
    left = 1.0 / (2.0 * np.log(2.0 * fine) / np.log(fine) - 1.0)
    for component, wanted in (("yy", -105.6688), ("zz", 55.7096)):
        found = read(solutions, "inner", component)
        assert abs(found[-1] - wanted) < left * abs(found[-1] - found[-2])
    assert round(float(read(solutions, "inner", "yy")[-1])) == -105
    order = 2 * 0.840539  # twice the exponent of the blunter outer corner
    for place, wanted in (("inner", 6.46239324e-2), ("outer", 7.66901850e-2)):
        found = read(solutions, place, "x")
        assert abs(found[-1] - wanted) < shown(found, order)
    energy = np.array([solution.energy for solution in solutions])
    assert abs(energy[-1] - 74865.8348599) < shown(energy, order)


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
    assert across.reaction("top") == pytest.approx([0.0, 0.0, -5.0 * 80.0 * 40.0], abs=1e-9 * 16000.0)


@pytest.mark.parametrize(
    ("model", "arguments", "wrong"),
    [
        (hollow_cylinder, {"outer_radius": 20.0}, "outer_radius 20"),
        (solid_lug, {"boss_height": 5.0, "boss_radius": 50.0}, "boss_radius 50"),
        (solid_lug, {"height": 30.0}, "height 30"),
        (solid_bracket, {"grading": 2.0}, "grading 2"),
        (solid_plate_with_hole, {"hole_diameter": 70.0}, "hole_diameter 70"),
        (loaded_block, {"patch_half_y": 700.0}, "patch_half_y 700"),
        (loaded_block, {"probe_depth": 700.0}, "probe_depth 700"),
        (elliptic_plate, {"outer_half_y": 90.0}, "outer_half_y 90"),
        (heated_taper, {"cone_end": 60.0}, "cone_start 70"),
        (heated_taper, {"bore_radius": 100.0}, "bore_radius 100"),
    ],
)
def test_unsuitable_proportions(
    model: Callable[..., Problem], arguments: dict[str, float], wrong: str
) -> None:
    with pytest.raises(Unsuitable, match=wrong):
        model(material=STEEL, **arguments)
