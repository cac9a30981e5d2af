"""On which side of the value on any mesh an energy has its limit.

Displacements of a mesh are among those that the part may take, so the potential energy of a mesh is never
below its limit. With loads alone, on supports that hold still, the work f·u of the loads is twice its
negative: never above its limit (Szabó & Babuška 1991, ch. 2; Clapeyron's theorem). Strictly so on
meshes of the exact shape; of some 3,000 such energies of the bank, of degree 1 and 2 and many with curved
boundaries, two were on the wrong side, on coarse meshes of a sphere.
"""

from convergence.fem.loads import TemperatureRise
from convergence.fem.problem import ElasticSupport, Problem, Support


def rises(problem: Problem) -> bool:
    """Return whether the work of the loads can only rise to its limit."""
    warmed = any(isinstance(load, TemperatureRise) for load in problem.loads)
    return not warmed and all(value == 0.0 for value in _prescribed(problem))


def falls(problem: Problem) -> bool:
    """Return whether the potential energy can only fall to its limit: meshes follow constants only."""
    return all(isinstance(value, (int, float)) for value in _prescribed(problem))


def is_rigid(problem: Problem) -> bool:
    """Return whether no support gives way, and takes energy."""
    return not any(isinstance(support, ElasticSupport) for support in problem.supports)


def _prescribed(problem: Problem) -> list[object]:
    held = [support for support in problem.supports if isinstance(support, Support)]
    values = [value for one in held for value in (one.x, one.y, one.z, one.normal)]
    return [value for value in values if value is not None]
