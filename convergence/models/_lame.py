"""Sector of a ring, and its plane field under pressure at its bore and on its outside (Lamé 1852).

Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28: stresses q ∓ c/r², displacement m q r + n c/r.
Each plane through the axis is one of symmetry. A uniform rise of temperature adds e r to the displacement.
"""

from dataclasses import replace

import numpy as np

from convergence.errors import require
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part, arc
from convergence.fem.problem import Exact, Support

NARROWEST, WIDEST = 5.0, 175.0  # at 180° the two planes are one, and nothing stops a motion along it
PLANES = (
    Support("symmetry_x", normal=0.0, boundary="symmetry_x"),
    Support("symmetry_y", y=0.0, boundary="symmetry_y"),
)


def ring_sector(a: float, b: float, sector: float) -> Part:
    """Return the sector, in degrees, between the radii a and b, from the x axis; `PLANES` hold it."""
    require((NARROWEST <= sector <= WIDEST, "sector", sector, f"{NARROWEST:g} to {WIDEST:g}"))
    ends = {"bore_y": (0.0, a), "outer_y": (0.0, b)}
    if sector != 90.0:
        cos, sin = float(np.cos(np.radians(sector))), float(np.sin(np.radians(sector)))
        ends = {name: (r * cos, r * sin) for name, (_, r) in ends.items()}
    return Part(
        points={"bore_x": (a, 0.0), "outer_x": (b, 0.0)} | ends,
        blocks=(("bore_x", "outer_x", "outer_y", "bore_y"),),
        curves={
            ("bore_x", "bore_y"): arc((0.0, 0.0), a, 0.0, sector),
            ("outer_x", "outer_y"): arc((0.0, 0.0), b, 0.0, sector),
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


def free_growth(kind: PlaneKind, material: Material) -> float:
    """Return e of one kelvin; in plane strain the stress along the axis adds to the expansion."""
    return material.expansion * (1.0 + material.poisson if kind == "plane strain" else 1.0)


def ring(
    bore: float,
    outside: float,
    pressures: tuple[float, float],
    kind: PlaneKind,
    material: Material,
    warmth: float = 0.0,
) -> Exact:
    """Return displacement and stress of a ring around the origin; `pressures` at the bore and outside.

    `energy` is that of one radian and unit length: half of stress times strain less the thermal strain.
    """
    within, around = pressures
    area = outside**2 - bore**2
    q = (within * bore**2 - around * outside**2) / area
    c = (within - around) * (bore * outside) ** 2 / area
    m, n = compliances(kind, material)
    e, thermal = warmth * free_growth(kind, material), warmth * material.expansion
    along = 2.0 * material.poisson * q - material.young * thermal if kind == "plane strain" else 0.0

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        return np.asarray(np.array([x, y]) * (m * q + e + n * c / (x**2 + y**2)))

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        cos, sin = x / r, y / r
        rr, tt = q - c / r**2, q + c / r**2
        xx, yy = cos**2 * rr + sin**2 * tt, sin**2 * rr + cos**2 * tt
        return np.array([xx, yy, np.full_like(r, along), cos * sin * (rr - tt)])

    work = sum(p * r**2 * (m * q + e + n * c / r**2) for p, r in ((within, bore), (-around, outside)))
    return Exact(displacement, stress, 0.5 * (work - thermal * (2.0 * q + along) * 0.5 * area))


def in_sector(exact: Exact, sector: float, length: float) -> Exact:
    """Return the field of `ring` with the energy of a sector, in degrees, of a length."""
    assert exact.energy is not None
    return replace(exact, energy=float(np.radians(sector)) * length * exact.energy)
