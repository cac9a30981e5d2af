"""Named points that take a force: stress and displacement there have no limit.

In a plane stress ~ 1/r and displacement ~ ln r (Flamant 1892), in a solid stress ~ 1/r² and displacement
~ 1/r (Kelvin 1848, Boussinesq 1885). A support at a point does the same by its reaction, unless that is zero.
Equilibrium says so where no other support can take the reaction's place, as where three components at points
hold a plane part still under balanced loads. Where it cannot tell, the reaction counts as not zero. An exact
field with a displacement at the support has no such reaction.
"""

from collections.abc import Iterator

import numpy as np

from convergence.fem.element import Shape
from convergence.fem.given_part import GivenPart
from convergence.fem.held import boundary_nodes, held_by
from convergence.fem.load_vector import load_vector
from convergence.fem.loads import PointForce, rigid_motions
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.problem import AnyPart, ElasticSupport, Problem, Support
from convergence.fem.strain import unknowns

NEGLIGIBLE = 1e-3  # of the sum of all nodal forces; more than a coarse mesh errs on curved boundaries
INDEPENDENT = 1e-8


def forced_points(problem: Problem) -> dict[str, str]:
    """Return "force" or "support" by the name of every point that takes a force."""
    supports = [s for s in problem.supports if isinstance(s, Support) and s.point is not None]
    asked = supports and problem.exact is None
    reacting = dict.fromkeys(_reacting(problem, supports), "support") if asked else {}
    return reacting | {load.point: "force" for load in problem.loads if isinstance(load, PointForce)}


def _reacting(problem: Problem, supports: list[Support]) -> Iterator[str]:
    """Yield the points whose reaction is not zero by equilibrium, from the forces on the coarsest mesh."""
    part = problem.part
    coarse = _coarsest(part)
    motions = rigid_motions(coarse.nodes / part.size)
    if problem.kind == "axisymmetric":
        motions = motions[1:2]  # a ring can only move along its axis
    vectors = motions.transpose(0, 2, 1).reshape(len(motions), -1)
    forces, held = load_vector(problem, coarse), held_by(problem, coarse)
    resultant, scale = vectors @ forces, NEGLIGIBLE * np.abs(forces).sum()
    turned = np.array([held.turned(vector) for vector in vectors])
    elastic = [
        vectors[:, unknowns(boundary_nodes(coarse, support.boundary)[None], coarse.dimension).ravel()]
        for support in problem.supports
        if isinstance(support, ElasticSupport)
    ]
    for support in supports:
        for number in held.by_support[support.name]:
            others = np.hstack([turned[:, held.numbers[held.numbers != number]], *elastic])
            alone = _beyond(others, turned[:, number])
            determined = np.linalg.norm(alone) > INDEPENDENT
            if not determined or abs(alone @ resultant) > scale * (alone @ alone):
                yield str(support.point)


def _coarsest(part: AnyPart) -> Mesh:
    """Return the coarsest mesh of a part."""
    if isinstance(part, GivenPart):
        return mesh(part, {0: 0}, shape=part.meshes[0].shape, degree=part.meshes[0].degree)
    shape: Shape = "hexahedron" if part.dimension == 3 else "quadrilateral"
    return mesh(part, part.divisions(size=None, divisions=1), shape=shape, degree=2)


def _beyond(others: np.ndarray, own: np.ndarray) -> np.ndarray:
    """Return what no combination of the other reactions (motions, n) can replace of one's own (motions,)."""
    basis, size, _ = np.linalg.svd(others, full_matrices=False)
    spanned = basis[:, size > INDEPENDENT * max(1.0, size.max(initial=0.0))]
    return np.asarray(own - spanned @ (spanned.T @ own))
