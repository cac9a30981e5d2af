"""Consistent nodal forces of all loads."""

import numpy as np

from convergence.errors import SolvingError
from convergence.fem.facets import FacetBasis, facet_bases
from convergence.fem.geometry import at_rule
from convergence.fem.loads import (
    BearingLoad,
    BodyForce,
    Load,
    PointForce,
    Pressure,
    Resultant,
    TemperatureRise,
    Traction,
    rigid_motions,
    values_at,
)
from convergence.fem.mesh import Mesh
from convergence.fem.problem import Problem
from convergence.fem.strain import strain_operator, thermal_strain, unknowns, volumes

FACET_ORDER = {1: 19, 2: 19, 3: 9}  # by dimension: bearing loads begin and end inside facets
CHUNK = 20_000


def load_vector(problem: Problem, mesh: Mesh) -> np.ndarray:
    """Return the nodal forces of all loads but temperature, interleaved."""
    total = np.zeros(mesh.dimension * mesh.nodes.shape[1])
    for load in problem.loads:
        if not isinstance(load, TemperatureRise):
            total += _one_load(load, problem, mesh)
    return total


def thermal_load(problem: Problem, mesh: Mesh) -> tuple[np.ndarray, float]:
    """Return ∫ B'.D.e of the thermal strain e, and ½ ∫ e.D.e."""
    total, energy = np.zeros(mesh.dimension * mesh.nodes.shape[1]), 0.0
    for region, members in mesh.regions.items():
        elasticity = problem.materials[region].elasticity(problem.kind)
        for start in range(0, len(members), CHUNK):
            cells = members[start : start + CHUNK]
            at = at_rule(mesh, 2 * mesh.degree + 2, cells)
            strain = thermal_strain(problem, region, at.x)
            stress, weights = np.einsum("st,tmq->smq", elasticity, strain), volumes(problem, at)
            operator = strain_operator(problem, mesh, at, cells)
            forces = np.einsum("snmq,smq,mq->nm", operator, stress, weights, optimize=True)
            numbers = unknowns(mesh.cell_nodes[:, cells], mesh.dimension)
            total += np.bincount(numbers.ravel(), forces.ravel(), minlength=len(total))
            energy += 0.5 * float((strain * stress * weights).sum())
    return total, energy


def _one_load(load: Load, problem: Problem, mesh: Mesh) -> np.ndarray:
    if isinstance(load, BodyForce):
        return _body_load(load, problem, mesh)
    if isinstance(load, PointForce):
        return _point_load(load, mesh)
    total = np.zeros(mesh.dimension * mesh.nodes.shape[1])
    assert not isinstance(load, TemperatureRise)
    bases = list(facet_bases(mesh, load.boundary, FACET_ORDER[mesh.dimension]))
    weights = [facets.dx * problem.depth(facets.places[0]) for facets in bases]
    if isinstance(load, Resultant):
        motion = _linear_traction(load, bases, weights)
    for facets, weight in zip(bases, weights, strict=True):
        if isinstance(load, Pressure):
            values = -values_at(load.value, facets.places) * facets.normals
        elif isinstance(load, Traction):
            values = values_at(load.value, facets.places)
        elif isinstance(load, BearingLoad):
            values = -_cosine(load, facets) * facets.normals
        else:
            values = np.einsum("acfq,a->cfq", _motions(facets.places, load.about), motion)
        total += _integrate(mesh, facets.nodes, facets.shapes[:, None, :], weight, values)
    if isinstance(load, BearingLoad):
        size = float(np.linalg.norm(load.force))
        resultant = total.reshape(-1, mesh.dimension).sum(axis=0)
        along = float(resultant @ np.array(load.force))
        if not along > 0.0:
            what = f"the force of the pin in {load.boundary} does not press on it"
            raise SolvingError(f"{what}; a force towards the boundary, or a centre inside the hole")
        total *= size**2 / along
    return total


def _cosine(load: BearingLoad, facets: FacetBasis) -> np.ndarray:
    """Return the cosine of the angle from the force at places in front of it, 0 behind."""
    arm = facets.places - np.array(load.centre)[:, None, None]
    if load.axis is not None:
        axis = np.array(load.axis) / np.linalg.norm(load.axis)
        arm = arm - np.multiply.outer(axis, np.einsum("c,cfq->fq", axis, arm))
    along = np.einsum("c,cfq->fq", np.array(load.force) / np.linalg.norm(load.force), arm)
    return np.asarray(np.clip(along / np.linalg.norm(arm, axis=0), 0.0, None))


def _motions(places: np.ndarray, about: tuple[float, ...]) -> np.ndarray:
    return rigid_motions(places - np.array(about).reshape(-1, *[1] * (places.ndim - 1)))


def _linear_traction(load: Resultant, bases: list[FacetBasis], weights: list[np.ndarray]) -> np.ndarray:
    """Return the factors of the rigid motions whose traction has the force and moment asked for.

    A least-squares solution: a straight edge has no width across itself, a moment about it cannot be met.
    """
    gram = 0.0
    for facets, weight in zip(bases, weights, strict=True):
        motions = _motions(facets.places, load.about)
        gram = gram + np.einsum("acfq,bcfq,fq->ab", motions, motions, weight)
    return np.asarray(
        np.linalg.lstsq(np.asarray(gram), np.array([*load.force, *load.moment]), rcond=1e-12)[0]
    )


def _point_load(load: PointForce, mesh: Mesh) -> np.ndarray:
    total = np.zeros(mesh.dimension * mesh.nodes.shape[1])
    node = mesh.vertices[load.point]
    total[mesh.dimension * node : mesh.dimension * (node + 1)] = load.force
    return total


def _body_load(load: BodyForce, problem: Problem, mesh: Mesh) -> np.ndarray:
    chosen = np.arange(mesh.cells) if load.region is None else mesh.regions[load.region]
    total = np.zeros(mesh.dimension * mesh.nodes.shape[1])
    for start in range(0, len(chosen), CHUNK):
        cells = chosen[start : start + CHUNK]
        at = at_rule(mesh, 2 * mesh.degree + 2, cells)
        values = values_at(load.value, at.x)
        shapes = at.shapes[:, None, :]
        total += _integrate(mesh, mesh.cell_nodes[:, cells], shapes, volumes(problem, at), values)
    return total


def _integrate(
    mesh: Mesh, nodes: np.ndarray, shapes: np.ndarray, weights: np.ndarray, values: np.ndarray
) -> np.ndarray:
    """Return the integrals of values (D, m, q) times the shapes (n, m or 1, q) of nodes (n, m)."""
    forces = np.array([(values * (shape * weights)).sum(axis=2) for shape in shapes])
    size, dimension = mesh.nodes.shape[1], mesh.dimension
    sums = [np.bincount(nodes.ravel(), forces[:, c].ravel(), minlength=size) for c in range(dimension)]
    return np.array(sums).T.ravel()
