"""Membrane patch test: five distorted cells under a linear displacement, solved exactly by any sound element.

MacNeal & Harder 1985, Finite Elem. Anal. Des. 1:3-20, the membrane patch, scaled from 0.24 x 0.12.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Ratio
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part
from convergence.fem.problem import Exact, Problem
from convergence.models._supports import exact_support

QUANTITIES = {
    "inner_stress": {"measure": "stress", "at": "inner_1", "component": "xx", "relative_tolerance": 1e-6},
    "inner_displacement": {
        "measure": "displacement",
        "at": "inner_3",
        "component": "x",
        "relative_tolerance": 1e-6,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 1e-6},
}
PLACES = {
    "lower_left": (0.0, 0.0),
    "lower_right": (0.24, 0.0),
    "upper_right": (0.24, 0.12),
    "upper_left": (0.0, 0.12),
    "inner_1": (0.04, 0.02),
    "inner_2": (0.18, 0.03),
    "inner_3": (0.16, 0.08),
    "inner_4": (0.08, 0.08),
}


def patch_test(
    *,
    length: Annotated[PositiveLength, "length, twice the depth"] = 240.0,
    strain: Annotated[Ratio, "direct strain in both directions, and shear angle"] = 1e-3,
    thickness: Annotated[PositiveLength, "thickness"] = 1.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """All four sides are held at the linear displacement; inner points are counted from the lower left."""
    scale = length / 0.24
    part = Part(
        points={name: (scale * x, scale * y) for name, (x, y) in PLACES.items()},
        blocks=(
            ("inner_1", "inner_2", "inner_3", "inner_4"),
            ("lower_left", "lower_right", "inner_2", "inner_1"),
            ("lower_right", "upper_right", "inner_3", "inner_2"),
            ("upper_right", "upper_left", "inner_4", "inner_3"),
            ("upper_left", "lower_left", "inner_1", "inner_4"),
        ),
        boundaries={
            "rim": (
                ("lower_left", "lower_right"),
                ("lower_right", "upper_right"),
                ("upper_right", "upper_left"),
                ("upper_left", "lower_left"),
            )
        },
        weights={("inner_1", "inner_2"): 1.0, ("inner_2", "inner_3"): 1.0, ("inner_1", "lower_left"): 1.0},
    )

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        return np.array([x + 0.5 * y, y + 0.5 * x]) * strain

    stresses = material.elasticity(kind) @ (strain * np.array([1.0, 1.0, 0.0, 1.0]))

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        return np.array([np.full_like(x, value) for value in stresses])

    density = 0.5 * strain * float(stresses[[0, 1, 3]].sum())
    return Problem(
        title="Membrane patch test",
        part=part,
        materials={"body": material},
        supports=(exact_support("rim", displacement, boundary="rim"),),
        loads=(),
        kind=kind,
        thickness=thickness,
        exact=Exact(displacement, stress, energy=density * 0.5 * length**2 * thickness),
    )
