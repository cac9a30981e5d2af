"""The cells of a file in the order of our own, with the nodes that serendipity cells lack."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from scipy import sparse

from convergence.bodies.conventions import (
    OTHER_EDGES,
    Kind,
    groups,
    kind_of,
    missing,
    positions,
    serendipity,
)
from convergence.fem.element import DIMENSION, Shape

SAMPLE = 2_000
BADLY_PLACED = 0.2  # of a cell's size: middles of edges that are this far from them are in another order


@dataclass(frozen=True, eq=False)
class Block:
    """Cells (m, k) of one kind in a file: `first` is the number of the first, `place` that of the block.

    `kind` is None for cells that we do not have, `dimension` that of the cells.
    """

    name: str
    kind: Kind | None
    dimension: int
    cells: np.ndarray
    first: int
    place: int

    @property
    def numbers(self) -> np.ndarray:
        return np.arange(self.first, self.first + len(self.cells))


@dataclass(frozen=True, eq=False)
class CellGroup:
    """Cells of one shape and degree.

    cell_nodes (k, m) are numbers into the nodes of the file mesh, in the order of the element; numbers (m,)
    those of the cells in the file, counted from 0 over all its cells.
    """

    shape: Shape
    degree: int
    cell_nodes: np.ndarray
    numbers: np.ndarray


@dataclass(frozen=True, eq=False)
class Added:
    """Nodes that the file lacks: `weights` (added, n) makes them and their values from the file's nodes."""

    weights: sparse.csr_array
    remarks: tuple[str, ...]


def blocks_of(raw: Any) -> list[Block]:
    """Return the blocks of a meshio.Mesh."""
    found, first = [], 0
    for place, block in enumerate(raw.cells):
        cells = (
            np.asarray(block.data)
            if not block.type.startswith("polyhedron")
            else np.empty((len(block.data), 0), dtype=int)
        )
        kind = kind_of(block.type, cells.shape[1] if cells.ndim == 2 else 0)
        dimension = DIMENSION[kind.shape] if kind else int(block.dim)
        found.append(Block(block.type, kind, dimension, cells, first, place))
        first += len(cells)
    return found


def standard(nodes: np.ndarray, block: Block) -> tuple[Block, str]:
    """Return a block with its nodes in VTK's order, and a remark where they were not, "" else.

    Where the middles of edges are not near their edges, as they are in no program's own output, the orders
    that other writers use for the same kind are tried.
    """
    kind = block.kind
    assert kind is not None
    sample = block.cells[:: max(1, len(block.cells) // SAMPLE)]
    if kind.degree == 1 or _misplaced(nodes, kind, sample, "") < BADLY_PLACED:
        return block, ""
    for other in OTHER_EDGES.get(kind.shape, ()):
        if _misplaced(nodes, kind, sample, other) < BADLY_PLACED:
            theirs = groups(kind.shape, 2, other)
            at = [theirs.index(group) for group in groups(kind.shape, 2)[: kind.nodes]]
            remark = f"{block.name}: middle nodes are read in the order of the edges {other}"
            return replace(block, cells=block.cells[:, at]), remark
    return block, ""


def ordered(block: Block) -> np.ndarray:
    """Return the cells (k, m) of a block in our order, -1 where a node is missing."""
    kind = block.kind
    assert kind is not None
    at = positions(kind.shape, kind.degree)
    full = np.full((len(at), len(block.cells)), -1, dtype=np.int64)
    given = at < kind.nodes
    full[given] = block.cells[:, at[given]].T
    return full


def _misplaced(nodes: np.ndarray, kind: Kind, cells: np.ndarray, edges: str) -> float:
    """Return how far middle nodes are from the middles of their vertices, over the cell's size."""
    places = nodes[:, cells]
    where = groups(kind.shape, kind.degree, edges)[: kind.nodes]
    middles = np.stack([places[:, :, list(group)].mean(axis=2) for group in where], axis=2)
    apart = np.linalg.norm(places - middles, axis=0).max(axis=1)
    size = np.linalg.norm(np.ptp(places, axis=2), axis=0)
    return float(np.median(apart / np.where(size > 0.0, size, 1.0)))


def completed(cells: Sequence[np.ndarray], blocks: Sequence[Block], count: int) -> Added:
    """Fill the missing nodes (-1) of cells in our order with numbers from `count` on; cells share a face's.

    A node in the middle of a face of two kinds of cell is one node.
    """
    known: list[np.ndarray] = []
    rows: list[tuple[np.ndarray, np.ndarray]] = []
    for full, block, face, at in _gaps(cells, blocks):
        assert block.kind is not None
        members, weights = serendipity(block.kind, face)
        vertices = np.sort(block.cells[:, list(face)], axis=1)
        spare = np.full((len(vertices), 8 - len(face)), -1)
        known.append(np.hstack([vertices, spare]))
        rows.append((block.cells[:, members], weights))
        full[at] = -2
    if not known:
        return Added(sparse.csr_array((0, count)), ())
    _, first, back = np.unique(np.concatenate(known), axis=0, return_index=True, return_inverse=True)
    back, start = back.ravel(), 0
    for (full, _, _, at), part in zip(_gaps(cells, blocks), known, strict=True):
        full[at] = count + back[start : start + len(part)]
        start += len(part)
    remark = f"nodes added, serendipity cells being read as full ones: {len(first)}"
    return Added(_weights(rows, first, count), (remark,))


def _gaps(
    cells: Sequence[np.ndarray], blocks: Sequence[Block]
) -> Iterator[tuple[np.ndarray, Block, tuple[int, ...], int]]:
    """Yield cells, their block, the vertices of each face whose middle is missing, and our row of it."""
    for full, block in zip(cells, blocks, strict=True):
        if block.kind is not None:
            where = positions(block.kind.shape, block.kind.degree)
            for number, face in enumerate(missing(block.kind)):
                yield full, block, face, int(np.flatnonzero(where == block.kind.nodes + number)[0])


def _weights(
    rows: Sequence[tuple[np.ndarray, np.ndarray]], first: np.ndarray, count: int
) -> sparse.csr_array:
    """Return the matrix of the rows of numbers `first` among all rows."""
    starts = np.cumsum([0, *(len(nodes) for nodes, _ in rows)])
    row, column, value = [], [], []
    for (nodes, weights), start, end in zip(rows, starts, starts[1:], strict=False):
        mine = np.flatnonzero((first >= start) & (first < end))
        chosen = nodes[first[mine] - start]
        row.append(np.repeat(mine, len(weights)))
        column.append(chosen.ravel())
        value.append(np.tile(weights, len(mine)))
    entries = (np.concatenate(value), (np.concatenate(row), np.concatenate(column)))
    return sparse.csr_array(sparse.coo_array(entries, shape=(len(first), count)))
