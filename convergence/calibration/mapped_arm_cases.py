"""Cases of bars, arms and lugs, and a rod; beams, bars and the rod have their exact field."""

from convergence.calibration.mapped_case import (
    MappedCase,
    displacement,
    energy,
    linearised,
    mean_displacement,
    peak,
    peak_near,
    peak_on,
    rotation_at,
    rotation_of,
    section_force,
    section_moment,
    stress,
)


def arm_cases() -> list[MappedCase]:
    """Return all of them."""
    return [*_beams(), *_bars(), *_arms(), *_lugs(), *_rods()]


def _beams() -> list[MappedCase]:
    """A beam with its exact field under an end force: linear cells are stiff in bending."""

    def case(name: str, length: float, depth: float, kind: str) -> MappedCase:
        return MappedCase(
            "slender_arm",
            name,
            "exact_cantilever",
            (
                energy(),
                displacement("tip", "y"),
                displacement((0.6 * length, 0.2 * depth), "x"),
                mean_displacement("tip", "y"),
                rotation_at((0.55 * length, 0.1 * depth)),
                stress("root_lower", "xx"),
                stress("root_upper", "xx", "direct"),
                stress((0.4 * length, -0.3 * depth), "von_mises"),
                stress((0.3 * length, 0.0), "xy", "direct"),
                peak("first_principal"),
                peak_near("root_lower", 0.4 * depth, "von_mises", "direct"),
                section_force(
                    (0.5 * length, 0.5 * depth), (0.5 * length, -0.5 * depth), "shear", "recovered"
                ),
                section_moment((0.37 * length, 0.5 * depth), (0.37 * length, -0.5 * depth)),
            ),
            {"length": length, "depth": depth, "force": 3500.0, "kind": kind},
            divisions=1,
        )

    return [case("short beam", 300.0, 130.0, "plane strain"), case("long beam", 900.0, 100.0, "plane stress")]


def _bars() -> list[MappedCase]:
    """Curved bars under end force and end moment."""

    def case(name: str, inner: float, outer: float, moment: float, force: float) -> MappedCase:
        inside = (0.4 * (inner + outer), 0.26 * (inner + outer))
        return MappedCase(
            "curved_hook",
            name,
            "curved_bar",
            (
                energy(),
                displacement("end_inner", "x"),
                displacement("end_outer", "y"),
                rotation_at(inside),
                stress("root_inner", "xx"),
                stress("root_inner", "xx", "direct"),
                stress("root_outer", "xx"),
                stress(inside, "von_mises"),
                peak("von_mises"),
                peak_on("outer", "third_principal", "direct"),
                section_force("root_inner", "root_outer", "normal", "recovered"),
                section_moment("root_inner", "root_outer"),
                mean_displacement("end", "x"),
            ),
            {"inner_radius": inner, "outer_radius": outer, "moment": moment, "force": force},
            divisions=2,
        )

    return [
        case("thick, force", 60.0, 150.0, 0.0, 16_000.0),
        case("slender, moment and force", 170.0, 225.0, 7.0e5, -2_500.0),
    ]


def _arms() -> list[MappedCase]:
    """A clamped tapered arm with end shear, tension and weight."""
    return [
        MappedCase(
            "slender_arm",
            "tapered arm",
            "tapered_arm",
            (
                energy(),
                displacement("tip", "y"),
                displacement("tip_upper", "x"),
                rotation_of("tip"),
                stress("middle_upper", "xx"),
                stress("middle_lower", "xx", "direct"),
                stress((170.0, 31.0), "von_mises"),
                peak("von_mises"),
                peak_near("root_upper", 40.0, "first_principal", "direct"),
                section_force((300.0, 70.0), (300.0, -70.0), "shear", "recovered"),
                section_moment((300.0, 70.0), (300.0, -70.0)),
            ),
            {
                "length": 700.0,
                "depth_root": 200.0,
                "depth_tip": 90.0,
                "tip_shear": -9.0,
                "tip_tension": 14.0,
                "weight": 7.7e-5,
            },
            divisions=1,
        )
    ]


def _lugs() -> list[MappedCase]:
    """A lug of a clamped base, pulled straight and at an angle."""
    return [
        MappedCase(
            "solid_lug",
            name,
            "lug",
            (
                energy(),
                displacement("hole_0", "y"),
                displacement("rim_0", "x"),
                stress("hole_45", "von_mises"),
                stress((20.0, -40.0), "yy"),
                stress("rim_90", "xx", "direct"),
                peak_on("hole", "von_mises"),
                peak_on("hole", "first_principal", "direct"),
                peak("von_mises", "direct"),
                peak_near("base_right", 9.0, "von_mises"),
                section_force((-35.0, -50.0), (35.0, -50.0), "normal", "recovered"),
                linearised((35.0, -50.0), (-35.0, -50.0), "yy", "bending"),
            ),
            {"head_radius": 35.0, "hole_radius": hole, "height": 75.0, "force": 18_000.0, "angle": angle},
            divisions=1,
            corners=("hole_90", "hole_270"),
            short=True,
        )
        for name, hole, angle in (("plane, straight", 18.0, 0.0), ("plane, 35 degrees", 12.0, 35.0))
    ]


def _rods() -> list[MappedCase]:
    """A tapered tie rod: one dimension."""
    return [
        MappedCase(
            "tie_rod",
            name,
            "tie_rod",
            (
                energy(),
                displacement("eye", "x"),
                displacement((0.43 * length,), "x"),
                stress("eye", "xx"),
                stress("head", "xx"),
                stress((0.71 * length,), "xx", "direct"),
                peak("xx"),
                peak("xx", "direct"),
            ),
            {"length": length, "area_at_head": head, "area_at_eye": eye, "force": force, "weight": weight},
            divisions=3,
        )
        for name, length, head, eye, force, weight in (
            ("steep taper", 1600.0, 2000.0, 160.0, 25_000.0, 7.7e-5),
            ("heavy", 60_000.0, 500.0, 260.0, 9_000.0, 7.7e-5),
        )
    ]
