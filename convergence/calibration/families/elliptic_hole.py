"""A plate with a slender elliptic hole or a slot with round ends, askew, pulled and pressed along two axes.

The plate's left and lower sides slide on rollers, so no corner is singular: the peaks at the tips of the hole
are steep and finite.
"""

import math
from dataclasses import dataclass
from typing import Any

from netgen.occ import Axis, Rectangle, WorkPlane, X, Y, Z

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading, Way

Place = tuple[float, float]


def elliptic_hole() -> list[DrawnCase]:
    """Return two ellipses and two slots; radius of the tip over half the length 1/4 to 1/12."""
    return [
        _case(
            "ellipse 2 to 1", "plane_stress", _Hole(18.0, 9.0, True, (50.0, 40.0), 30.0), (100.0, 60.0), 15.0
        ),
        _case(
            "ellipse 3 to 1", "plane_strain", _Hole(21.0, 7.0, True, (48.0, 42.0), 55.0), (90.0, -40.0), 18.0
        ),
        _case("slot askew", "plane_stress", _Hole(24.0, 2.0, False, (45.0, 38.0), 135.0), (70.0, 25.0), 16.0),
        _case(
            "slot near a side",
            "plane_strain",
            _Hole(16.0, 4.0, False, (27.0, 45.0), 80.0),
            (80.0, 45.0),
            15.0,
        ),
    ]


@dataclass(frozen=True)
class _Hole:
    """Half length, half width, centre and the angle of its length to the x axis in degrees."""

    half: float
    narrow: float
    is_ellipse: bool
    centre: Place
    angle: float

    def at(self, along: float) -> Place:
        """Return the place so far along the hole from its centre."""
        turned = math.radians(self.angle)
        return self.centre[0] + math.cos(turned) * along, self.centre[1] + math.sin(turned) * along

    def faces(self) -> list[Any]:
        """Return the parts that are cut from the plate; the tips are vertices of them."""
        drawn = self._ellipse() if self.is_ellipse else [self._slot()]
        turn = Axis((0.0, 0.0, 0.0), Z)
        return [face.Rotate(turn, self.angle).Move((*self.centre, 0.0)) for face in drawn]

    def _ellipse(self) -> list[Any]:
        whole = WorkPlane().Ellipse(self.half, self.narrow).Face()
        upper = Rectangle(4.0 * self.half, 2.0 * self.narrow).Face().Move((-2.0 * self.half, 0.0, 0.0))
        return [whole * upper, whole - upper]

    def _slot(self) -> Any:
        straight, radius = self.half - self.narrow, self.narrow
        plan = WorkPlane().MoveTo(-straight, -radius)
        for direction in (1.0, -1.0):
            plan.LineTo(direction * straight, -direction * radius).Direction(direction, 0.0)
            plan.Arc(radius, 90.0).Arc(radius, 90.0)
        return plan.Face()


def _case(name: str, kind: DrawnKind, hole: _Hole, pull: tuple[float, float], size: float) -> DrawnCase:
    """Return the plate 100 by 80 with the hole, its right and upper sides pulled."""
    face = Rectangle(100.0, 80.0).Face()
    for part in hole.faces():
        face = face - part
    for side, label in ((X, ("left", "right")), (Y, ("lower", "upper"))):
        face.edges.Min(side).name, face.edges.Max(side).name = label
    return DrawnCase(
        name=name,
        kind=kind,
        shape=face,
        size=size,
        held={"left": {"x": 0.0}, "lower": {"y": 0.0}},
        tractions={"right": (pull[0], 0.0), "upper": (0.0, pull[1])},
        materials={"": Elastic(young=70_000.0, poisson=0.33) if kind == "plane_strain" else Elastic()},
        readings=(*_global(hole), *_stresses(hole)),
    )


def _global(hole: _Hole) -> tuple[Reading, ...]:
    tips = {"start": hole.at(-hole.half), "end": hole.at(hole.half)}
    inside = (77.0, 23.0)
    return (
        Reading("energy", "energy", "energy"),
        Reading("tip moves", "displacement", "displacement", {"at": hole.at(hole.half), "component": "x"}),
        Reading("inside u", "displacement", "displacement", {"at": inside, "component": "y"}),
        Reading("right mean", "displacement", "mean_displacement", {"boundary": "right", "component": "x"}),
        Reading("hole turns", "rotation", "rotation", tips),
        Reading("left force", "resultant", "section_force", {"boundary": "left", "component": "x"}),
    )


def _stresses(hole: _Hole) -> tuple[Reading, ...]:
    tip, other = hole.at(hole.half), hole.at(-hole.half)
    ahead = {"start": hole.at(1.15 * hole.half), "end": hole.at(1.6 * hole.half)}
    near = {"near": other, "radius": 0.6 * hole.half}
    return (
        _stress("tip nodal", tip, "von_mises"),
        _stress("tip direct", tip, "first_principal", "direct"),
        _stress("far", (91.0, 13.0), "xy", "direct"),
        Reading("peak nodal", "peak_stress", "peak", {"component": "von_mises"}),
        Reading("peak gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss"}),
        Reading(
            "other direct", "peak_stress", "peak", {"component": "first_principal", "way": "direct", **near}
        ),
        Reading("bending", "point_stress", "line_stress", {**ahead, "component": "xx", "part": "bending"}),
    )


def _stress(label: str, at: Place, component: str, way: Way = "nodal") -> Reading:
    return Reading(label, "point_stress", "stress", {"at": at, "component": component, "way": way})
