"""Quarter of a thick elliptic plate with an elliptic opening, clamped at its outside, under pressure.

The thick plate LE10 of "The Standard NAFEMS Benchmarks" (TNSB, Rev. 3, 1990) at a tenth of its size, with one
change: there the outer face is held along z on its middle line only. A support without area has no limit
in a solid (the plate sinks without bound as cells shrink), so here the whole face is held.
"""

from dataclasses import replace
from typing import Annotated

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.models._elliptic_plan import elliptic_plan
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "opening_stress": {
        "measure": "stress",
        "at": "opening_x_upper",
        "component": "yy",
        "relative_tolerance": 0.02,
    },
    "opening_sag": {
        "measure": "displacement",
        "at": "opening_x_upper",
        "component": "z",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}
# more cells where the opening is curved most
WEIGHTS = {
    ("opening_x", "outer_x"): 2.0,
    ("opening_x", "opening_middle"): 2.0,
    ("opening_middle", "opening_y"): 1.0,
}


def elliptic_plate(
    *,
    opening_half_x: Annotated[PositiveLength, "half axis of the opening along x"] = 200.0,
    opening_half_y: Annotated[PositiveLength, "half axis of the opening along y"] = 100.0,
    outer_half_x: Annotated[PositiveLength, "half axis of the outer edge along x"] = 325.0,
    outer_half_y: Annotated[PositiveLength, "half axis of the outer edge along y"] = 275.0,
    thickness: Annotated[PositiveLength, "thickness"] = 60.0,
    pressure: Annotated[Stress, "pressure on the upper face"] = 1.0,
    material: Material,
) -> Problem:
    """The plate lies across z, faces lower (z = 0) and upper.

    Points opening_x, outer_x lie above and on the x axis, opening_y, outer_y on the y axis; symmetry on both.
    """
    wider = f"more than opening_half_x {opening_half_x:g}"
    deeper = f"more than opening_half_y {opening_half_y:g}"
    require(
        (outer_half_x > opening_half_x, "outer_half_x", outer_half_x, wider),
        (outer_half_y > opening_half_y, "outer_half_y", outer_half_y, deeper),
    )
    plan = replace(
        elliptic_plan((opening_half_x, opening_half_y), (outer_half_x, outer_half_y)), weights=WEIGHTS
    )
    return Problem(
        title="Thick elliptic plate under pressure",
        part=SolidPart(plan, (("lower", 0.0), ("upper", thickness))),
        materials={"body": material},
        supports=(*SYMMETRY, Support("outer", x=0.0, y=0.0, z=0.0, boundary="outer")),
        loads=(Pressure("upper", pressure),),
        kind="solid",
    )
