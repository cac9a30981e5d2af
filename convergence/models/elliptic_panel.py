"""Quarter of an elliptic panel with an elliptic opening, e.g. the hand hole of the davit's base plate.

The elliptic membrane LE1 of "The Standard NAFEMS Benchmarks" (TNSB, Rev. 3, 1990) at a tenth of its size.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part, ellipse, graded
from convergence.fem.problem import Problem
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "opening_stress": {"measure": "stress", "at": "opening_x", "component": "yy", "relative_tolerance": 0.02},
    "opening_displacement": {
        "measure": "displacement",
        "at": "opening_x",
        "component": "x",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def elliptic_panel(
    *,
    opening_half_x: Annotated[PositiveLength, "half axis of the opening along x"] = 200.0,
    opening_half_y: Annotated[PositiveLength, "half axis of the opening along y"] = 100.0,
    outer_half_x: Annotated[PositiveLength, "half axis of the outer edge along x"] = 325.0,
    outer_half_y: Annotated[PositiveLength, "half axis of the outer edge along y"] = 275.0,
    thickness: Annotated[PositiveLength, "thickness"] = 10.0,
    tension: Annotated[Stress, "normal traction on the outer edge, positive outward"] = 10.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """Points opening_x, outer_x lie on the x axis, opening_y, outer_y on the y axis; symmetry on both."""
    wider = f"more than opening_half_x {opening_half_x:g}"
    deeper = f"more than opening_half_y {opening_half_y:g}"
    require(
        (outer_half_x > opening_half_x, "outer_half_x", outer_half_x, wider),
        (outer_half_y > opening_half_y, "outer_half_y", outer_half_y, deeper),
    )
    return Problem(
        title="Elliptic panel in tension",
        part=_part((opening_half_x, opening_half_y), (outer_half_x, outer_half_y)),
        materials={"body": material},
        supports=SYMMETRY,
        loads=(Pressure("outer", -tension),),
        kind=kind,
        thickness=thickness,
    )


def _part(opening: tuple[float, float], outer: tuple[float, float]) -> Part:
    middle = np.sqrt(0.5)
    points = {
        "opening_x": (opening[0], 0.0),
        "outer_x": (outer[0], 0.0),
        "outer_middle": (middle * outer[0], middle * outer[1]),
        "opening_middle": (middle * opening[0], middle * opening[1]),
        "opening_y": (0.0, opening[1]),
        "outer_y": (0.0, outer[1]),
    }
    ratio = sum(outer) / sum(opening)
    spokes = (("opening_x", "outer_x"), ("opening_middle", "outer_middle"), ("opening_y", "outer_y"))
    return Part(
        points=points,
        blocks=(
            ("opening_x", "outer_x", "outer_middle", "opening_middle"),
            ("opening_y", "opening_middle", "outer_middle", "outer_y"),
        ),
        curves={
            ("opening_x", "opening_middle"): ellipse(*opening, 0.0, 45.0),
            ("opening_middle", "opening_y"): ellipse(*opening, 45.0, 90.0),
            ("outer_x", "outer_middle"): ellipse(*outer, 0.0, 45.0),
            ("outer_middle", "outer_y"): ellipse(*outer, 45.0, 90.0),
            **{(a, b): graded(points[a], points[b], ratio) for a, b in spokes},
        },
        boundaries={
            "opening": (("opening_x", "opening_middle"), ("opening_middle", "opening_y")),
            "outer": (("outer_x", "outer_middle"), ("outer_middle", "outer_y")),
            "symmetry_x": (("outer_y", "opening_y"),),
            "symmetry_y": (("opening_x", "outer_x"),),
        },
    )
