"""Slice of a thick cylinder in its meridian plane, under pressure, e.g. a hydraulic cylinder's barrel.

Axisymmetric, held along the axis. Lamé 1852; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material
from convergence.fem.part import Part
from convergence.fem.problem import Exact, Problem, Support

QUANTITIES = {
    "bore_hoop_stress": {"measure": "stress", "at": "bore", "component": "zz", "relative_tolerance": 0.02},
    "bore_growth": {"measure": "displacement", "at": "bore", "component": "x", "relative_tolerance": 0.01},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def barrel(
    *,
    inner_radius: Annotated[PositiveLength, "bore radius"] = 30.0,
    outer_radius: Annotated[PositiveLength, "outer radius"] = 45.0,
    height: Annotated[PositiveLength, "length of the slice along the axis"] = 7.5,
    pressure: Annotated[Stress, "pressure in the bore"] = 21.0,
    material: Material,
) -> Problem:
    """Points bore and outer lie on the lower face, bore_upper and outer_upper on the upper one."""
    a, b = inner_radius, outer_radius
    require((b > a, "outer_radius", b, f"more than inner_radius {a:g}"))
    part = Part(
        points={"bore": (a, 0.0), "outer": (b, 0.0), "outer_upper": (b, height), "bore_upper": (a, height)},
        blocks=(("bore", "outer", "outer_upper", "bore_upper"),),
        boundaries={
            "bore": (("bore_upper", "bore"),),
            "outer": (("outer", "outer_upper"),),
            "lower": (("bore", "outer"),),
            "upper": (("outer_upper", "bore_upper"),),
        },
    )
    return Problem(
        title="Slice of a thick cylinder, axisymmetric",
        part=part,
        materials={"body": material},
        supports=(Support("lower", y=0.0, boundary="lower"), Support("upper", y=0.0, boundary="upper")),
        loads=(Pressure("bore", pressure),),
        kind="axisymmetric",
        exact=_lame(a, b, height, pressure, material),
    )


def _lame(a: float, b: float, height: float, pressure: float, material: Material) -> Exact:
    scale, nu = pressure * a**2 / (b**2 - a**2), material.poisson

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        radial = (1 + nu) / material.young * scale * ((1 - 2 * nu) * x + b**2 / x)
        return np.array([radial, np.zeros_like(x)])

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        share = b**2 / x**2
        along = np.full_like(x, 2 * nu * scale)
        return np.array([scale * (1 - share), along, scale * (1 + share), np.zeros_like(x)])

    bore = float(displacement(np.array(a), np.array(0.0))[0])
    return Exact(displacement, stress, energy=np.pi * a * height * pressure * bore)
