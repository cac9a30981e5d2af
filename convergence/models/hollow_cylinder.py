"""Sector of a thick cylinder under internal pressure as a solid, held along its axis, e.g. a barrel.

Plane strain in three dimensions. Lamé 1852; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import Degrees, PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material
from convergence.fem.problem import Exact, Problem, Support
from convergence.fem.solid_part import SolidPart
from convergence.models._lame import PLANES, in_sector, ring, ring_sector

QUANTITIES = {
    "bore_hoop_stress": {
        "measure": "stress",
        "at": "bore_x_back",
        "component": "yy",
        "relative_tolerance": 0.02,
    },
    "bore_growth": {
        "measure": "displacement",
        "at": "bore_x_back",
        "component": "x",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def hollow_cylinder(
    *,
    inner_radius: Annotated[PositiveLength, "bore radius"] = 30.0,
    outer_radius: Annotated[PositiveLength, "outer radius"] = 45.0,
    length: Annotated[PositiveLength, "length along the axis"] = 15.0,
    sector: Annotated[Degrees, "angle between the two planes of symmetry, 5 to 175"] = 90.0,
    pressure: Annotated[Stress, "pressure in the bore"] = 21.0,
    material: Material,
) -> Problem:
    """The axis is z; points are on the faces back (z = 0) and front.

    bore_x and outer_x lie on y = 0, bore_y and outer_y on the other plane of symmetry.
    """
    a, b = inner_radius, outer_radius
    require((b > a, "outer_radius", b, f"more than inner_radius {a:g}"))
    plane = ring(a, b, (pressure, 0.0), "plane strain", material)
    return Problem(
        title="Thick cylinder under internal pressure, solid",
        part=SolidPart(ring_sector(a, b, sector), (("back", 0.0), ("front", length))),
        materials={"body": material},
        supports=(
            *PLANES,
            Support("back", z=0.0, boundary="back"),
            Support("front", z=0.0, boundary="front"),
        ),
        loads=(Pressure("bore", pressure),),
        kind="solid",
        exact=in_sector(_along_z(plane), sector, length),
    )


def _along_z(plane: Exact) -> Exact:
    """Return a field of plane strain as that of a solid."""

    def displacement(x: np.ndarray, y: np.ndarray, z: np.ndarray) -> np.ndarray:
        return np.array([*plane.displacement(x, y), np.zeros_like(z)])

    def stress(x: np.ndarray, y: np.ndarray, z: np.ndarray) -> np.ndarray:
        return np.array([*plane.stress(x, y), np.zeros_like(z), np.zeros_like(z)])

    return Exact(displacement, stress, plane.energy)
