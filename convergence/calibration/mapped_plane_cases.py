"""Plane and axisymmetric cases of mapped meshes; those that stand here have their exact field.

A family has the name of the drawn one where it is the same physics.
"""

from convergence.calibration.mapped_arm_cases import arm_cases
from convergence.calibration.mapped_case import (
    ALUMINIUM,
    BRONZE,
    RUBBER,
    STEEL,
    MappedCase,
    displacement,
    energy,
    linearised,
    mean_displacement,
    mean_stress,
    peak,
    peak_on,
    rotation_at,
    section_force,
    section_moment,
    stress,
)
from convergence.calibration.mapped_cornered_cases import cornered_cases
from convergence.calibration.mapped_rounded_cases import rounded_cases
from convergence.fem.material import Material


def plane_cases() -> list[MappedCase]:
    """Return all of them."""
    return [
        *_cylinders(),
        *_rings(),
        *_lined(),
        *_holes(),
        *_discs(),
        *arm_cases(),
        *cornered_cases(),
        *rounded_cases(),
    ]


def _cylinders() -> list[MappedCase]:
    """Sectors of thick cylinders; in rubber nearly incompressible, where linear cells lock."""

    def case(name: str, inner: float, outer: float, kind: str, material: Material) -> MappedCase:
        middle = (0.5 * (inner + outer), 0.0)
        diagonal = (0.41 * (inner + outer), 0.27 * (inner + outer))
        return MappedCase(
            "thick_cylinder",
            name,
            "thick_cylinder",
            (
                energy(),
                displacement("bore_x", "x"),
                displacement("outer_x", "x"),
                stress("bore_x", "yy"),
                stress("bore_x", "yy", "direct"),
                stress("bore_y", "von_mises"),
                stress(middle, "xx"),
                stress(diagonal, "first_principal", "direct"),
                peak("von_mises"),
                peak_on("outer", "first_principal", "direct"),
                section_force("bore_x", "outer_x", "normal", "direct"),
                linearised("bore_x", "outer_x", "yy", "bending"),
            ),
            {
                "inner_radius": inner,
                "outer_radius": outer,
                "sector": 75.0,
                "pressure": 15.0,
                "kind": kind,
                "material": material,
            },
            divisions=2,
        )

    return [
        case("thick wall", 20.0, 52.0, "plane stress", STEEL),
        case("rubber", 24.0, 40.0, "plane strain", RUBBER),
    ]


def _rings() -> list[MappedCase]:
    """Rings of one exact field each: a slice of a barrel, half of a sphere."""
    barrel = MappedCase(
        "thick_cylinder",
        "barrel as a ring",
        "barrel",
        (
            energy(),
            displacement("bore", "x"),
            stress("bore", "zz"),
            stress("bore", "zz", "direct"),
            stress("outer_upper", "von_mises"),
            stress((31.0, 4.1), "xx", "direct"),
            peak("von_mises"),
            section_force("bore", "outer", "y", "recovered"),
            linearised("bore", "outer", "zz", "bending"),
            mean_displacement("outer", "x"),
        ),
        {"inner_radius": 20.0, "outer_radius": 50.0, "height": 12.0, "pressure": 32.0},
        divisions=2,
    )
    sphere = MappedCase(
        "thick_sphere",
        "accumulator",
        "thick_sphere",
        (
            energy(),
            displacement("inner_x", "x"),
            displacement("outer_y", "y"),
            stress("inner_x", "zz"),
            stress("inner_y", "von_mises", "direct"),
            stress((30.0, 31.0), "first_principal"),
            peak("von_mises"),
            peak("first_principal", "direct"),
            section_force("inner_x", "outer_x", "normal", "recovered"),
            linearised("inner_x", "outer_x", "zz", "bending"),
            mean_displacement("outside", "y"),
        ),
        {"inner_radius": 35.0, "outer_radius": 62.0, "pressure": 24.0},
        divisions=2,
    )
    return [barrel, sphere]


def _lined() -> list[MappedCase]:
    """A bonded liner, cold and warm: the hoop stress jumps where the layers meet."""

    def case(name: str, warmth: float, pressure: float, kind: str) -> MappedCase:
        return MappedCase(
            "heated_liner",
            name,
            "lined_cylinder",
            (
                energy(),
                displacement("bore_x", "x"),
                displacement("outer_y", "y"),
                stress("bore_x", "yy"),
                stress("outer_x", "yy", "direct"),
                stress((30.0, 20.0), "von_mises"),
                stress((50.0, 0.0), "xx", "direct"),
                peak_on("bore", "von_mises"),
                peak_on("outer", "first_principal", "direct"),
                section_moment("bond_x", "outer_x"),
                mean_stress("bore_x", "bond_x", "yy"),
            ),
            {
                "inner_radius": 26.0,
                "bond_radius": 41.0,
                "outer_radius": 64.0,
                "pressure": pressure,
                "warmth": warmth,
                "kind": kind,
                "liner_material": BRONZE,
            },
            divisions=2,
        )

    return [case("cold", 0.0, 28.0, "plane stress"), case("warm", 45.0, 8.0, "plane strain")]


def _holes() -> list[MappedCase]:
    """A round hole in an infinite plate, cut out with its exact tractions; fine and coarse around it."""

    def case(name: str, radius: float, side: float, kind: str) -> MappedCase:
        far = (0.47 * side, 0.61 * side)
        return MappedCase(
            "plate_with_hole",
            name,
            "perforated_plate",
            (
                energy(),
                displacement("hole_end", "x"),
                displacement(far, "y"),
                mean_displacement("top", "y"),
                stress("hole_top", "xx"),
                stress("hole_top", "xx", "direct"),
                stress("hole_end", "yy", "direct"),
                stress(far, "xx"),
                stress((0.0, 0.5 * (radius + side)), "xx", "direct"),
                peak("von_mises"),
                peak("first_principal", "direct"),
                section_force("hole_top", "top", "normal", "recovered"),
                section_moment("hole_top", "top"),
                rotation_at(far),
            ),
            {"hole_radius": radius, "half_width": side, "tension": 85.0, "kind": kind},
            divisions=1,
        )

    return [
        case("small hole in an infinite plate", 6.0, 45.0, "plane stress"),
        case("wide hole in an infinite plate", 22.0, 50.0, "plane strain"),
    ]


def _discs() -> list[MappedCase]:
    """A rotating disc with a bore."""
    return [
        MappedCase(
            "rotating_wheel",
            "disc with a small bore",
            "rotating_disc",
            (
                energy(),
                displacement("rim_x", "x"),
                displacement("bore_y", "y"),
                mean_displacement("rim", "x"),
                stress("bore_x", "yy"),
                stress("bore_x", "yy", "direct"),
                stress((70.0, 50.0), "von_mises"),
                stress("rim_y", "xx", "direct"),
                peak("von_mises"),
                peak_on("rim", "first_principal"),
                section_force("bore_x", "rim_x", "normal", "direct"),
                linearised("bore_x", "rim_x", "yy", "bending"),
            ),
            {"bore_radius": 25.0, "rim_radius": 140.0, "inertia": 60.0, "material": ALUMINIUM},
            divisions=2,
        )
    ]
