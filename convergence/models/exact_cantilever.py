"""Cantilever under an end force with its exact field, e.g. a straight stretch of the davit's arm.

Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 21; in this form Augarde & Deeks 2008, Finite
Elem. Anal. Des. 44:595. The root is not clamped: it is held at the exact displacements, and the end
carries a parabolic shear traction.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import Force, PositiveLength
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part
from convergence.fem.problem import Exact, Problem
from convergence.models._exact import traction_of
from convergence.models._supports import exact_support

QUANTITIES = {
    "deflection": {"measure": "displacement", "at": "tip", "component": "y", "relative_tolerance": 0.01},
    "root_stress": {"measure": "stress", "at": "root_lower", "component": "xx", "relative_tolerance": 0.02},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def exact_cantilever(
    *,
    length: Annotated[PositiveLength, "length"] = 480.0,
    depth: Annotated[PositiveLength, "depth"] = 120.0,
    thickness: Annotated[PositiveLength, "thickness"] = 10.0,
    force: Annotated[Force, "end force, positive upward"] = -6000.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The axis lies on y = 0 from root to tip."""
    half = 0.5 * depth
    part = Part(
        points={
            "root": (0.0, 0.0),
            "root_lower": (0.0, -half),
            "root_upper": (0.0, half),
            "tip": (length, 0.0),
            "tip_lower": (length, -half),
            "tip_upper": (length, half),
        },
        blocks=(("root_lower", "tip_lower", "tip", "root"), ("root_upper", "root", "tip", "tip_upper")),
        boundaries={
            "root": (("root_upper", "root"), ("root", "root_lower")),
            "lower": (("root_lower", "tip_lower"),),
            "upper": (("tip_upper", "root_upper"),),
            "tip": (("tip_lower", "tip"), ("tip", "tip_upper")),
        },
    )
    exact = _timoshenko(length, depth, thickness, force, kind, material)
    return Problem(
        title="Cantilever with an exact solution",
        part=part,
        materials={"body": material},
        supports=(exact_support("root", exact.displacement, boundary="root"),),
        loads=(Traction("tip", traction_of(exact.stress, (1.0, 0.0))),),
        kind=kind,
        thickness=thickness,
        exact=exact,
    )


def _timoshenko(
    length: float, depth: float, thickness: float, force: float, kind: PlaneKind, material: Material
) -> Exact:
    young, nu, out = material.young, material.poisson, 0.0
    if kind == "plane strain":
        young, nu, out = young / (1 - nu**2), nu / (1 - nu), nu
    inertia = thickness * depth**3 / 12.0
    scale = force / (6.0 * young * inertia)

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        ux = -y * ((6 * length - 3 * x) * x + (2 + nu) * (y**2 - 0.25 * depth**2))
        uy = 3 * nu * y**2 * (length - x) + 0.25 * (4 + 5 * nu) * depth**2 * x + (3 * length - x) * x**2
        return scale * np.array([ux, uy])

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        xx = -force / inertia * (length - x) * y
        xy = 0.5 * force / inertia * (0.25 * depth**2 - y**2)
        return np.array([xx, np.zeros_like(xx), out * xx, xy])

    bending = force**2 * length**3 / (6.0 * young * inertia)
    shear = (1 + nu) * force**2 * length * thickness * depth**5 / (120.0 * young * inertia**2)
    return Exact(displacement, stress, energy=bending + shear)
