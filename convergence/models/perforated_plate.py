"""Quarter of a wide plate with a round hole in tension, e.g. a lightening hole of the davit's arm.

Kirsch 1898; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 35. The plate is cut out of an
infinite one: the cut edges carry the exact tractions.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part, arc, graded
from convergence.fem.problem import Exact, Problem
from convergence.models._exact import energy_of, traction_of
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "hole_stress": {"measure": "stress", "at": "hole_top", "component": "xx", "relative_tolerance": 0.02},
    "hole_opening": {
        "measure": "displacement",
        "at": "hole_end",
        "component": "x",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def perforated_plate(
    *,
    hole_radius: Annotated[PositiveLength, "radius of the hole"] = 10.0,
    half_width: Annotated[PositiveLength, "side of the square quarter"] = 40.0,
    thickness: Annotated[PositiveLength, "thickness"] = 8.0,
    tension: Annotated[Stress, "remote stress along x"] = 60.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The hole is centred on the origin; hole_top has three times the remote stress.

    Four cells per division around the hole's quarter; along the spokes they grow with the distance.
    """
    require((half_width > hole_radius, "half_width", half_width, f"more than hole_radius {hole_radius:g}"))
    part = _part(hole_radius, half_width)
    exact = _kirsch(hole_radius, tension, kind, material)
    loaded = (("side", "corner"), ("corner", "top"))
    return Problem(
        title="Plate with a round hole",
        part=part,
        materials={"body": material},
        supports=SYMMETRY,
        loads=(
            Traction("side", traction_of(exact.stress, (1.0, 0.0))),
            Traction("top", traction_of(exact.stress, (0.0, 1.0))),
        ),
        kind=kind,
        thickness=thickness,
        exact=Exact(exact.displacement, exact.stress, energy_of(exact, part, loaded, thickness)),
    )


def _part(radius: float, side: float) -> Part:
    diagonal = radius * np.sqrt(0.5)
    points = {
        "hole_end": (radius, 0.0),
        "side": (side, 0.0),
        "corner": (side, side),
        "top": (0.0, side),
        "hole_top": (0.0, radius),
        "hole_diagonal": (diagonal, diagonal),
    }
    ratio = side / radius
    spokes = (("hole_end", "side"), ("hole_diagonal", "corner"), ("hole_top", "top"))
    return Part(
        points=points,
        blocks=(
            ("hole_end", "side", "corner", "hole_diagonal"),
            ("hole_top", "hole_diagonal", "corner", "top"),
        ),
        curves={
            ("hole_end", "hole_diagonal"): arc((0.0, 0.0), radius, 0.0, 45.0),
            ("hole_diagonal", "hole_top"): arc((0.0, 0.0), radius, 45.0, 90.0),
            **{(a, b): graded(points[a], points[b], ratio) for a, b in spokes},
        },
        boundaries={
            "hole": (("hole_end", "hole_diagonal"), ("hole_diagonal", "hole_top")),
            "side": (("side", "corner"),),
            "top": (("corner", "top"),),
            "symmetry_x": (("top", "hole_top"),),
            "symmetry_y": (("hole_end", "side"),),
        },
        weights={
            ("side", "corner"): 2.0,
            ("corner", "top"): 2.0,
            ("hole_end", "side"): max(1.0, 2.0 * np.log(ratio) / (0.25 * np.pi)),
        },
    )


def _kirsch(radius: float, tension: float, kind: PlaneKind, material: Material) -> Exact:
    kappa, scale = material.kappa(kind), tension * radius / (8.0 * material.shear_modulus)
    out = material.poisson if kind == "plane strain" else 0.0

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r, angle = np.hypot(x, y) / radius, np.arctan2(y, x)
        cos, sin = np.cos(angle), np.sin(angle)
        cos3, sin3 = np.cos(3 * angle), np.sin(3 * angle)
        ux = r * (kappa + 1) * cos + 2 / r * ((1 + kappa) * cos + cos3) - 2 / r**3 * cos3
        uy = r * (kappa - 3) * sin + 2 / r * ((1 - kappa) * sin + sin3) - 2 / r**3 * sin3
        return scale * np.array([ux, uy])

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        squared = x**2 + y**2
        q, cos2, sin2 = radius**2 / squared, (x**2 - y**2) / squared, 2 * x * y / squared
        cos4, sin4 = cos2**2 - sin2**2, 2 * sin2 * cos2
        xx = 1 - q * (1.5 * cos2 + cos4) + 1.5 * q**2 * cos4
        yy = -q * (0.5 * cos2 - cos4) - 1.5 * q**2 * cos4
        xy = -q * (0.5 * sin2 + sin4) + 1.5 * q**2 * sin4
        return tension * np.array([xx, yy, out * (xx + yy), xy])

    return Exact(displacement, stress)
