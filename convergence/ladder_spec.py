"""The ladder a study asks for: sizes from coarse to fine, cell shape and degree."""

from dataclasses import dataclass, replace
from typing import Annotated, Any, Literal

from convergence.dimensions import RATIO, Bounds, PositiveLength
from convergence.errors import require

Shape = Literal["line", "triangle", "quadrilateral", "tetrahedron", "hexahedron", "wedge"]
SHAPES: dict[int, tuple[Shape, ...]] = {
    1: ("line",),
    2: ("triangle", "quadrilateral"),
    3: ("tetrahedron", "hexahedron", "wedge"),
}
Formulation = Literal["displacement", "mean dilatation"]
Divisions = Annotated[int, Bounds(1, 1000, closed=True)]
Levels = Annotated[int, Bounds(1, 12, closed=True)]
RefinementRatio = Annotated[float, RATIO, Bounds(1.0, 10.0)]


@dataclass(frozen=True)
class LadderSpec:
    """Exactly one of `size` and `divisions` is given; each level is finer by `ratio`."""

    size: float | None
    divisions: int | None
    ratio: float
    levels: int
    shape: Shape | None
    degree: int
    formulation: Formulation

    def with_companion(self, *, degree: Literal[1, 2] | None, shape: Shape | None) -> "LadderSpec":
        """Return the ladder of another degree, other cells or both. Unsuitable where it would be the same."""
        found = replace(self, degree=degree or self.degree, shape=shape or self.shape)
        key, same = ("degree", degree) if shape is None else ("shape", shape)
        require((found != self, key, same, "another degree or other cells than [ladder] has"))
        return found

    def of_dimension(self, dimension: int) -> "LadderSpec":
        """Return the ladder with cells that fill the dimension. Unsuitable where its own do not."""
        shapes = SHAPES[dimension]
        fits = self.shape is None or self.shape in shapes
        require(
            (fits, "shape", self.shape, f"one of {', '.join(shapes)}: the model has {dimension} dimensions")
        )
        return self if self.shape else replace(self, shape=shapes[0])


def ladder(
    *,
    size: Annotated[PositiveLength | None, "largest cell edge on the coarsest level"] = None,
    divisions: Annotated[Divisions | None, "cells along the shortest edges on the coarsest level"] = None,
    ratio: Annotated[RefinementRatio, "how much finer each level is"] = 2.0,
    levels: Annotated[Levels, "number of levels; four or more tell most"] = 5,
    shape: Annotated[Shape | None, "shape of the cells; triangle or tetrahedron where none is given"] = None,
    degree: Annotated[Literal[1, 2], "polynomial degree of the elements"] = 2,
    formulation: Annotated[
        Formulation, "mean dilatation does not lock at Poisson's ratio near 0.5"
    ] = "displacement",
) -> LadderSpec:
    """Return the ladder of a study's [ladder]; two divisions where neither size nor divisions is given."""
    require((size is None or divisions is None, "divisions", divisions, "give either size or divisions"))
    if size is None and divisions is None:
        divisions = 2
    return LadderSpec(size, divisions, ratio, levels, shape, degree, formulation)


def companion(
    *,
    degree: Annotated[Literal[1, 2] | None, "polynomial degree, that of [ladder] if not given"] = None,
    shape: Annotated[Shape | None, "shape of the cells, that of [ladder] if not given"] = None,
) -> dict[str, Any]:
    """Return how a study's [companion], a second ladder of the same model, differs from its [ladder]."""
    return {"degree": degree, "shape": shape}
