"""A drawn part with its loads and supports, and the numbers to read from its solutions.

The drawing is a face (plane, ring) or a solid of Open CASCADE with named edges, faces and regions, as the
mesher's package brings it. Needed only to build the bank.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any, Literal

from netgen.occ import WorkPlane

from convergence.results import Kind

Way = Literal["nodal", "direct", "gauss"]
DrawnKind = Literal["plane_stress", "plane_strain", "axisymmetric", "solid"]


@dataclass(frozen=True)
class Elastic:
    """Young's modulus in MPa, Poisson's ratio, thermal expansion in 1/K."""

    young: float = 210_000.0
    poisson: float = 0.3
    expansion: float = 0.0


@dataclass(frozen=True)
class Reading:
    """One number to read: `measure` names a function of `readings`, `arguments` are its keywords.

    A singular reading has no limit. `label` is unique in its case.
    """

    label: str
    kind: Kind
    measure: str
    arguments: Mapping[str, Any] = field(default_factory=dict)
    singular: bool = False


@dataclass(frozen=True)
class DrawnCase:
    """A boundary value problem; mm, N, MPa. Rings turn about the y axis, x is the radius.

    shape: the drawing. materials: by the name of the region ("" is all). held: boundary -> prescribed
    displacement by component, {"left": {"x": 0.0}}. tractions: boundary -> vector (a tuple of numbers or
    of NGSolve coefficient functions). body: force per volume, temperature: change in K (number or
    coefficient function). corners: places of singular points, edges: names of singular edges of a solid;
    there the reference mesh is
    refined, and its peaks are not looked for in the cells that touch such an edge.
    size: cell size of the coarsest mesh. exponent: weakest corner exponent, None where there is none.
    Whatever is drawn along `curves` of the solution's data (load edges, kinks) is not seen by the meshes
    unless it is drawn as an edge: both occur in practice.
    """

    name: str
    kind: DrawnKind
    shape: Any
    size: float
    held: Mapping[str, Mapping[str, float]]
    readings: tuple[Reading, ...]
    tractions: Mapping[str, tuple[Any, ...]] = field(default_factory=dict)
    materials: Mapping[str, Elastic] = field(default_factory=lambda: {"": Elastic()})
    body: tuple[Any, ...] | None = None
    temperature: Any = None
    corners: tuple[tuple[float, ...], ...] = ()
    edges: tuple[str, ...] = ()
    exponent: float | None = None
    levels: int = 9

    @property
    def dimension(self) -> int:
        return 3 if self.kind == "solid" else 2


def name_edges(shape: Any, names: Mapping[str, tuple[float, float]]) -> None:
    """Name the edges of a face that are nearest to places."""
    for name, place in names.items():
        shape.edges.Nearest((*place, 0.0)).name = name


def name_sides(solid: Any, rest: str | None = None) -> None:
    """Name the faces in a plane of the solid's box "min_x" to "max_z"; all others get the name `rest`."""
    low, high = solid.bounding_box
    for face in solid.faces:
        if rest is not None:
            face.name = rest
        centre = (face.center.x, face.center.y, face.center.z)
        for axis, place, lowest, highest in zip("xyz", centre, low, high, strict=True):
            for end, where in (("min", lowest), ("max", highest)):
                if abs(place - where) < 1e-6:
                    face.name = f"{end}_{axis}"


def outline(*corners: tuple[float, float, str]) -> Any:
    """Return the face within straight lines through corners, counter-clockwise.

    A corner carries the name of the line that leads to it.
    """
    pen = WorkPlane().MoveTo(*corners[-1][:2])
    for x, y, name in corners:
        pen.LineTo(x, y, name)
    return pen.Face()
