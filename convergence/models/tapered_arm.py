"""Clamped tapered arm: the davit's jib with its tip load, optional tip tension and own weight.

Both clamped corners are singular (Williams 1952, J. Appl. Mech. 19:526): the stress there has no limit.
"""

from typing import Annotated

from convergence.dimensions import ForcePerVolume, PositiveLength, Stress
from convergence.fem.loads import BodyForce, Traction
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
    weight: Annotated[ForcePerVolume, "weight per volume, downward"] = 0.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The arm lies along y = 0, symmetric about it; the root is clamped over its depth."""
    root, tip, middle = 0.5 * depth_root, 0.5 * depth_tip, 0.25 * (depth_root + depth_tip)
    part = Part(
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
    return Problem(
        title="Clamped tapered arm",
        part=part,
        materials={"body": material},
        supports=(Support("root", x=0.0, y=0.0, boundary="root"),),
        loads=(Traction("tip", (tip_tension, tip_shear)), BodyForce((0.0, -weight))),
        kind=kind,
        thickness=thickness,
    )
