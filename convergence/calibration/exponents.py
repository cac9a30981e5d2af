"""Weakest exponents of the corners of drawn cases: of one material and of bonded wedges."""

from collections.abc import Sequence

from convergence.calibration.drawn_case import DrawnKind, Elastic
from convergence.corners.bonded import Sector, wedge_exponents

Wedge = Sequence[tuple[Elastic, float]]
FREE = ("free", "free")


def weakest(kind: DrawnKind, *wedges: Wedge, sides: tuple[str, str] = FREE) -> float:
    """Return the weakest exponent of corners, each the materials and openings from one side to the other."""
    sectors = [[_sector(kind, *part) for part in wedge] for wedge in wedges]
    return min(root.real for wedge in sectors for root in wedge_exponents(wedge, sides))


def kappa(kind: DrawnKind, poisson: float) -> float:
    """Return Kolosov's constant (Muskhelishvili 1953)."""
    return (3.0 - poisson) / (1.0 + poisson) if kind == "plane_stress" else 3.0 - 4.0 * poisson


def _sector(kind: DrawnKind, material: Elastic, opening: float) -> Sector:
    nu = material.poisson
    return opening, material.young / (2.0 * (1.0 + nu)), kappa(kind, nu)
