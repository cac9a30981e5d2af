"""L-shaped bracket as a solid, hung from its top face with a load on its arm, also out of its plane.

The sharp inner edge and the edges of the clamped face are singular, along the whole thickness; at a
fillet the stress has a limit.
"""

from typing import Annotated

from convergence.dimensions import LENGTH, Bounds, PositiveLength, Stress
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.models._grading import Grading
from convergence.models._l_shape import l_shape

QUANTITIES = {
    "deflection": {
        "measure": "displacement",
        "at": "tip_middle",
        "component": "y",
        "relative_tolerance": 0.01,
    },
    "corner_stress": {
        "measure": "peak_stress",
        "near": "inner_corner_middle",
        "radius": 20.0,
        "component": "first_principal",
        "relative_tolerance": 0.05,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def solid_bracket(
    *,
    post_width: Annotated[PositiveLength, "width of the upright leg"] = 80.0,
    post_height: Annotated[PositiveLength, "height over all"] = 200.0,
    arm_depth: Annotated[PositiveLength, "depth of the horizontal leg"] = 80.0,
    arm_length: Annotated[PositiveLength, "length over all"] = 200.0,
    fillet_radius: Annotated[
        float, LENGTH, Bounds(low=0.0, closed=True), "radius of the inner corner, 0 is sharp"
    ] = 20.0,
    thickness: Annotated[PositiveLength, "thickness"] = 40.0,
    end_shear: Annotated[Stress, "shear traction on the arm's end, positive upward (y)"] = -10.0,
    side_shear: Annotated[Stress, "shear traction on the arm's end out of the bracket's plane (z)"] = 0.0,
    grading: Grading = 1.0,
    material: Material,
) -> Problem:
    """The outer corner is the origin, the thickness lies along z: planes back, middle (z = 0) and front.

    With a fillet, inner_corner is the middle of its arc, with at least two cells per division on each half.
    `grading` makes the cells at a sharp inner corner smaller.
    """
    plan = l_shape(post_width, post_height, arm_depth, arm_length, fillet_radius, grading)
    return Problem(
        title="Solid L-shaped bracket, filleted" if fillet_radius else "Solid L-shaped bracket, sharp",
        part=SolidPart(plan, (("back", -0.5 * thickness), ("middle", 0.0), ("front", 0.5 * thickness))),
        materials={"body": material},
        supports=(Support("top", x=0.0, y=0.0, z=0.0, boundary="top"),),
        loads=(Traction("end", (0.0, end_shear, side_shear)),),
        kind="solid",
    )
