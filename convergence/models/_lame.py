"""Quarter of a ring, and its plane field under pressure at its bore and on its outside (Lamé 1852).

Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28: stresses q ∓ c/r², displacement m q r + n c/r.
"""

import numpy as np

from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part, arc
from convergence.fem.problem import Exact


def quarter_ring(a: float, b: float) -> Part:
    """Return the quarter between the radii a and b, from the x axis to the y axis."""
    return Part(
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


def compliances(kind: PlaneKind, material: Material) -> tuple[float, float]:
    """Return m and n."""
    nu = material.poisson
    n = (1.0 + nu) / material.young
    return (n * (1.0 - 2.0 * nu) if kind == "plane strain" else (1.0 - nu) / material.young), n


def ring(
    bore: float, outside: float, pressures: tuple[float, float], kind: PlaneKind, material: Material
) -> Exact:
    """Return displacement and stress of a ring around the origin; `pressures` at the bore and outside."""
    within, around = pressures
    area = outside**2 - bore**2
    q = (within * bore**2 - around * outside**2) / area
    c = (within - around) * (bore * outside) ** 2 / area
    m, n = compliances(kind, material)
    along = 2.0 * material.poisson * q if kind == "plane strain" else 0.0

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        return np.asarray(np.array([x, y]) * (m * q + n * c / (x**2 + y**2)))

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        cos, sin = x / r, y / r
        rr, tt = q - c / r**2, q + c / r**2
        xx, yy = cos**2 * rr + sin**2 * tt, sin**2 * rr + cos**2 * tt
        return np.array([xx, yy, np.full_like(r, along), cos * sin * (rr - tt)])

    return Exact(displacement, stress)


def quarter_energy(exact: Exact, bore: float, pressure: float, length: float) -> float:
    """Return the strain energy of a quarter of a ring: half the work of the pressure in its bore."""
    growth = float(exact.displacement(np.array(bore), np.array(0.0))[0])
    return 0.25 * np.pi * bore * pressure * growth * length
