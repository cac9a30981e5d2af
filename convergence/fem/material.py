"""Isotropic linear elasticity of a part, in a plane or a meridian plane, with the stress out of it."""

from dataclasses import dataclass
from typing import Annotated, Literal

import numpy as np

from convergence.dimensions import PoissonRatio, PositiveStress

PlaneKind = Literal["plane stress", "plane strain"]
ProblemKind = Literal["plane stress", "plane strain", "axisymmetric"]


@dataclass(frozen=True)
class Material:
    """Young's modulus, Poisson's ratio and, where given, the yield strength with its source."""

    young: float
    poisson: float
    yield_strength: float | None = None
    yield_source: str = ""

    @property
    def shear_modulus(self) -> float:
        return self.young / (2.0 * (1.0 + self.poisson))

    def kappa(self, kind: ProblemKind) -> float:
        """Return Kolosov's constant; near a corner an axisymmetric body is in plane strain."""
        nu = self.poisson
        return (3.0 - nu) / (1.0 + nu) if kind == "plane stress" else 3.0 - 4.0 * nu

    def elasticity(self, kind: ProblemKind) -> np.ndarray:
        """Return D (4, 4): stresses xx, yy, zz, xy from strains xx, yy, zz, 2xy.

        In plane stress the strain zz follows from the others and its column is zero; in plane strain
        it is zero itself; axisymmetric it is the hoop strain.
        """
        mu, nu = self.shear_modulus, self.poisson
        matrix = np.diag([2.0 * mu, 2.0 * mu, 2.0 * mu, mu])
        if kind == "plane stress":
            matrix[2, 2] = 0.0
            matrix[:2, :2] += 2.0 * mu * nu / (1.0 - nu)
        else:
            matrix[:3, :3] += 2.0 * mu * nu / (1.0 - 2.0 * nu)
        return matrix

    def compliance(self) -> np.ndarray:
        """Return S (4, 4): s.S.s is twice the energy density of the stresses xx, yy, zz, xy."""
        nu = self.poisson
        normal = np.full((3, 3), -nu) + (1.0 + nu) * np.eye(3)
        matrix = np.zeros((4, 4))
        matrix[:3, :3] = normal
        matrix[3, 3] = 2.0 * (1.0 + nu)
        return matrix / self.young


def material(
    *,
    young: Annotated[PositiveStress, "Young's modulus"] = 210000.0,
    poisson: Annotated[PoissonRatio, "Poisson's ratio"] = 0.3,
    yield_strength: Annotated[PositiveStress, "yield strength, for the check of the linear range"]
    | None = None,
    yield_source: Annotated[str, "where the yield strength stands"] = "",
) -> Material:
    """Return the material of a study's [material] table."""
    return Material(young, poisson, yield_strength, yield_source)
