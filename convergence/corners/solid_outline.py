"""True edges of a solid that is given by its meshes, told from the edges of facets on curved faces.

As in `outline`: at an edge of the part the surface turns by the same angle on every mesh, on a curved face
by an angle that falls with the facets. An edge of facets is one of the part where a coarser mesh has an edge
of facets at the same place and the turn is kept, or where a named boundary ends.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from convergence.corners.edge_chains import edge_chains
from convergence.corners.outline import FINER, KEPT, extrapolated
from convergence.fem.given_part import GivenMesh
from convergence.fem.outer_facets import facet_element, facet_keys, outer_facets

SHALLOW = 15.0  # degrees; edges that turn less are hardly singular and not told from curved faces
PLAIN = 50.0  # degrees; a turn on meshes that are not finer there is an edge from here on
PARALLEL = 0.98  # cosine
NEIGHBOURS = 12  # coarse edges that are looked at
ASIDE = 0.12  # of a coarse edge: chords of one curve are no further apart


@dataclass(frozen=True, eq=False)
class FacetEdges:
    """Edges between two outer facets: ends (2, e), middles and directions (3, e), opening in degrees, length.

    `width` is the mean size of the two facets across the edge: on a curved face the turn goes with it.
    `ways` (2, 3, e) point into the two facets, square to the edge, `facets` (2, e) are their numbers. Of each
    facet: `vertices` (4, f), -1 where there is none, the `keys` that tell it, and of `cells` the one behind.
    """

    ends: np.ndarray
    middles: np.ndarray
    along: np.ndarray
    opening: np.ndarray
    length: np.ndarray
    width: np.ndarray
    ways: np.ndarray
    facets: np.ndarray
    vertices: np.ndarray
    keys: np.ndarray
    cells: np.ndarray

    @property
    def turn(self) -> np.ndarray:
        return np.asarray(180.0 - self.opening)


@dataclass(frozen=True, eq=False)
class SolidEdge:
    """An edge of a part: nodes of the finest mesh along it, the first again at the end of a closed one.

    Opening, `ways` (2, 3) into its two faces and the vertices of a facet on each are those at its middle
    piece (start, end), `cell` is one behind it.
    """

    nodes: tuple[int, ...]
    middle: tuple[int, int]
    opening: float
    ways: np.ndarray
    facets: tuple[tuple[int, ...], tuple[int, ...]]
    cell: int

    @property
    def closed(self) -> bool:
        return self.nodes[0] == self.nodes[-1]


def true_edges(meshes: Sequence[GivenMesh]) -> tuple[SolidEdge, ...]:
    """Return the edges of a solid by its meshes, coarse to fine, in order of their first places."""
    finest = meshes[-1]
    fine = facet_edges(finest)
    own = _own_turn(fine, [facet_edges(made) for made in reversed(meshes[:-1])])
    codes = _codes(finest, fine)[fine.facets]
    sharp = np.flatnonzero((own != 0.0) | (codes[0] != codes[1]))
    low, high = np.sort(codes[:, sharp], axis=0)
    kind = np.array([low, high, np.round(own[sharp]).astype(np.int64)])
    chains = edge_chains(finest.nodes, fine.ends[:, sharp], kind)
    found = [_edge(fine, own, sharp[np.array(members)], nodes) for members, nodes in chains]
    return tuple(sorted(found, key=lambda edge: tuple(np.round(finest.nodes[:, edge.nodes[0]], 6))))


def facet_edges(made: GivenMesh) -> FacetEdges:
    """Return the edges of the outer facets of a mesh that just two of them share."""
    parts, vertices, keys, cells = [], [], [], []
    count = 0
    for nodes, behind in outer_facets(made.shape, made.degree, made.cell_nodes):
        kind = facet_element(3, made.degree, len(nodes))
        numbers = count + np.arange(nodes.shape[1])
        count += nodes.shape[1]
        corners = nodes[: kind.corners]
        vertices.append(np.vstack([corners, np.full((4 - len(corners), len(behind)), -1)]))
        keys.append(facet_keys(corners, made.nodes.shape[1]))
        cells.append(behind)
        for start in range(kind.corners):
            end = (start + 1) % kind.corners
            middle = 0.5 * (kind.nodes[start] + kind.nodes[end])
            tangents = np.einsum(
                "dnf,nk->kdf", made.nodes[:, nodes], kind.gradients(middle[:, None])[:, :, 0]
            )
            normal = np.cross(tangents[0], tangents[1], axis=0)
            along = np.tensordot(kind.nodes[end] - kind.nodes[start], tangents, 1)
            into = np.cross(normal, along, axis=0)
            ends = nodes[[start, end]]
            parts.append(
                (ends, _unit(normal), _unit(into), _across(made, nodes[: kind.corners], ends), numbers)
            )
    ends, normal, into, width, facet = (np.concatenate(rows, axis=-1) for rows in zip(*parts, strict=True))
    pairs = facet_keys(ends, made.nodes.shape[1])
    order = np.argsort(pairs, kind="stable")
    _, first, shared = np.unique(pairs[order], return_index=True, return_counts=True)
    one, other = order[first[shared == 2]], order[first[shared == 2] + 1]
    across = np.linalg.norm(np.cross(normal[:, one], normal[:, other], axis=0), axis=0)
    turn = np.degrees(np.arctan2(across, (normal[:, one] * normal[:, other]).sum(axis=0)))
    convex = (normal[:, one] * into[:, other]).sum(axis=0) <= 0.0
    places = made.nodes[:, ends[:, one]]
    return FacetEdges(
        ends=ends[:, one],
        middles=places.mean(axis=1),
        along=_unit(places[:, 1] - places[:, 0]),
        opening=180.0 - np.where(convex, turn, -turn),
        length=np.linalg.norm(places[:, 1] - places[:, 0], axis=0),
        width=0.5 * (width[one] + width[other]),
        ways=np.array([into[:, one], into[:, other]]),
        facets=np.array([facet[one], facet[other]]),
        vertices=np.concatenate(vertices, axis=1),
        keys=np.concatenate(keys),
        cells=np.concatenate(cells),
    )


def _across(made: GivenMesh, corners: np.ndarray, ends: np.ndarray) -> np.ndarray:
    """Return the size of facets (k, f) square to one of their edges (2, f)."""
    places, edges = made.nodes[:, corners], made.nodes[:, ends]
    one, other = (1, 2) if len(corners) == 3 else (2, 3)
    start = 0 if len(corners) == 3 else 1
    doubled = np.cross(places[:, one] - places[:, 0], places[:, other] - places[:, start], axis=0)
    area = np.linalg.norm(doubled, axis=0) * (1.0 if len(corners) == 3 else 0.5)
    return np.asarray(area / np.linalg.norm(edges[:, 1] - edges[:, 0], axis=0))


def _unit(vectors: np.ndarray) -> np.ndarray:
    length = np.linalg.norm(vectors, axis=0)
    return np.asarray(vectors / np.where(length > 0.0, length, 1.0))


def _own_turn(fine: FacetEdges, coarser: Sequence[FacetEdges]) -> np.ndarray:
    """Return the turn of the part at each edge of facets, 0 on its smooth faces."""
    from scipy.spatial import KDTree

    turn = fine.turn
    own, told, seen = turn.copy(), np.zeros(len(turn), dtype=bool), np.zeros(len(turn), dtype=bool)
    asked = np.flatnonzero(np.abs(turn) > SHALLOW)
    for coarse in coarser:
        count = min(NEIGHBOURS, coarse.middles.shape[1])
        near = np.asarray(KDTree(coarse.middles.T).query(fine.middles[:, asked].T, k=count)[1])
        near = near.reshape(len(asked), count)
        aside = _distance(fine.middles[:, asked], coarse, near) / coarse.length[near]
        parallel = np.abs((fine.along[:, asked, None] * coarse.along[:, near]).sum(axis=0)) > PARALLEL
        aside = np.where(parallel, aside, np.inf)
        rows, best = np.arange(len(asked)), aside.argmin(axis=1)
        edge = near[rows, best]
        found = aside[rows, best] <= ASIDE
        ratio = coarse.width[edge] / fine.width[asked]
        new = found & (ratio >= FINER) & ~told[asked]
        own[asked[new]] = extrapolated(turn[asked], coarse.turn[edge], np.maximum(ratio, FINER))[new]
        told[asked[new]] = True
        seen[asked[found]] = True
    kept = own / np.where(turn == 0.0, 1.0, turn) >= KEPT
    plain = np.abs(turn) > PLAIN
    sharp = np.where(told, kept & (np.abs(own) > SHALLOW), plain & (seen if coarser else True))
    return np.where(sharp & (np.abs(turn) > SHALLOW), own, 0.0)


def _distance(places: np.ndarray, coarse: FacetEdges, near: np.ndarray) -> np.ndarray:
    """Return how far each place (3, n) is from coarse edges (n, k), by their middles and lengths."""
    arm = places[:, :, None] - coarse.middles[:, near]
    share = (arm * coarse.along[:, near]).sum(axis=0)
    half = 0.5 * coarse.length[near]
    return np.asarray(np.linalg.norm(arm - np.clip(share, -half, half) * coarse.along[:, near], axis=0))


def _codes(made: GivenMesh, fine: FacetEdges) -> np.ndarray:
    """Return a number for every outer facet that says which named boundaries it is on."""
    size = made.nodes.shape[1]
    codes = np.zeros(len(fine.keys), dtype=np.int64)
    for number, groups in enumerate(made.facets.values()):
        for group in groups:
            corners = facet_element(3, made.degree, len(group)).corners
            codes += np.isin(fine.keys, facet_keys(group[:corners], size)) * 2**number
    return codes


def _edge(fine: FacetEdges, own: np.ndarray, members: np.ndarray, nodes: tuple[int, ...]) -> SolidEdge:
    at = len(members) // 2
    middle = members[at]
    one, other = fine.facets[:, middle]
    return SolidEdge(
        nodes=nodes,
        middle=(nodes[at], nodes[at + 1]),
        opening=float(180.0 - np.median(own[members])),
        ways=fine.ways[:, :, middle],
        facets=(_vertices(fine, one), _vertices(fine, other)),
        cell=int(fine.cells[one]),
    )


def _vertices(fine: FacetEdges, facet: int) -> tuple[int, ...]:
    return tuple(node for node in fine.vertices[:, facet].tolist() if node >= 0)
