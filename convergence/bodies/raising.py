"""The nodes of degree 2 of linear cells: middles of edges, faces and cells, shared by what meets there."""

from dataclasses import dataclass
from functools import lru_cache

import numpy as np

from convergence.fem.element import Shape, element
from convergence.fem.outer_facets import facet_keys

Groups = tuple[np.ndarray, ...]
FACETS: dict[int, Shape] = {2: "line", 3: "triangle", 4: "quadrilateral"}
OWNERS = (1, 2, 4, 8)  # vertices whose middle a node is: of a vertex, an edge, a face, a hexahedron


@dataclass(frozen=True, eq=False)
class Raised:
    """Cells (k, m) and facets with nodes of degree 2, in the order of their elements.

    The nodes below `vertices` are those of the linear cells. `count` has the numbers of the middles of edges,
    of quadrilaterals and of hexahedra, which come after them in this order.
    """

    cell_nodes: np.ndarray
    facets: Groups
    vertices: int
    count: tuple[int, int, int]

    @property
    def nodes(self) -> int:
        return self.vertices + sum(self.count)


def raised(shape: Shape, cell_nodes: np.ndarray, facets: Groups, vertices: int) -> Raised:
    """Return linear cells (k, m) and facets of theirs, in groups of one shape, with the nodes of degree 2."""
    parts = [(shape, cell_nodes), *((FACETS[len(group)], group) for group in facets)]
    found = [np.empty((len(owners(kind)), group.shape[1]), dtype=np.int64) for kind, group in parts]
    total, count = vertices, []
    for size in OWNERS:
        rows = [
            (found[part], node, group[list(own)])
            for part, (kind, group) in enumerate(parts)
            for node, own in enumerate(owners(kind))
            if len(own) == size
        ]
        if size == 1:
            for nodes, node, own in rows:
                nodes[node] = own[0]
            continue
        number, new = _numbers([own for _, _, own in rows], vertices)
        for nodes, node, own in rows:
            nodes[node], number = total + number[: own.shape[1]], number[own.shape[1] :]
        total += new
        count.append(new)
    return Raised(found[0], tuple(found[1:]), vertices, (count[0], count[1], count[2]))


def _numbers(own: list[np.ndarray], vertices: int) -> tuple[np.ndarray, int]:
    """Return a number for each column of vertices, the same in any order of them, and how many there are."""
    if not own:
        return np.zeros(0, dtype=np.int64), 0
    every = np.concatenate(own, axis=1)
    if len(every) == 8:  # a hexahedron shares its middle with nobody
        return np.arange(every.shape[1]), every.shape[1]
    keys, number = np.unique(facet_keys(every, vertices), return_inverse=True)
    return number.ravel(), len(keys)


@lru_cache(maxsize=8)
def owners(shape: Shape) -> tuple[tuple[int, ...], ...]:
    """Return the local vertices whose middle each node of a cell of degree 2 is."""
    weights = element(shape, 1).shapes(element(shape, 2).nodes.T)
    return tuple(tuple(int(v) for v in np.flatnonzero(column > 1e-9)) for column in weights.T)
