"""A mesh whose inner vertices are moved at random; nodes between vertices follow them."""

from dataclasses import replace
from itertools import combinations

import numpy as np

from convergence.fem.element import Element, element
from convergence.fem.mesh import Mesh


def perturbed(mesh: Mesh, share: float, random: np.random.Generator) -> Mesh:
    """Return the mesh with vertices moved by up to `share` of the shortest cell edge at them.

    Vertices on the outside, where regions meet, and with a name stay. SolvingError where a cell is inverted.
    """
    kind = mesh.element
    vertices = mesh.cell_nodes[: kind.corners]
    reach = np.full(mesh.nodes.shape[1], np.inf)
    for one, other in combinations(vertices, 2):
        length = np.linalg.norm(mesh.nodes[:, one] - mesh.nodes[:, other], axis=0)
        np.minimum.at(reach, one, length)
        np.minimum.at(reach, other, length)
    reach[_fixed(mesh)] = 0.0
    moves = random.normal(size=mesh.nodes.shape)
    moves /= np.linalg.norm(moves, axis=0)
    moves *= share * random.uniform(size=moves.shape[1]) ** (1.0 / mesh.dimension)
    moves *= np.where(np.isfinite(reach), reach, 0.0)
    moved = replace(mesh, nodes=_shifted(mesh, moves))
    moved.require_positive()
    return moved


def _shifted(mesh: Mesh, moves: np.ndarray) -> np.ndarray:
    """Return the nodes, each moved by the mean of the vertices of its cell as its place has them."""
    weights = element(mesh.shape, 1).shapes(mesh.element.nodes.T)
    vertices = mesh.cell_nodes[: mesh.element.corners]
    shift = np.zeros_like(mesh.nodes)
    shift[:, mesh.cell_nodes] = np.einsum("vj,dvm->djm", weights, moves[:, vertices])
    moved: np.ndarray = mesh.nodes + shift
    return moved


def _fixed(mesh: Mesh) -> np.ndarray:
    """Return the numbers of the vertices that stay."""
    kind = mesh.element
    vertices = mesh.cell_nodes[: kind.corners]
    outside = []
    for group in _faces(kind):
        faces = np.concatenate([np.sort(vertices[list(face)], axis=0).T for face in group])
        _, first, count = np.unique(faces, axis=0, return_index=True, return_counts=True)
        outside.append(faces[first[count == 1]].ravel())
    owners = [np.unique(vertices[:, cells]) for cells in mesh.regions.values()]
    shared = [np.intersect1d(one, other) for one, other in combinations(owners, 2)]
    return np.concatenate([*outside, *shared, np.array(list(mesh.vertices.values()), dtype=int)])


def _faces(kind: Element) -> list[list[tuple[int, ...]]]:
    """Return the vertices of the faces of a cell, faces of as many vertices together."""
    places = kind.nodes[: kind.corners]
    dimension = places.shape[1]
    heights = [*places.T, *(1.0 - places.T), 1.0 - places[:, :2].sum(axis=1), 1.0 - places.sum(axis=1)]
    found = set()
    for height in heights:
        on = np.flatnonzero(np.abs(height) < 1e-9)
        if height.min() > -1e-9 and len(on) >= dimension:
            found.add(tuple(int(number) for number in on))
    sizes = sorted({len(face) for face in found})
    return [[face for face in sorted(found) if len(face) == size] for size in sizes]
