"""Strain energy of the whole part or of a region.

Order 2p on a smooth solution, 2 min(p, λ) with a corner of exponent λ (Szabó & Babuška 1991, ch. 10); of a
region p + 1, as the weight breaks off at its edges.
"""

from collections.abc import Mapping
from typing import Annotated, Any

from convergence.corner import Corner
from convergence.dimensions import Energy, RegionName
from convergence.fem.problem import AnyPart, Problem
from convergence.fem.recovery import element_energy
from convergence.fem.solution import Solution
from convergence.quantities._side import is_rigid, rises
from convergence.results import Kind

KIND: Kind = "energy"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p of the part, p + 1 of a region."""
    return float(2 * degree if arguments.get("region") is None else degree + 1)


def covers(part: AnyPart, corner: Corner, arguments: Mapping[str, Any]) -> bool:
    """Return whether a force acts on a point, of the region where one is given: no limit then."""
    region = arguments.get("region")
    inside = region is None or region not in part.regions or part.region_points(region) & set(corner.points)
    return corner.exponent <= 0.0 and bool(inside)


def side(problem: Problem, arguments: Mapping[str, Any]) -> int:
    """Return 1 where the limit is never below the value: loads alone on supports that hold still."""
    return int(arguments.get("region") is None and is_rigid(problem) and rises(problem))


def strain_energy(
    solution: Solution,
    *,
    region: Annotated[RegionName | None, "region, all of the part if not given"] = None,
) -> Energy:
    """Elastic energy of the material, half of stress times strain over the volume."""
    if region is None:
        return solution.energy
    return 0.5 * float(element_energy(solution, solution.mesh.regions[region]).sum())
