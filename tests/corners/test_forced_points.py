"""Points that take a force: given ones, and supports whose reaction is not zero by equilibrium."""

from dataclasses import replace

import numpy as np
import pytest

from convergence.corners.forced_points import forced_points
from convergence.corners.singular_corners import singular_corners
from convergence.fem.loads import BodyForce, Load, PointForce, Traction
from convergence.fem.material import Material
from convergence.fem.part import Part
from convergence.fem.problem import ElasticSupport, Exact, Problem, Support
from convergence.fem.solid_part import SolidPart

STEEL = Material(210000.0, 0.3)
SQUARE = Part(
    points={"a": (0.0, 0.0), "b": (10.0, 0.0), "c": (10.0, 10.0), "d": (0.0, 10.0)},
    blocks=(("a", "b", "c", "d"),),
    boundaries={"left": (("d", "a"),), "right": (("b", "c"),), "foot": (("a", "b"),)},
)
BEAM = (Support("pin", x=0.0, y=0.0, point="a"), Support("rocker", y=0.0, point="b"))
PULL = (Traction("left", (-1.0, 0.0)), Traction("right", (1.0, 0.0)))
SHEAR = (Traction("right", (0.0, -1.0)),)
SYMMETRY = Support("symmetry", x=0.0, boundary="left")
HOLD = Support("hold", y=0.0, point="a")


def square(supports: tuple[Support | ElasticSupport, ...], loads: tuple[Load, ...]) -> Problem:
    return Problem("square", SQUARE, {"body": STEEL}, supports, loads)


@pytest.mark.parametrize(
    ("supports", "loads", "points"),
    [
        (BEAM, PULL, set()),
        (BEAM, (BodyForce((0.0, -1.0)),), {"a", "b"}),
        (BEAM, SHEAR, {"b"}),  # right above b: nothing is left for a
        (BEAM, (), set()),
        ((SYMMETRY, HOLD), (Traction("right", (1.0, 0.0)),), set()),
        ((SYMMETRY, HOLD), SHEAR, {"a"}),
        ((*BEAM, Support("third", x=0.0, point="b")), PULL, {"a", "b"}),  # both hold x: one more than needed
        ((Support("foot", x=0.0, y=0.0, boundary="foot"), Support("tie", x=0.0, point="c")), PULL, {"c"}),
        ((ElasticSupport("bed", "foot", 10.0, 10.0), Support("tie", x=0.0, point="c")), PULL, {"c"}),
    ],
)
def test_supports(supports: tuple[Support, ...], loads: tuple[Load, ...], points: set[str]) -> None:
    """Statics of a square of side 10."""
    assert forced_points(square(supports, loads)) == dict.fromkeys(points, "support")


def test_a_support_shared_with_a_boundary_takes_what_the_boundary_leaves() -> None:
    """The boundary holds x at a already; the point holds y there, which nothing loads."""
    pin = Support("pin", x=0.0, y=0.0, point="a")
    assert forced_points(square((SYMMETRY, pin), (Traction("right", (1.0, 0.0)),))) == {}


def test_an_exact_field_has_no_forced_support() -> None:
    """A displacement is given there, which a force would make infinite."""
    still = Exact(lambda x, y: np.zeros((2, *x.shape)), lambda x, y: np.zeros((4, *x.shape)))
    assert forced_points(replace(square(BEAM, SHEAR), exact=still)) == {}


def test_corners_of_forced_points() -> None:
    """Flamant 1892: stress ~ 1/r, displacement ~ ln r, exponent 0; weaker corners come after."""
    clamp = Support("clamp", x=0.0, y=0.0, boundary="left")
    force, *others = singular_corners(square((clamp,), (PointForce("c", (0.0, -1.0)),)))
    assert (force.name, force.sides, force.opening, force.exponent) == ("c", ("point", "force"), 90.0, 0.0)
    assert [corner.name for corner in others] == ["a", "d"]
    (support,) = singular_corners(square(BEAM, SHEAR))
    assert (support.name, support.sides, support.exponent) == ("b", ("point", "support"), 0.0)


def test_around_an_axis() -> None:
    """A ring moves along its axis only, so a point that holds it there has the axial load as reaction."""
    hold = Support("hold", y=0.0, point="b")
    for force, expected in ((0.0, []), (1.0, [("b", 0.0)])):
        ring = replace(square((hold,), (Traction("right", (1.0, force)),)), kind="axisymmetric")
        assert [(corner.name, corner.exponent) for corner in singular_corners(ring)] == expected
    on_axis = replace(square((hold,), (PointForce("d", (0.0, 1.0)),)), kind="axisymmetric")
    assert {c.name: c.exponent for c in singular_corners(on_axis)} == {"b": 0.0, "d": -1.0}


def test_solids() -> None:
    """Six components hold a cube still. Kelvin 1848: displacement ~ 1/r, exponent -1."""
    cube = SolidPart(SQUARE, (("back", 0.0), ("front", 10.0)))
    supports = (
        Support("p", x=0.0, y=0.0, z=0.0, point="a_back"),
        Support("q", y=0.0, z=0.0, point="b_back"),
        Support("r", z=0.0, point="d_back"),
    )
    pull = (Traction("left", (-1.0, 0.0, 0.0)), Traction("right", (1.0, 0.0, 0.0)))
    problem = Problem("cube", cube, {"body": STEEL}, supports, pull, kind="solid")
    assert forced_points(problem) == {}
    pushed = replace(problem, loads=(PointForce("c_front", (1.0, 0.0, 0.0)),))
    found = {corner.name: corner.exponent for corner in singular_corners(pushed)}
    assert found["c_front"] == -1.0 and "a_back" in found and set(found.values()) == {-1.0}
