"""What acts on a solved part: the resultant of the load on each boundary or point and of each support."""

from dataclasses import replace

import numpy as np

from convergence.fem.facets import facet_bases
from convergence.fem.load_vector import load_vector
from convergence.fem.loads import BodyForce, Load, PointForce, TemperatureRise
from convergence.fem.mesh import Mesh
from convergence.fem.problem import ElasticSupport
from convergence.fem.solution import Solution
from convergence.fields import Forces

BODY = "whole part"  # what takes body forces: weight, rotation
Column = tuple[bool, str, str | None, np.ndarray]  # a load or not, its name, what takes it, nodal forces


def acting(solution: Solution) -> Forces:
    """Return the loads, then the supports; what has no nodal force at all is left out.

    The loads of one boundary are one, and so are all body forces; temperature has no resultant.
    """
    problem, mesh = solution.problem, solution.mesh
    columns = _loads(solution)
    for support in problem.supports:
        of = support.boundary if isinstance(support, ElasticSupport) else support.boundary or support.point
        columns.append((False, support.name, of, solution.reactions_of(support.name)))
    columns = [column for column in columns if np.any(column[-1])]
    dimension = mesh.dimension
    place, total = np.zeros((dimension, len(columns))), np.zeros((6, len(columns)))
    for number, (_, _, of, forces) in enumerate(columns):
        place[:, number] = _place(mesh, of, forces)
        sums = solution.resultant(forces, tuple(place[:, number]))
        total[: len(sums), number] = sums
    moments = 0 if problem.kind == "axisymmetric" else {1: 0, 2: 1, 3: 3}[dimension]
    return Forces(
        is_load=np.array([is_load for is_load, *_ in columns], dtype=bool),
        names=np.array([name for _, name, *_ in columns], dtype=str),
        place=place,
        force=total[:dimension],
        moment=total[dimension : dimension + moments],
    )


def _place(mesh: Mesh, of: str | None, forces: np.ndarray) -> np.ndarray:
    """Return the middle (D,) of a boundary, a point, or where the body forces are by their size."""
    if of is not None and of in mesh.facets:
        bases = list(facet_bases(mesh, of, 2 * mesh.degree))
        sums = sum(np.einsum("dfq,fq->d", facets.places, facets.dx) for facets in bases)
        return np.asarray(sums / sum(facets.dx.sum() for facets in bases))
    if of is not None and of in mesh.vertices:
        return np.asarray(mesh.nodes[:, mesh.vertices[of]])
    sizes = np.linalg.norm(forces.reshape(-1, mesh.dimension), axis=1)
    return np.asarray(mesh.nodes @ (sizes / sizes.sum()))


def _loads(solution: Solution) -> list[Column]:
    """Return the nodal forces of the loads by what takes them; the last ones are what the others leave."""
    problem = solution.problem
    found: dict[str | None, list[Load]] = {}
    for load in problem.loads:
        if isinstance(load, PointForce):
            found.setdefault(load.point, []).append(load)
        elif not isinstance(load, BodyForce | TemperatureRise):
            found.setdefault(load.boundary, []).append(load)
    names = [*found, *([None] if any(isinstance(load, BodyForce) for load in problem.loads) else [])]
    columns: list[Column] = []
    for name in names[:-1]:
        forces = load_vector(replace(problem, loads=tuple(found[name])), solution.mesh)
        columns.append((True, name or BODY, name, forces))
    for name in names[-1:]:
        left = solution.load - sum(forces for *_, forces in columns)
        columns.append((True, name or BODY, name, left))
    return columns
