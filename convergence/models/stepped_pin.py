"""Stepped round pin with a shoulder fillet in tension, axisymmetric, e.g. the davit's hinge pin.

Half of it: the lower end is a plane of symmetry. The stress of the thin part's section is the nominal one.
"""

from typing import Annotated

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.problem import Problem, Support
from convergence.models._l_shape import l_shape

QUANTITIES = {
    "fillet_peak": {
        "measure": "peak_stress",
        "boundary": "fillet",
        "component": "first_principal",
        "relative_tolerance": 0.03,
    },
    "elongation": {
        "measure": "mean_displacement",
        "boundary": "top",
        "component": "y",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def stepped_pin(
    *,
    thin_radius: Annotated[PositiveLength, "radius of the thin part"] = 20.0,
    thick_radius: Annotated[PositiveLength, "radius of the thick part"] = 32.0,
    fillet_radius: Annotated[PositiveLength, "radius of the shoulder fillet"] = 7.0,
    thick_length: Annotated[PositiveLength, "half length of the thick part"] = 30.0,
    length: Annotated[PositiveLength, "half length over all"] = 100.0,
    tension: Annotated[Stress, "stress on the thin end, along the axis"] = 100.0,
    material: Material,
) -> Problem:
    """x is the radius. Points as in the L-shaped bracket: inner_corner is the middle of the fillet."""
    foot, head = thin_radius + fillet_radius, thick_length + fillet_radius
    require(
        (
            thick_radius > foot,
            "thick_radius",
            thick_radius,
            f"more than thin_radius + fillet_radius {foot:g}",
        ),
        (length > head, "length", length, f"more than thick_length + fillet_radius {head:g}"),
    )
    return Problem(
        title="Stepped pin with a shoulder fillet",
        part=l_shape(thin_radius, length, thick_length, thick_radius, fillet_radius),
        materials={"body": material},
        supports=(Support("symmetry", y=0.0, boundary="bottom"), Support("axis", x=0.0, boundary="left")),
        loads=(Traction("top", (0.0, tension)),),
        kind="axisymmetric",
    )
