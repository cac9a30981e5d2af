"""Supports and loads of a study on meshes: each acts with the force it states, and refuses what misfits."""

import math
from typing import Any

import numpy as np
import pytest

from convergence.conditions import LOADS, SUPPORTS
from convergence.errors import SolvingError, Unsuitable
from convergence.fem.load_vector import load_vector, thermal_load
from convergence.fem.loads import Load, TemperatureRise, rigid_motions, scaled
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part, arc
from convergence.fem.problem import ElasticSupport, Problem, Support
from convergence.fem.solid_part import SolidPart

HALF = Part(  # a half ring of radii 10 and 20 above the x axis
    points={"a": (10.0, 0.0), "b": (20.0, 0.0), "c": (-20.0, 0.0), "d": (-10.0, 0.0)},
    blocks=(("a", "b", "c", "d"),),
    curves={("b", "c"): arc((0.0, 0.0), 20.0, 0.0, 180.0), ("a", "d"): arc((0.0, 0.0), 10.0, 0.0, 180.0)},
    boundaries={"bore": (("d", "a"),), "out": (("b", "c"),), "right": (("a", "b"),), "left": (("c", "d"),)},
    weights={("a", "d"): 12.0},
)
THICKNESS = 4.0
AREA = 0.5 * math.pi * (20.0**2 - 10.0**2)
CENTROID = 4.0 / (3.0 * math.pi) * (20.0**3 - 10.0**3) / (20.0**2 - 10.0**2)


def acting(load: Load, solid: bool) -> np.ndarray:
    """Return force and moment about the origin on a mesh of the half ring, in a solid on its extrusion."""
    part = SolidPart(HALF, (("base", 0.0), ("lid", THICKNESS))) if solid else HALF
    made: Mesh = mesh(
        part,
        part.divisions(size=None, divisions=1),
        shape="hexahedron" if solid else "quadrilateral",
        degree=2,
    )
    kind = "solid" if solid else "plane stress"
    problem = Problem("p", part, {"body": Material(1000.0, 0.3)}, (), (load,), kind, THICKNESS)
    forces = load_vector(problem, made)
    if isinstance(load, TemperatureRise):
        forces = thermal_load(problem, made)[0]
    return np.einsum("acn,nc->a", rigid_motions(made.nodes), forces.reshape(-1, made.dimension))


PLANE: list[tuple[str, dict[str, Any], tuple[float, ...]]] = [
    ("traction", {"boundary": "right", "value": (3.0, -2.0)}, (120.0, -80.0, -80.0 * 15.0)),
    ("pressure", {"boundary": "right", "value": 5.0}, (0.0, 200.0, 200.0 * 15.0)),
    ("pressure", {"boundary": "bore", "value": 5.0}, (0.0, 5.0 * 20.0 * THICKNESS, 0.0)),
    ("force", {"boundary": "right", "force": (7.0, 9.0)}, (7.0, 9.0, 0.0)),
    (
        "force",
        {"boundary": "out", "force": (7.0, 9.0), "moment": 30.0, "about": (0.0, 5.0)},
        (7.0, 9.0, -5.0),
    ),
    ("bearing", {"boundary": "bore", "force": (0.0, 60.0), "centre": (0.0, 0.0)}, (0.0, 60.0, 0.0)),
    ("point_force", {"point": "b", "force": (1.0, 2.0)}, (1.0, 2.0, 40.0)),
    ("weight", {"value": 0.5, "direction": (0.0, -3.0)}, (0.0, -0.5 * AREA * THICKNESS, 0.0)),
    ("rotation", {"axis": "x", "density": 0.1, "rate": 2.0}, (0.0, 0.4 * AREA * THICKNESS * CENTROID, 0.0)),
    ("temperature", {"rise": 100.0}, (0.0, 0.0, 0.0)),
]
SOLID: list[tuple[str, dict[str, Any], tuple[float, ...]]] = [
    ("traction", {"boundary": "right", "value": (3.0, -2.0, 1.0)}, (120.0, -80.0, 40.0)),
    (
        "force",
        {"boundary": "lid", "force": (1.0, 2.0, 3.0), "moment": (4.0, 5.0, 6.0)},
        (1.0, 2.0, 3.0, 4.0, 5.0, 6.0),
    ),
    (
        "bearing",
        {"boundary": "bore", "force": (0.0, 60.0, 0.0), "centre": (0.0, 0.0, 0.0), "axis": (0.0, 0.0, 2.0)},
        (0.0, 60.0, 0.0, -60.0 * THICKNESS / 2.0, 0.0, 0.0),
    ),
    ("rotation", {"axis": "z", "density": 0.1, "rate": 2.0}, (0.0, 0.4 * AREA * THICKNESS * CENTROID, 0.0)),
]
CASES = [(*case, False) for case in PLANE] + [(*case, True) for case in SOLID]


@pytest.mark.parametrize(("kind", "said", "expected", "solid"), CASES)
def test_a_load_acts_with_the_force_it_states(
    kind: str, said: dict[str, Any], expected: tuple[float, ...], solid: bool
) -> None:
    """The half circle in twelve parabolas errs by less than 1e-5 in area; resultants are exact."""
    load = LOADS[kind](**said)
    scale = max(*np.abs(expected), 1.0)
    found = acting(load, solid)[: len(expected)]
    assert np.abs(found - expected).max() < 2e-5 * scale
    assert acting(scaled(load, 2.0), solid)[: len(expected)] == pytest.approx(2.0 * found, abs=1e-9 * scale)


def test_a_pin_that_presses_on_nothing_is_refused() -> None:
    with pytest.raises(SolvingError, match="the pin in bore does not press on it"):
        acting(LOADS["bearing"](boundary="bore", force=(0.0, -60.0), centre=(0.0, 0.0)), solid=False)


def test_supports() -> None:
    assert SUPPORTS["rigid"](name="w", boundary="left", x=0.0) == Support("w", x=0.0, boundary="left")
    assert SUPPORTS["rigid"](name="w", point="a", y=0.1) == Support("w", y=0.1, point="a")
    bed = SUPPORTS["elastic"](name="bed", boundary="left", stiffness=5.0, tangential=1.0)
    assert bed == ElasticSupport("bed", "left", 5.0, 1.0)


@pytest.mark.parametrize(
    ("function", "said", "key"),
    [
        (SUPPORTS["rigid"], {"name": "w", "boundary": "left"}, "x"),
        (SUPPORTS["rigid"], {"name": "w", "x": 0.0}, "boundary"),
        (SUPPORTS["rigid"], {"name": "w", "point": "a", "normal": 0.0}, "normal"),
        (LOADS["force"], {"boundary": "b", "force": (1.0, 2.0), "moment": (1.0, 2.0, 3.0)}, "moment"),
        (LOADS["force"], {"boundary": "b", "force": (1.0, 2.0, 3.0), "moment": 1.0}, "moment"),
        (LOADS["force"], {"boundary": "b", "force": (1.0, 2.0), "about": (1.0, 2.0, 3.0)}, "about"),
        (LOADS["bearing"], {"boundary": "b", "force": (0.0, 0.0), "centre": (0.0, 0.0)}, "force"),
        (LOADS["bearing"], {"boundary": "b", "force": (1.0, 0.0, 0.0), "centre": (0.0, 0.0, 0.0)}, "axis"),
        (LOADS["weight"], {"value": 1.0, "direction": (0.0, 0.0)}, "direction"),
    ],
)
def test_what_misfits_is_refused(function: Any, said: dict[str, Any], key: str) -> None:
    with pytest.raises(Unsuitable) as caught:
        function(**said)
    assert [problem[0] for problem in caught.value.problems] == [key]


def test_a_pin_cannot_push_along_its_hole() -> None:
    with pytest.raises(Unsuitable, match="square to"):
        LOADS["bearing"](boundary="b", force=(0.0, 1.0, 1.0), centre=(0.0, 0.0, 0.0), axis=(0.0, 0.0, 1.0))
