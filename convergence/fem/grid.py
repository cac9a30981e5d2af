"""The nodes of a part's blocks as grids, numbered through the whole part, and cells cut from them.

Meshes of degree 2 use the grid of twice the cells. Nodes shared by blocks are shared by construction, not
by a distance, and their numbers do not depend on the shape of the cells.
"""

from collections.abc import Mapping

import numpy as np

from convergence.fem.element import Element, Shape
from convergence.fem.part import EdgeName, Part

# vertices of the cells that a square is cut into, in the order of their shape functions
SQUARES: dict[str, tuple[tuple[tuple[int, int], ...], ...]] = {
    "quadrilateral": (((0, 0), (1, 0), (1, 1), (0, 1)),),
    "triangle": (((0, 0), (1, 0), (1, 1)), ((0, 0), (1, 1), (0, 1))),
}


class Grids:
    """Node numbers of a plane part: named points, then the inner nodes of edges, then those of blocks."""

    def __init__(self, part: Part, counts: Mapping[int, int], degree: int = 1):
        used = dict.fromkeys(name for block in part.blocks for name in block)
        self.points = {name: number for number, name in enumerate(used)}
        self.part, self.counts, self.degree = part, counts, degree
        self.size = len(self.points)
        self._edges: dict[EdgeName, np.ndarray] = {}
        self.blocks = [self._block(index) for index in range(len(part.blocks))]

    def along(self, start: str, end: str) -> np.ndarray:
        """Return the nodes of an edge in its direction, ends included."""
        if (start, end) not in self._edges:
            inner = self.degree * self.counts[self.part.families[start, end]] - 1
            numbers = np.arange(self.size, self.size + inner)
            self.size += inner
            chain = np.concatenate([[self.points[start]], numbers, [self.points[end]]])
            self._edges[start, end], self._edges[end, start] = chain, chain[::-1]
        return self._edges[start, end]

    def _block(self, index: int) -> np.ndarray:
        """Return the nodes of a block as a grid, first index from a to b."""
        a, b, c, d = self.part.blocks[index]
        south, north, west, east = self.along(a, b), self.along(d, c), self.along(a, d), self.along(b, c)
        ids = np.empty((len(south), len(west)), dtype=np.int64)
        ids[:, 0], ids[:, -1], ids[0, :], ids[-1, :] = south, north, west, east
        shape = (len(south) - 2, len(west) - 2)
        ids[1:-1, 1:-1] = self.size + np.arange(shape[0] * shape[1]).reshape(shape)
        self.size += shape[0] * shape[1]
        return ids

    def places(self, straight_diagonals: bool) -> np.ndarray:
        """Return the places (2, n) of all nodes, by the blocks' maps.

        With `straight_diagonals` the middle of a cell is its diagonal's own midpoint plus the bulge of the
        cell, so that the diagonal is straight in a straight-sided cell whatever the cell's shape.
        """
        places = np.empty((2, self.size))
        for index, ids in enumerate(self.blocks):
            x = self.part.block(index, *(np.linspace(0.0, 1.0, n) for n in ids.shape))
            if straight_diagonals and self.degree == 2:
                corners = x[:, ::2, ::2]
                ends = 0.5 * (corners[:, :-1, :-1] + corners[:, 1:, 1:])
                others = 0.5 * (corners[:, 1:, :-1] + corners[:, :-1, 1:])
                x[:, 1::2, 1::2] += 0.5 * (ends - others)
            places[:, ids.ravel()] = x.reshape(2, -1)
        return places


def cut(ids: np.ndarray, element: Element) -> np.ndarray:
    """Return the nodes (k, m) of the cells that a grid of nodes is cut into; triangles in pairs."""
    pieces = SQUARES[element.shape]
    first = ids[: -1 : element.degree, : -1 : element.degree]
    cells = []
    for vertices in pieces:
        steps = element.degree * (_vertex_shapes(element.shape, element.nodes) @ np.array(vertices))
        right, up = np.rint(steps).astype(int).T
        nodes = [
            ids[i : i + first.shape[0] * element.degree : element.degree, j:][
                :, : first.shape[1] * element.degree : element.degree
            ]
            for i, j in zip(right, up, strict=True)
        ]
        cells.append(np.reshape(nodes, (len(element.nodes), -1)))
    return np.stack(cells, axis=2).reshape(len(element.nodes), -1)


def chain_facets(chain: np.ndarray, degree: int) -> np.ndarray:
    """Return the nodes (2 or 3, f) of the facets along a chain of nodes: start, end, middle."""
    return np.array([chain[:-1:degree], chain[degree::degree], *([chain[1::2]] if degree == 2 else [])])


def _vertex_shapes(shape: Shape, nodes: np.ndarray) -> np.ndarray:
    """Return the weight (n, vertices) of each vertex of a cell at each of its nodes."""
    x, y = nodes.T
    if shape == "triangle":
        return np.array([1.0 - x - y, x, y]).T
    return np.array([(1 - x) * (1 - y), x * (1 - y), x * y, (1 - x) * y]).T
