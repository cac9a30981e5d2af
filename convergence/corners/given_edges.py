"""The edges of a solid that is given by its meshes, named, with the material around each."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise
from weakref import WeakKeyDictionary

import numpy as np

from convergence.corner import Corner
from convergence.corners.fans import Face, Fan, Wedge
from convergence.corners.given_sites import facet_key
from convergence.corners.outline import SAME, with_corners
from convergence.corners.solid_outline import SolidEdge, true_edges
from convergence.fem.given_part import GivenMesh, GivenPart
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh
from convergence.fem.outer_facets import outer_facets

WIDEST = 120.0  # degrees of one wedge
STRAIGHT = 1e-6  # of the part's size
ALONG = 0.1  # of a cell: nodes this near to an edge are on it

_found: WeakKeyDictionary[GivenPart, tuple[SolidEdge, ...]] = WeakKeyDictionary()


@dataclass(frozen=True, eq=False)
class GivenEdge:
    """An edge: names of its ends, places along it (n, 3), its middle, the fan of material around it."""

    points: tuple[str, ...]
    path: np.ndarray
    middle: np.ndarray
    fan: Fan


def with_edges(meshes: Sequence[GivenMesh]) -> tuple[GivenMesh, ...]:
    """Return meshes with the corners of a plane part named, of a solid the ends of its edges.

    These are corner_1, corner_2 ... along x, y, z; on coarser meshes the nearest vertex on the surface.
    """
    from scipy.spatial import KDTree

    if meshes[-1].dimension != 3:
        return with_corners(meshes)
    names = _names(meshes[-1], true_edges(meshes))
    places = meshes[-1].nodes[:, list(names)].T
    found = []
    for made in meshes:
        groups = outer_facets(made.shape, made.degree, made.cell_nodes)
        nodes = np.unique(np.concatenate([group.ravel() for group, _ in groups]))
        nearest = nodes[KDTree(made.nodes[:, nodes].T).query(places)[1]] if names else []
        own = {name: int(node) for name, node in zip(names.values(), nearest, strict=True)}
        found.append(replace(made, vertices={**made.vertices, **own}))
    return tuple(found)


def given_edges(part: GivenPart, materials: Mapping[str, Material]) -> Iterator[GivenEdge]:
    """Yield the edges of a solid, with the openings of the part and directions of the finest mesh."""
    edges = _found.get(part)
    if edges is None:
        edges = _found[part] = true_edges(part.telling)
    finest = part.finest
    names = _names(finest, edges)
    for edge in edges:
        points = tuple(names[node] for node in _ends(edge))
        path = finest.nodes[:, edge.nodes].T
        middle = finest.nodes[:, edge.middle].mean(axis=1)
        chord, arm = path[-1] - path[0], path - path[0]
        aside = arm - np.outer(arm @ chord, chord) / max(float(chord @ chord), 1e-300)
        if not edge.closed and np.abs(aside).max() < STRAIGHT * part.size:
            path = path[[0, -1]]
        region = next(name for name, cells in finest.regions.items() if edge.cell in cells)
        yield GivenEdge(points, path, middle, _fan(finest, edge, middle, materials[region], "-".join(points)))


def path_nodes(mesh: Mesh, corner: Corner) -> np.ndarray:
    """Return the nodes of a mesh along an edge."""
    from scipy.spatial import KDTree

    path = np.array(corner.path)
    near = ALONG * mesh.h
    pieces = [
        np.linspace(start, end, 2 + int(np.linalg.norm(end - start) / near)) for start, end in pairwise(path)
    ]
    distance = KDTree(np.concatenate(pieces)).query(mesh.nodes.T, distance_upper_bound=near)[0]
    return np.flatnonzero(distance < near)


def _ends(edge: SolidEdge) -> tuple[int, ...]:
    """Return the nodes at the ends of an edge, of a closed one with the node half around between them."""
    half = (edge.nodes[len(edge.nodes) // 2],) if edge.closed else ()
    return (edge.nodes[0], *half, edge.nodes[-1])


def _names(made: GivenMesh, edges: Sequence[SolidEdge]) -> dict[int, str]:
    """Return the name of every node at an end of an edge, in the order of their places."""
    nodes = np.unique([node for edge in edges for node in _ends(edge)]).astype(int)
    step = SAME * float(np.linalg.norm(np.ptp(made.nodes, axis=1)))
    order = np.lexsort(np.round(made.nodes[:, nodes] / step)[::-1])
    return {int(node): f"corner_{number}" for number, node in enumerate(nodes[order], start=1)}


def _fan(made: GivenMesh, edge: SolidEdge, middle: np.ndarray, material: Material, name: str) -> Fan:
    """Return the material from one face of an edge to the other, in wedges that are not too wide."""
    first = edge.ways[0]
    start, end = made.nodes[:, edge.middle[0]], made.nodes[:, edge.middle[1]]
    along = (end - start) / np.linalg.norm(end - start)
    inward = made.nodes[:, made.cell_nodes[:, edge.cell]].mean(axis=1) - middle
    inward = inward - (inward @ along) * along - (inward @ first) * first
    inward = inward / np.linalg.norm(inward)
    count = int(np.ceil(edge.opening / WIDEST))
    angles = np.radians(np.linspace(0.0, edge.opening, count + 1))
    ways = np.outer(np.cos(angles), first) + np.outer(np.sin(angles), inward)
    outer = [facet_key(made, np.array(facet)) for facet in edge.facets]
    between: list[Face] = [(frozenset((name, str(k))), 0) for k in range(1, count)]
    faces = [outer[0], *between, outer[1]]
    return Fan(tuple(Wedge(faces[k], faces[k + 1], ways[k : k + 2], material) for k in range(count)))
