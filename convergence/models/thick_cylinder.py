"""Quarter of a thick cylinder under internal pressure, e.g. a hydraulic cylinder's barrel.

Lamé 1852; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28.
"""

from typing import Annotated

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material, PlaneKind
from convergence.fem.problem import Exact, Problem
from convergence.models._lame import quarter_energy, quarter_ring, ring
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
    exact = ring(a, b, (pressure, 0.0), kind, material)
    return Problem(
        title="Thick cylinder under internal pressure",
        part=quarter_ring(a, b),
        materials={"body": material},
        supports=SYMMETRY,
        loads=(Pressure("bore", pressure),),
        kind=kind,
        thickness=length,
        exact=Exact(exact.displacement, exact.stress, quarter_energy(exact, a, pressure, length)),
    )
