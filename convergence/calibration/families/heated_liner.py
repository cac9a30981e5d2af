"""A liner of another material in a heated body; smooth curved interfaces that end on planes of symmetry."""

from typing import Any

import ngsolve as ng
from netgen.occ import Circle, Glue, Rectangle, WorkPlane

from convergence.calibration.drawn_case import DrawnCase, DrawnKind, Elastic, Reading, name_edges

Place = tuple[float, float]
STEEL = Elastic(210_000.0, 0.3, 1.2e-5)
BRONZE = Elastic(105_000.0, 0.34, 1.8e-5)
POLYMER = Elastic(3_000.0, 0.4, 8.0e-5)


def heated_liner() -> list[DrawnCase]:
    """Return a lined block in plane strain, an eccentric one in plane stress, a waved and a blind liner."""
    return [_block(), _eccentric(), _waved(), _blind()]


def _block() -> DrawnCase:
    """Return a quarter of a square block with a bronze liner."""
    bore, joint, half = 20.0, 27.0, 55.0
    square = Rectangle(half, half).Face()
    outside = square - Circle((0, 0), joint).Face()
    liner = square * (Circle((0, 0), joint).Face() - Circle((0, 0), bore).Face())
    shape = _glued(liner, outside)
    name_edges(shape, {"liner_cut": (0.5 * (bore + joint), 0.0), "body_cut": (0.5 * (joint + half), 0.0)})
    name_edges(shape, {"left_liner": (0.0, 0.5 * (bore + joint)), "left_body": (0.0, 0.5 * (joint + half))})
    name_edges(shape, {"bore": (0.7071 * bore, 0.7071 * bore), "outer": (half, 0.5 * half)})
    radius = ng.sqrt(ng.x * ng.x + ng.y * ng.y)
    return _case(
        name="lined block",
        kind="plane_strain",
        shape=shape,
        size=9.0,
        liner=BRONZE,
        temperature=120.0 * (1.0 - ng.log(radius / bore) / 1.2),
        held={
            "liner_cut": {"y": 0.0},
            "body_cut": {"y": 0.0},
            "left_liner": {"x": 0.0},
            "left_body": {"x": 0.0},
        },
        readings=_readings(
            bore=(bore, 0.0),
            tip=(half, half),
            inside=(37.3, 11.8),
            component="yy",
            walls=(((bore, 0.0), (0.98 * joint, 0.0)), ((1.02 * joint, 0.0), (half, 0.0))),
            reach=0.8 * (joint - bore),
        ),
        corners=((bore, 0.0), (joint, 0.0), (0.0, bore), (0.0, joint)),
    )


def _eccentric() -> DrawnCase:
    """Return half a housing on a foot, its bore and its liner off the centre, one from the other too."""
    upper = WorkPlane().MoveTo(-60, 0).Rectangle(110, 45).Face()
    bore, joint = (8.0, 16.0), (4.0, 26.0)
    hole, disc = Circle((bore[0], 0), bore[1]).Face(), Circle((joint[0], 0), joint[1]).Face()
    shape = _glued(upper * (disc - hole), upper - disc)
    thin, far, front = (0.5 * (24.0 + 30.0), 0.0), (40.0, 0.0), (-40.0, 0.0)
    name_edges(shape, {"liner_cut": thin, "thick_cut": (-15.0, 0.0), "body_cut": far, "front_cut": front})
    name_edges(shape, {"bore": (bore[0], bore[1]), "outer": (0.0, 45.0), "foot": (-60.0, 22.5)})
    away = (ng.x - bore[0]) * (ng.x - bore[0]) + ng.y * ng.y
    cuts = ("liner_cut", "thick_cut", "body_cut", "front_cut")
    return _case(
        name="eccentric housing",
        kind="plane_stress",
        shape=shape,
        size=9.0,
        liner=BRONZE,
        temperature=150.0 * ng.exp(-away / 1500.0),
        held={"foot": {"x": 0.0}} | {cut: {"y": 0.0} for cut in cuts},
        readings=_readings(
            bore=(24.0, 0.0),
            tip=(50.0, 45.0),
            inside=(-31.4, 19.2),
            component="yy",
            walls=(((24.0, 0.0), (29.8, 0.0)), ((30.2, 0.0), (50.0, 0.0))),
            reach=5.0,
            peak=(5.0, 15.7),
        ),
        corners=((24.0, 0.0), (30.0, 0.0), (-8.0, 0.0), (-22.0, 0.0)),
    )


def _waved() -> DrawnCase:
    """Return a tube held at both ends whose bronze liner grows thicker along a smooth wave."""
    bore, outer, height = 30.0, 52.0, 50.0
    plane = WorkPlane().MoveTo(bore, 0).LineTo(37, 0).LineTo(37, 12).Direction(0, 1).Arc(15, -35).Arc(15, 35)
    liner = plane.LineTo(37 + 30 * 0.18084796, height).LineTo(bore, height).Close().Face()
    shape = _glued(liner, WorkPlane().MoveTo(bore, 0).Rectangle(outer - bore, height).Face() - liner)
    joint = 37 + 30 * 0.18084796
    name_edges(
        shape,
        {"liner_cut": (33.5, 0.0), "body_cut": (44.5, 0.0), "bore": (bore, 25.0), "outer": (outer, 25.0)},
    )
    name_edges(
        shape, {"liner_top": (0.5 * (bore + joint), height), "body_top": (0.5 * (joint + outer), height)}
    )
    ends = ("liner_cut", "body_cut", "liner_top", "body_top")
    rise = 12 + 30 * 0.57357644
    own = (Reading("top", "reaction", "reaction", {"boundary": "body_top", "component": "y"}),)
    readings = _readings(
        bore=(bore, 0.0),
        tip=(outer, height),
        inside=(46.6, 21.7),
        component="zz",
        walls=(((bore, 25.0), (36.0, 25.0)), ((45.0, 25.0), (outer, 25.0))),
        reach=5.0,
    )
    return _case(
        name="waved liner",
        kind="axisymmetric",
        shape=shape,
        size=5.5,
        liner=BRONZE,
        temperature=140.0 * (1.0 - ng.log(ng.x / bore) / 0.7) * (1.0 + ng.y / 80.0),
        held={end: {"y": 0.0} for end in ends},
        readings=readings + own,
        corners=(
            (37.0, 12.0),
            (joint, rise),
            (joint, height),
            (bore, 0.0),
            (37.0, 0.0),
            (37 + 15 * 0.18084796, 12 + 15 * 0.57357644),
        ),
    )


def _blind() -> DrawnCase:
    """Return a cup of polymer in a steel body, rounded inside and outside."""
    cup = WorkPlane().MoveTo(0, 10).LineTo(14, 10).Direction(1, 0).Arc(12, 90).LineTo(26, 60).LineTo(20, 60)
    liner = cup.LineTo(20, 24).Direction(0, -1).Arc(8, -90).LineTo(0, 16).Close().Face()
    around = WorkPlane().LineTo(42, 0).LineTo(42, 60).LineTo(26, 60).LineTo(26, 22).Direction(0, -1)
    shape = _glued(liner, around.Arc(12, -90).LineTo(0, 10).Close().Face())
    name_edges(
        shape,
        {"liner_cut": (23.0, 60.0), "body_cut": (34.0, 60.0), "bore": (20.0, 42.0), "outer": (42.0, 30.0)},
    )
    name_edges(shape, {"axis_liner": (0.0, 13.0), "axis_body": (0.0, 5.0)})
    return _case(
        name="blind polymer liner",
        kind="axisymmetric",
        shape=shape,
        size=8.0,
        liner=POLYMER,
        temperature=90.0 * ng.exp(-ng.x * ng.x / 900.0),
        held={"axis_liner": {"x": 0.0}, "axis_body": {"x": 0.0}}
        | {"liner_cut": {"y": 0.0}, "body_cut": {"y": 0.0}},
        readings=_readings(
            bore=(20.0, 60.0),
            tip=(42.0, 0.0),
            inside=(33.7, 18.4),
            component="zz",
            walls=(((20.0, 40.0), (25.8, 40.0)), ((26.2, 40.0), (42.0, 40.0))),
            reach=4.5,
        ),
        corners=((12.0, 16.0), (20.0, 24.0), (26.0, 22.0), (14.0, 10.0)),
    )


def _glued(liner: Any, body: Any) -> Any:
    liner.name, body.name = "liner", "body"
    return Glue([liner, body])


def _case(
    *,
    name: str,
    kind: DrawnKind,
    shape: Any,
    size: float,
    liner: Elastic,
    temperature: Any,
    held: dict[str, dict[str, float]],
    readings: tuple[Reading, ...],
    corners: tuple[Place, ...],
) -> DrawnCase:
    return DrawnCase(
        name=name,
        kind=kind,
        shape=shape,
        size=size,
        held=held,
        materials={"liner": liner, "body": STEEL},
        temperature=temperature,
        readings=readings,
        corners=corners,
        levels=8,
    )


def _readings(
    *,
    bore: Place,
    tip: Place,
    inside: Place,
    component: str,
    walls: tuple[tuple[Place, Place], tuple[Place, Place]],
    reach: float,
    peak: Place | None = None,
) -> tuple[Reading, ...]:
    """Return what is read from every liner; reach: how far the bore's peak is searched."""
    liner = {"start": walls[0][0], "end": walls[0][1], "component": component, "part": "bending"}
    body = {"start": walls[1][0], "end": walls[1][1], "component": component, "part": "membrane"}
    hoop = {"at": bore, "component": component}
    near = {"component": "von_mises", "near": peak or bore, "radius": reach}
    return (
        Reading("energy", "energy", "energy"),
        Reading("bore u", "displacement", "mean_displacement", {"boundary": "bore", "component": "x"}),
        Reading("tip", "displacement", "displacement", {"at": tip, "component": "x"}),
        Reading("liner cut", "resultant", "section_force", {"boundary": "liner_cut", "component": "y"}),
        Reading("liner mean", "point_stress", "mean_stress", {"region": "liner", "component": component}),
        Reading("bore hoop", "point_stress", "stress", hoop),
        Reading("inside", "point_stress", "stress", {"at": inside, "component": "von_mises"}),
        Reading("inside xy", "point_stress", "stress", {"at": inside, "component": "xy", "way": "direct"}),
        Reading("bore peak", "peak_stress", "peak", near),
        Reading("peak unaveraged", "peak_stress", "peak", {"component": "first_principal", "way": "direct"}),
        Reading("peak gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss"}),
        Reading("liner bending", "point_stress", "line_stress", liner),
        Reading("body membrane", "point_stress", "line_stress", body),
    )
