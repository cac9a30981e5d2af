"""Isotropic linear elasticity of a part, in the plane and with the out-of-plane stress."""

from dataclasses import dataclass
from typing import Annotated, Literal

import numpy as np

from convergence.dimensions import PoissonRatio, PositiveStress

PlaneKind = Literal["plane stress", "plane strain"]


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

    def kappa(self, kind: PlaneKind) -> float:
        """Return Kolosov's constant."""
        nu = self.poisson
        return 3.0 - 4.0 * nu if kind == "plane strain" else (3.0 - nu) / (1.0 + nu)

    def elasticity(self, kind: PlaneKind) -> np.ndarray:
        """Return D (4, 3): stresses xx, yy, zz, xy from strains xx, yy, 2xy."""
        mu, nu = self.shear_modulus, self.poisson
        if kind == "plane strain":
            lam = 2.0 * mu * nu / (1.0 - 2.0 * nu)
            through = [lam, lam, 0.0]
        else:
            lam = 2.0 * mu * nu / (1.0 - nu)
            through = [0.0, 0.0, 0.0]
        return np.array([[lam + 2 * mu, lam, 0.0], [lam, lam + 2 * mu, 0.0], through, [0.0, 0.0, mu]])

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
