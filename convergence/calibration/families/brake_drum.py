"""Brake drums and discs of the winch, heated by friction: steep temperatures, rounded inner edges."""

import ngsolve as ng
from netgen.occ import WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_edges
from convergence.calibration.drawn_readings import (
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)

IRON = Elastic(115_000.0, 0.26, 11e-6)


def brake_drum() -> list[DrawnCase]:
    """Return a drum with a web, hot on its outside, and half a disc, hot on its face; rings about y."""
    return [_drum(), _disc()]


def _drum() -> DrawnCase:
    """A rim on a web; both inner edges are rounded, the web's bore stands on rollers."""
    bore, rim, outer, web, wide, radius = 30.0, 82.0, 94.0, 12.0, 48.0, 5.0
    pen = WorkPlane().MoveTo(bore, 0.0).LineTo(outer, 0.0).LineTo(outer, wide).LineTo(rim, wide)
    pen.LineTo(rim, web + radius).Direction(0.0, -1.0).Arc(radius, -45.0).Arc(radius, -45.0).LineTo(bore, web)
    face = pen.Close().Face()
    name_edges(face, {"bore": (bore, 6.0), "low": (60.0, 0.0), "outer": (outer, 24.0), "web": (50.0, web)})
    fillet = (rim - radius * (1.0 - 0.5**0.5), web + radius * (1.0 - 0.5**0.5))
    return DrawnCase(
        name="drum hot outside",
        kind="axisymmetric",
        shape=face,
        size=10.0,
        held={"bore": {"y": 0.0}},
        materials={"": IRON},
        temperature=180.0 * ng.exp((ng.x - outer) / 9.0),
        readings=(
            *_common((outer, wide), "zz", (88.0, 31.0)),
            mean_displacement("web lift", "web", "y"),
            mean_displacement("bore", "bore", "x"),
            Reading("rim turn", "rotation", "rotation", {"start": (outer, 0.0), "end": (outer, wide)}),
            section_force("bore force", "bore", "y"),
            stress("web hoop", (bore, 0.0), "zz"),
            *_peaks(fillet, 2.0 * radius),
            *linearised("web", (62.0, 0.0), (62.0, web), "xx"),
        ),
    )


def _disc() -> DrawnCase:
    """Half the thickness of a disc with a rounded groove in the plane of symmetry's face, hot near it."""
    inner, outer, half, radius = 40.0, 110.0, 14.0, 6.0
    centre = 78.0
    pen = WorkPlane().MoveTo(inner, 0.0).LineTo(outer, 0.0).LineTo(outer, half).LineTo(centre + radius, half)
    pen.Direction(0.0, -1.0).Arc(radius, -90.0).Arc(radius, -90.0).LineTo(inner, half)
    face = pen.Close().Face()
    name_edges(
        face,
        {"middle": (75.0, 0.0), "inner": (inner, 7.0), "outer": (outer, 7.0), "face": (55.0, half)},
    )
    bottom = (centre, half - radius)
    return DrawnCase(
        name="disc with a groove, hot on its face",
        kind="axisymmetric",
        shape=face,
        size=8.0,
        held={"middle": {"y": 0.0}},
        materials={"": IRON},
        temperature=220.0 * (ng.y / half) ** 2 * ng.exp(-((ng.x - 84.0) ** 2) / 300.0),
        readings=(
            *_common((outer, half), "xx", (62.0, 5.0)),
            mean_displacement("face lift", "face", "y"),
            mean_displacement("inner", "inner", "x"),
            Reading("rim turn", "rotation", "rotation", {"start": (outer, 0.0), "end": (outer, half)}),
            section_force("middle force", "middle", "y"),
            stress("bore hoop", (inner, 0.0), "zz"),
            *_peaks(bottom, 1.5 * radius),
            *linearised("disc", (60.0, 0.0), (60.0, half), "zz"),
        ),
    )


def _common(tip: tuple[float, float], component: str, inside: tuple[float, float]) -> tuple[Reading, ...]:
    return (
        Reading("energy", "energy", "energy"),
        displacement("tip x", tip, "x"),
        displacement("tip y", tip, "y"),
        stress("inside", inside, component),
        stress("inside xy", inside, "xy", "direct"),
    )


def _peaks(at: tuple[float, float], radius: float) -> tuple[Reading, ...]:
    return (
        stress("fillet", at, "first_principal"),
        peak("nodal", "von_mises", near=at, radius=radius),
        peak("direct", "first_principal", "direct", at, radius),
        peak("all gauss", "von_mises", "gauss"),
    )
