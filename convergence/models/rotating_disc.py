"""Quarter of a thin rotating disc with a central bore, e.g. the brake disc of the davit's winch.

Plane stress; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 32.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, PositiveStress
from convergence.errors import require
from convergence.fem.loads import centrifugal
from convergence.fem.material import Material
from convergence.fem.part import Part, arc
from convergence.fem.problem import Exact, Problem
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "bore_stress": {"measure": "stress", "at": "bore_x", "component": "yy", "relative_tolerance": 0.02},
    "rim_growth": {"measure": "displacement", "at": "rim_x", "component": "x", "relative_tolerance": 0.01},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def rotating_disc(
    *,
    bore_radius: Annotated[PositiveLength, "bore radius"] = 60.0,
    rim_radius: Annotated[PositiveLength, "rim radius"] = 160.0,
    thickness: Annotated[PositiveLength, "thickness"] = 20.0,
    inertia: Annotated[
        PositiveStress, "density times rim speed squared; 78.5 MPa is steel at 100 m/s"
    ] = 78.5,
    material: Material,
) -> Problem:
    """Points bore_x, bore_y, rim_x and rim_y lie on the axes; symmetry on both of them."""
    a, b = bore_radius, rim_radius
    require((b > a, "rim_radius", b, f"more than bore_radius {a:g}"))
    part = Part(
        points={"bore_x": (a, 0.0), "rim_x": (b, 0.0), "rim_y": (0.0, b), "bore_y": (0.0, a)},
        blocks=(("bore_x", "rim_x", "rim_y", "bore_y"),),
        curves={
            ("bore_x", "bore_y"): arc((0.0, 0.0), a, 0.0, 90.0),
            ("rim_x", "rim_y"): arc((0.0, 0.0), b, 0.0, 90.0),
        },
        boundaries={
            "bore": (("bore_y", "bore_x"),),
            "rim": (("rim_x", "rim_y"),),
            "symmetry_x": (("rim_y", "bore_y"),),
            "symmetry_y": (("bore_x", "rim_x"),),
        },
    )
    density = inertia / b**2
    return Problem(
        title="Rotating disc with a bore",
        part=part,
        materials={"body": material},
        supports=SYMMETRY,
        loads=(centrifugal(density, 1.0, axis=2),),
        kind="plane stress",
        thickness=thickness,
        exact=_disc(a, b, density, thickness, material),
    )


def _disc(a: float, b: float, density: float, thickness: float, material: Material) -> Exact:
    nu, scale = material.poisson, density * (3 + material.poisson) / 8

    def radial(r: np.ndarray) -> np.ndarray:
        shape = a**2 + b**2 + (1 + nu) / (1 - nu) * a**2 * b**2 / r**2 - (1 + nu) / (3 + nu) * r**2
        return np.asarray(scale * (1 - nu) / material.young * shape * r)

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        return np.asarray(np.array([x, y]) * radial(r) / r)

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        cos, sin = x / r, y / r
        rr = scale * (a**2 + b**2 - a**2 * b**2 / r**2 - r**2)
        tt = scale * (a**2 + b**2 + a**2 * b**2 / r**2 - (1 + 3 * nu) / (3 + nu) * r**2)
        sides = [cos**2 * rr + sin**2 * tt, sin**2 * rr + cos**2 * tt]
        return np.array([*sides, np.zeros_like(r), cos * sin * (rr - tt)])

    at, weight = np.polynomial.legendre.leggauss(20)
    r = a + 0.5 * (b - a) * (at + 1)
    work = 0.5 * (b - a) * float(weight @ (density * r * radial(r) * r))
    return Exact(displacement, stress, energy=0.25 * np.pi * thickness * work)
