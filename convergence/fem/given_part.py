"""A part that is given by its meshes, coarse to fine, as a mesher made them: no map says more about it.

Whatever asks for the part itself is told what the finest mesh says.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from convergence.fem.element import Shape, element
from convergence.fem.outer_facets import facet_element, outer_facets
from convergence.fem.pieces import pieces

if TYPE_CHECKING:
    from scipy.spatial import KDTree

REST = "rest"  # the boundary of all outer facets that no other boundary has
BULGE = 1.0 / 6.0
NEAR = 2e-5
PAIRS = 2_000_000  # of places and facets at once


@dataclass(frozen=True, eq=False)
class GivenMesh:
    """One mesh of one shape and degree, without nodes that no cell has; arrays as in `mesh.Mesh`.

    The boundaries of `facets` together are all outer facets; one facet may be on several. `vertices` are
    named points, `regions` the cells of each region, {"body": all} where nothing is named.
    """

    shape: Shape
    degree: int
    nodes: np.ndarray
    cell_nodes: np.ndarray
    facets: Mapping[str, tuple[np.ndarray, ...]]
    vertices: Mapping[str, int]
    regions: Mapping[str, np.ndarray]

    @property
    def dimension(self) -> int:
        return int(self.nodes.shape[0])


@dataclass(frozen=True, eq=False)
class GivenPart:
    """Meshes of one part from coarse to fine, all with the same names of boundaries, points and regions.

    Meshes that are made when they are asked for may say their `node_counts` beforehand. The first `asked` of
    them, all where None, tell what the part is.
    """

    meshes: Sequence[GivenMesh]
    node_counts: tuple[int, ...] = ()
    asked: int | None = None

    @cached_property
    def telling(self) -> tuple[GivenMesh, ...]:
        """Return the meshes that tell what the part is, coarse to fine."""
        return tuple(self.meshes[number] for number in range(self.asked or len(self.meshes)))

    @property
    def finest(self) -> GivenMesh:
        """Return the finest of the meshes that tell what the part is."""
        return self.telling[-1]

    def count_nodes(self, number: int) -> int:
        """Return the number of nodes of a mesh."""
        return self.node_counts[number] if self.node_counts else int(self.meshes[number].nodes.shape[1])

    @property
    def dimension(self) -> int:
        return self.finest.dimension

    @cached_property
    def size(self) -> float:
        """Return the diagonal of the box around the part."""
        return float(np.linalg.norm(np.ptp(self.finest.nodes, axis=1)))

    @cached_property
    def points(self) -> Mapping[str, tuple[float, ...]]:
        """Return the places of the named points."""
        made = self.finest
        return {name: tuple(made.nodes[:, node].tolist()) for name, node in made.vertices.items()}

    @property
    def boundaries(self) -> Mapping[str, tuple[np.ndarray, ...]]:
        return self.finest.facets

    @property
    def regions(self) -> Mapping[str, np.ndarray]:
        return self.finest.regions

    def boundary_points(self, boundary: str) -> set[str]:
        """Return the names of the points on a boundary."""
        nodes = np.concatenate([group.ravel() for group in self.finest.facets[boundary]])
        return {name for name, node in self.finest.vertices.items() if (nodes == node).any()}

    def region_points(self, region: str) -> set[str]:
        """Return the names of the points of a region."""
        made = self.finest
        nodes = made.cell_nodes[:, made.regions[region]]
        return {name for name, node in made.vertices.items() if (nodes == node).any()}

    def contains(self, places: np.ndarray) -> np.ndarray:
        """Return which places (D, n) lie in the part.

        A curved boundary bulges over the facets of a mesh, so a place counts as in the part that is in it
        after a sixth of the way to the centre of the nearest cell.
        """
        return _inside(self._surface, places + BULGE * self._inward(places))

    def encloses(self, places: np.ndarray) -> np.ndarray:
        """Return which places (D, n) lie in the finest mesh or within about 1e-5 of the part's size of it."""
        way = self._inward(places)
        length = np.maximum(np.linalg.norm(way, axis=0), NEAR * self.size)
        return _inside(self._surface, places + NEAR * self.size / length * way)

    def _inward(self, places: np.ndarray) -> np.ndarray:
        """Return the ways (D, n) to the centre of the nearest cell."""
        return np.asarray(self._centres.data[self._centres.query(places.T)[1]].T - places)

    @cached_property
    def _centres(self) -> "KDTree":
        from scipy.spatial import KDTree

        made = self.finest
        corners = element(made.shape, made.degree).corners
        return KDTree(made.nodes[:, made.cell_nodes[:corners]].mean(axis=1).T)

    @cached_property
    def _surface(self) -> np.ndarray:
        """Return the corners (D, D, f) of straight pieces of the outer facets: segments or triangles."""
        made = self.finest
        groups = outer_facets(made.shape, made.degree, made.cell_nodes)
        return np.concatenate([made.nodes[:, _straight(made, nodes)] for nodes, _ in groups], axis=2)


def _straight(made: GivenMesh, nodes: np.ndarray) -> np.ndarray:
    """Return the nodes (D, f) of straight pieces of facets, in the facets' own direction."""
    cuts = pieces(facet_element(made.dimension, made.degree, len(nodes)))
    if len(cuts[0]) == 4:
        cuts = [half for a, b, c, d in cuts for half in ((a, b, c), (a, c, d))]
    return np.concatenate([nodes[list(cut)] for cut in cuts], axis=1)


def _inside(surface: np.ndarray, places: np.ndarray) -> np.ndarray:
    """Return which places (D, n) a closed surface (D, D, f) winds around: by angles, or by solid angles.

    The solid angle of a triangle is that of van Oosterom & Strackee 1983, IEEE Trans. Biomed. Eng. 30:125,
    eq. 8 (from memory).
    """
    step = max(1, PAIRS // surface.shape[2])
    found = [
        _winding(surface[:, :, None, :] - places[:, None, start : start + step, None]) > 0.5
        for start in range(0, places.shape[1], step)
    ]
    return np.concatenate([np.zeros(0, dtype=bool), *found])


def _winding(arms: np.ndarray) -> np.ndarray:
    """Return how often pieces at `arms` (D, D, n, f) from n places wind around each."""
    if len(arms) == 2:
        a, b = arms[:, 0], arms[:, 1]
        turn = np.arctan2(a[0] * b[1] - a[1] * b[0], (a * b).sum(axis=0))
        return np.asarray(turn.sum(axis=1) / (2.0 * np.pi))
    a, b, c = arms[:, 0], arms[:, 1], arms[:, 2]
    size_a, size_b, size_c = (np.sqrt((arm**2).sum(axis=0)) for arm in (a, b, c))
    volume = (a * np.cross(b, c, axis=0)).sum(axis=0)
    rest = size_a * size_b * size_c + size_c * (a * b).sum(axis=0)
    rest += size_a * (b * c).sum(axis=0) + size_b * (c * a).sum(axis=0)
    return np.asarray(2.0 * np.arctan2(volume, rest).sum(axis=1) / (4.0 * np.pi))
