"""Half of a thick sphere under internal pressure, axisymmetric, e.g. a spherical accumulator.

Lamé 1852; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 136.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material
from convergence.fem.part import Part, arc
from convergence.fem.problem import Exact, Problem, Support

QUANTITIES = {
    "inner_stress": {"measure": "stress", "at": "inner_x", "component": "zz", "relative_tolerance": 0.02},
    "inner_growth": {
        "measure": "displacement",
        "at": "inner_x",
        "component": "x",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def thick_sphere(
    *,
    inner_radius: Annotated[PositiveLength, "inner radius"] = 40.0,
    outer_radius: Annotated[PositiveLength, "outer radius"] = 60.0,
    pressure: Annotated[Stress, "pressure inside"] = 30.0,
    material: Material,
) -> Problem:
    """Points inner_x and outer_x lie on the equator, inner_y and outer_y on the axis."""
    a, b = inner_radius, outer_radius
    require((b > a, "outer_radius", b, f"more than inner_radius {a:g}"))
    part = Part(
        points={"inner_x": (a, 0.0), "outer_x": (b, 0.0), "outer_y": (0.0, b), "inner_y": (0.0, a)},
        blocks=(("inner_x", "outer_x", "outer_y", "inner_y"),),
        curves={
            ("inner_x", "inner_y"): arc((0.0, 0.0), a, 0.0, 90.0),
            ("outer_x", "outer_y"): arc((0.0, 0.0), b, 0.0, 90.0),
        },
        boundaries={
            "inside": (("inner_y", "inner_x"),),
            "outside": (("outer_x", "outer_y"),),
            "equator": (("inner_x", "outer_x"),),
            "axis": (("outer_y", "inner_y"),),
        },
    )
    return Problem(
        title="Thick sphere under internal pressure",
        part=part,
        materials={"body": material},
        supports=(Support("equator", y=0.0, boundary="equator"), Support("axis", x=0.0, boundary="axis")),
        loads=(Pressure("inside", pressure),),
        kind="axisymmetric",
        exact=_lame(a, b, pressure, material),
    )


def _lame(a: float, b: float, pressure: float, material: Material) -> Exact:
    scale, nu = pressure * a**3 / (b**3 - a**3), material.poisson

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        radial = scale / material.young * ((1 - 2 * nu) * r + (1 + nu) * b**3 / (2 * r**2))
        return np.asarray(np.array([x, y]) * radial / r)

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        cos, sin = x / r, y / r
        rr, tt = scale * (1 - b**3 / r**3), scale * (1 + b**3 / (2 * r**3))
        return np.array([cos**2 * rr + sin**2 * tt, sin**2 * rr + cos**2 * tt, tt, cos * sin * (rr - tt)])

    inside = float(displacement(np.array(a), np.array(0.0))[0])
    return Exact(displacement, stress, energy=np.pi * a**2 * pressure * inside)
