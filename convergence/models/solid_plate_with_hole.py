"""Eighth of a thick strip with a round hole in tension, as a solid, e.g. a tie of the davit with a pin hole.

Thin plates follow Howland 1930, Phil. Trans. R. Soc. A 229:49. In thick ones the hoop stress varies over the
thickness: a little above the plane value in the middle, below it at the face (Sternberg & Sadowsky 1949, J.
Appl. Mech. 16:27, from memory).
"""

from typing import Annotated

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.models._holed_strip_plan import holed_strip_plan
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "middle_stress": {
        "measure": "stress",
        "at": "hole_top_middle",
        "component": "xx",
        "relative_tolerance": 0.02,
    },
    "face_stress": {
        "measure": "stress",
        "at": "hole_top_face",
        "component": "xx",
        "relative_tolerance": 0.03,
    },
    "elongation": {
        "measure": "mean_displacement",
        "boundary": "end",
        "component": "x",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def solid_plate_with_hole(
    *,
    width: Annotated[PositiveLength, "full width"] = 60.0,
    hole_diameter: Annotated[PositiveLength, "diameter of the hole"] = 24.0,
    half_length: Annotated[PositiveLength, "length from the middle of the hole to the loaded end"] = 90.0,
    thickness: Annotated[PositiveLength, "full thickness"] = 18.0,
    tension: Annotated[Stress, "stress of the gross section at the end, along x"] = 50.0,
    material: Material,
) -> Problem:
    """The hole is centred on the origin, its axis is z, the strip lies along x.

    Symmetry on x = 0, y = 0 and the plane `middle`, z = 0; `face` is the free face. hole_top has the
    largest stress. Cells grow away from the hole, and become thinner towards the free face.
    """
    require(
        (hole_diameter < width, "hole_diameter", hole_diameter, f"less than width {width:g}"),
        (half_length > 0.5 * width, "half_length", half_length, f"more than half of width {width:g}"),
    )
    return Problem(
        title="Thick strip with a round hole in tension",
        part=SolidPart(
            holed_strip_plan(0.5 * hole_diameter, 0.5 * width, half_length),
            (("middle", 0.0), ("face", 0.5 * thickness)),
            weights={0: 2.0},
            ratios={0: 0.5},
        ),
        materials={"body": material},
        supports=(*SYMMETRY, Support("middle", z=0.0, boundary="middle")),
        loads=(Traction("end", (tension, 0.0, 0.0)),),
        kind="solid",
    )
