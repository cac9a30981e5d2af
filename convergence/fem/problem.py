"""What is to be solved, without a mesh: part, materials, supports, loads and, if known, the exact field."""

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np

from convergence.fem.given_part import GivenPart
from convergence.fem.loads import FieldFunction, Load, values_at
from convergence.fem.material import Material, ProblemKind
from convergence.fem.part import Part
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_part import SolidPart

AnyPart = Part | SolidPart | RodPart | GivenPart
Prescribed = float | FieldFunction


@dataclass(frozen=True)
class Support:
    """Displacements held on a boundary or at a named point; None leaves a component free.

    A value is a number or a function of the coordinates that returns that component. `normal` holds the
    component along the outward normal of the boundary: a symmetry plane at any angle, a smooth guide.
    """

    name: str
    x: Prescribed | None = None
    y: Prescribed | None = None
    z: Prescribed | None = None
    normal: Prescribed | None = None
    boundary: str | None = None
    point: str | None = None


@dataclass(frozen=True)
class ElasticSupport:
    """An elastic foundation (Winkler): traction against the displacement, force per volume.

    `normal` acts along the normal of the boundary, `tangential` across it.
    """

    name: str
    boundary: str
    normal: float
    tangential: float = 0.0


@dataclass(frozen=True)
class Exact:
    """A closed-form solution: displacement (D, ...) and stress of the coordinates.

    The stress has xx, yy, zz, xy (4, ...) in a plane, yz, zx too (6, ...) in a solid, xx alone in a rod.
    """

    displacement: FieldFunction
    stress: FieldFunction
    energy: float | None = None


@dataclass(frozen=True)
class Problem:
    """A linear static problem. `materials` by region of the part.

    Axisymmetric, x is the radius and y the axis; loads and energies are those of the whole ring, and the
    stress zz is the hoop stress. Of a rod, `thickness` is the area of its section,
    which may be a function of x.
    """

    title: str
    part: AnyPart
    materials: Mapping[str, Material]
    supports: tuple[Support | ElasticSupport, ...]
    loads: tuple[Load, ...]
    kind: ProblemKind = "plane stress"
    thickness: float | FieldFunction = 1.0
    exact: Exact | None = field(default=None, compare=False)

    def depth(self, x: np.ndarray) -> np.ndarray:
        """Return the extent out of the mesh's dimensions: thickness, circumference 2πx, 1 for a solid."""
        if self.kind == "axisymmetric":
            return np.asarray(2.0 * np.pi * x)
        if self.kind == "solid":
            return np.ones_like(x)
        return values_at(self.thickness, x[None])

    def names(self) -> dict[str, tuple[str, ...]]:
        """Return the names a quantity may use, by what they name."""
        return {
            "boundary": tuple(self.part.boundaries),
            "support": tuple(support.name for support in self.supports),
            "point": tuple(self.part.points),
            "region": tuple(self.part.regions) or ("body",),
        }
