"""Which corners of the models are singular: places, openings, sides, exponents; and which are not.

Exponents: Williams 1952, J. Appl. Mech. 19:526; digits by own computation with 40 digits from its equations.
"""

import time
from dataclasses import replace

import numpy as np
import pytest

from convergence import rooms
from convergence.corners.bonded import wedge_exponents
from convergence.corners.singular_corners import singular_corners, unexamined_corners
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support

STEEL = Material(210000.0, 0.3)
FREE_FREE_270 = 0.5444837367825
CLAMPED_FREE_90 = {"plane stress": 0.7583491579, "plane strain": 0.7111729330}
CLAMPED_FREE_120 = {"plane stress": 0.6745965920, "plane strain": 0.6206502813}
COOK_UPPER = 0.677164  # clamped-free in plane stress, nu = 1/3


def problem_of(model: str, material: Material = STEEL, **arguments: object) -> Problem:
    problem: Problem = rooms.find("models", model)(material=material, **arguments)
    return problem


@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
def test_sharp_bracket(kind: str) -> None:
    found = singular_corners(problem_of("l_bracket", fillet_radius=0.0, kind=kind))
    inner, *clamped = found
    assert inner.name == "inner_corner"
    assert {corner.name for corner in clamped} == {"top_left", "top_right"}
    assert (inner.path, inner.opening, inner.sides) == (((80.0, 80.0),), 270.0, ("free", "free"))
    assert inner.exponent == pytest.approx(FREE_FREE_270, abs=1e-9)
    for corner in clamped:
        assert corner.opening == 90.0 and set(corner.sides) == {"free", "clamped"}
        assert corner.exponent == pytest.approx(CLAMPED_FREE_90[kind], abs=1e-9)


def test_filleted_bracket_keeps_its_clamped_corners_only() -> None:
    """The tangent points of the fillet are smooth: 180 degrees, free on both sides."""
    found = singular_corners(problem_of("l_bracket", fillet_radius=20.0))
    assert {corner.name for corner in found} == {"top_left", "top_right"}


def test_skew_panel() -> None:
    """Upper corner 90 + atan(160 / 480) = 108.43 degrees; the lower one, 47.5, is regular."""
    (upper,) = singular_corners(problem_of("skew_panel", Material(70.0, 1.0 / 3.0)))
    assert upper.name == "root_upper" and upper.path == ((0.0, 440.0),)
    assert upper.opening == pytest.approx(90.0 + np.degrees(np.arctan(160.0 / 480.0)), abs=1e-4)
    assert upper.exponent == pytest.approx(COOK_UPPER, abs=1e-6)


@pytest.mark.parametrize("model", ["thick_cylinder", "perforated_plate", "holed_strip", "elliptic_panel"])
@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
def test_quarter_models_on_rollers_are_regular(model: str, kind: str) -> None:
    assert singular_corners(problem_of(model, kind=kind)) == ()


def test_prescribed_exact_fields_excite_no_corner() -> None:
    assert singular_corners(problem_of("patch_test")) == ()
    assert singular_corners(problem_of("exact_cantilever")) == ()


@pytest.mark.parametrize(("mode", "exponent"), [("I", 0.544483736782), ("II", None)])
def test_l_domain(mode: str, exponent: float | None) -> None:
    """The field itself is singular there; theory names the weakest exponent of the corner."""
    (corner,) = singular_corners(problem_of("l_domain", mode=mode))
    assert (corner.name, corner.opening) == ("inner_corner", 270.0)
    if exponent:
        assert corner.exponent == pytest.approx(exponent, abs=1e-9)


def test_clamped_ends() -> None:
    """The arm's taper opens its root corners to 90 − atan(60 / 1200) degrees; the lug's base is square."""
    arm = singular_corners(problem_of("tapered_arm"))
    assert {corner.name for corner in arm} == {"root_lower", "root_upper"}
    for corner in arm:
        assert corner.opening == pytest.approx(90.0 - np.degrees(np.arctan(60.0 / 1200.0)), abs=1e-3)
        assert CLAMPED_FREE_90["plane stress"] < corner.exponent < 1.0
    lug = singular_corners(problem_of("lug"))
    assert {corner.name for corner in lug} == {"base_left", "base_right"}
    assert lug[0].exponent == pytest.approx(CLAMPED_FREE_90["plane stress"], abs=1e-9)


def wedge(supports: tuple[Support, ...], far: tuple[float, float] = (0.0, 100.0)) -> Problem:
    """A four-sided part with its corner o at the origin, one side along x, the other towards `far`."""
    part = Part(
        points={"o": (0.0, 0.0), "x": (100.0, 0.0), "c": (150.0, 150.0), "y": far},
        blocks=(("o", "x", "c", "y"),),
        boundaries={"along_x": (("o", "x"),), "along_y": (("y", "o"),), "far": (("x", "c"), ("c", "y"))},
    )
    return Problem("wedge", part, {"body": STEEL}, supports, (Traction("far", (1.0, 0.0)),))


def at_origin(problem: Problem) -> tuple:
    return tuple(corner for corner in singular_corners(problem) if corner.name == "o")


def test_what_a_support_makes_of_a_side() -> None:
    """Normal held: roller. Both held: clamped. Tangent only held, or a skew side: counted as clamped."""
    clamped = Support("s", x=0.0, y=0.0, boundary="along_x")
    (corner,) = at_origin(wedge((clamped,)))
    assert set(corner.sides) == {"clamped", "free"} and corner.opening == 90.0
    assert at_origin(wedge((Support("s", y=0.0, boundary="along_x"),))) == ()
    (tangent,) = at_origin(wedge((Support("s", x=0.0, boundary="along_x"),)))
    assert set(tangent.sides) == {"clamped", "free"}
    skew = wedge((Support("s", x=0.0, boundary="along_y"),), far=(-30.0, 100.0))
    assert all(set(corner.sides) == {"clamped", "free"} for corner in at_origin(skew))
    rollers = (Support("s", y=0.0, boundary="along_x"), Support("t", x=0.0, boundary="along_y"))
    assert at_origin(wedge(rollers)) == ()
    both_in_steps = (Support("s", y=0.0, boundary="along_x"), Support("t", x=0.0, boundary="along_x"))
    assert at_origin(wedge(both_in_steps))[0].exponent == corner.exponent


def test_a_free_wedge_of_less_than_180_degrees_is_regular() -> None:
    assert singular_corners(wedge(())) == ()


@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
def test_an_opening_of_120_degrees(kind: str) -> None:
    far = (100.0 * np.cos(np.radians(120.0)), 100.0 * np.sin(np.radians(120.0)))
    problem = replace(wedge((Support("s", x=0.0, y=0.0, boundary="along_x"),), far), kind=kind)
    (corner,) = at_origin(problem)
    assert corner.opening == 120.0
    assert corner.exponent == pytest.approx(CLAMPED_FREE_120[kind], abs=1e-9)


def test_a_support_that_ends_on_a_straight_edge_is_a_corner_of_180_degrees() -> None:
    """Real part 1/2 whatever the material."""
    part = Part(
        points={
            "a": (0.0, 0.0), "m": (50.0, 0.0), "b": (100.0, 0.0),
            "c": (100.0, 40.0), "n": (50.0, 40.0), "d": (0.0, 40.0),
        },
        blocks=(("a", "m", "n", "d"), ("m", "b", "c", "n")),
        boundaries={"foot": (("a", "m"),), "top": (("c", "n"), ("n", "d"))},
    )  # fmt: skip
    supports = (Support("foot", x=0.0, y=0.0, boundary="foot"),)
    problem = Problem("ledge", part, {"body": STEEL}, supports, (Traction("top", (0.0, -1.0)),))
    end, *others = singular_corners(problem)
    assert (end.name, end.opening) == ("m", 180.0)
    assert end.exponent == pytest.approx(0.5, abs=1e-7)
    assert [corner.name for corner in others] == ["a"]
    roller = replace(problem, supports=(Support("foot", y=0.0, boundary="foot"),))
    (slides,) = singular_corners(roller)
    assert slides.name == "m" and slides.exponent == pytest.approx(0.5, abs=1e-7)


def test_an_edge_between_two_regions_uses_the_material_of_its_own() -> None:
    """A rubber-like region moves its clamped corner's exponent, and makes its ends at steel singular too."""
    base = problem_of("tapered_arm")
    regions = {"root": (0, 1), "rest": (2, 3)}
    part = replace(base.part, regions=regions)
    soft = Material(100.0, 0.49)
    at_root = replace(base, part=part, materials={"root": soft, "rest": STEEL}, kind="plane strain")
    away = replace(base, part=part, materials={"root": STEEL, "rest": soft}, kind="plane strain")
    names = {"root_lower", "root_upper", "middle_lower", "middle_upper"}
    soft_root, steel_root = ({c.name: c for c in singular_corners(p)} for p in (at_root, away))
    assert set(soft_root) == set(steel_root) == names
    assert soft_root["root_upper"].exponent < steel_root["root_upper"].exponent - 0.05
    assert soft_root["middle_upper"].opening == 180.0


def halves(soft: Material, supports: tuple[Support, ...] = ()) -> Problem:
    """A square of steel below, another material above; their line ends at w and e, c is inside it."""
    part = Part(
        points={
            "sw": (-10.0, -10.0), "s": (0.0, -10.0), "se": (10.0, -10.0),
            "w": (-10.0, 0.0), "c": (0.0, 0.0), "e": (10.0, 0.0),
            "nw": (-10.0, 10.0), "n": (0.0, 10.0), "ne": (10.0, 10.0),
        },
        blocks=(("sw", "s", "c", "w"), ("s", "se", "e", "c"), ("w", "c", "n", "nw"), ("c", "e", "ne", "n")),
        boundaries={"bottom": (("sw", "s"), ("s", "se")), "right": (("se", "e"), ("e", "ne"))},
        regions={"lower": (0, 1), "upper": (2, 3)},
    )  # fmt: skip
    return Problem("halves", part, {"lower": STEEL, "upper": soft}, supports, (), kind="plane strain")


def test_the_end_of_an_interface() -> None:
    """Bonded quarter planes, moduli 3:1, plane strain: own computation, 8 x 8 determinant, 40 digits."""
    west, east = sorted(singular_corners(halves(Material(70000.0, 0.3))), key=lambda corner: corner.path)
    assert (west.name, east.name, west.opening, west.sides) == ("w", "e", 180.0, ("free", "free"))
    assert west.exponent == pytest.approx(0.920101695698, abs=1e-10)
    assert singular_corners(halves(Material(210000.0, 0.3, yield_strength=355.0))) == ()


def test_the_side_of_each_material_counts() -> None:
    """Held along the lower or along the upper half of the right side: the condition sits on its material."""
    soft, exponents = Material(7000.0, 0.3), {}
    for name, edges in {"below": (("se", "e"),), "above": (("e", "ne"),)}.items():
        base = halves(soft, (Support("grip", x=0.0, y=0.0, boundary="grip"),))
        problem = replace(base, part=replace(base.part, boundaries={"grip": edges}))
        (corner,) = (corner for corner in singular_corners(problem) if corner.name == "e")
        assert corner.sides == ("clamped", "free")
        exponents[name] = corner.exponent
    assert abs(exponents["below"] - exponents["above"]) > 0.05


def test_an_inclusion_with_a_corner() -> None:
    """One quarter of another material: a ring of 90 and 270 degrees inside, and two ends of interfaces."""
    base = halves(STEEL)
    part = replace(base.part, regions={"lower": (0, 1, 2), "upper": (3,)})
    problem = replace(base, part=part, materials={"lower": STEEL, "upper": Material(7000.0, 0.3)})
    found = {corner.name: corner for corner in singular_corners(problem)}
    assert set(found) == {"c", "e", "n"}
    assert (found["c"].opening, found["c"].sides) == (360.0, ("bonded", "bonded"))
    mu = STEEL.shear_modulus
    (expected, *_) = wedge_exponents([(270.0, mu, 1.8), (90.0, mu / 30.0, 1.8)], None)
    assert found["c"].exponent == pytest.approx(expected.real, abs=1e-12)
    assert found["e"].exponent == pytest.approx(found["n"].exponent, abs=1e-12)


def test_orthotropic_corners_are_named_and_not_examined() -> None:
    """All but the inside of one material and its flat free sides."""
    wood = Material(
        12000.0, 0.4, young_y=800.0, young_z=500.0, poisson_yz=0.4, poisson_zx=0.02,
        shear_xy=700.0, shear_yz=60.0, shear_zx=700.0,
    )  # fmt: skip
    assert singular_corners(halves(wood)) == ()
    found = unexamined_corners(halves(wood))
    assert {corner.name for corner in found} == {"w", "c", "e", "nw", "ne"}
    assert np.isnan([corner.exponent for corner in found]).all()
    assert unexamined_corners(halves(STEEL)) == ()


def test_the_axis_of_a_ring_is_a_roller() -> None:
    """A clamped disc is singular at its rim, not on its axis; where its top meets the axis is a cone."""
    disc = replace(wedge((Support("s", x=0.0, y=0.0, boundary="along_x"),)), kind="axisymmetric")
    (rim,) = singular_corners(disc)
    assert rim.name == "x"
    assert [corner.name for corner in unexamined_corners(disc)] == ["y"]


def test_is_quick() -> None:
    """Below 0.2 s a part with two materials, the best of three, nothing kept from before."""
    durations = []
    for young in (60000.0, 61000.0, 62000.0):
        start = time.perf_counter()
        singular_corners(halves(Material(young, 0.3)))
        durations.append(time.perf_counter() - start)
    assert min(durations) < 0.2
