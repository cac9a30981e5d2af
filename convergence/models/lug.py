"""Eye plate with a pin hole: round head, straight shank, clamped base, e.g. the davit's hanging lug.

The pin presses on half of the hole with a cosine distribution (common practice). Both ends of the base
are singular corners (Williams 1952, J. Appl. Mech. 19:526).
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import Degrees, Force, PositiveLength
from convergence.errors import require
from convergence.fem.loads import BearingLoad
from convergence.fem.material import Material, PlaneKind
from convergence.fem.problem import Problem, Support
from convergence.models._lug_plan import lug_plan

QUANTITIES = {
    "hole_stress": {
        "measure": "peak_stress",
        "boundary": "hole",
        "component": "first_principal",
        "relative_tolerance": 0.03,
    },
    "pin_travel": {"measure": "displacement", "at": "hole_0", "component": "y", "relative_tolerance": 0.01},
    "shank_stress": {"measure": "stress", "at": "rim_225", "component": "yy", "relative_tolerance": 0.02},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def lug(
    *,
    head_radius: Annotated[PositiveLength, "radius of the head, half of the shank's width"] = 40.0,
    hole_radius: Annotated[PositiveLength, "radius of the pin hole"] = 16.0,
    height: Annotated[PositiveLength, "from the clamped base to the middle of the hole"] = 90.0,
    thickness: Annotated[PositiveLength, "thickness"] = 20.0,
    force: Annotated[Force, "pull of the pin, positive"] = 25000.0,
    angle: Annotated[
        Degrees, "direction of the pull, counter-clockwise from straight away from the base"
    ] = 0.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The hole's middle is the origin, the base lies on y = -height.

    Points hole_0, hole_22, hole_45 ... are named by their angle from the pull, counter-clockwise; the
    pressure begins and ends at hole_270 and hole_90. Points rim_0, rim_22 ... count from the x axis.
    """
    require(
        (hole_radius < head_radius, "hole_radius", hole_radius, f"less than head_radius {head_radius:g}"),
        (height > head_radius, "height", height, f"more than head_radius {head_radius:g}"),
        (force > 0.0, "force", force, "a positive pull; `angle` turns it"),
    )
    direction = np.radians(90.0 + angle)
    pull = (force * float(np.cos(direction)), force * float(np.sin(direction)))
    return Problem(
        title="Lug with a pin hole",
        part=lug_plan(head_radius, hole_radius, height, 90.0 + angle),
        materials={"body": material},
        supports=(Support("base", x=0.0, y=0.0, boundary="base"),),
        loads=(BearingLoad("hole", pull, centre=(0.0, 0.0)),),
        kind=kind,
        thickness=thickness,
    )
