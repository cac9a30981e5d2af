"""Fields of one mesh at the nodes of another, by the shape functions of the cells that hold them.

Polynomials of the element's degree are carried exactly. A node that lies outside the other mesh, because
curved boundaries are polygons there, takes the nearest cell's polynomial beyond its border; farther ones have
no value. Nodes on two sides of a crack, or of two bodies that touch, stand at one place: each is sought a
little inside its own cells.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from convergence.bodies.nodal_fields import NodalFields
from convergence.fem.search import Found, local_places, search
from convergence.fem.workers import workers

INWARD = 1e-3  # of the way to the middle of a node's own cells
NODES = 20_000  # at once


@dataclass(frozen=True, eq=False)
class Carried:
    """Fields (components, n) at the nodes asked for, NaN at `missing` of them; `outside` lie in no cell."""

    fields: Mapping[str, np.ndarray]
    outside: int
    missing: int


def carry(sources: Sequence[NodalFields], target: NodalFields, nodes: np.ndarray) -> Carried:
    """Return the fields of `sources`, the pieces of one mesh, at nodes (n,) of `target`.

    A node belongs to the piece that holds it, or is nearest to it.
    """
    places = target.nodes[:, nodes]
    sought = places + INWARD * (_inner(target)[:, nodes] - places)
    gap = np.full(len(nodes), np.inf)
    values = {name: np.full((len(field), len(nodes)), np.nan) for name, field in sources[0].fields.items()}
    for source in sources:
        found = search(source.nodes, source.cell_nodes, source.kind, sought)
        nearer = np.flatnonzero(found.gap < gap)
        gap[nearer] = found.gap[nearer]
        _take(source, found, places, nearer, values)
    held = np.isfinite(gap)
    return Carried(values, int((gap[held] > 0.0).sum()), int((~held).sum()))


def _take(
    source: NodalFields, found: Found, places: np.ndarray, nearer: np.ndarray, values: dict[str, np.ndarray]
) -> None:
    """Put the values of one piece at the places with the given numbers."""

    def take(rows: np.ndarray) -> None:
        cells = found.cells[rows]
        local = local_places(
            source.nodes, source.cell_nodes, source.kind, cells, places[:, rows], found.local[:, rows]
        )
        shapes = source.kind.shapes(local)
        for name, field in source.fields.items():
            values[name][:, rows] = np.einsum("cnm,nm->cm", field[:, source.cell_nodes[:, cells]], shapes)

    with workers() as pool:
        list(pool.map(take, (nearer[start : start + NODES] for start in range(0, len(nearer), NODES))))


def _inner(body: NodalFields) -> np.ndarray:
    """Return for each node the mean (D, n) of the middles of its cells."""
    rows, n = body.cell_nodes, body.nodes.shape[1]
    count = np.bincount(rows.ravel(), minlength=n)
    middles = [sum(axis[row] for row in rows) / len(rows) for axis in body.nodes]
    sums = [sum(np.bincount(row, middle, minlength=n) for row in rows) for middle in middles]
    return np.asarray(np.array(sums) / count)
