"""Potential energy: strain energy and that of elastic supports, less the work f·u of the loads.

It falls to its limit on nested meshes whose cells can follow the prescribed displacements. Order 2p on a
smooth solution, 2 min(p, λ) with a corner of exponent λ (Szabó & Babuška 1991, ch. 10).
"""

from collections.abc import Mapping
from typing import Any

from convergence.corner import Corner
from convergence.dimensions import Energy
from convergence.fem.problem import AnyPart, Problem
from convergence.fem.solution import Solution
from convergence.quantities._side import falls
from convergence.results import Kind

KIND: Kind = "energy"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p."""
    return 2.0 * degree


def covers(part: AnyPart, corner: Corner, arguments: Mapping[str, Any]) -> bool:
    """Return whether a force acts on a point, which leaves the energy without a limit."""
    return corner.exponent <= 0.0


def side(problem: Problem, arguments: Mapping[str, Any]) -> int:
    """Return -1 where the limit is never above the value: meshes follow what supports prescribe."""
    return -int(falls(problem))


def potential_energy(solution: Solution) -> Energy:
    """With a temperature, the strain energy is that of the elastic strain."""
    springs = 0.5 * float(solution.unknowns @ solution.springs)
    return solution.energy + springs - float(solution.load @ solution.unknowns)
