"""A displacement field that another program computed, as a Solution: every quantity can be read from it.

The equations are not solved again and no stiffness is assembled. With supports and loads given, reactions,
energy and work follow from the nodal forces of the material under this displacement.
"""

import numpy as np

from convergence.fem.assembly import foundation
from convergence.fem.held import Held, held_by
from convergence.fem.load_vector import load_vector, thermal_load
from convergence.fem.mesh import Mesh
from convergence.fem.problem import ElasticSupport, Problem
from convergence.fem.solution import Solution
from convergence.fem.strain import is_heated


def field_solution(problem: Problem, mesh: Mesh, displacement: np.ndarray) -> Solution:
    """Return the solution with a displacement (D, nodes) in the order of the mesh's nodes.

    A problem without supports is taken as it is; SolvingError where supports are given that leave the part
    loose.
    """
    nothing = np.array([], dtype=int)
    held = held_by(problem, mesh) if problem.supports else Held(nothing, nothing.astype(float), {}, None)
    springs = {
        s.name: foundation(problem, mesh, s) for s in problem.supports if isinstance(s, ElasticSupport)
    }
    thermal, energy = thermal_load(problem, mesh) if is_heated(problem) else (None, 0.0)
    load, unknowns = load_vector(problem, mesh), np.ascontiguousarray(displacement.T).ravel()
    return Solution(problem, mesh, None, load, unknowns, held, springs, thermal, energy)


def imbalance(solution: Solution) -> dict[str, float]:
    """Return how far a field is from solving the equations of its problem, as shares.

    `forces`: nodal forces left over away from the supports, over all nodal forces (Euclidean norms);
    `resultant`: loads and reactions that miss each other, over the loads; `energy`: energy against work.
    Another program may integrate or formulate its cells otherwise: then none of them is zero.
    """
    left = solution.internal - solution.load - solution.reactions
    if solution.thermal is not None:
        scale = np.linalg.norm(solution.thermal) + np.linalg.norm(solution.load)
    else:
        scale = np.linalg.norm(solution.load) + np.linalg.norm(solution.reactions)
    tiny = float(np.finfo(float).tiny)
    dimension, loads = solution.mesh.dimension, solution.load if np.any(solution.load) else solution.reactions
    missing = left.reshape(-1, dimension).sum(axis=0)
    size = np.linalg.norm(loads.reshape(-1, dimension), axis=1).sum()
    energy = solution.quadratic_energy
    return {
        "forces": float(np.linalg.norm(left)) / max(float(scale), tiny),
        "resultant": float(np.linalg.norm(missing)) / max(float(size), tiny),
        "energy": abs(energy - solution.work) / max(abs(energy), tiny),
    }
