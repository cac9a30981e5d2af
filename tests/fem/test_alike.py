"""Problems that differ in loads only are alike; whatever changes the equations is found and named."""

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

import numpy as np
import pytest

from convergence.fem.alike import unlike
from convergence.fem.loads import PointForce, TemperatureRise, Traction
from convergence.fem.material import Material
from convergence.fem.part import Part, arc
from convergence.fem.problem import ElasticSupport, Problem, Support
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_part import REVOLVED, SolidPart, Sweep

STEEL = Material(210000.0, 0.3)
CORNERS = {"a": (1.0, 0.0), "b": (2.0, 0.0), "c": (2.0, 1.0), "d": (1.0, 1.0)}


def bow(height: float) -> Any:
    """A circular arc from b to c, as a new function every time."""
    radius = (0.25 + height**2) / (2.0 * height)
    half = float(np.degrees(np.arcsin(0.5 / radius)))
    return arc((2.0 + height - radius, 0.5), radius, -half, half)


def plate(height: float = 0.1, points: Mapping[str, tuple[float, float]] = CORNERS, **more: Any) -> Part:
    return Part(
        points=points,
        blocks=(("a", "b", "c", "d"),),
        curves={("b", "c"): bow(height)},
        boundaries={"left": (("d", "a"),), "right": (("b", "c"),)},
        **more,
    )


def solid(sweep: Sweep = REVOLVED, end: float = 30.0, **more: Any) -> SolidPart:
    return SolidPart(plate(), (("front", 0.0), ("back", end)), sweep=sweep, **more)


def twisted(turn: float) -> Sweep:
    """An extrusion that turns by `turn` degrees a length."""

    def place(x: np.ndarray, y: np.ndarray, s: np.ndarray) -> np.ndarray:
        angle = np.radians(turn * s)
        u, v = x * np.cos(angle) - y * np.sin(angle), x * np.sin(angle) + y * np.cos(angle)
        return np.array(np.broadcast_arrays(u, v, s))

    return Sweep(place, place)


def problem(part: Any = None, **changes: Any) -> Problem:
    usual = Problem(
        title="",
        part=part or plate(),
        materials={"body": STEEL},
        supports=(Support("wall", x=0.0, y=0.0, boundary="left"), ElasticSupport("bed", "right", 5.0)),
        loads=(Traction("right", (1.0, 0.0)),),
    )
    return replace(usual, **changes)


def test_loads_and_prescribed_values_may_differ() -> None:
    moved = (Support("wall", x=1.5, y=lambda x, y: x, boundary="left"), problem().supports[1])
    loads = (PointForce("c", (1.0, 2.0)), TemperatureRise(50.0))
    assert unlike(problem(), problem(loads=loads, supports=moved)) == ""


@pytest.mark.parametrize(
    ("changes", "what"),
    [
        ({"part": plate(height=0.11)}, "the part"),
        ({"part": plate(points={**CORNERS, "a": (0.9, 0.0)})}, "the part"),
        ({"part": plate(weights={("a", "b"): 2.0})}, "the part"),
        ({"part": plate(regions={"steel": (0,)})}, "the part"),
        ({"kind": "plane strain"}, "the kind"),
        ({"thickness": 2.0}, "the thickness"),
        ({"thickness": lambda x: 1.0 + 0.01 * x}, "the thickness"),
        ({"materials": {"body": replace(STEEL, poisson=0.29)}}, "a material"),
        ({"supports": problem().supports[:1]}, "a support"),
        ({"supports": (replace(problem().supports[0], y=None), problem().supports[1])}, "a support"),
        ({"supports": (problem().supports[0], ElasticSupport("bed", "right", 6.0))}, "a support"),
    ],
)
def test_what_changes_the_equations_is_named(changes: dict[str, Any], what: str) -> None:
    assert unlike(problem(), problem(**changes)) == what


@pytest.mark.parametrize(
    ("part", "other", "same"),
    [
        (solid(), solid(), True),
        (solid(), solid(end=31.0), False),
        (solid(), solid(weights={0: 3.0}), False),
        (solid(), solid(ratios={0: 2.0}), False),
        (solid(twisted(1.0)), solid(twisted(1.0)), True),
        (solid(twisted(1.0)), solid(twisted(2.0)), False),
        (RodPart({"a": (0.0,), "b": (1.0,)}), RodPart({"a": (0.0,), "b": (1.0,)}), True),
        (RodPart({"a": (0.0,), "b": (1.0,)}), RodPart({"a": (0.0,), "b": (1.1,)}), False),
        (plate(), solid(), False),
    ],
)
def test_parts_of_every_dimension(part: Any, other: Any, same: bool) -> None:
    assert unlike(problem(part), problem(other)) == ("" if same else "the part")
