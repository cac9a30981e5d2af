"""Plane and axisymmetric cases whose limits come from a finer mesh, most of them with singular corners.

The L-shaped domain has its exact field.
"""

from convergence.calibration.mapped_case import (
    MappedCase,
    MappedReading,
    around,
    displacement,
    energy,
    linearised,
    mean_displacement,
    mean_stress,
    peak,
    peak_near,
    peak_on,
    rotation_of,
    section_force,
    section_moment,
    stress,
)


def cornered_cases() -> list[MappedCase]:
    """Return all of them."""
    return [
        *_domains(),
        *_brackets(),
        *_cracks(),
        *_panels(),
        *_strips(),
    ]


def _domains() -> list[MappedCase]:
    return [
        MappedCase(
            "sharp_bracket",
            f"exact field, mode {mode}",
            "l_domain",
            (
                energy(),
                displacement("free_left", "y"),
                displacement((31.0, 44.0), "x"),
                stress((30.0, 30.0), "yy"),
                stress((-52.0, 47.0), "von_mises", "direct"),
                stress((6.0, 5.0), "first_principal"),
                peak_near("inner_corner", 16.0, "von_mises"),
                peak("first_principal", "direct"),
                mean_stress((25.0, -80.0), (25.0, 80.0), "xx"),
                section_moment((60.0, 80.0), (60.0, -80.0)),
            ),
            {"leg": 80.0, "stress": 25.0, "mode": mode},
            divisions=2,
        )
        for mode in ("I", "II")
    ]


def _brackets() -> list[MappedCase]:
    def case(family: str, name: str, radius: float, grading: float) -> MappedCase:
        return MappedCase(
            family,
            name,
            "l_bracket",
            (
                energy(),
                displacement("tip", "y"),
                displacement("end_upper", "x"),
                rotation_of("end"),
                stress((140.0, 60.0), "xx"),
                stress((30.0, 130.0), "yy", "direct"),
                stress((75.0, 40.0), "von_mises"),
                peak_near("inner_corner", 25.0, "first_principal"),
                peak_near("inner_corner", 25.0, "von_mises", "direct"),
                peak("von_mises"),
                section_force((130.0, 60.0), (130.0, 0.0), "shear", "recovered"),
                linearised((0.0, 140.0), (50.0, 140.0), "yy", "bending"),
                around((50.0, 30.0), 25.0, "xx"),
            ),
            {
                "post_width": 50.0,
                "post_height": 210.0,
                "arm_depth": 60.0,
                "arm_length": 190.0,
                "fillet_radius": radius,
                "end_shear": 14.0,
                "grading": grading,
            },
            divisions=1,
            short=True,
        )

    return [
        case("fillet_bracket", "large fillet", 24.0, 1.0),
        case("fillet_bracket", "small fillet", 12.0, 1.0),
        case("sharp_bracket", "even cells", 0.0, 1.0),
        case("sharp_bracket", "graded cells", 0.0, 6.0),
    ]


def _cracks() -> list[MappedCase]:
    return [
        MappedCase(
            "edge_crack",
            name,
            "centre_cracked_plate",
            (
                energy(),
                MappedReading(
                    "stress_intensity",
                    {"tip": "tip", "ahead": (1.0, 0.0), "radius": 0.4 * crack, "symmetric": True},
                ),
                displacement("crack_middle", "y"),
                displacement("box_side", "x"),
                mean_displacement("top", "y"),
                stress((0.8 * (crack + 20.0), 41.0), "yy"),
                stress((12.0, 20.0), "von_mises", "direct"),
                peak_near("tip", 10.0, "first_principal"),
                peak("von_mises", "direct"),
                section_moment((0.0, 25.0), (50.0, 25.0)),
                mean_stress((0.0, 50.0), (50.0, 50.0), "yy"),
            ),
            {
                "half_width": 50.0,
                "half_height": 90.0,
                "half_crack": crack,
                "tension": 70.0,
                "grading": grading,
            },
            divisions=2,
            short=True,
        )
        for name, crack, grading in (("short crack", 14.0, 1.0), ("long crack, graded", 33.0, 8.0))
    ]


def _panels() -> list[MappedCase]:
    return [
        MappedCase(
            "skew_panel",
            name,
            "skew_panel",
            (
                energy(),
                displacement("tip", "y"),
                displacement("tip_lower", "x"),
                rotation_of("tip"),
                stress("lower", "first_principal"),
                stress("lower", "first_principal", "direct"),
                stress((210.0, 250.0 * rise / 300.0), "von_mises"),
                peak("von_mises"),
                peak_near("root_upper", 60.0, "first_principal"),
                peak_on("lower", "von_mises"),
                section_moment((150.0, 0.5 * rise + 190.0), (150.0, 0.5 * rise)),
                around((150.0, 0.5 * rise + 60.0), 50.0, "yy"),
            ),
            {
                "length": 300.0,
                "depth_root": 260.0,
                "depth_tip": 120.0,
                "rise": rise,
                "shear": 12.0,
                "kind": kind,
            },
            divisions=3,
        )
        for name, rise, kind in (("steep", 300.0, "plane stress"), ("low", 140.0, "plane strain"))
    ]


def _strips() -> list[MappedCase]:
    return [
        MappedCase(
            "bonded_strips",
            "steel and aluminium",
            "bonded_strip",
            (
                energy(),
                mean_displacement("end", "x"),
                displacement("bond_axis", "x"),
                displacement("bond_edge", "y"),
                stress("held_axis", "xx"),
                stress("bond_axis", "xx", "direct"),
                stress((55.0, 21.0), "von_mises"),
                stress((30.0, 12.0), "yy", "direct"),
                peak_near("bond_edge", 8.0, "xx"),
                peak_near("bond_edge", 8.0, "von_mises", "direct"),
                mean_stress((44.0, 0.0), (44.0, 25.0), "yy"),
                section_force((50.0, 0.0), (50.0, 25.0), "normal", "direct"),
            ),
            {"width": 50.0, "length": 40.0, "bonded_length": 55.0, "kind": "plane strain"},
            divisions=2,
        )
    ]
