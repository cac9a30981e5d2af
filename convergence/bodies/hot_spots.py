"""Hot spots: where the recovered von Mises stress of the finest mesh has a local maximum.

A spot is the largest value within its reach, and reaches of two spots do not overlap. The reach is the
distance within which every coarser mesh has a few nodes, so that the spot can be followed down the series as
the largest stress within the reach.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from convergence.fem.mesh import Mesh

MOST = 8
SHARE = 0.25  # of the largest value; lower maxima are no hot spots
MARGIN = 1.001
CLOSEST = 2000  # local maxima that are looked at, from the largest down


@dataclass(frozen=True)
class HotSpot:
    """A place (D coordinates) on the finest mesh, its node, the stress there and its reach."""

    place: tuple[float, ...]
    node: int
    stress: float
    reach: float


def hot_spots(finest: Mesh, stress: np.ndarray, coarser: Sequence[np.ndarray]) -> tuple[HotSpot, ...]:
    """Return at most eight spots, the hottest first.

    `stress` (nodes of a cell, cells) is that of the finest mesh; `coarser` are the nodes (D, n) of the other
    meshes.
    """
    from scipy.spatial import KDTree

    values = np.zeros(finest.nodes.shape[1])
    np.maximum.at(values, finest.cell_nodes, stress)
    found = _local_maxima(finest.cell_nodes, values)
    found = found[values[found] >= SHARE * values[found].max(initial=0.0)]
    if not len(found):
        return ()
    found = found[np.argsort(-values[found], kind="stable")][:CLOSEST]
    places = finest.nodes[:, found].T
    own = KDTree(finest.nodes.T)
    few = 2**finest.dimension
    reaches = np.zeros(len(places))
    for nodes in (finest.nodes, *coarser):
        distance = np.asarray(KDTree(nodes.T).query(places, k=min(few, nodes.shape[1]))[0])
        reaches = np.maximum(reaches, distance[:, -1])
    spots: list[HotSpot] = []
    for node, place, reach in zip(found, places, MARGIN * reaches, strict=True):
        apart = all(np.linalg.norm(place - spot.place) > reach + spot.reach for spot in spots)
        if apart and values[node] >= values[own.query_ball_point(place, reach)].max():
            spots.append(HotSpot(tuple(place.tolist()), int(node), float(values[node]), float(reach)))
        if len(spots) == MOST:
            break
    return tuple(spots)


def _local_maxima(cell_nodes: np.ndarray, values: np.ndarray) -> np.ndarray:
    """Return the nodes that no node of a cell around them exceeds."""
    highest = np.zeros(len(values))
    largest = values[cell_nodes].max(axis=0)
    # numpy's maximum.at (2.4) misreads values that it has to broadcast
    np.maximum.at(highest, cell_nodes.ravel(), np.tile(largest, len(cell_nodes)))
    return np.flatnonzero((values >= highest) & (highest > 0.0))
