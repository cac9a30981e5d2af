"""Linear elasticity and thermal strain of one material, isotropic or orthotropic, in every kind of problem.

Jones, Mechanics of Composite Materials, 2nd ed. 1999: compliance of an orthotropic material sect. 2.3, bounds
of its constants sect. 2.4, reduction to plane stress sect. 2.5, turn about z sect. 2.6 (from memory).
Components: xx, yy, zz, xy, yz, zx of a solid, the first four in a plane and a meridian plane (zz is the hoop
there), xx in a rod; shear strains are engineering strains.
"""

from collections.abc import Callable
from dataclasses import asdict, dataclass
from typing import Annotated, Any, Literal, get_type_hints

import numpy as np

from convergence.dimensions import Degrees, Expansion, PositiveStress, Ratio
from convergence.errors import require

PlaneKind = Literal["plane stress", "plane strain"]
ProblemKind = Literal["plane stress", "plane strain", "axisymmetric", "solid", "rod"]

# the components that can carry stress; the others are free to strain (plane stress, rod)
STRESSED: dict[ProblemKind, list[int]] = {
    "plane stress": [0, 1, 3],
    "plane strain": [0, 1, 2, 3],
    "axisymmetric": [0, 1, 2, 3],
    "solid": [0, 1, 2, 3, 4, 5],
    "rod": [0],
}
COMPONENTS: dict[ProblemKind, int] = {
    "plane stress": 4,
    "plane strain": 4,
    "axisymmetric": 4,
    "solid": 6,
    "rod": 1,
}
ORTHOTROPIC = ("young_y", "young_z", "poisson_yz", "poisson_zx", "shear_xy", "shear_yz", "shear_zx")


@dataclass(frozen=True)
class Material:
    """Constants along the material's own axes x, y, z; `angle` in degrees turns them about z from x to y.

    Where the stress ii alone acts, poisson_ij = -(strain jj)/(strain ii); `poisson` is poisson_xy. The
    constants named in ORTHOTROPIC are all given or all None, which is isotropic; `expansion` is per kelvin
    and holds for y and z too where these are None.
    """

    young: float
    poisson: float
    yield_strength: float | None = None
    yield_source: str = ""
    expansion: float = 0.0
    expansion_y: float | None = None
    expansion_z: float | None = None
    young_y: float | None = None
    young_z: float | None = None
    poisson_yz: float | None = None
    poisson_zx: float | None = None
    shear_xy: float | None = None
    shear_yz: float | None = None
    shear_zx: float | None = None
    angle: float = 0.0

    def constants(self) -> dict[str, Any]:
        """Return what changes a solution: all but the yield strength and its source."""
        return {key: value for key, value in asdict(self).items() if not key.startswith("yield_")}

    @property
    def isotropic(self) -> bool:
        """Return whether the elasticity, not the expansion, is the same in all directions."""
        return all(getattr(self, name) is None for name in ORTHOTROPIC)

    @property
    def shear_modulus(self) -> float:
        """Return the shear modulus; `Unsuitable` where the material is orthotropic."""
        self._require_isotropic()
        return self.young / (2.0 * (1.0 + self.poisson))

    def kappa(self, kind: ProblemKind) -> float:
        """Return Kolosov's constant: plane strain near an edge of a solid or an axisymmetric body.

        `Unsuitable` where the material is orthotropic: its corners follow other equations.
        """
        self._require_isotropic()
        nu = self.poisson
        return (3.0 - nu) / (1.0 + nu) if kind == "plane stress" else 3.0 - 4.0 * nu

    def elasticity(self, kind: ProblemKind) -> np.ndarray:
        """Return D (4, 4), (6, 6) of a solid, (1, 1) of a rod: stress from elastic strain.

        Rows and columns of strains that follow from the others (zz of plane stress) are zero.
        """
        stressed = np.ix_(STRESSED[kind], STRESSED[kind])
        inverse = np.linalg.inv(self.compliance("solid")[stressed])
        matrix = np.zeros((COMPONENTS[kind], COMPONENTS[kind]))
        matrix[stressed] = 0.5 * (inverse + inverse.T)
        return matrix

    def compliance(self, kind: ProblemKind) -> np.ndarray:
        """Return S of the size of D: elastic strain from stress; s.S.s is twice the energy density."""
        turn = _strain_turn(self.angle)
        count = COMPONENTS[kind]
        turned: np.ndarray = turn @ self._own_compliance() @ turn.T
        return turned[:count, :count]

    def thermal_strain(self, kind: ProblemKind) -> np.ndarray:
        """Return the free strain of one kelvin, (4,), (6,) or (1,): stress = D (strain - free strain).

        In plane strain the strain zz is zero and the free strain zz is not: D makes the stress zz of it,
        and its share in the plane.
        """
        own = np.zeros(6)
        own[:3] = self.expansion, _or(self.expansion_y, self.expansion), _or(self.expansion_z, self.expansion)
        return (_strain_turn(self.angle) @ own)[: COMPONENTS[kind]]

    def _own_compliance(self) -> np.ndarray:
        """Return S (6, 6) along the material's own axes."""
        shear = self.young / (2.0 * (1.0 + self.poisson))
        young_y, young_z = _or(self.young_y, self.young), _or(self.young_z, self.young)
        shears = [_or(value, shear) for value in (self.shear_xy, self.shear_yz, self.shear_zx)]
        matrix = np.diag([1.0 / modulus for modulus in (self.young, young_y, young_z, *shears)])
        matrix[0, 1] = matrix[1, 0] = -self.poisson / self.young
        matrix[1, 2] = matrix[2, 1] = -_or(self.poisson_yz, self.poisson) / young_y
        matrix[2, 0] = matrix[0, 2] = -_or(self.poisson_zx, self.poisson) / young_z
        return matrix

    def _require_isotropic(self) -> None:
        right = "an isotropic one: the closed form needs one Young's modulus and one Poisson's ratio"
        require((self.isotropic, "material", "orthotropic", right))


def material(
    *,
    young: Annotated[PositiveStress, "Young's modulus, along x of the material"] = 210000.0,
    poisson: Annotated[Ratio, "Poisson's ratio, of y to x under stress xx; -1 … 0.5 where isotropic"] = 0.3,
    yield_strength: Annotated[PositiveStress, "yield strength, for the check of the linear range"]
    | None = None,
    yield_source: Annotated[str, "where the yield strength stands"] = "",
    expansion: Annotated[Expansion, "thermal expansion, along x of the material"] = 1.2e-5,
    expansion_y: Annotated[Expansion | None, "thermal expansion along y, where another"] = None,
    expansion_z: Annotated[Expansion | None, "thermal expansion along z, where another"] = None,
    young_y: Annotated[PositiveStress | None, "Young's modulus along y, where orthotropic"] = None,
    young_z: Annotated[PositiveStress | None, "Young's modulus along z, where orthotropic"] = None,
    poisson_yz: Annotated[Ratio | None, "Poisson's ratio, of z to y under stress yy"] = None,
    poisson_zx: Annotated[Ratio | None, "Poisson's ratio, of x to z under stress zz"] = None,
    shear_xy: Annotated[PositiveStress | None, "shear modulus in xy, where orthotropic"] = None,
    shear_yz: Annotated[PositiveStress | None, "shear modulus in yz, where orthotropic"] = None,
    shear_zx: Annotated[PositiveStress | None, "shear modulus in zx, where orthotropic"] = None,
    angle: Annotated[Degrees, "angle of the material's x axis, from x to y"] = 0.0,
) -> Material:
    """Return the material of a study's table; the defaults are structural steel.

    `Unsuitable` where a constant of an orthotropic material is missing, some strain would have no positive
    energy, or an orthotropic material has a yield strength: von Mises stress does not apply to it.
    """
    found = Material(
        young, poisson, yield_strength, yield_source, expansion, expansion_y, expansion_z,
        young_y, young_z, poisson_yz, poisson_zx, shear_xy, shear_yz, shear_zx, angle,
    )  # fmt: skip
    if found.isotropic:
        require((-1.0 < poisson < 0.5, "poisson", poisson, "-1 < value < 0.5"))
    else:
        _require_orthotropic(found)
    return found


def material_names(function: Callable[..., Any]) -> tuple[str, ...]:
    """Return the parameters of a model that are materials; each is a table of the study."""
    return tuple(
        name for name, hint in get_type_hints(function).items() if hint is Material and name != "return"
    )


def _require_orthotropic(found: Material) -> None:
    """Raise `Unsuitable` where constants are missing or the compliance is not positive definite."""
    all_of = f"a value: an orthotropic material has all of {', '.join(ORTHOTROPIC)}"
    none = "no value: the von Mises stress does not apply to an orthotropic material"
    require(
        (found.yield_strength is None, "yield_strength", found.yield_strength, none),
        *((getattr(found, key) is not None, key, None, all_of) for key in ORTHOTROPIC),
    )
    own = found._own_compliance()[:3, :3]
    scale = np.sqrt(np.diag(own))
    coupling = own / np.outer(scale, scale)
    pairs = (
        (0, 1, "poisson", "young", "young_y"),
        (1, 2, "poisson_yz", "young_y", "young_z"),
        (2, 0, "poisson_zx", "young_z", "young"),
    )
    require(
        *(
            (
                abs(coupling[i, j]) < 1.0,
                key,
                getattr(found, key),
                f"a size below √({one}/{other}) = {scale[j] / scale[i]:.4g}",
            )
            for i, j, key, one, other in pairs
        )
    )
    energy = "smaller poisson, poisson_yz, poisson_zx: together some strain has no positive energy"
    require((float(np.linalg.det(coupling)) > 0.0, "poisson", found.poisson, energy))


def _strain_turn(angle: float) -> np.ndarray:
    """Return T (6, 6): strains along x, y, z from those along axes turned about z by degrees."""
    c, s = np.cos(np.radians(angle)), np.sin(np.radians(angle))
    turn = np.eye(6)
    turn[:2, :2] = [[c * c, s * s], [s * s, c * c]]
    turn[:2, 3] = -c * s, c * s
    turn[3, :2] = 2.0 * c * s, -2.0 * c * s
    turn[3, 3] = c * c - s * s
    turn[4:, 4:] = [[c, s], [-s, c]]
    return turn


def _or(value: float | None, otherwise: float) -> float:
    return otherwise if value is None else value
