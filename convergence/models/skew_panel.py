"""Skew panel clamped on one side and sheared on the other, e.g. a side panel of the davit's post.

Cook 1974, J. Struct. Div. ASCE 100:1851, known as Cook's membrane. The upper clamped corner is singular.
"""

from typing import Annotated

from convergence.dimensions import Length, PositiveLength, Stress
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.models._grading import Grading, away_from

QUANTITIES = {
    "deflection": {"measure": "displacement", "at": "tip", "component": "y", "relative_tolerance": 0.01},
    "lower_stress": {
        "measure": "stress",
        "at": "lower",
        "component": "first_principal",
        "relative_tolerance": 0.02,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def skew_panel(
    *,
    length: Annotated[PositiveLength, "horizontal length"] = 480.0,
    depth_root: Annotated[PositiveLength, "depth of the clamped side"] = 440.0,
    depth_tip: Annotated[PositiveLength, "depth of the loaded side"] = 160.0,
    rise: Annotated[Length, "height of the loaded side's lower corner above the clamped one's"] = 440.0,
    thickness: Annotated[PositiveLength, "thickness"] = 10.0,
    shear: Annotated[Stress, "shear traction on the loaded side, positive upward"] = 10.0,
    grading: Grading = 1.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The lower clamped corner is the origin. As many cells along the panel as across it.

    Points tip, lower and upper are the middles of their sides: nodes where the divisions are even, upper only
    without grading. `grading` makes the cells at the upper clamped corner smaller.
    """
    points = {
        "root_lower": (0.0, 0.0),
        "tip_lower": (length, rise),
        "tip_upper": (length, rise + depth_tip),
        "root_upper": (0.0, depth_root),
        "tip": (length, rise + 0.5 * depth_tip),
        "lower": (0.5 * length, 0.5 * rise),
        "upper": (0.5 * length, 0.5 * (depth_root + rise + depth_tip)),
    }
    blocks = (("tip_lower", "tip_upper", "root_upper", "root_lower"),)
    part = Part(
        points=points,
        blocks=blocks,
        curves=away_from("root_upper", points, blocks, grading),
        boundaries={
            "root": (("root_upper", "root_lower"),),
            "lower": (("root_lower", "tip_lower"),),
            "tip": (("tip_lower", "tip_upper"),),
            "upper": (("tip_upper", "root_upper"),),
        },
        weights={("root_lower", "tip_lower"): 1.0, ("root_lower", "root_upper"): 1.0},
    )
    return Problem(
        title="Skew panel in shear",
        part=part,
        materials={"body": material},
        supports=(Support("root", x=0.0, y=0.0, boundary="root"),),
        loads=(Traction("tip", (0.0, shear)),),
        kind=kind,
        thickness=thickness,
    )
