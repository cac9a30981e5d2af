"""True corners of a plane part that is given by its meshes, told from the facets of curved sides.

The outline of a mesh turns at every node: at a corner of the part by the same angle on every mesh, on a
curved side by an angle that falls with the length of the facets. What is left of the turn when two meshes are
extrapolated to facets of no length is the corner's own. Every region has its outline, so that the corners of
borders between materials are found too.
"""

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from convergence.fem.element import element
from convergence.fem.given_part import REST, GivenMesh
from convergence.fem.outer_facets import outer_facets

SAME = 1e-5  # of the part's size: nodes of two meshes at one place
TURN = 2.0  # degrees; less is the noise of curved sides
KEPT = 0.6  # of the turn on the finest mesh: a corner keeps it, a curved side loses it
FINER = 1.3  # facets must be shorter by this factor to tell
STEADY = 0.01  # degrees
PLAIN = 30.0  # degrees; a turn that no pair of meshes can explain is a corner from here on


@dataclass(frozen=True, eq=False)
class Outline:
    """The vertices on the outline of one region: node, opening in degrees, mean length of its two facets."""

    nodes: np.ndarray
    opening: np.ndarray
    length: np.ndarray


def outline(made: GivenMesh, cells: np.ndarray) -> Outline:
    """Return the outline of cells of a plane mesh."""
    count = made.nodes.shape[1]
    owned = made.cell_nodes[:, cells]
    start, end = outer_facets(made.shape, made.degree, owned)[0][0][:2]
    both = np.concatenate([start, end])
    nodes, facets = np.unique(both, return_counts=True)
    length = np.linalg.norm(made.nodes[:, end] - made.nodes[:, start], axis=0)
    corners = owned[: element(made.shape, 1).corners]
    angle = np.bincount(corners.ravel(), corner_angles(made, cells).ravel(), minlength=count)
    total = np.bincount(both, np.tile(length, 2), minlength=count)
    return Outline(nodes, angle[nodes], total[nodes] / facets)


def corner_angles(made: GivenMesh, cells: np.ndarray) -> np.ndarray:
    """Return the angle of each cell at its vertices in degrees, (vertices, cells)."""
    ways = corner_ways(made, cells)
    sine = ways[0, 0] * ways[1, 1] - ways[0, 1] * ways[1, 0]
    return np.asarray(np.degrees(np.arctan2(sine, (ways[0] * ways[1]).sum(axis=0))))


def corner_ways(made: GivenMesh, cells: np.ndarray) -> np.ndarray:
    """Return the tangents at each vertex to the next and to the last one, (2, D, vertices, m)."""
    kind = element(made.shape, made.degree)
    local = kind.nodes[: kind.corners]
    slopes = kind.gradients(local.T)
    along = np.array([np.roll(local, -1, axis=0) - local, np.roll(local, 1, axis=0) - local])
    return np.asarray(
        np.einsum("dnm,nkv,wvk->wdvm", made.nodes[:, made.cell_nodes[:, cells]], slopes, along, optimize=True)
    )


def true_openings(meshes: Sequence[GivenMesh], region: str) -> tuple[np.ndarray, np.ndarray]:
    """Return the outline of a region of the finest mesh: its vertices, their openings, 180 where smooth."""
    from scipy.spatial import KDTree

    fine, *coarser = [outline(made, made.regions[region]) for made in reversed(meshes)]
    finest = meshes[-1]
    places, size = finest.nodes[:, fine.nodes].T, np.linalg.norm(np.ptp(finest.nodes, axis=1))
    turn = 180.0 - fine.opening
    own, told = turn.copy(), np.zeros(len(turn), dtype=bool)
    for made, coarse in zip(reversed(meshes[:-1]), coarser, strict=True):
        distance, at = KDTree(made.nodes[:, coarse.nodes].T).query(places)
        ratio = coarse.length[at] / fine.length
        new = (distance <= SAME * size) & (ratio >= FINER) & ~told
        own[new] = extrapolated(turn, 180.0 - coarse.opening[at], np.maximum(ratio, FINER))[new]
        told |= new
    sharp = np.where(told, (np.abs(own) > TURN) & (own / _nonzero(turn) >= KEPT), np.abs(turn) > PLAIN)
    return fine.nodes, np.where(sharp, 180.0 - own, 180.0)


def extrapolated(fine: np.ndarray, coarse: np.ndarray, ratio: np.ndarray) -> np.ndarray:
    """Return the turns of facets of no length, from those of facets that are finer by a ratio.

    A turn that changes is known to about a degree and taken as a whole number of them.
    """
    change = coarse - fine
    own = fine - change / (ratio - 1.0)
    return np.asarray(np.where(np.abs(change) > STEADY, np.round(own), own))


def _nonzero(values: np.ndarray) -> np.ndarray:
    return np.where(values == 0.0, 1.0, values)


def marked_nodes(meshes: Sequence[GivenMesh]) -> np.ndarray:
    """Return the nodes of the finest mesh at corners of regions and at ends of named boundaries."""
    finest = meshes[-1]
    found = [_ends(groups) for name, groups in finest.facets.items() if name != REST]
    for region in finest.regions:
        nodes, opening = true_openings(meshes, region)
        found.append(nodes[opening != 180.0])
    return np.unique(np.concatenate(found))


def _ends(groups: tuple[np.ndarray, ...]) -> np.ndarray:
    """Return the vertices that one facet of a boundary only has."""
    nodes, count = np.unique(np.concatenate([group[:2].ravel() for group in groups]), return_counts=True)
    return np.asarray(nodes[count == 1])


def with_corners(meshes: Sequence[GivenMesh]) -> tuple[GivenMesh, ...]:
    """Return plane meshes with every corner and end of a boundary named: corner_1, corner_2 ... along x, y.

    On coarser meshes it is the nearest vertex on the outline. A point that has a name keeps it; solids are
    returned as they are.
    """
    from scipy.spatial import KDTree

    finest = meshes[-1]
    if finest.dimension != 2:
        return tuple(meshes)
    marked = np.setdiff1d(marked_nodes(meshes), list(finest.vertices.values()))
    step = SAME * np.linalg.norm(np.ptp(finest.nodes, axis=1))
    x, y = np.round(finest.nodes[:, marked] / step)
    places = finest.nodes[:, marked[np.lexsort((y, x))]].T
    found = []
    for made in meshes:
        nodes = np.unique(np.concatenate([outline(made, cells).nodes for cells in made.regions.values()]))
        nearest = nodes[KDTree(made.nodes[:, nodes].T).query(places)[1]] if len(places) else ()
        names = {f"corner_{number}": int(node) for number, node in enumerate(nearest, start=1)}
        found.append(replace(made, vertices={**made.vertices, **names}))
    return tuple(found)
