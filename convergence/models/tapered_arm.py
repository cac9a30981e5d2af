"""Clamped tapered arm: the davit's jib with its tip load, optional tip tension, hook and own weight.

Both clamped corners are singular (Williams 1952, J. Appl. Mech. 19:526): the stress there has no limit. A
force on the point of the hook leaves stress, displacement there and strain energy without a limit (Flamant
1892); at a distance it is as good as one that is spread.
"""

from typing import Annotated

from convergence.dimensions import Force, ForcePerVolume, PositiveLength, Stress
from convergence.fem.loads import BodyForce, Load, PointForce, Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support

QUANTITIES = {
    "deflection": {"measure": "displacement", "at": "tip", "component": "y", "relative_tolerance": 0.01},
    "middle_stress": {
        "measure": "stress",
        "at": "middle_upper",
        "component": "xx",
        "relative_tolerance": 0.02,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def tapered_arm(
    *,
    length: Annotated[PositiveLength, "length from root to tip"] = 1200.0,
    depth_root: Annotated[PositiveLength, "depth at the root"] = 240.0,
    depth_tip: Annotated[PositiveLength, "depth at the tip"] = 120.0,
    thickness: Annotated[PositiveLength, "thickness"] = 12.0,
    tip_shear: Annotated[Stress, "mean shear traction on the tip, positive upward"] = -6.0,
    tip_tension: Annotated[Stress, "normal traction on the tip, positive outward"] = 0.0,
    hook_force: Annotated[Force, "force on the point tip_lower, positive upward"] = 0.0,
    weight: Annotated[ForcePerVolume, "weight per volume, downward"] = 0.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The arm lies along y = 0, symmetric about it; the root is clamped over its depth."""
    loads: tuple[Load, ...] = (Traction("tip", (tip_tension, tip_shear)), BodyForce((0.0, -weight)))
    if hook_force:
        loads = (*loads, PointForce("tip_lower", (0.0, hook_force)))
    return Problem(
        title="Clamped tapered arm",
        part=_part(length, depth_root, depth_tip),
        materials={"body": material},
        supports=(Support("root", x=0.0, y=0.0, boundary="root"),),
        loads=loads,
        kind=kind,
        thickness=thickness,
    )


def _part(length: float, depth_root: float, depth_tip: float) -> Part:
    root, tip, middle = 0.5 * depth_root, 0.5 * depth_tip, 0.25 * (depth_root + depth_tip)
    return Part(
        points={
            "root": (0.0, 0.0),
            "root_lower": (0.0, -root),
            "root_upper": (0.0, root),
            "middle": (0.5 * length, 0.0),
            "middle_lower": (0.5 * length, -middle),
            "middle_upper": (0.5 * length, middle),
            "tip": (length, 0.0),
            "tip_lower": (length, -tip),
            "tip_upper": (length, tip),
        },
        blocks=(
            ("root_lower", "middle_lower", "middle", "root"),
            ("root_upper", "root", "middle", "middle_upper"),
            ("middle_lower", "tip_lower", "tip", "middle"),
            ("middle_upper", "middle", "tip", "tip_upper"),
        ),
        boundaries={
            "root": (("root_upper", "root"), ("root", "root_lower")),
            "lower": (("root_lower", "middle_lower"), ("middle_lower", "tip_lower")),
            "upper": (("tip_upper", "middle_upper"), ("middle_upper", "root_upper")),
            "tip": (("tip_lower", "tip"), ("tip", "tip_upper")),
        },
    )
