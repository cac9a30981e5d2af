"""Work of the loads at their final size, f·u: the compliance.

Temperature does no work in this sense. Twice the strain energy where supports and temperature do nothing
(Clapeyron's theorem). Order 2p on a smooth solution, 2 min(p, λ) with a corner of exponent λ (Szabó &
Babuška 1991, ch. 10).
"""

from collections.abc import Mapping
from dataclasses import replace
from typing import Annotated, Any

from convergence.corner import Corner
from convergence.dimensions import BoundaryName, Energy
from convergence.fem.load_vector import load_vector
from convergence.fem.problem import AnyPart, Problem
from convergence.fem.solution import Solution
from convergence.quantities._side import rises
from convergence.results import Kind

KIND: Kind = "energy"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p."""
    return 2.0 * degree


def covers(part: AnyPart, corner: Corner, arguments: Mapping[str, Any]) -> bool:
    """Return whether a force acts on a point, or a support at a point lets the part move without a limit."""
    return corner.exponent <= 0.0 and (arguments.get("boundary") is None or "support" in corner.sides)


def side(problem: Problem, arguments: Mapping[str, Any]) -> int:
    """Return 1 where the limit is never below the value: loads alone on supports that hold still."""
    return int(arguments.get("boundary") is None and rises(problem))


def work_of_load(
    solution: Solution,
    *,
    boundary: Annotated[BoundaryName | None, "only of the loads on this boundary"] = None,
) -> Energy:
    """Not the half: a force grown slowly from zero does half of this work."""
    forces = solution.load
    if boundary is not None:
        mine = tuple(load for load in solution.problem.loads if getattr(load, "boundary", None) == boundary)
        forces = load_vector(replace(solution.problem, loads=mine), solution.mesh)
    return float(forces @ solution.unknowns)
