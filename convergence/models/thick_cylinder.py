"""Quarter of a thick cylinder under internal pressure, e.g. a hydraulic cylinder's barrel.

Lamé 1852; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28.
"""

from typing import Annotated

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part, arc
from convergence.fem.problem import Exact, Problem
from convergence.models._lame import quarter_energy, ring
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "bore_hoop_stress": {"measure": "stress", "at": "bore_x", "component": "yy", "relative_tolerance": 0.02},
    "bore_growth": {"measure": "displacement", "at": "bore_x", "component": "x", "relative_tolerance": 0.01},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def thick_cylinder(
    *,
    inner_radius: Annotated[PositiveLength, "bore radius"] = 30.0,
    outer_radius: Annotated[PositiveLength, "outer radius"] = 45.0,
    length: Annotated[PositiveLength, "length along the axis"] = 1.0,
    pressure: Annotated[Stress, "pressure in the bore"] = 21.0,
    kind: PlaneKind = "plane strain",
    material: Material,
) -> Problem:
    """Points bore_x, bore_y, outer_x, outer_y lie on the axes; symmetry on both of them."""
    require(
        (
            outer_radius > inner_radius,
            "outer_radius",
            outer_radius,
            f"more than inner_radius {inner_radius:g}",
        )
    )
    a, b = inner_radius, outer_radius
    part = Part(
        points={"bore_x": (a, 0.0), "outer_x": (b, 0.0), "outer_y": (0.0, b), "bore_y": (0.0, a)},
        blocks=(("bore_x", "outer_x", "outer_y", "bore_y"),),
        curves={
            ("bore_x", "bore_y"): arc((0.0, 0.0), a, 0.0, 90.0),
            ("outer_x", "outer_y"): arc((0.0, 0.0), b, 0.0, 90.0),
        },
        boundaries={
            "bore": (("bore_x", "bore_y"),),
            "outer": (("outer_x", "outer_y"),),
            "symmetry_x": (("bore_y", "outer_y"),),
            "symmetry_y": (("bore_x", "outer_x"),),
        },
    )
    exact = ring(a, b, (pressure, 0.0), kind, material)
    return Problem(
        title="Thick cylinder under internal pressure",
        part=part,
        materials={"body": material},
        supports=SYMMETRY,
        loads=(Pressure("bore", pressure),),
        kind=kind,
        thickness=length,
        exact=Exact(exact.displacement, exact.stress, quarter_energy(exact, a, pressure, length)),
    )
