"""Quarter of a thick cylinder under internal pressure, e.g. a hydraulic cylinder's barrel.

Lamé 1852; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part, arc
from convergence.fem.problem import Exact, Pressure, Problem
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
    return Problem(
        title="Thick cylinder under internal pressure",
        part=part,
        materials={"body": material},
        supports=SYMMETRY,
        loads=(Pressure("bore", pressure),),
        kind=kind,
        thickness=length,
        exact=_lame(a, b, length, pressure, kind, material),
    )


def _lame(a: float, b: float, length: float, pressure: float, kind: PlaneKind, material: Material) -> Exact:
    scale = pressure * a**2 / (b**2 - a**2)
    nu, out = material.poisson, 1.0 if kind == "plane strain" else 0.0

    def radial(r: np.ndarray) -> np.ndarray:
        if kind == "plane strain":
            return (1 + nu) / material.young * scale * ((1 - 2 * nu) * r + b**2 / r)
        return scale / material.young * ((1 - nu) * r + (1 + nu) * b**2 / r)

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        return np.array([x * radial(r) / r, y * radial(r) / r])

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        c, s = x / r, y / r
        rr, tt = scale * (1 - b**2 / r**2), scale * (1 + b**2 / r**2)
        along = np.full_like(r, out * 2 * nu * scale)
        return np.array([c * c * rr + s * s * tt, s * s * rr + c * c * tt, along, c * s * (rr - tt)])

    quarter_work = 0.25 * np.pi * a * pressure * float(radial(np.array(a))) * length
    return Exact(displacement, stress, energy=quarter_work)
