"""What acts on a solved bar: forces, moments and places by hand."""

from dataclasses import replace

import numpy as np

from convergence.fem.acting import BODY, acting
from convergence.fem.loads import (
    BodyForce,
    Load,
    PointForce,
    Pressure,
    TemperatureRise,
    Traction,
)
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.part import Part
from convergence.fem.problem import ElasticSupport, Problem, Support
from convergence.fem.solution import solve
from convergence.fields import Forces

# a bar of 100 by 40 by 5; statics of a rigid body gives the reactions on any mesh
BAR = Part(
    points={"a": (0.0, 0.0), "b": (100.0, 0.0), "c": (100.0, 40.0), "d": (0.0, 40.0)},
    blocks=(("a", "b", "c", "d"),),
    boundaries={"left": (("d", "a"),), "right": (("b", "c"),), "lower": (("a", "b"),)},
)
CLAMP = Support("clamp", x=0.0, y=0.0, boundary="left")
# a solution leaves 1e-10 of the load out of balance at most; moments have an arm of up to 100
TOLERANCE = {"rtol": 1e-8, "atol": 1e-4}


def acts(*loads: Load, problem: Problem | None = None) -> Forces:
    steel = {"body": Material(210000.0, 0.3)}
    bar = problem or Problem("bar", BAR, steel, (CLAMP,), (), thickness=5.0)
    bar = replace(bar, loads=loads)
    return acting(
        solve(bar, mesh(BAR, BAR.divisions(size=None, divisions=2), shape="quadrilateral", degree=2))
    )


def test_loads_come_first_and_supports_answer() -> None:
    """A pull of 10 MPa on 40 by 5, own weight of 0.01 N/mm³ in 20,000 mm³ with its arm of 50."""
    found = acts(Traction("right", (10.0, 0.0)), BodyForce((0.0, -0.01)))
    assert found.names.tolist() == ["right", BODY, "clamp"]
    assert found.is_load.tolist() == [True, True, False]
    assert np.allclose(found.place, [[100.0, 50.0, 0.0], [20.0, 20.0, 20.0]], **TOLERANCE)
    assert np.allclose(found.force, [[2000.0, 0.0, -2000.0], [0.0, -200.0, 200.0]], **TOLERANCE)
    assert np.allclose(found.moment, [[0.0, 0.0, 10_000.0]], **TOLERANCE)


def test_loads_of_one_boundary_are_one_and_a_point_has_its_own() -> None:
    """Shear of 2 MPa and a pull of 10 MPa on the right, 300 N at its upper corner."""
    found = acts(
        Traction("right", (10.0, 0.0)), PointForce("c", (0.0, 300.0)), Traction("right", (0.0, -2.0))
    )
    assert found.names.tolist() == ["right", "c", "clamp"]
    assert np.allclose(found.force, [[2000.0, 0.0, -2000.0], [-400.0, 300.0, 100.0]], **TOLERANCE)
    assert np.allclose(found.place[:, 1], (100.0, 40.0))
    assert np.allclose(found.moment, [[0.0, 0.0, 100.0 * (400.0 - 300.0)]], **TOLERANCE)


def test_an_uneven_pressure_has_a_moment_about_the_middle() -> None:
    """Pressure 0.1 y on the right: 2 in the mean; 0.1 · 40³ / 12 · 5 turns its upper part to the left."""
    found = acts(Pressure("right", lambda x, y: 0.1 * y))
    assert np.allclose(found.force[:, 0], (-400.0, 0.0), **TOLERANCE)
    assert np.allclose(found.moment[0, 0], 0.1 * 40.0**3 / 12.0 * 5.0, **TOLERANCE)


def test_springs_push_back() -> None:
    steel = {"body": Material(210000.0, 0.3)}
    guide = Support("guide", x=0.0, boundary="left")
    bed = ElasticSupport("bed", "lower", normal=100.0)
    found = acts(Pressure("lower", -1.0), problem=Problem("bar", BAR, steel, (guide, bed), (), thickness=5.0))
    bed_force = found.force[:, found.names.tolist().index("bed")]
    assert np.allclose(found.force[:, 0] + bed_force, (0.0, 0.0), atol=1e-6 * 500.0)
    assert np.allclose(found.force[:, 0], (0.0, -500.0), **TOLERANCE)


def test_temperature_is_no_load() -> None:
    steel = {"body": Material(210000.0, 0.3, expansion=1.2e-5)}
    stops = (CLAMP, Support("stop", x=0.0, boundary="right"))
    found = acts(TemperatureRise(30.0), problem=Problem("bar", BAR, steel, stops, (), thickness=5.0))
    assert found.names.tolist() == ["clamp", "stop"] and not found.is_load.any()
    assert np.allclose(found.force.sum(axis=1), 0.0, atol=1e-3)
    assert found.force[0, 0] > 1000.0


def test_a_ring_has_forces_along_its_axis_only() -> None:
    """A tube 10 thick, 20 high around an axis at 30: pressure on its upper end over π (40² - 30²)."""
    part = Part(
        points={"a": (30.0, 0.0), "b": (40.0, 0.0), "c": (40.0, 20.0), "d": (30.0, 20.0)},
        blocks=(("a", "b", "c", "d"),),
        boundaries={"lower": (("a", "b"),), "upper": (("c", "d"),), "bore": (("d", "a"),)},
    )
    steel = {"body": Material(210000.0, 0.3)}
    loads = (Pressure("upper", 2.0), Pressure("bore", 7.0))
    ring = Problem(
        "ring", part, steel, (Support("floor", y=0.0, boundary="lower"),), loads, kind="axisymmetric"
    )
    found = acting(
        solve(ring, mesh(part, part.divisions(size=None, divisions=2), shape="quadrilateral", degree=2))
    )
    assert found.moment.shape == (0, 3)
    push = 2.0 * np.pi * (40.0**2 - 30.0**2)
    assert np.allclose(found.force, [[0.0] * 3, [-push, 0.0, push]], rtol=1e-8, atol=1e-4)


def test_what_carries_nothing_is_left_out() -> None:
    """A bar without loads and with nothing prescribed."""
    assert not acts().names.size
