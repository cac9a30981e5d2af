"""Plane and axisymmetric cases of rounded shapes, whose limits come from a finer mesh."""

from convergence.calibration.mapped_case import (
    ALUMINIUM,
    MappedCase,
    around,
    displacement,
    energy,
    linearised,
    mean_displacement,
    peak,
    peak_near,
    peak_on,
    reaction,
    section_force,
    section_moment,
    stress,
)


def rounded_cases() -> list[MappedCase]:
    """Return all of them."""
    return [*_pins(), *_vessels(), *_notches(), *_holes(), *_openings(), *_tapers()]


def _pins() -> list[MappedCase]:
    return [
        MappedCase(
            "shouldered_pin",
            name,
            "stepped_pin",
            (
                energy(),
                mean_displacement("top", "y"),
                displacement("end_upper", "y"),
                displacement("post_right", "x"),
                stress("centre", "yy"),
                stress("inner_corner", "first_principal", "direct"),
                stress((0.4 * thin, 48.0), "von_mises"),
                peak_on("fillet", "first_principal"),
                peak("von_mises", "direct"),
                peak_on("fillet", "zz"),
                section_force((0.0, 60.0), (thin, 60.0), "y", "recovered"),
                linearised("post_right", "left", "yy", "bending"),
            ),
            {
                "thin_radius": thin,
                "thick_radius": 36.0,
                "fillet_radius": radius,
                "thick_length": 26.0,
                "length": 90.0,
                "tension": 120.0,
            },
            divisions=1,
        )
        for name, thin, radius in (("generous fillet", 18.0, 10.0), ("tight fillet", 24.0, 2.5))
    ]


def _vessels() -> list[MappedCase]:
    """The end's wall differs from the cylinder's: bending at the junction."""
    return [
        MappedCase(
            "closed_vessel",
            name,
            "pressure_vessel",
            (
                energy(),
                displacement("outer_top", "y"),
                displacement("outer_junction", "x"),
                mean_displacement("outside", "x"),
                stress("inner_middle", "zz"),
                stress("outer_junction", "yy", "direct"),
                stress("inner_top", "xx"),
                stress("outer_junction", "von_mises"),
                peak("von_mises"),
                peak_on("outside", "first_principal", "direct"),
                peak_on("inside", "zz"),
                linearised("inner_junction", "outer_junction", "yy", "bending"),
                section_force("inner_junction", "outer_junction", "shear", "recovered"),
            ),
            {
                "inner_radius": 60.0,
                "wall": wall,
                "end_wall": end,
                "half_length": 90.0,
                "pressure": 12.0,
            },
            divisions=1,
        )
        for name, wall, end in (("thin end", 15.0, 7.0), ("thick end", 9.0, 16.0))
    ]


def _notches() -> list[MappedCase]:
    return [
        MappedCase(
            "notched_bar",
            name,
            "double_notched_bar",
            (
                energy(),
                mean_displacement("end", "x"),
                displacement("notch_root", "y"),
                stress("notch_root", "xx"),
                stress("notch_root", "xx", "direct"),
                stress("axis", "yy"),
                stress((31.0, 9.0), "von_mises", "direct"),
                peak_on("notch", "first_principal"),
                peak("von_mises", "direct"),
                linearised("notch_root", "axis", "xx", "bending"),
                section_force("axis", "notch_root", "normal", "recovered"),
            ),
            {
                "width": 70.0,
                "notch_radius": radius,
                "notch_depth": depth,
                "half_length": 80.0,
                "tension": 65.0,
                "kind": kind,
            },
            divisions=1,
        )
        for name, radius, depth, kind in (
            ("shallow notch", 14.0, 14.0, "plane strain"),
            ("deep notch", 3.0, 20.0, "plane stress"),
        )
    ]


def _holes() -> list[MappedCase]:
    return [
        MappedCase(
            "plate_with_hole",
            "strip with a wide hole",
            "holed_strip",
            (
                energy(),
                mean_displacement("end", "x"),
                displacement("hole_top", "y"),
                stress("hole_top", "xx"),
                stress("edge_opposite", "xx", "direct"),
                stress("hole_end", "yy"),
                stress((45.0, 17.0), "von_mises"),
                peak("von_mises"),
                peak_on("hole", "first_principal", "direct"),
                section_moment("hole_top", "edge_opposite"),
                around((33.0, 21.0), 9.0, "xx"),
            ),
            {
                "width": 80.0,
                "hole_diameter": 48.0,
                "half_length": 120.0,
                "tension": 40.0,
                "material": ALUMINIUM,
            },
            divisions=1,
        )
    ]


def _openings() -> list[MappedCase]:
    return [
        MappedCase(
            "elliptic_hole",
            name,
            "elliptic_panel",
            (
                energy(),
                displacement("opening_x", "x"),
                displacement("outer_y", "y"),
                mean_displacement("outer", "x"),
                stress("opening_x", "yy"),
                stress("opening_x", "yy", "direct"),
                stress("opening_y", "xx"),
                stress((88.0, 66.0), "von_mises", "direct"),
                peak_on("opening", "first_principal"),
                peak("von_mises", "direct"),
                section_force("opening_x", "outer_x", "normal", "recovered"),
                linearised("opening_x", "outer_x", "yy", "bending"),
            ),
            {
                "opening_half_x": half_x,
                "opening_half_y": half_y,
                "outer_half_x": 140.0,
                "outer_half_y": 120.0,
                "tension": 30.0,
            },
            divisions=2,
        )
        for name, half_x, half_y in (("round", 60.0, 45.0), ("flat", 70.0, 20.0))
    ]


def _tapers() -> list[MappedCase]:
    """A heated end fitting: temperature and pressure, weak corners outside."""
    return [
        MappedCase(
            "heated_taper",
            "heated end fitting",
            "heated_taper",
            (
                energy(),
                displacement("inner", "x"),
                displacement("outer_end", "x"),
                reaction("upper", "y"),
                stress("inner", "yy"),
                stress("outer", "zz", "direct"),
                stress("bore_end", "zz"),
                stress("bore_middle", "von_mises"),
                peak("von_mises"),
                peak_near("cone_foot", 8.0, "first_principal"),
                peak_on("inside", "zz", "direct"),
                linearised("inner", "outer", "yy", "bending"),
            ),
            {
                "inner_radius": 80.0,
                "outer_radius": 125.0,
                "bore_radius": 50.0,
                "neck_radius": 85.0,
                "cone_start": 60.0,
                "cone_end": 120.0,
                "height": 160.0,
                "warmth": 35.0,
                "pressure": 9.0,
            },
            divisions=2,
        )
    ]
