"""L-shaped bracket hung from its top edge with a load on its arm, the inner corner sharp or filleted.

The sharp corner and both clamped ones are singular (Williams 1952, J. Appl. Mech. 19:526): the stress
there has no limit, at a fillet it has.
"""

from typing import Annotated

from convergence.dimensions import LENGTH, Bounds, PositiveLength, Stress
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.problem import Problem, Support
from convergence.models._grading import Grading
from convergence.models._l_shape import l_shape

QUANTITIES = {
    "deflection": {"measure": "displacement", "at": "tip", "component": "y", "relative_tolerance": 0.01},
    "corner_stress": {
        "measure": "peak_stress",
        "near": "inner_corner",
        "radius": 20.0,
        "component": "first_principal",
        "relative_tolerance": 0.05,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def l_bracket(
    *,
    post_width: Annotated[PositiveLength, "width of the upright leg"] = 80.0,
    post_height: Annotated[PositiveLength, "height over all"] = 200.0,
    arm_depth: Annotated[PositiveLength, "depth of the horizontal leg"] = 80.0,
    arm_length: Annotated[PositiveLength, "length over all"] = 200.0,
    fillet_radius: Annotated[
        float, LENGTH, Bounds(low=0.0, closed=True), "radius of the inner corner, 0 is sharp"
    ] = 20.0,
    thickness: Annotated[PositiveLength, "thickness"] = 12.0,
    end_shear: Annotated[Stress, "shear traction on the arm's end, positive upward"] = -10.0,
    grading: Grading = 1.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The outer corner is the origin. With a fillet, inner_corner is the middle of its arc.

    The fillet has at least two cells per division on each half of its arc. `grading` makes the cells at a
    sharp inner corner smaller.
    """
    return Problem(
        title="L-shaped bracket, filleted" if fillet_radius else "L-shaped bracket, sharp",
        part=l_shape(post_width, post_height, arm_depth, arm_length, fillet_radius, grading),
        materials={"body": material},
        supports=(Support("top", x=0.0, y=0.0, boundary="top"),),
        loads=(Traction("end", (0.0, end_shear)),),
        kind=kind,
        thickness=thickness,
    )
