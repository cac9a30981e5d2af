"""Mean stress over the volume of a region or of a ball around a point, of the elements' own stress.

Component by component before invariants are formed. In a region: order p + 1 and not 2p, as the weight breaks
off at its edges. Around a point: the smooth weight (1 − r²/R²)³ makes it of order 2p (Babuska & Miller 1984,
Int. J. Numer. Meth. Engng 20:1085); a part of the ball outside the part is left out.
"""

from collections.abc import Mapping
from typing import Annotated, Any

import numpy as np

from convergence.dimensions import Point, PointName, PositiveLength, RegionName, Stress
from convergence.errors import require
from convergence.fem.geometry import at_rule
from convergence.fem.solution import Solution
from convergence.fem.strain import volumes
from convergence.fem.stress import Component, stress_at
from convergence.fem.stress import component as component_of
from convergence.quantities._place import place_of
from convergence.results import Kind

KIND: Kind = "point_stress"

CHUNK = 50_000


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return p + 1 in a region or the whole part, 2p around a point."""
    return float(degree + 1 if arguments.get("near") is None else 2 * degree)


def region_stress(
    solution: Solution,
    *,
    component: Annotated[Component, "component, principal or von Mises stress"] = "von_mises",
    region: Annotated[RegionName | None, "region to average over, all of the part if not given"] = None,
    near: Annotated[Point | PointName | None, "average around this point, within `radius`"] = None,
    radius: Annotated[PositiveLength | None, "distance from `near` where the weight ends"] = None,
) -> Stress:
    """Unsuitable where `near` and `radius` are not given together, or nothing lies within."""
    together = "`near` and `radius` together, or neither"
    require(((near is None) == (radius is None), "radius", radius, together))
    mesh = solution.mesh
    cells = np.arange(mesh.cells) if region is None else mesh.regions[region]
    total, volume = 0.0, 0.0
    for start in range(0, len(cells), CHUNK):
        chosen = cells[start : start + CHUNK]
        at = at_rule(mesh, 2 * mesh.degree + 2, chosen)
        weights = volumes(solution.problem, at)
        if near is not None and radius is not None:
            centre = np.array(place_of(mesh.part, near))[:, None, None]
            weights = weights * np.maximum(0.0, 1.0 - ((at.x - centre) ** 2).sum(axis=0) / radius**2) ** 3
        total = total + np.einsum("smq,mq->s", stress_at(solution, at, chosen), weights)
        volume += float(weights.sum())
    require((volume > 0.0, "radius", radius, "a radius that reaches into the part"))
    return float(component_of(np.asarray(total / volume), component))
