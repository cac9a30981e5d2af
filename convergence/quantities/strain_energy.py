"""Strain energy of the whole part.

Order 2p on a smooth solution, 2 min(p, λ) with a corner of exponent λ (Szabó & Babuška 1991, ch. 10).
"""

from collections.abc import Mapping
from typing import Any

from convergence.dimensions import Energy
from convergence.fem.solution import Solution
from convergence.results import Kind

KIND: Kind = "energy"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p."""
    return 2.0 * degree


def strain_energy(solution: Solution) -> Energy:
    """½ u·K u."""
    return solution.energy
