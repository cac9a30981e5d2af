"""Numbers with a dimension: Length, Stress, Force, Energy ... and the units they are shown in.

A parameter of a model or a quantity is annotated with one of these; the annotation is what a study
file is checked against, what a default is converted by and what a result is labelled with.
"""

from dataclasses import dataclass
from typing import Annotated, Any, get_args, get_origin, get_type_hints

from convergence.errors import Fault, InputError, nearest


@dataclass(frozen=True)
class Dimension:
    """A power product of length and force."""

    name: str
    length: float
    force: int


@dataclass(frozen=True)
class Bounds:
    """Allowed values: low < value < high, ends included where said."""

    low: float = float("-inf")
    high: float = float("inf")
    closed: bool = False

    def admits(self, value: float) -> bool:
        if self.closed:
            return self.low <= value <= self.high
        return self.low < value < self.high

    def __str__(self) -> str:
        less = "<=" if self.closed else "<"
        low = "" if self.low == float("-inf") else f"{self.low:g} {less} "
        high = "" if self.high == float("inf") else f" {less} {self.high:g}"
        return f"{low}value{high}"


LENGTH = Dimension("length", 1, 0)
STRESS = Dimension("stress", -2, 1)
FORCE = Dimension("force", 0, 1)
MOMENT = Dimension("moment", 1, 1)
ENERGY = Dimension("energy", 1, 1)
STRESS_INTENSITY = Dimension("stress intensity", -1.5, 1)
FORCE_PER_VOLUME = Dimension("force per volume", -3, 1)
AREA = Dimension("area", 2, 0)
RATIO = Dimension("ratio", 0, 0)
ANGLE = Dimension("angle", 0, 0)
TEMPERATURE = Dimension("temperature", 0, 0)
EXPANSION = Dimension("expansion", 0, 0)

# units that are the same in every system
ALIKE = {RATIO: "", ANGLE: "°", TEMPERATURE: "K", EXPANSION: "1/K"}

POSITIVE = Bounds(low=0.0)

Length = Annotated[float, LENGTH]
PositiveLength = Annotated[float, LENGTH, POSITIVE]
Stress = Annotated[float, STRESS]
PositiveStress = Annotated[float, STRESS, POSITIVE]
Force = Annotated[float, FORCE]
Moment = Annotated[float, MOMENT]
Energy = Annotated[float, ENERGY]
StressIntensity = Annotated[float, STRESS_INTENSITY]
ForcePerVolume = Annotated[float, FORCE_PER_VOLUME]
Ratio = Annotated[float, RATIO]
Degrees = Annotated[float, ANGLE]
Temperature = Annotated[float, TEMPERATURE]
Expansion = Annotated[float, EXPANSION]
Direction = Annotated[tuple[float, float] | tuple[float, float, float], RATIO]
Point = Annotated[tuple[float, float] | tuple[float, float, float], LENGTH]


@dataclass(frozen=True)
class OnPart:
    """A place that must lie on the part."""


PartPoint = Annotated[tuple[float, float] | tuple[float, float, float], LENGTH, OnPart()]


@dataclass(frozen=True)
class Names:
    """A text that names something of the problem: a boundary, support, point or region."""

    kind: str


BoundaryName = Annotated[str, Names("boundary")]
SupportName = Annotated[str, Names("support")]
PointName = Annotated[str, Names("point")]
RegionName = Annotated[str, Names("region")]


@dataclass(frozen=True)
class Located:
    """A value and the place where it was found, in the part's coordinates, as many as it has."""

    value: float
    x: float
    y: float | None = None
    z: float | None = None


@dataclass(frozen=True)
class Units:
    """A consistent system: names of length, force and stress, and their size in mm and N."""

    length: str
    force: str
    stress: str
    millimetres: float
    newtons: float

    def label(self, dimension: Dimension) -> str:
        """Return the unit of a dimension as it is printed, e.g. "N mm"."""
        known = {LENGTH: self.length, STRESS: self.stress, FORCE: self.force, **ALIKE}
        if dimension in known:
            return known[dimension]
        if dimension == STRESS_INTENSITY:
            return f"{self.stress} √{self.length}" if self.length else ""
        if dimension.force == 0:
            return f"{self.length}{dimension.length}" if self.length else ""
        if dimension.length == 1:
            return f"{self.force} {self.length}".strip()
        return f"{self.force}/{self.length}{-dimension.length}" if self.force else ""

    def from_millimetres(self, value: float, dimension: Dimension) -> float:
        """Convert a default, kept in mm and N, to this system."""
        factor = self.millimetres**dimension.length * self.newtons**dimension.force
        return value if factor == 1.0 else value / factor


SYSTEMS = {
    "mm, N, MPa": Units("mm", "N", "MPa", 1.0, 1.0),
    "m, N, Pa": Units("m", "N", "Pa", 1000.0, 1.0),
    "m, kN, kPa": Units("m", "kN", "kPa", 1000.0, 1000.0),
    "in, lbf, psi": Units("in", "lbf", "psi", 25.4, 4.4482216152605),
    "consistent": Units("", "", "", 1.0, 1.0),
}


def system(name: str, where: str) -> Units:
    """Return the named unit system; `InputError` names the nearest one."""
    if name not in SYSTEMS:
        raise InputError([Fault(where, "unknown unit system", nearest(name, SYSTEMS), name)])
    return SYSTEMS[name]


def dimension_of(annotation: Any) -> Dimension | None:
    """Return the dimension an annotation carries, or None."""
    if get_origin(annotation) is Annotated:
        for note in get_args(annotation)[1:]:
            if isinstance(note, Dimension):
                return note
    for part in get_args(annotation):
        found = dimension_of(part)
        if found:
            return found
    return None


def returned_dimension(function: Any) -> Dimension | None:
    """Return the dimension of what a function returns."""
    return dimension_of(get_type_hints(function, include_extras=True).get("return"))
