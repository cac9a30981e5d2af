"""Quarter of an elliptic panel with an elliptic opening, e.g. the hand hole of the davit's base plate.

The elliptic membrane LE1 of "The Standard NAFEMS Benchmarks" (TNSB, Rev. 3, 1990) at a tenth of its size.
"""

from typing import Annotated

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material, PlaneKind
from convergence.fem.problem import Problem
from convergence.models._elliptic_plan import elliptic_plan
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
        part=elliptic_plan((opening_half_x, opening_half_y), (outer_half_x, outer_half_y)),
        materials={"body": material},
        supports=SYMMETRY,
        loads=(Pressure("outer", -tension),),
        kind=kind,
        thickness=thickness,
    )
