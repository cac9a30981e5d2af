"""Pressure vessel with a hemispherical end, axisymmetric, e.g. the accumulator of the davit's hydraulics.

Half of it: the lower end is a plane of symmetry. Far from the junction the shell is a closed thick
cylinder (Lamé; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28).
"""

from typing import Annotated

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material
from convergence.fem.part import Part, arc, ellipse
from convergence.fem.problem import Problem, Support

QUANTITIES = {
    "hoop_stress": {"measure": "stress", "at": "inner_middle", "component": "zz", "relative_tolerance": 0.02},
    "inside_peak": {"measure": "peak_stress", "boundary": "inside", "relative_tolerance": 0.03},
    "top_rise": {"measure": "displacement", "at": "outer_top", "component": "y", "relative_tolerance": 0.01},
    "end_force": {
        "measure": "reaction_force",
        "support": "symmetry",
        "component": "y",
        "relative_tolerance": 0.001,
    },
}


def pressure_vessel(
    *,
    inner_radius: Annotated[PositiveLength, "inner radius of cylinder and end"] = 80.0,
    wall: Annotated[PositiveLength, "wall of the cylinder"] = 12.0,
    end_wall: Annotated[PositiveLength, "wall of the end at its top"] = 8.0,
    half_length: Annotated[PositiveLength, "half length of the cylinder"] = 160.0,
    pressure: Annotated[Stress, "pressure inside"] = 20.0,
    material: Material,
) -> Problem:
    """x is the radius. Outside, the end is half an ellipse, so that its wall changes steadily to the top."""
    a, b = inner_radius, inner_radius + wall
    top = inner_radius + end_wall
    require((end_wall < b, "end_wall", end_wall, f"less than the outer radius {b:g}"))
    part = Part(
        points={
            "inner_middle": (a, 0.0),
            "outer_middle": (b, 0.0),
            "outer_junction": (b, half_length),
            "inner_junction": (a, half_length),
            "outer_top": (0.0, half_length + top),
            "inner_top": (0.0, half_length + a),
        },
        blocks=(
            ("inner_middle", "outer_middle", "outer_junction", "inner_junction"),
            ("inner_junction", "outer_junction", "outer_top", "inner_top"),
        ),
        curves={
            ("inner_junction", "inner_top"): arc((0.0, half_length), a, 0.0, 90.0),
            ("outer_junction", "outer_top"): ellipse(b, top, 0.0, 90.0, centre=(0.0, half_length)),
        },
        boundaries={
            "inside": (("inner_junction", "inner_middle"), ("inner_top", "inner_junction")),
            "outside": (("outer_middle", "outer_junction"), ("outer_junction", "outer_top")),
            "middle": (("inner_middle", "outer_middle"),),
            "axis": (("outer_top", "inner_top"),),
        },
    )
    return Problem(
        title="Pressure vessel with a hemispherical end",
        part=part,
        materials={"body": material},
        supports=(Support("symmetry", y=0.0, boundary="middle"), Support("axis", x=0.0, boundary="axis")),
        loads=(Pressure("inside", pressure),),
        kind="axisymmetric",
    )
