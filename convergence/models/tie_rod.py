"""Tapered tie rod under its own weight and a pull: a rod in one dimension, the simplest ladder.

Stress and displacement follow from equilibrium in closed form (Gere & Timoshenko, Mechanics of Materials,
sect. 2.3, from memory).
"""

from collections.abc import Callable
from typing import Annotated

import numpy as np

from convergence.dimensions import AREA, POSITIVE, Force, ForcePerVolume, PositiveLength
from convergence.fem.loads import BodyForce, Traction
from convergence.fem.material import Material
from convergence.fem.problem import Exact, Problem, Support
from convergence.fem.rod_part import RodPart

QUANTITIES = {
    "stretch": {"measure": "displacement", "at": "eye", "component": "x", "relative_tolerance": 0.001},
    "stress_at_eye": {"measure": "stress", "at": "eye", "component": "xx", "relative_tolerance": 0.01},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.001},
}
Area = Annotated[float, AREA, POSITIVE]


def tie_rod(
    *,
    length: Annotated[PositiveLength, "length"] = 2400.0,
    area_at_head: Annotated[Area, "area of the section at the fixed head, x = 0"] = 900.0,
    area_at_eye: Annotated[Area, "area of the section at the loaded eye, x = length"] = 300.0,
    force: Annotated[Force, "pull at the eye"] = 40000.0,
    weight: Annotated[ForcePerVolume, "own weight per volume, along x"] = 7.7e-5,
    material: Material,
) -> Problem:
    """The rod hangs from its head; x points down from there."""

    def area(x: np.ndarray) -> np.ndarray:
        return area_at_head + (area_at_eye - area_at_head) * x / length

    def below(x: np.ndarray) -> np.ndarray:
        return 0.5 * (area(x) + area_at_eye) * (length - x)

    def stress(x: np.ndarray) -> np.ndarray:
        return np.array([(force + weight * below(x)) / area(x)])

    def stretch(x: np.ndarray) -> np.ndarray:
        slope = (area_at_eye - area_at_head) / length
        if abs(slope) * length < 1e-6 * area_at_head:
            flow = force * x / area_at_head + weight * x * (length - 0.5 * x)
        else:
            logarithm = (force + 0.5 * weight * area_at_eye**2 / slope) * np.log(area(x) / area_at_head)
            flow = (logarithm - 0.25 * weight * (area(x) ** 2 - area_at_head**2) / slope) / slope
        return np.array([flow / material.young])

    return Problem(
        title="Tie rod",
        part=RodPart({"head": (0.0,), "eye": (length,)}),
        materials={"body": material},
        supports=(Support("head", x=0.0, boundary="head"),),
        loads=(Traction("eye", (force / area_at_eye,)), BodyForce((weight,))),
        kind="rod",
        thickness=area,
        exact=Exact(
            stretch,
            stress,
            energy=0.5 * _integral(lambda x: stress(x)[0] ** 2 * area(x) / material.young, length),
        ),
    )


def _integral(function: Callable[[np.ndarray], np.ndarray], length: float) -> float:
    """Return the integral from 0 to length by a Gauss rule of 40 points, exact to rounding here."""
    at, weights = np.polynomial.legendre.leggauss(40)
    return float(0.5 * length * weights @ function(0.5 * length * (at + 1.0)))
