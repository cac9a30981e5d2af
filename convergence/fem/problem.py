"""What is to be solved, without a mesh: part, material, supports, loads and, where known, the exact field."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field

import numpy as np

from convergence.fem.material import Material, ProblemKind
from convergence.fem.part import Part

FieldFunction = Callable[[np.ndarray, np.ndarray], np.ndarray]
Prescribed = float | FieldFunction


@dataclass(frozen=True)
class Support:
    """Displacements held on a boundary or at a named point; None leaves a component free.

    A value is a number or a function of (x, y) that returns that component.
    """

    name: str
    x: Prescribed | None = None
    y: Prescribed | None = None
    boundary: str | None = None
    point: str | None = None


@dataclass(frozen=True)
class Traction:
    """Force per area on a boundary: a vector, or a function of (x, y) returning (2, ...)."""

    boundary: str
    value: tuple[float, float] | FieldFunction


@dataclass(frozen=True)
class Pressure:
    """Pressure on a boundary, positive against the outward normal."""

    boundary: str
    value: float


@dataclass(frozen=True)
class BearingLoad:
    """A force passed by a pin: pressure with a cosine distribution over the half of the hole it presses on.

    Scaled on every mesh so that its resultant is the force exactly (common practice).
    """

    boundary: str
    force: tuple[float, float]
    centre: tuple[float, float]


@dataclass(frozen=True)
class BodyForce:
    """Force per volume in a region (every region where None): a vector, or a function of (x, y)."""

    value: tuple[float, float] | FieldFunction
    region: str | None = None


Load = Traction | Pressure | BearingLoad | BodyForce


@dataclass(frozen=True)
class Exact:
    """A closed-form solution: displacement (2, ...) and stress xx, yy, zz, xy (4, ...) of (x, y)."""

    displacement: FieldFunction
    stress: FieldFunction
    energy: float | None = None


@dataclass(frozen=True)
class Problem:
    """A linear static problem in a plane. `materials` by region of the part.

    Axisymmetric, x is the radius and y the axis; loads and energies are those of the whole ring, and the
    stress zz is the hoop stress.
    """

    title: str
    part: Part
    materials: Mapping[str, Material]
    supports: tuple[Support, ...]
    loads: tuple[Load, ...]
    kind: ProblemKind = "plane stress"
    thickness: float = 1.0
    exact: Exact | None = field(default=None, compare=False)

    def depth(self, x: np.ndarray) -> np.ndarray:
        """Return the extent out of the plane at x: the thickness, or the circumference 2πx."""
        if self.kind == "axisymmetric":
            return np.asarray(2.0 * np.pi * x)
        return np.full_like(x, self.thickness)

    def names(self) -> dict[str, tuple[str, ...]]:
        """Return the names a quantity may use, by what they name."""
        return {
            "boundary": tuple(self.part.boundaries),
            "support": tuple(support.name for support in self.supports),
            "point": tuple(self.part.points),
            "region": tuple(self.part.regions) or ("body",),
        }
