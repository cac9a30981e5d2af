"""Quarter of a plate with a crack in its middle, in tension, e.g. a crack found in the davit's web plate.

Isida 1971 and Tada, Paris & Irwin, The Stress Analysis of Cracks Handbook: K = F s (pi a)^(1/2) with
F = (1 - 0.025 q^2 + 0.06 q^4) sec(pi q/2)^(1/2), q = a/W, within 0.1 % where the plate is long.
"""

from typing import Annotated

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part
from convergence.fem.problem import Problem
from convergence.models._grading import Grading, away_from
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "opening": {
        "measure": "displacement",
        "at": "crack_middle",
        "component": "y",
        "relative_tolerance": 0.01,
    },
    "tip_stress": {
        "measure": "peak_stress",
        "near": "tip",
        "radius": 15.0,
        "component": "first_principal",
        "relative_tolerance": 0.05,
    },
    "intensity": {
        "measure": "stress_intensity",
        "tip": "tip",
        "ahead": [1.0, 0.0],
        "radius": 20.0,
        "symmetric": True,
        "relative_tolerance": 0.02,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def centre_cracked_plate(
    *,
    half_width: Annotated[PositiveLength, "half of the width"] = 60.0,
    half_height: Annotated[PositiveLength, "half of the height"] = 120.0,
    half_crack: Annotated[PositiveLength, "half of the crack's length"] = 30.0,
    thickness: Annotated[PositiveLength, "thickness"] = 10.0,
    tension: Annotated[Stress, "tension on the upper end, along y"] = 50.0,
    grading: Grading = 1.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The crack's middle is the origin, the crack lies on the x axis; the stress at its tip has no limit.

    `opening` at crack_middle is half of the crack's. `grading` makes the cells at the tip smaller.
    """
    box = 0.5 * half_width
    require(
        (half_crack < half_width, "half_crack", half_crack, f"less than half_width {half_width:g}"),
        (half_height > box, "half_height", half_height, f"more than half of half_width {half_width:g}"),
    )
    return Problem(
        title="Plate with a crack in its middle",
        part=_part(half_width, half_height, half_crack, grading),
        materials={"body": material},
        supports=SYMMETRY,
        loads=(Traction("top", (0.0, tension)),),
        kind=kind,
        thickness=thickness,
    )


def _part(half_width: float, half_height: float, half_crack: float, grading: float) -> Part:
    """Return the quarter: two rows of blocks, the lower one half as high as the plate's half is wide."""
    rows = {"": 0.0, "box_": 0.5 * half_width, "top_": half_height}
    columns = {"middle": 0.0, "tip": half_crack, "side": half_width}
    points = {row + column: (x, y) for row, y in rows.items() for column, x in columns.items()}
    points["crack_middle"] = points.pop("middle")
    blocks = (
        ("crack_middle", "tip", "box_tip", "box_middle"),
        ("side", "box_side", "box_tip", "tip"),
        ("box_middle", "box_tip", "top_tip", "top_middle"),
        ("box_side", "top_side", "top_tip", "box_tip"),
    )
    return Part(
        points=points,
        blocks=blocks,
        curves=away_from("tip", points, blocks, grading),
        boundaries={
            "crack": (("crack_middle", "tip"),),
            "symmetry_y": (("tip", "side"),),
            "side": (("side", "box_side"), ("box_side", "top_side")),
            "top": (("top_side", "top_tip"), ("top_tip", "top_middle")),
            "symmetry_x": (("top_middle", "box_middle"), ("box_middle", "crack_middle")),
        },
    )
