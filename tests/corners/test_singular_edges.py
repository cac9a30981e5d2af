"""Singular edges of solid parts: which, where, their openings and exponents.

Along a smooth edge the field is that of plane strain across it (textbook). Exponents: Williams 1952, J. Appl.
Mech. 19:526; digits by own computation with 40 digits from its equations.
"""

import time

import numpy as np
import pytest

from convergence.corners.singular_corners import singular_corners, unexamined_corners
from convergence.corners.williams import weakest_exponent
from convergence.fem.material import Material
from convergence.fem.part import Part, arc
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import REVOLVED, SolidPart, Sweep

STEEL = Material(210000.0, 0.3)
FREE_FREE_270 = 0.5444837367825
CLAMPED_FREE_90 = 0.7111729330  # plane strain
CLAMPED_FREE_120 = 0.6206502813  # plane strain
BRACKET = Part(
    points={
        "o": (0.0, 0.0), "a": (80.0, 0.0), "b": (80.0, 80.0), "c": (0.0, 80.0),
        "d": (200.0, 0.0), "e": (200.0, 80.0), "f": (80.0, 200.0), "g": (0.0, 200.0),
    },
    blocks=(("o", "a", "b", "c"), ("a", "d", "e", "b"), ("c", "b", "f", "g")),
    boundaries={"top": (("f", "g"),), "right": (("d", "e"),), "foot": (("o", "a"), ("a", "d"))},
    regions={"heel": (0,), "toe": (1,), "stem": (2,)},
)  # fmt: skip
CLAMPED_TOP = Support("top", x=0.0, y=0.0, z=0.0, boundary="top")


def solid(part: SolidPart, *supports: Support, toe: Material = STEEL) -> Problem:
    return Problem(
        "solid", part, {"heel": STEEL, "toe": toe, "stem": STEEL, "body": STEEL}, supports, (), kind="solid"
    )


def extruded(plan: Part = BRACKET) -> SolidPart:
    return SolidPart(plan, (("back", 0.0), ("front", 30.0)))


def test_an_extruded_bracket() -> None:
    """The inner edge, and the four edges around the clamped face as one."""
    inner, around = singular_corners(solid(extruded(), CLAMPED_TOP))
    assert (inner.name, inner.opening, inner.sides) == ("b_back-b_front", 270.0, ("free", "free"))
    assert inner.path == ((80.0, 80.0, 0.0), (80.0, 80.0, 30.0)) and inner.points == ("b_back", "b_front")
    assert inner.exponent == pytest.approx(FREE_FREE_270, abs=1e-9)
    assert around.points[0] == around.points[-1] and len(around.path) == 5
    assert set(around.points) == {f"{name}_{plane}" for name in "fg" for plane in ("back", "front")}
    assert (around.opening, around.sides) == (90.0, ("clamped", "free"))
    assert around.exponent == pytest.approx(CLAMPED_FREE_90, abs=1e-9)


@pytest.mark.parametrize(
    "cut", [Support("cut", z=0.0, boundary="back"), Support("cut", normal=0.0, boundary="back")]
)
def test_a_plane_of_symmetry_adds_no_edge(cut: Support) -> None:
    inner, around = singular_corners(solid(extruded(), CLAMPED_TOP, cut))
    assert inner.name == "b_back-b_front"
    assert around.points == ("f_back", "f_front", "g_front", "g_back")


def test_a_layer_that_leaves_a_block_out_makes_a_step() -> None:
    """The toe ends at half the depth: 270 degrees along its top, which goes on in the inner edge."""
    part = SolidPart(BRACKET, (("back", 0.0), ("mid", 30.0), ("front", 50.0)), filled=((0, 1, 2), (0, 2)))
    (edge,) = singular_corners(solid(part))
    assert edge.points == ("b_back", "b_mid", "a_mid")
    assert edge.path == ((80.0, 80.0, 0.0), (80.0, 80.0, 30.0), (80.0, 0.0, 30.0))
    assert edge.exponent == pytest.approx(FREE_FREE_270, abs=1e-9)


def test_edges_between_materials() -> None:
    """The toe of another material: its interface ends on the sides, and changes the inner edge."""
    stiff, soft = (singular_corners(solid(extruded(), toe=Material(e, 0.3))) for e in (210000.0, 70000.0))
    assert [corner.name for corner in stiff] == ["b_back-b_front"]
    inner = next(corner for corner in soft if corner.name == "b_back-b_front")
    assert inner.exponent != pytest.approx(FREE_FREE_270, abs=1e-3)
    (end,) = (corner for corner in soft if corner is not inner)
    assert end.points == ("b_back", "a_back", "a_front", "b_front") and end.opening == 180.0
    assert end.exponent == pytest.approx(0.920101695698, abs=1e-9)  # bonded quarter planes, moduli 3:1


def test_shear_along_the_edge_counts() -> None:
    """Clamped to free in shear, as a roller is: 90 over the opening (textbook), below what the plane has."""
    lean = 100.0 / np.tan(np.radians(100.0))
    plan = Part(
        points={"o": (0.0, 0.0), "e": (100.0, 0.0), "n": (100.0, 100.0), "w": (lean, 100.0)},
        blocks=(("o", "e", "n", "w"),),
        boundaries={"floor": (("o", "e"),), "wall": (("w", "o"),)},
    )
    floor = Support("floor", x=0.0, y=0.0, z=0.0, boundary="floor")
    wall = Support("wall", normal=0.0, boundary="wall")
    found = {corner.points: corner for corner in singular_corners(solid(extruded(plan), floor, wall))}
    edge = found["o_back", "o_front"]
    assert (edge.opening, edge.sides) == (100.0, ("clamped", "roller"))
    assert edge.exponent == pytest.approx(0.9, abs=1e-9)
    in_plane = weakest_exponent(100.0, edge.sides, kappa=1.8)
    assert in_plane is not None and in_plane > 0.91


def test_a_skewed_sweep() -> None:
    """Planes move along x by height / tan 60: the clamped foot meets two sides at 60 and 120 degrees."""
    lean = 1.0 / np.tan(np.radians(60.0))
    square = Part(
        points={"a": (0.0, 0.0), "b": (10.0, 0.0), "c": (10.0, 10.0), "d": (0.0, 10.0)},
        blocks=(("a", "b", "c", "d"),),
    )
    skew = Sweep(
        lambda x, y, s: np.array(np.broadcast_arrays(x + lean * s, y, s)),
        lambda x, y, z: np.array(np.broadcast_arrays(x - lean * z, y, z)),
    )
    part = SolidPart(square, (("foot", 0.0), ("head", 10.0)), sweep=skew)
    found = singular_corners(solid(part, Support("foot", x=0.0, y=0.0, z=0.0, boundary="foot")))
    by_points = {frozenset(corner.points): corner for corner in found}
    obtuse = by_points[frozenset(("b_foot", "c_foot"))]
    assert obtuse.opening == 120.0 and obtuse.exponent == pytest.approx(CLAMPED_FREE_120, abs=1e-9)
    acute = by_points[frozenset(("a_foot", "d_foot"))]
    assert acute.opening == 60.0 and 0.94 < acute.exponent < 1.0
    upright = by_points[frozenset(("a_foot", "b_foot"))]
    assert upright.opening == 90.0 and upright.exponent == pytest.approx(CLAMPED_FREE_90, abs=1e-9)


def test_a_revolved_shoulder() -> None:
    """A quarter of a stepped ring between rollers: the shoulder's edge is a quarter circle."""
    plan = Part(
        points={
            "a": (20.0, 0.0), "b": (40.0, 0.0), "c": (40.0, 30.0), "d": (20.0, 30.0),
            "e": (70.0, 0.0), "f": (70.0, 30.0), "g": (40.0, 60.0), "h": (20.0, 60.0),
        },
        blocks=(("a", "b", "c", "d"), ("b", "e", "f", "c"), ("d", "c", "g", "h")),
    )  # fmt: skip
    ring = SolidPart(plan, (("start", 0.0), ("end", 90.0)), sweep=REVOLVED)
    rollers = (Support("s", z=0.0, boundary="start"), Support("e", x=0.0, boundary="end"))
    (shoulder,) = singular_corners(solid(ring, *rollers))
    assert shoulder.points == ("c_start", "c_end") and shoulder.opening == 270.0
    assert shoulder.exponent == pytest.approx(FREE_FREE_270, abs=1e-9)
    radii = [np.hypot(x, z) for x, _, z in shoulder.path]
    assert len(radii) > 2 and radii == pytest.approx([40.0] * len(radii), abs=1e-9)


def test_a_fillet_is_no_edge() -> None:
    """Tangent points of a fillet are flat, swept or not."""
    k = 40.0 * (1.0 - np.sqrt(0.5))
    plan = Part(
        points={
            "o": (0.0, 0.0), "a": (120.0, 0.0), "b": (120.0, 80.0), "m": (80.0 + k, 80.0 + k),
            "f": (80.0, 120.0), "g": (0.0, 120.0), "d": (200.0, 0.0), "e": (200.0, 80.0),
        },
        blocks=(("o", "a", "b", "m"), ("o", "m", "f", "g"), ("a", "d", "e", "b")),
        curves={
            ("b", "m"): arc((120.0, 120.0), 40.0, 270.0, 225.0),
            ("m", "f"): arc((120.0, 120.0), 40.0, 225.0, 180.0),
        },
    )  # fmt: skip
    assert singular_corners(solid(extruded(plan))) == ()


def test_orthotropic_edges_are_named() -> None:
    wood = Material(
        12000.0, 0.4, young_y=800.0, young_z=500.0, poisson_yz=0.4, poisson_zx=0.02,
        shear_xy=700.0, shear_yz=60.0, shear_zx=700.0,
    )  # fmt: skip
    named = {edge.name for edge in unexamined_corners(solid(extruded(), toe=wood))}
    assert "d_back-d_front" in named and "b_back-b_front" in named
    assert not any(name.startswith(("o", "f", "g")) for name in named)


def test_is_quick() -> None:
    """Below 0.2 s for two materials in three layers, the best of three, nothing kept from before."""
    planes = (("p", 0.0), ("q", 10.0), ("r", 20.0), ("s", 30.0))
    durations = []
    for young in (60000.0, 61000.0, 62000.0):
        start = time.perf_counter()
        singular_corners(solid(SolidPart(BRACKET, planes), CLAMPED_TOP, toe=Material(young, 0.3)))
        durations.append(time.perf_counter() - start)
    assert min(durations) < 0.2
