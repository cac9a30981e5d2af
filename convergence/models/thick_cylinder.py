"""Sector of a thick cylinder under internal pressure, e.g. a hydraulic cylinder's barrel.

Lamé 1852; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28.
"""

from typing import Annotated

from convergence.dimensions import Degrees, PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material, PlaneKind
from convergence.fem.problem import Problem
from convergence.models._lame import PLANES, in_sector, ring, ring_sector

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
    sector: Annotated[Degrees, "angle between the two planes of symmetry, 5 to 175"] = 90.0,
    pressure: Annotated[Stress, "pressure in the bore"] = 21.0,
    kind: PlaneKind = "plane strain",
    material: Material,
) -> Problem:
    """Points bore_x and outer_x lie on y = 0, bore_y and outer_y on the other plane of symmetry."""
    require(
        (
            outer_radius > inner_radius,
            "outer_radius",
            outer_radius,
            f"more than inner_radius {inner_radius:g}",
        )
    )
    a, b = inner_radius, outer_radius
    return Problem(
        title="Thick cylinder under internal pressure",
        part=ring_sector(a, b, sector),
        materials={"body": material},
        supports=PLANES,
        loads=(Pressure("bore", pressure),),
        kind=kind,
        thickness=length,
        exact=in_sector(ring(a, b, (pressure, 0.0), kind, material), sector, length),
    )
