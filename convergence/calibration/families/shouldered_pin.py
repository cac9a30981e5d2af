"""A round pin with a shoulder or a groove, pulled or pressed along its axis; fillets blunt and sharp."""

from typing import Any

from netgen.occ import WorkPlane, X, Y

from convergence.calibration.drawn_case import DrawnCase, Reading

Place = tuple[float, float]

PULL, PRESSURE, SQUEEZE = 120.0, 80.0, 35.0


def shouldered_pin() -> list[DrawnCase]:
    """Return two shoulders and a groove pulled, and a pin pressed on its end and squeezed by a hub."""
    pull = {"end": (0.0, PULL)}
    press = {"end": (0.0, -PRESSURE), "fit": (-SQUEEZE, 0.0)}
    return [
        _shouldered("davit pin, fillet 2", (10.0, 16.0), 2.0, (25.0, 60.0), 6.0, pull),
        _shouldered("sharp fillet 0.4", (12.0, 15.0), 0.4, (20.0, 50.0), 7.0, pull),
        _grooved("round groove", 15.0, 3.0, 45.0, 7.0),
        _shouldered("pressed in a hub", (8.0, 20.0), 3.0, (22.0, 58.0), 6.0, press),
    ]


def _shouldered(
    name: str,
    radii: tuple[float, float],
    fillet: float,
    heights: tuple[float, float],
    size: float,
    tractions: dict[str, tuple[float, float]],
) -> DrawnCase:
    """Return a pin of two radii; heights: of the shoulder and of the end."""
    (small, large), (shoulder, height) = radii, heights
    band = (height - 16.0, height - 6.0)
    plane = WorkPlane().MoveTo(0, 0).LineTo(large, 0).LineTo(large, shoulder).LineTo(small + fillet, shoulder)
    plane.Direction(-1, 0).Arc(fillet, -90).LineTo(small, band[0]).LineTo(small, band[1]).LineTo(
        small, height
    )
    face = plane.LineTo(0, height).Close().Face()
    face.edges.Nearest((small, 0.5 * sum(band), 0)).name = "fit"
    face.edges.Nearest((0.5 * (small + fillet + large), shoulder, 0)).name = "shoulder"
    foot, toe = (small, shoulder + fillet), (small + fillet, shoulder)
    load_ends = ((small, band[0]), (small, band[1])) if "fit" in tractions else ()
    inside = (0.61 * small, 1.08 * shoulder)
    largest = "von_mises" if load_ends else "first_principal"
    own = (
        Reading("shoulder", "displacement", "mean_displacement", {"boundary": "shoulder", "component": "y"}),
        Reading("turn", "rotation", "rotation", {"start": toe, "end": (large, shoulder)}),
        Reading("toe", "point_stress", "stress", {"at": toe, "component": "xx", "way": "direct"}),
    )
    return _case(
        name=name,
        face=face,
        size=size,
        tractions=tractions,
        readings=_common(foot, (large, shoulder), inside, shoulder, largest) + own,
        corners=(foot, toe, *load_ends),
    )


def _grooved(name: str, radius: float, groove: float, height: float, size: float) -> DrawnCase:
    """Return the half of a pin with a round groove."""
    root, rim = (radius - groove, 0.0), (radius, groove)
    plane = WorkPlane().MoveTo(0, 0).LineTo(*root).Direction(0, 1).Arc(groove, -90)
    face = plane.LineTo(radius, height).LineTo(0, height).Close().Face()
    own = (
        Reading("flank", "displacement", "displacement", {"at": (radius, 17.3), "component": "x"}),
        Reading("root hoop", "point_stress", "stress", {"at": root, "component": "zz", "way": "direct"}),
    )
    readings = _common(root, rim, (0.63 * radius, 1.9 * groove), 0.5 * groove, "first_principal")
    return _case(
        name=name,
        face=face,
        size=size,
        tractions={"end": (0.0, PULL)},
        readings=readings + own,
        corners=(root, rim),
    )


def _case(
    *,
    name: str,
    face: Any,
    size: float,
    tractions: dict[str, tuple[float, float]],
    readings: tuple[Reading, ...],
    corners: tuple[Place, ...],
) -> DrawnCase:
    face.edges.Min(X).name = "axis"
    face.edges.Min(Y).name = "base"
    face.edges.Max(Y).name = "end"
    return DrawnCase(
        name=name,
        kind="axisymmetric",
        shape=face,
        size=size,
        held={"axis": {"x": 0.0}, "base": {"y": 0.0}},
        tractions=tractions,
        readings=readings,
        corners=corners,
    )


def _common(foot: Place, tip: Place, inside: Place, level: float, largest: str) -> tuple[Reading, ...]:
    """Return what is read from every pin; foot: the narrow end of the fillet, level: height on the axis."""
    section = {"start": (0.0, foot[1]), "end": foot, "component": "yy"}
    return (
        Reading("energy", "energy", "energy"),
        Reading("tip", "displacement", "displacement", {"at": tip, "component": "y"}),
        Reading("base", "resultant", "section_force", {"boundary": "base", "component": "y"}),
        Reading("foot", "point_stress", "stress", {"at": foot, "component": "yy"}),
        Reading("axis", "point_stress", "stress", {"at": (0.0, level), "component": "von_mises"}),
        Reading("inside", "point_stress", "stress", {"at": inside, "component": "xy", "way": "direct"}),
        Reading("peak nodal", "peak_stress", "peak", {"component": "von_mises"}),
        Reading("peak unaveraged", "peak_stress", "peak", {"component": largest, "way": "direct"}),
        Reading("peak gauss", "peak_stress", "peak", {"component": "von_mises", "way": "gauss"}),
        Reading("bending", "point_stress", "line_stress", section | {"part": "bending"}),
    )
