"""Threads of the tie bolt as a row of round grooves, pulled; rings about y, below a plane of symmetry."""

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


def screw_thread() -> list[DrawnCase]:
    """Return a solid bolt with three grooves and a hollow one with two small ones."""
    return [
        _bolt("solid bolt, three grooves", (0.0, 24.0), (3, 2.5, 11.0), 70.0, 7.0, 90.0),
        _bolt("hollow bolt, two grooves", (9.0, 20.0), (2, 1.2, 8.0), 44.0, 5.5, 60.0),
    ]


def _bolt(
    name: str,
    wall: tuple[float, float],
    grooves: tuple[int, float, float],
    length: float,
    size: float,
    pull: float,
) -> DrawnCase:
    """Return a bolt; wall: inner and outer radius; grooves: number, radius, distance."""
    inner, outer = wall
    number, radius, pitch = grooves
    first = 0.8 * pitch
    pen = WorkPlane().MoveTo(inner, 0.0).LineTo(outer, 0.0)
    for groove in range(number):
        pen.LineTo(outer, first + groove * pitch - radius).Direction(-1.0, 0.0)
        pen.Arc(radius, -90.0).Arc(radius, -90.0)
    face = pen.LineTo(outer, length).LineTo(inner, length).Close().Face()
    middle = 0.5 * (inner + outer)
    name_edges(face, {"middle": (middle, 0.0), "end": (middle, length), "inner": (inner, 0.5 * length)})
    held = {"middle": {"y": 0.0}} | ({} if inner else {"inner": {"x": 0.0}})
    root, last = (outer - radius, first), (outer - radius, first + (number - 1) * pitch)
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=face,
        size=size,
        held=held,
        tractions={"end": (0.0, pull)},
        materials={"": Elastic(205_000.0, 0.29)},
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("end y", (outer, length), "y"),
            displacement("end x", (outer, length), "x"),
            mean_displacement("end mean", "end", "y"),
            section_force("middle force", "middle", "y"),
            section_force("middle shear", "middle", "x"),
            stress("first root", root, "yy"),
            stress("last root", last, "yy", "direct"),
            stress("root hoop", root, "zz"),
            stress("core", (0.8 * middle, first), "yy", "direct"),
            peak("nodal", "von_mises"),
            peak("direct", "first_principal", "direct"),
            peak("gauss", "yy", "gauss", last, 1.8 * radius),
            *linearised("net", (inner, first), root, "yy"),
        ),
    )
