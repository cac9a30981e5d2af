"""A plate with a hole pulled along x, quarter drawn; holes small and large against the width."""

from netgen.occ import Circle, Rectangle, X, Y

from convergence.calibration.drawn_case import DrawnCase, Reading


def plate_with_hole() -> list[DrawnCase]:
    """Return three proportions, plane stress and plane strain."""
    return [
        _case("small hole", 8.0, 100.0, 60.0, 14.0, "plane_stress"),
        _case("large hole", 25.0, 80.0, 50.0, 12.0, "plane_stress"),
        _case("square, plane strain", 12.0, 60.0, 60.0, 12.0, "plane_strain"),
    ]


def _case(name: str, radius: float, length: float, width: float, size: float, kind: str) -> DrawnCase:
    face = Rectangle(length, width).Face() - Circle((0, 0), radius).Face()
    face.edges.Min(X).name = "symmetry_x"
    face.edges.Max(X).name = "pulled"
    face.edges.Min(Y).name = "symmetry_y"
    top = (0.0, radius)
    ligament = (0.0, 0.5 * (radius + width))
    inside = (0.37 * length, 0.41 * width)
    return DrawnCase(
        name=name,
        kind=kind,  # type: ignore[arg-type]
        shape=face,
        size=size,
        held={"symmetry_x": {"x": 0.0}, "symmetry_y": {"y": 0.0}},
        tractions={"pulled": (100.0, 0.0)},
        readings=(
            Reading("energy", "energy", "energy"),
            Reading("end", "displacement", "mean_displacement", {"boundary": "pulled", "component": "x"}),
            Reading("inside u", "displacement", "displacement", {"at": inside, "component": "y"}),
            Reading("hole top nodal", "point_stress", "stress", {"at": top, "component": "xx"}),
            Reading(
                "hole top direct", "point_stress", "stress", {"at": top, "component": "xx", "way": "direct"}
            ),
            Reading("ligament", "point_stress", "stress", {"at": ligament, "component": "von_mises"}),
            Reading("inside s", "point_stress", "stress", {"at": inside, "component": "xx", "way": "direct"}),
            Reading("peak nodal", "peak_stress", "peak", {"component": "von_mises"}),
            Reading("peak unaveraged", "peak_stress", "peak", {"component": "von_mises", "way": "direct"}),
            Reading("peak gauss", "peak_stress", "peak", {"component": "first_principal", "way": "gauss"}),
            Reading("support", "resultant", "section_force", {"boundary": "symmetry_x", "component": "x"}),
            Reading(
                "membrane",
                "point_stress",
                "line_stress",
                {"start": top, "end": (0.0, width), "component": "xx", "part": "membrane"},
            ),
            Reading(
                "bending",
                "point_stress",
                "line_stress",
                {"start": top, "end": (0.0, width), "component": "xx", "part": "bending"},
            ),
        ),
    )
