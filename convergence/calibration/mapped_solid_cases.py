"""Solid cases of mapped meshes. The hollow cylinder has its exact field."""

from math import log, pi

from convergence.calibration.mapped_case import (
    MappedCase,
    MappedReading,
    displacement,
    energy,
    linearised,
    mean_displacement,
    peak,
    peak_on,
    stress,
)


def solid_cases() -> list[MappedCase]:
    """Return all of them."""
    return [
        _cylinder("solid barrel", 24.0, 48.0, 20.0),
        _cylinder("solid tube", 40.0, 52.0, 25.0),
        *_plates(),
    ]


def _cylinder(name: str, a: float, b: float, length: float) -> MappedCase:
    """A quarter; force and moment of the hoop stress through the section at 45 degrees by integration."""
    pressure, poisson = 18.0, 0.3
    scale = pressure * a**2 / (b**2 - a**2)
    middle = 0.5 * (a + b)
    bending = scale * (0.5 * (b**2 - a**2) + b**2 * log(b / a)) - middle * pressure * a
    at = (middle * 0.5**0.5, middle * 0.5**0.5, 0.0)
    plane = {"at": at, "normal": (-1.0, 1.0, 0.0)}
    inside = (0.43 * (a + b), 0.23 * (a + b), 0.37 * length)
    return MappedCase(
        "thick_cylinder",
        name,
        "hollow_cylinder",
        (
            energy(),
            displacement("bore_x_back", "x"),
            displacement(inside, "y"),
            stress("bore_x_back", "yy"),
            stress("bore_y_front", "xx", "direct"),
            stress(inside, "von_mises"),
            stress("outer_x_back", "zz"),
            peak("von_mises"),
            peak_on("outer", "first_principal", "direct"),
            reaction_along("front", 0.5 * pi * poisson * pressure * a**2),
            MappedReading("cut_force", plane, pressure * a * length),
            MappedReading("cut_moment", {**plane, "component": "z"}, bending * length),
        ),
        {"inner_radius": a, "outer_radius": b, "length": length, "pressure": pressure},
    )


def reaction_along(support: str, limit: float) -> MappedReading:
    """Return the force of a support along z, known from the exact field."""
    return MappedReading("reaction_force", {"support": support, "component": "z"}, limit)


def _plates() -> list[MappedCase]:
    return [
        MappedCase(
            "solid_hole",
            "thick plate with a hole",
            "solid_plate_with_hole",
            (
                energy(),
                mean_displacement("end", "x"),
                displacement("hole_top_middle", "y"),
                displacement("hole_end_face", "z"),
                stress("hole_top_middle", "xx"),
                stress("hole_top_middle", "zz"),
                stress("hole_top_face", "xx", "direct"),
                stress("edge_opposite_middle", "xx"),
                peak("von_mises"),
                peak_on("hole", "first_principal", "direct"),
                linearised("hole_top_middle", "edge_opposite_middle", "xx", "bending"),
            ),
            {"width": 70.0, "hole_diameter": 30.0, "half_length": 70.0, "thickness": 30.0, "tension": 60.0},
            short=True,
        )
    ]
