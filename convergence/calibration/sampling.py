"""Stress of drawn solutions at many points at once: nodes, points of integration, fine lattices, edges."""

from functools import lru_cache
from typing import Any

import ngsolve as ng
import numpy as np
from scipy.spatial import cKDTree

CORNERS = {
    "TRIG": [(1, 0), (0, 1), (0, 0)],
    "QUAD": [(0, 0), (1, 0), (1, 1), (0, 1)],
    "TET": [(1, 0, 0), (0, 1, 0), (0, 0, 1), (0, 0, 0)],
}
INNER_TRIPLE = np.array([(1, 1), (4, 1), (1, 4)]) / 6.0
CELLS = {2: ("TRIG", "QUAD"), 3: ("TET",)}
STEPS = {2: 12, 3: 8}
EDGE_STEPS = {2: 400, 3: 40}
Rules = dict[Any, Any]
Samples = tuple[np.ndarray, np.ndarray, np.ndarray]


def sampled(mesh: Any, field: Any, rules: Rules) -> Samples:
    """Return places (n, D), the field there (n, ...) and the cell of each."""
    points = mesh.MapToAllElements(rules, ng.VOL)
    where = ng.CoefficientFunction((ng.x, ng.y, ng.z)[: mesh.dim])
    places = np.asarray(where(points)).reshape(-1, mesh.dim)
    return places, np.asarray(field(points)).reshape(len(places), -1), points["nr"]


def means(places: np.ndarray, values: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return each place once, with the mean of its values."""
    keys = np.round(places / np.ptp(places, axis=0).max(), 9)
    _, first, index = np.unique(keys, axis=0, return_index=True, return_inverse=True)
    index = index.reshape(-1)
    sums = np.zeros((len(first), values.shape[1]))
    np.add.at(sums, index, values)
    return places[first], sums / np.bincount(index)[:, None]


def nodal_means(mesh: Any, field: Any, entries: int) -> Any:
    """Return the means of a field of so many entries at the corners of cells, linear in between."""
    averaged = ng.GridFunction(ng.H1(mesh, order=1, dim=entries))
    places, values = means(*sampled(mesh, field, nodes(mesh.dim, 1))[:2])
    corners = np.array([corner.point for corner in mesh.vertices])
    _, index = cKDTree(places).query(corners)
    averaged.vec.FV().NumPy()[:] = values[index].reshape(-1)
    return averaged


@lru_cache
def nodes(dimension: int, degree: int) -> Rules:
    """Return the nodes of the cells of degree 1 or 2."""
    return {getattr(ng.ET, name): _rule(_nodes(name, degree)) for name in CELLS[dimension]}


@lru_cache
def inner(dimension: int, degree: int) -> Rules:
    """Return the points of integration that programs use: order 2p - 1 in a quadrilateral, else p."""
    orders = {name: 2 * degree - 1 if name == "QUAD" else degree for name in CELLS[dimension]}
    rules = {getattr(ng.ET, name): ng.IntegrationRule(getattr(ng.ET, name), n) for name, n in orders.items()}
    if (dimension, degree) == (2, 2):
        rules[ng.ET.TRIG] = _rule(INNER_TRIPLE)  # NGSolve's own three are the middles of the edges
    return rules


@lru_cache
def lattice(dimension: int) -> Rules:
    """Return an even lattice in every kind of cell."""
    steps = STEPS[dimension]
    axes = np.meshgrid(*[np.arange(steps + 1)] * dimension, indexing="ij")
    grid = np.stack([axis.ravel() for axis in axes], axis=1)
    simplex = _rule(grid[grid.sum(axis=1) <= steps] / steps)
    if dimension == 3:
        return {ng.ET.TET: simplex}
    return {ng.ET.TRIG: simplex, ng.ET.QUAD: _rule(grid / steps)}


@lru_cache
def edges(dimension: int) -> Rules:
    """Return points along the edges of the cells."""
    share = np.linspace(0.0, 1.0, EDGE_STEPS[dimension] + 1)[:, None]
    rules = {}
    for name in CELLS[dimension]:
        places = np.concatenate([a + share * (b - a) for a, b in _edges(name)])
        rules[getattr(ng.ET, name)] = _rule(places)
    return rules


def _edges(name: str) -> list[tuple[np.ndarray, np.ndarray]]:
    corners = np.array(CORNERS[name], dtype=float)
    pairs = [(a, b) for i, a in enumerate(corners) for b in corners[:i]]
    return [(a, b) for a, b in pairs if name != "QUAD" or np.abs(a - b).sum() < 1.5]


def _nodes(name: str, degree: int) -> np.ndarray:
    corners = np.array(CORNERS[name], dtype=float)
    return corners if degree == 1 else np.concatenate([corners, [0.5 * (a + b) for a, b in _edges(name)]])


def _rule(places: np.ndarray) -> Any:
    return ng.IntegrationRule([tuple(map(float, place)) for place in places], [0.0] * len(places))
