"""A level's mesh of a part: scikit-fem's mesh with named boundaries, points and regions.

Vertices shared by blocks are shared by construction, not by a distance. Meshes of degree 2 are
isoparametric with every node, also those inside, placed by the block's map.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any, Literal

import numpy as np
from skfem import Basis, MeshQuad1, MeshQuad2, MeshTri1, MeshTri2

from convergence.errors import SolvingError
from convergence.fem.part import EdgeName, Part

Shape = Literal["triangle", "quadrilateral"]


@dataclass(frozen=True, eq=False)
class Mesh:
    """A part cut into cells. `skfem` is scikit-fem's mesh; facets and vertices are its numbers.

    `counts` holds the cells along each family of the part's edges.
    """

    part: Part
    counts: Mapping[int, int]
    skfem: Any
    shape: Shape
    degree: int
    facets: Mapping[str, np.ndarray]
    vertices: Mapping[str, int]
    regions: Mapping[str, np.ndarray]

    @property
    def cells(self) -> int:
        return int(self.skfem.t.shape[1])

    @property
    def nodes(self) -> np.ndarray:
        """Return the places (2, n) of all nodes in scikit-fem's numbering of a scalar field."""
        return np.asarray(self.skfem.doflocs)

    @cached_property
    def cell_areas(self) -> np.ndarray:
        """Return the area of each cell, exact for the curved cells themselves."""
        return np.asarray(Basis(self.skfem, self.skfem.elem(), intorder=2 * self.degree).dx.sum(axis=1))

    @property
    def area(self) -> float:
        """Return the area of all cells."""
        return float(self.cell_areas.sum())

    @cached_property
    def h(self) -> float:
        """Return the representative cell size (area / cells)^(1/2)."""
        return float(np.sqrt(self.area / self.cells))


class _Numbering:
    """Vertex numbers: named points first, then the inner vertices of edges, then those of blocks."""

    def __init__(self, part: Part, counts: Mapping[int, int]):
        used = dict.fromkeys(name for block in part.blocks for name in block)
        self.points = {name: number for number, name in enumerate(used)}
        self.edges: dict[EdgeName, np.ndarray] = {}
        self.next = len(self.points)
        self.part, self.counts = part, counts

    def along(self, start: str, end: str) -> np.ndarray:
        """Return the vertices of an edge in its direction, ends included."""
        if (start, end) not in self.edges:
            inner = self.counts[self.part.families[start, end]] - 1
            numbers = np.arange(self.next, self.next + inner)
            self.next += inner
            chain = np.concatenate([[self.points[start]], numbers, [self.points[end]]])
            self.edges[start, end], self.edges[end, start] = chain, chain[::-1]
        return self.edges[start, end]

    def grid(self, index: int) -> np.ndarray:
        """Return the vertices of a block as a grid, first index from a to b."""
        a, b, c, d = self.part.blocks[index]
        south, north, west, east = self.along(a, b), self.along(d, c), self.along(a, d), self.along(b, c)
        ids = np.empty((len(south), len(west)), dtype=np.int64)
        ids[:, 0], ids[:, -1], ids[0, :], ids[-1, :] = south, north, west, east
        shape = (len(south) - 2, len(west) - 2)
        ids[1:-1, 1:-1] = self.next + np.arange(shape[0] * shape[1]).reshape(shape)
        self.next += shape[0] * shape[1]
        return ids


def block_grids(part: Part, counts: Mapping[int, int]) -> list[np.ndarray]:
    """Return the vertices of each block as a grid, numbered as in `mesh`; first index from a to b."""
    numbering = _Numbering(part, counts)
    return [numbering.grid(index) for index in range(len(part.blocks))]


def _pair_keys(first: np.ndarray, second: np.ndarray) -> np.ndarray:
    keys: np.ndarray = np.minimum(first, second).astype(np.int64) * 2**31 + np.maximum(first, second)
    return keys


def _cut(ids: np.ndarray, shape: Shape) -> np.ndarray:
    a, b, c, d = (part.ravel() for part in (ids[:-1, :-1], ids[1:, :-1], ids[1:, 1:], ids[:-1, 1:]))
    if shape == "quadrilateral":
        return np.array([a, b, c, d])
    return np.stack([np.array([a, b, c]), np.array([a, c, d])], axis=2).reshape(3, -1)


def _middles(ids: np.ndarray, x: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return keys and places of the middle nodes of all segments of a block, diagonals included.

    A diagonal's middle is its own midpoint plus the bulge of the cell, so that it is straight in a
    straight-sided cell whatever the cell's shape.
    """
    keys = [
        _pair_keys(ids[:-1, :], ids[1:, :]).ravel(),
        _pair_keys(ids[:, :-1], ids[:, 1:]).ravel(),
        _pair_keys(ids[:-1, :-1], ids[1:, 1:]).ravel(),
    ]
    corners = x[:, ::2, ::2]
    ends = 0.5 * (corners[:, :-1, :-1] + corners[:, 1:, 1:])
    others = 0.5 * (corners[:, 1:, :-1] + corners[:, :-1, 1:])
    diagonals = x[:, 1::2, 1::2] + 0.5 * (ends - others)
    places = [x[:, 1::2, ::2], x[:, ::2, 1::2], diagonals]
    return np.concatenate(keys), np.concatenate([p.reshape(2, -1) for p in places], axis=1)


def mesh(part: Part, counts: Mapping[int, int], *, shape: Shape, degree: int) -> Mesh:
    """Return the mesh of a part with `counts` cells on each family of edges.

    Raises SolvingError where a cell is inverted.
    """
    numbering = _Numbering(part, counts)
    grids = [numbering.grid(index) for index in range(len(part.blocks))]
    places = np.empty((2, numbering.next))
    cells, keys, middles, centres, owner = [], [], [], [], []
    for index, ids in enumerate(grids):
        steps = [np.linspace(0.0, 1.0, 2 * n - 1) for n in ids.shape]
        x = part.block(index, *steps)
        places[:, ids.ravel()] = x[:, ::2, ::2].reshape(2, -1)
        cells.append(_cut(ids, shape))
        owner.append(np.full(cells[-1].shape[1], index))
        key, middle = _middles(ids, x)
        keys.append(key)
        middles.append(middle)
        centres.append(x[:, 1::2, 1::2].reshape(2, -1))
    t = np.concatenate(cells, axis=1)
    linear = MeshTri1(places, t, sort_t=False) if shape == "triangle" else MeshQuad1(places, t)
    native = linear
    if degree == 2:
        native = _quadratic(linear, np.concatenate(keys), np.concatenate(middles, axis=1), np.hstack(centres))
    _require_positive(native)
    blocks = np.concatenate(owner)
    regions = part.regions or {"body": tuple(range(len(part.blocks)))}
    return Mesh(
        part=part,
        counts=dict(counts),
        skfem=native,
        shape=shape,
        degree=degree,
        facets={name: _facets(native, numbering, edges) for name, edges in part.boundaries.items()},
        vertices=numbering.points,
        regions={name: np.flatnonzero(np.isin(blocks, members)) for name, members in regions.items()},
    )


def _quadratic(linear: Any, keys: np.ndarray, middles: np.ndarray, centres: np.ndarray) -> Any:
    kind = MeshTri2 if isinstance(linear, MeshTri1) else MeshQuad2
    native = kind.from_mesh(linear)
    doflocs = np.array(native.doflocs)
    keys, first = np.unique(keys, return_index=True)
    wanted = _pair_keys(*native.facets)
    doflocs[:, native.dofs.facet_dofs[0]] = middles[:, first[np.searchsorted(keys, wanted)]]
    if kind is MeshQuad2:
        doflocs[:, native.dofs.interior_dofs[0]] = centres
    return kind(doflocs, linear.t, sort_t=False) if kind is MeshTri2 else kind(doflocs, linear.t)


def _facets(native: Any, numbering: _Numbering, edges: tuple[EdgeName, ...]) -> np.ndarray:
    chains = [numbering.along(*edge) for edge in edges]
    wanted = np.concatenate([_pair_keys(chain[:-1], chain[1:]) for chain in chains])
    keys = _pair_keys(*native.facets)
    order = np.argsort(keys)
    return np.asarray(order[np.searchsorted(keys[order], wanted)])


def _require_positive(native: Any) -> None:
    """Check the signed Jacobian at the nodes of every cell."""
    local = native.elem.doflocs.T
    jacobian = np.asarray(native.mapping().detDF(local))
    if jacobian.min() <= 0.0:
        cell = int(np.unravel_index(jacobian.argmin(), jacobian.shape)[0])
        x, y = native.p[:, native.t[:, cell]].mean(axis=1)
        raise SolvingError(
            f"mesh: cell {cell} near ({x:g}, {y:g}) is inverted; "
            "more divisions or other proportions of the part"
        )
