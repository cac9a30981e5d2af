"""Rotation of a boundary, or of the material at a point; rotations are small.

Of a boundary: the turn of the rigid motion that fits its displacement best, weighted by area: a linear
functional with a smooth weight, order 2p (Babuska & Miller 1984, Int. J. Numer. Meth. Engng 20:1085). At a
point: the skew part of the displacement gradient, averaged over the cells that meet there, order p.
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

import numpy as np

from convergence.corner import Corner
from convergence.dimensions import BoundaryName, Degrees, PartPoint, PointName
from convergence.errors import require
from convergence.fem.facets import facet_bases
from convergence.fem.geometry import geometry, interpolate
from convergence.fem.loads import rigid_motions
from convergence.fem.location import locate
from convergence.fem.problem import AnyPart
from convergence.fem.solution import Solution
from convergence.fem.stress import gradient_at
from convergence.quantities._place import place_of
from convergence.results import Kind

KIND: Kind = "rotation"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p of a boundary, p at a point."""
    return float(degree if arguments.get("boundary") is None else 2 * degree)


def covers(part: AnyPart, corner: Corner, arguments: Mapping[str, Any]) -> bool:
    """Return whether the rotation at a point is read on this corner, where gradients have no limit."""
    at = arguments.get("at")
    return at is not None and corner.distance(place_of(part, at)) <= 1e-9 * part.size


def rotation(
    solution: Solution,
    *,
    boundary: Annotated[BoundaryName | None, "boundary that turns"] = None,
    at: Annotated[PartPoint | PointName | None, "point instead of a boundary, by name or coordinates"] = None,
    component: Annotated[Literal["x", "y", "z"], "axis of the rotation, z in a plane"] = "z",
) -> Degrees:
    """Counter-clockwise about the axis. Unsuitable where boundary and point are both given, or neither."""
    dimension = solution.mesh.dimension
    require(
        ((boundary is None) != (at is None), "at", at, "either `boundary` or `at`"),
        (dimension > 1, "measure", "rotation", "a plane part or a solid"),
        (dimension != 2 or component == "z", "component", component, "z: the only axis in a plane"),
    )
    turns = _fitted(solution, boundary) if boundary is not None else _at_point(solution, at)
    return float(np.degrees(turns["xyz".index(component) if dimension == 3 else 0]))


def _at_point(solution: Solution, at: Any) -> np.ndarray:
    """Return half the curl of the displacement at a place, (1,) or (3,)."""
    cells, local = locate(solution.mesh, place_of(solution.mesh.part, at))
    g = gradient_at(solution, geometry(solution.mesh, local, cells), cells)[..., 0].mean(axis=2)
    pairs = ((1, 0),) if len(g) == 2 else ((2, 1), (0, 2), (1, 0))
    return np.array([0.5 * (g[i, j] - g[j, i]) for i, j in pairs])


def _fitted(solution: Solution, boundary: str) -> np.ndarray:
    """Return the turns of the rigid motion nearest to the displacement of a boundary, by least squares."""
    mesh = solution.mesh
    bases = list(facet_bases(mesh, boundary, 2 * mesh.degree + 2))
    weights = [facets.dx * solution.problem.depth(facets.places[0]) for facets in bases]
    pairs = list(zip(bases, weights, strict=True))
    area = sum(float(weight.sum()) for weight in weights)
    centre = sum((f.places * w).sum(axis=(1, 2)) for f, w in pairs) / area
    motions = [rigid_motions(facets.places - centre[:, None, None]) for facets in bases]
    size = len(motions[0])
    gram, moved = np.zeros((size, size)), np.zeros(size)
    for (facets, weight), motion in zip(pairs, motions, strict=True):
        u = interpolate(solution.displacement[:, facets.nodes], facets.shapes)
        gram += np.einsum("acfq,bcfq,fq->ab", motion, motion, weight)
        moved += np.einsum("acfq,cfq,fq->a", motion, u, weight)
    return np.asarray(np.linalg.lstsq(gram, moved, rcond=1e-12)[0][mesh.dimension :])
