"""Rope pulleys of the davit: a rim with a round groove on a thin web and a hub, rings about the y axis."""

from typing import Any

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Reading, name_edges
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)


def rope_pulley() -> list[DrawnCase]:
    """Return a steel pulley pressed by its rope and a slim one pushed along its axis."""
    normal = ng.specialcf.normal(2)
    rope = (-20.0 * normal[0], -20.0 * normal[1])
    axial = (0.0, 15.0 * (ng.x / 40.0) ** 2)
    return [
        _pulley("pulley under its rope", (12.0, 50.0, 9.0), (14.0, 6.0), 4.0, 7.0, rope),
        _pulley("slim pulley pushed along its axis", (10.0, 46.0, 6.0), (12.0, 3.0), 1.5, 6.0, axial),
    ]


def _pulley(
    name: str,
    radii: tuple[float, float, float],
    widths: tuple[float, float],
    fillet: float,
    size: float,
    load: tuple[Any, ...],
) -> DrawnCase:
    """Return half a pulley; radii: bore, rim, groove; widths: of half the rim, of half the web."""
    bore, rim, groove = radii
    wide, web = widths
    hub, under = bore + 8.0, rim - groove - 8.0
    reach = fillet * (1.0 - 0.5**0.5)
    outer, inner = (under - reach, web + reach), (hub + reach, web + reach)
    half = 0.5 * (hub + under)
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=_face(radii, widths, (under, hub), fillet),
        size=size,
        held={"middle": {"y": 0.0}, "bore": {"x": 0.0}},
        tractions={"groove" if load[0] != 0.0 else "lip": load},
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("lip x", (rim, wide), "x"),
            displacement("lip y", (rim, wide), "y"),
            mean_displacement("lip mean", "lip", "y"),
            Reading("rim turn", "rotation", "rotation", {"start": (under, wide), "end": (rim, wide)}),
            section_force("bore force", "bore", "x"),
            section_force("middle force", "middle", "y"),
            stress("outer fillet", outer, "first_principal"),
            stress("inner fillet", inner, "von_mises", "direct"),
            stress("web", (half, 0.4 * web), "xx"),
            stress("bore hoop", (bore, 0.0), "zz"),
            peak("nodal", "von_mises", near=outer, radius=2.0 * fillet + 2.0),
            peak("direct", "first_principal", "direct", outer, 2.0 * fillet + 2.0),
            peak("gauss", "von_mises", "gauss", inner, 2.0 * fillet + 2.0),
            *linearised("web", (half, 0.0), (half, web), "xx"),
        ),
    )


def _face(
    radii: tuple[float, float, float], widths: tuple[float, float], ends: tuple[float, float], fillet: float
) -> Any:
    """Return the drawing; ends: outer and inner end of the web."""
    bore, rim, groove = radii
    wide, web = widths
    under, hub = ends
    pen = WorkPlane().MoveTo(bore, 0.0).LineTo(rim - groove, 0.0).Direction(0.0, 1.0)
    pen.Arc(groove, -45.0).Arc(groove, -45.0).LineTo(rim, wide).LineTo(under, wide)
    pen.LineTo(under, web + fillet).Direction(0.0, -1.0).Arc(fillet, -45.0).Arc(fillet, -45.0)
    pen.LineTo(hub + fillet, web).Direction(-1.0, 0.0).Arc(fillet, -45.0).Arc(fillet, -45.0)
    face = pen.LineTo(hub, wide).LineTo(bore, wide).Close().Face()
    middle = 0.5 * (bore + rim)
    name_edges(face, {"middle": (middle, 0.0), "bore": (bore, 0.5 * wide), "lip": (under + 1.0, wide)})
    for share in (0.3827, 0.9239):
        name_edges(face, {"groove": (rim - groove * share, groove * (1.0 - share**2) ** 0.5)})
    return face
