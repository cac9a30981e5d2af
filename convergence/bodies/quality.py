"""Quality of cells: scaled Jacobian, ratio of edges, skew of angles, with the worst cells and their places.

Scaled Jacobian and edge ratio are those of P. M. Knupp, C. D. Ernst, D. C. Thompson, C. J. Stimpson,
P. P. Pebay, "The Verdict Geometric Quality Library", SAND2007-1751 (2007); the former at the vertices of
curved cells too, along the tangents of their edges. Equiangle skew and the thresholds are common practice.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import lru_cache
from itertools import combinations
from typing import Literal

import numpy as np

from convergence.bodies.file_cells import CellGroup
from convergence.fem.calculus import determinant
from convergence.fem.element import Element, Shape, element
from convergence.fem.outer_facets import facet_nodes

CHUNK = 100_000
Measure = Literal["scaled_jacobian", "aspect", "skew"]
# the scaled Jacobian of a cell with equal sides and angles is one
IDEAL = {
    "triangle": 2.0 / np.sqrt(3.0),
    "quadrilateral": 1.0,
    "tetrahedron": np.sqrt(2.0),
    "hexahedron": 1.0,
    "wedge": 2.0 / np.sqrt(3.0),
}
POOR: Mapping[Measure, float] = {"scaled_jacobian": 0.2, "aspect": 10.0, "skew": 0.9}


@dataclass(frozen=True)
class WorstCell:
    """A cell by its number in the file, its middle and its value."""

    number: int
    place: tuple[float, ...]
    value: float


@dataclass(frozen=True, eq=False)
class Quality:
    """Of each cell (m,): scaled Jacobian (1 is best, below 0 is folded at a vertex), longest over shortest
    edge (1 is best), and how far angles are from equal ones (0 is best, 1 is flat).
    """

    scaled_jacobian: np.ndarray
    aspect: np.ndarray
    skew: np.ndarray
    numbers: np.ndarray
    middles: np.ndarray

    def worst(self, measure: Measure, count: int = 5) -> tuple[WorstCell, ...]:
        """Return the worst cells by a measure, the worst first."""
        values = getattr(self, measure)
        order = np.argsort(values if measure == "scaled_jacobian" else -values, kind="stable")[:count]
        return tuple(
            WorstCell(int(self.numbers[c]), tuple(self.middles[:, c].tolist()), float(values[c]))
            for c in order
        )

    def poor(self, measure: Measure) -> int:
        """Return how many cells are beyond the usual threshold of a measure."""
        values, limit = getattr(self, measure), POOR[measure]
        return int((values < limit if measure == "scaled_jacobian" else values > limit).sum())


def quality(nodes: np.ndarray, group: CellGroup) -> Quality:
    """Return the quality of the cells of a group on nodes (D, n); edges and angles as of straight sides."""
    shape = element(group.shape, group.degree)
    parts = [
        _chunk(nodes[:, group.cell_nodes[:, start : start + CHUNK]], shape)
        for start in range(0, group.cell_nodes.shape[1], CHUNK)
    ]
    jacobian, aspect, skew, middles = (np.concatenate(part, axis=-1) for part in zip(*parts, strict=True))
    return Quality(jacobian, aspect, skew, group.numbers, middles)


def _chunk(places: np.ndarray, shape: Element) -> tuple[np.ndarray, np.ndarray, np.ndarray, np.ndarray]:
    """Return the measures (m,) and middles (D, m) of cells with nodes at places (D, n, m)."""
    corners = places[:, : shape.corners]
    scaled = [_scaled(places, weights) for weights in _tangents(shape)]
    sides = [np.linalg.norm(corners[:, b] - corners[:, a], axis=0) for a, b in _edges(shape.shape)]
    shortest = np.min(sides, axis=0)
    with np.errstate(divide="ignore"):
        aspect = np.max(sides, axis=0) / shortest
    jacobian = np.minimum(IDEAL[shape.shape] * np.min(scaled, axis=0), 1.0)
    return jacobian, aspect, np.max(list(_skews(corners, shape)), axis=0), corners.mean(axis=1)


def _scaled(places: np.ndarray, weights: np.ndarray) -> np.ndarray:
    """Return the determinant of D tangents (m,) over the product of their lengths, 0 where one has none."""
    tangents = np.einsum("dnm,nk->dkm", places, weights, optimize=True)
    lengths = np.linalg.norm(tangents, axis=0).prod(axis=0)
    return np.asarray(determinant(tangents) / np.where(lengths > 0.0, lengths, np.inf))


@lru_cache(maxsize=32)
def _edges(shape: Shape) -> tuple[tuple[int, int], ...]:
    """Return the pairs of vertices that an edge joins: those of two faces, in a plane of one."""
    kind = element(shape, 1)
    wanted = 1 if kind.dimension == 2 else 2
    pairs = combinations(range(kind.corners), 2)
    return tuple(p for p in pairs if sum(set(p) <= set(face) for face in kind.faces) == wanted)


@lru_cache(maxsize=32)
def _tangents(shape: Element) -> tuple[np.ndarray, ...]:
    """Return the weights (n, D) of nodes for the edges' tangents at vertices and in a hexahedron's middle."""
    spots = [(shape.nodes[v], _directions(shape, v)) for v in range(shape.corners)]
    if shape.shape == "hexahedron":
        spots.append((np.full(3, 0.5), np.eye(3)))
    return tuple(shape.gradients(place[:, None])[:, :, 0] @ along for place, along in spots)


def _directions(shape: Element, vertex: int) -> np.ndarray:
    """Return the edges (D, D) at a vertex of the reference cell as columns, right-handed."""
    ends = [b if a == vertex else a for a, b in _edges(shape.shape) if vertex in (a, b)]
    along = (shape.nodes[ends] - shape.nodes[vertex]).T
    return np.asarray(along if np.linalg.det(along) > 0.0 else along[:, ::-1])


def _skews(corners: np.ndarray, shape: Element) -> Iterator[np.ndarray]:
    """Yield how far (m,) the angles of faces are from those of equal-sided ones, of 180° or 0°."""
    rings = facet_nodes(shape.shape, 1) if shape.dimension == 3 else (tuple(range(shape.corners)),)
    along = {(a, b): _unit(corners[:, b] - corners[:, a]) for a, b in _edges(shape.shape)}
    along |= {(b, a): -edge for (a, b), edge in along.items()}
    for sides in sorted({len(ring) for ring in rings}):
        spots = [
            (along[at, before] * along[at, after]).sum(axis=0)
            for ring in rings
            if len(ring) == sides
            for before, at, after in zip((ring[-1], *ring), ring, (*ring[1:], ring[0]), strict=False)
        ]
        equal = np.pi * (1.0 - 2.0 / sides)
        widest, narrowest = np.arccos(np.clip([np.min(spots, axis=0), np.max(spots, axis=0)], -1.0, 1.0))
        yield (widest - equal) / (np.pi - equal)
        yield (equal - narrowest) / equal


def _unit(vectors: np.ndarray) -> np.ndarray:
    """Return vectors (D, m) of length one, zero where they have none."""
    lengths = np.linalg.norm(vectors, axis=0)
    return np.asarray(vectors / np.where(lengths > 0.0, lengths, 1.0))
