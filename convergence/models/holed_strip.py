"""Quarter of a strip with a central round hole in tension, e.g. a tie of the davit with a pin hole.

Howland 1930, Phil. Trans. R. Soc. A 229:49, for the infinite strip; three widths from hole to end are
as good as that.
"""

from typing import Annotated

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.problem import Problem
from convergence.models._holed_strip_plan import holed_strip_plan
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "hole_stress": {"measure": "stress", "at": "hole_top", "component": "xx", "relative_tolerance": 0.02},
    "edge_stress": {
        "measure": "stress",
        "at": "edge_opposite",
        "component": "xx",
        "relative_tolerance": 0.02,
    },
    "elongation": {
        "measure": "mean_displacement",
        "boundary": "end",
        "component": "x",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def holed_strip(
    *,
    width: Annotated[PositiveLength, "full width"] = 60.0,
    hole_diameter: Annotated[PositiveLength, "diameter of the hole"] = 24.0,
    half_length: Annotated[PositiveLength, "length from the middle of the hole to the loaded end"] = 180.0,
    thickness: Annotated[PositiveLength, "thickness"] = 10.0,
    tension: Annotated[Stress, "stress of the gross section at the end, along x"] = 50.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The hole is centred on the origin, the strip along x; hole_top has the largest stress.

    Four cells per division around the hole's quarter; along the spokes they grow with the distance.
    """
    require(
        (hole_diameter < width, "hole_diameter", hole_diameter, f"less than width {width:g}"),
        (half_length > 0.5 * width, "half_length", half_length, f"more than half of width {width:g}"),
    )
    return Problem(
        title="Strip with a round hole in tension",
        part=holed_strip_plan(0.5 * hole_diameter, 0.5 * width, half_length),
        materials={"body": material},
        supports=SYMMETRY,
        loads=(Traction("end", (tension, 0.0)),),
        kind=kind,
        thickness=thickness,
    )
