"""A bar with U-notches of small radius, in tension and in bending: steep, finite peaks.

Half of the bar is drawn, a quarter where it has a notch on either side. The far end is held across the bar
only, so that no corner is singular but for the mild one where a traction meets a free side.
"""

from dataclasses import dataclass
from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading

Place = tuple[float, float]


def notched_bar() -> list[DrawnCase]:
    """Return one notch and two, pulled and bent; radius over width 0.01 to 0.05."""
    return [_two_pulled(), _one_pulled(), _one_bent(), _two_bent()]


@dataclass(frozen=True)
class _Bar:
    """The notch is cut at x = 0 into the side y = width, `patch` is the part of the other side pressed."""

    length: float
    width: float
    depth: float
    radius: float
    patch: float = 0.0

    @property
    def root(self) -> Place:
        return 0.0, self.width - self.depth

    @property
    def end_corner(self) -> Place:
        return self.length, self.width

    def face(self) -> Any:
        plan = WorkPlane().MoveTo(0.0, 0.0)
        if self.patch:
            plan.LineTo(self.patch, 0.0, "patch")
        plan.LineTo(self.length, 0.0, "bottom").LineTo(self.length, self.width, "end")
        plan.LineTo(self.radius, self.width, "top").LineTo(self.radius, self.width - self.depth + self.radius)
        plan.Direction(0.0, -1.0)
        for _ in range(2):
            plan.Arc(self.radius, -45.0)
        return plan.Close("notch_plane").Face()


def _two_pulled() -> DrawnCase:
    bar = _Bar(length=55.0, width=25.0, depth=8.0, radius=1.0)
    return DrawnCase(
        name="tie bar, two notches",
        kind="plane_stress",
        shape=bar.face(),
        size=7.0,
        held={"notch_plane": {"x": 0.0}, "bottom": {"y": 0.0}},
        tractions={"end": (90.0, 0.0)},
        readings=(
            Reading("end y", "displacement", "mean_displacement", {"boundary": "end", "component": "y"}),
            *_readings(bar),
        ),
    )


def _one_pulled() -> DrawnCase:
    bar = _Bar(length=60.0, width=40.0, depth=10.0, radius=2.0)
    return DrawnCase(
        name="one notch, pulled",
        kind="plane_stress",
        shape=bar.face(),
        size=9.0,
        held={"notch_plane": {"x": 0.0}, "end": {"y": 0.0}},
        tractions={"end": (80.0, 0.0)},
        materials={"": Elastic(young=70_000.0, poisson=0.33)},
        corners=((bar.length, 0.0), bar.end_corner),
        readings=(_turning(bar), *_readings(bar)),
    )


def _one_bent() -> DrawnCase:
    bar = _Bar(length=70.0, width=30.0, depth=9.0, radius=0.6, patch=8.0)
    return DrawnCase(
        name="one notch, bent on three points",
        kind="plane_strain",
        shape=bar.face(),
        size=7.5,
        held={"notch_plane": {"x": 0.0}, "end": {"y": 0.0}},
        tractions={"patch": (0.0, 40.0)},
        corners=((bar.patch, 0.0),),
        readings=(_turning(bar), *_readings(bar)),
    )


def _two_bent() -> DrawnCase:
    """The axis moves across the bar only: the lower half is the mirrored one, its stress reversed."""
    bar = _Bar(length=70.0, width=30.0, depth=6.0, radius=0.9)
    return DrawnCase(
        name="two notches, bent",
        kind="plane_stress",
        shape=bar.face(),
        size=8.0,
        held={"notch_plane": {"x": 0.0}, "bottom": {"x": 0.0}, "end": {"y": 0.0}},
        tractions={"end": (120.0 * ng.y / bar.width, 0.0)},
        corners=(bar.end_corner,),
        readings=(_turning(bar), *_readings(bar)),
    )


def _turning(bar: _Bar) -> Reading:
    line = {"start": (bar.length, 0.0), "end": (bar.length, bar.width)}
    return Reading("end turns", "rotation", "rotation", line)


def _readings(bar: _Bar) -> tuple[Reading, ...]:
    root, near = bar.root, (0.0, bar.root[1] - 0.5 * bar.radius)
    inside = (0.31 * bar.length, 0.57 * bar.width)
    line = {"start": root, "end": (0.0, 0.0), "component": "xx"}
    mouth = (bar.radius, bar.width)
    section = (
        {"boundary": "end", "component": "y"} if bar.patch else {"boundary": "notch_plane", "component": "x"}
    )
    return (
        Reading("energy", "energy", "energy"),
        Reading("mouth opens", "displacement", "displacement", {"at": mouth, "component": "x"}),
        Reading("inside u", "displacement", "displacement", {"at": inside, "component": "y"}),
        Reading("section", "resultant", "section_force", section),
        Reading("root nodal", "point_stress", "stress", {"at": root, "component": "xx"}),
        Reading("root direct", "point_stress", "stress", {"at": root, "component": "xx", "way": "direct"}),
        Reading("below root", "point_stress", "stress", {"at": near, "component": "yy"}),
        Reading("inside s", "point_stress", "stress", {"at": inside, "component": "xx", "way": "direct"}),
        Reading("peak nodal", "peak_stress", "peak", {"component": "von_mises"}),
        Reading("peak unaveraged", "peak_stress", "peak", {"component": "first_principal", "way": "direct"}),
        Reading("peak gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss"}),
        Reading("bending", "point_stress", "line_stress", {**line, "part": "bending"}),
    )
