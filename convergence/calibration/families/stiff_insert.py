"""Inserts of another material with a smooth interface: stress is finite, and leaps across the interface.

A mean over the cells around a node on the interface mixes both sides, so points are read off the interface
and peaks there at the points of integration. (The nodes of single cells are no better: four-sided cells with
two sides on one arc are nearly degenerate there.)
"""

from typing import Any

import ngsolve as ng
from netgen.occ import Circle, Glue, Rectangle, WorkPlane, X, Y

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, outline

Place = tuple[float, float]
STEEL = Elastic(210_000.0, 0.3, 12e-6)
ALUMINIUM = Elastic(70_000.0, 0.33, 23e-6)
BRONZE = Elastic(110_000.0, 0.34, 18e-6)
PLASTIC = Elastic(2_500.0, 0.4, 80e-6)
ON_AXIS = 1e-9


def stiff_insert() -> list[DrawnCase]:
    """Return a stiff boss, a soft plug, a rounded square that is heated, a bush under bearing pressure."""
    return [_boss(), _plug(), _rounded_square(), _bush()]


def _boss() -> DrawnCase:
    """A quarter: a steel boss in an aluminium plate pulled along x."""
    radius, length, width = 13.0, 60.0, 38.0
    disc = Circle((0.0, 0.0), radius).Face()
    face = _bonded(Rectangle(length, width).Face(), disc, "boss", "plate")
    face.edges.Max(X).name = "pulled"
    face.edges.Max(Y).name = "top"
    return DrawnCase(
        name="steel boss in an aluminium arm",
        kind="plane_stress",
        shape=face,
        size=8.0,
        held=_symmetric("boss", "plate"),
        tractions={"pulled": (100.0, 0.0)},
        materials={"boss": STEEL, "plate": ALUMINIUM},
        readings=(
            *_common("boss", "xx", (4.0, 3.0), (31.0, 17.0)),
            Reading("top y", "displacement", "mean_displacement", {"boundary": "top", "component": "y"}),
            Reading("section", "resultant", "section_force", {"boundary": "boss_left", "component": "x"}),
            Reading("by boss", "point_stress", "stress", {"at": (radius + 3.0, 0.0), "component": "xx"}),
            Reading("gauss xx", "peak_stress", "peak", {"component": "xx", "way": "gauss"}),
            Reading("gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss"}),
            *_line((0.0, radius + 3.0), (0.0, width), "xx"),
        ),
    )


def _plug() -> DrawnCase:
    """A whole plate with a soft plug off its middle, pulled on two sides."""
    width, height, centre, radius = 96.0, 70.0, (38.0, 28.0), 13.0
    plate = outline((width, 0.0, "low"), (width, height, "right"), (0.0, height, "top"), (0.0, 0.0, "left"))
    return DrawnCase(
        name="soft plug in the base plate",
        kind="plane_strain",
        shape=_bonded(plate, Circle(centre, radius).Face(), "plug", "plate"),
        size=12.0,
        held={"plate_left": {"x": 0.0}, "plate_low": {"y": 0.0}},
        tractions={"right": (60.0, 0.0), "top": (0.0, 25.0)},
        materials={"plug": PLASTIC, "plate": STEEL},
        readings=(
            *_common("plug", "yy", (35.0, 31.0), (71.0, 47.0)),
            Reading("top x", "displacement", "mean_displacement", {"boundary": "top", "component": "x"}),
            Reading("turn", "rotation", "rotation", {"start": (width, 0.0), "end": (width, height)}),
            Reading("corner", "point_stress", "stress", {"at": (0.0, 0.0), "component": "xx"}),
            Reading("below plug", "point_stress", "stress", {"at": (centre[0], 0.0), "component": "xx"}),
            Reading("rim direct", "peak_stress", "peak", {"component": "first_principal", "way": "direct"}),
            Reading("rim gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss"}),
            *_line((centre[0], 0.0), (centre[0], centre[1] - radius - 3.0), "xx"),
        ),
    )


def _rounded_square() -> DrawnCase:
    """A quarter: a bronze square with rounded corners, fitted in steel and heated with it."""
    half, fillet, length, width = 15.0, 3.0, 44.0, 36.0
    pen = WorkPlane().MoveTo(0.0, 0.0).LineTo(half, 0.0).LineTo(half, half - fillet).Rotate(90.0)
    square = pen.Arc(fillet, 90.0).LineTo(0.0, half).Close().Face()
    face = _bonded(Rectangle(length, width).Face(), square, "insert", "plate")
    face.edges.Max(X).name = "right"
    face.edges.Max(Y).name = "top"
    beyond = {"near": (0.0, width), "radius": 12.0}
    return DrawnCase(
        name="heated square insert",
        kind="plane_stress",
        shape=face,
        size=8.0,
        held=_symmetric("insert", "plate"),
        materials={"insert": BRONZE, "plate": STEEL},
        temperature=150.0,
        readings=(
            *_common("insert", "xx", (5.0, 4.0), (27.0, 22.0)),
            Reading("right x", "displacement", "mean_displacement", {"boundary": "right", "component": "x"}),
            Reading("turn", "rotation", "rotation", {"start": (length, 0.0), "end": (length, width)}),
            Reading("section", "resultant", "section_force", {"boundary": "plate_low", "component": "y"}),
            Reading("beyond", "peak_stress", "peak", {"component": "xx", **beyond}),
            Reading("gauss one", "peak_stress", "peak", {"component": "first_principal", "way": "gauss"}),
            Reading("gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss"}),
            *_line((0.0, half + 5.0), (0.0, width), "xx"),
        ),
    )


def _bush() -> DrawnCase:
    """Half of a lug with a bronze bush; the pin presses on all of the bore, most towards x."""
    bore, outer, length, width = 9.0, 13.0, 40.0, 26.0
    pressure = 15.0 * (1.0 + ng.x / bore) ** 2 / bore
    box = Rectangle(length + width, width).Face().Move((-length, 0.0, 0.0))
    hole = Circle((0.0, 0.0), bore).Face()
    face = _bonded(box - hole, Circle((0.0, 0.0), outer).Face() - hole, "bush", "lug")
    face.edges.Min(X).name = "root"
    face.edges.Max(X).name = "tip"
    face.edges.Nearest((0.0, bore, 0.0)).name = "bore"
    at_bore = {"near": (0.0, bore), "radius": 3.6}
    return DrawnCase(
        name="bush in the lug",
        kind="plane_stress",
        shape=face,
        size=8.0,
        held={"root": {"x": 0.0}, "bush_low": {"y": 0.0}, "lug_low": {"y": 0.0}},
        tractions={"bore": (pressure * ng.x, pressure * ng.y)},
        materials={"bush": BRONZE, "lug": STEEL},
        readings=(
            *_common("bush", "yy", (-7.0, 8.5), (-23.0, 11.0)),
            Reading("tip x", "displacement", "mean_displacement", {"boundary": "tip", "component": "x"}),
            Reading("oval", "displacement", "displacement", {"at": (0.0, bore), "component": "y"}),
            Reading("section", "resultant", "section_force", {"boundary": "root", "component": "x"}),
            Reading("bore", "peak_stress", "peak", {"component": "first_principal", **at_bore}),
            Reading("bore gauss", "peak_stress", "peak", {"component": "xx", "way": "gauss", **at_bore}),
            Reading("gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss"}),
            *_line((0.0, outer + 0.5), (0.0, width), "xx"),
        ),
    )


def _symmetric(*regions: str) -> dict[str, dict[str, float]]:
    """Return the rollers of a quarter."""
    left = {f"{region}_left": {"x": 0.0} for region in regions}
    return left | {f"{region}_low": {"y": 0.0} for region in regions}


def _bonded(plate: Any, insert: Any, insert_name: str, plate_name: str) -> Any:
    """Return the plate with the insert in it; sides on the axes are called insert_name_left and so on."""
    insert = insert * plate
    insert.faces.name = insert_name
    rest = plate - insert
    rest.faces.name = plate_name
    whole = Glue([insert, rest])
    for face in whole.faces:
        for edge in face.edges:
            if abs(edge.center.x) < ON_AXIS:
                edge.name = f"{face.name}_left"
            elif abs(edge.center.y) < ON_AXIS:
                edge.name = f"{face.name}_low"
    return whole


def _common(region: str, component: str, within: Place, outside: Place) -> tuple[Reading, ...]:
    """Return what is read in all cases: at a place within the insert and one outside of it."""
    return (
        Reading("energy", "energy", "energy"),
        Reading("inside u", "displacement", "displacement", {"at": outside, "component": "magnitude"}),
        Reading("mean", "point_stress", "mean_stress", {"region": region, "component": component}),
        Reading("within", "point_stress", "stress", {"at": within, "component": "von_mises"}),
        Reading("outside", "point_stress", "stress", {"at": outside, "component": "xy", "way": "direct"}),
    )


def _line(start: Place, end: Place, component: str) -> tuple[Reading, ...]:
    line = {"start": start, "end": end, "component": component}
    return (
        Reading("membrane", "point_stress", "line_stress", {**line, "part": "membrane"}),
        Reading("bending", "point_stress", "line_stress", {**line, "part": "bending"}),
    )
