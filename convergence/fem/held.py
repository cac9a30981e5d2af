"""Supports on a mesh: the frame of each node, the unknowns held in it, and their values.

Along a coordinate the frame of a node is that of the part; a support along a normal turns it. Where supports
meet at a node, each holds what the ones before it left free (Gram-Schmidt), so nothing is held twice.
"""

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from scipy import sparse

from convergence.errors import SolvingError, Unsuitable
from convergence.fem.assembly import foundation
from convergence.fem.facets import facet_bases
from convergence.fem.loads import rigid_motions, values_at
from convergence.fem.mesh import Mesh
from convergence.fem.problem import ElasticSupport, Prescribed, Problem, Support
from convergence.fem.strain import unknowns

LOOSE = 1e-12
MOTIONS = {
    1: ("move along x",),
    2: ("move along x", "move along y", "turn"),
    3: ("move along x", "move along y", "move along z", "turn about x", "turn about y", "turn about z"),
}
PARALLEL = 1e-6  # a direction closer than this to those already held adds nothing


@dataclass(frozen=True, eq=False)
class Held:
    """`numbers` the held unknowns, in the nodes' frames, and their `values`; by support their numbers.

    `frame` turns unknowns in the nodes' frames to coordinates of the part, None where none is turned.
    """

    numbers: np.ndarray
    values: np.ndarray
    by_support: Mapping[str, np.ndarray]
    frame: sparse.csr_matrix | None

    def turned(self, vector: np.ndarray) -> np.ndarray:
        """Return a nodal vector of the part's coordinates in the nodes' frames."""
        return vector if self.frame is None else np.asarray(self.frame.T @ vector)

    def back(self, vector: np.ndarray) -> np.ndarray:
        """Return a vector in the nodes' frames in the part's coordinates."""
        return vector if self.frame is None else np.asarray(self.frame @ vector)


def held_by(problem: Problem, mesh: Mesh) -> Held:
    """Return what the supports hold; SolvingError where they leave a rigid motion."""
    places = _Places(mesh)
    for support in problem.supports:
        if isinstance(support, Support):
            places.hold(support)
    found = places.result()
    _require_no_rigid_motion(problem, mesh, found)
    return found


def support_nodes(support: Support, mesh: Mesh) -> np.ndarray:
    """Return the scalar nodes a support acts on."""
    if support.point is not None:
        return np.array([mesh.vertices[support.point]])
    assert support.boundary is not None
    return boundary_nodes(mesh, support.boundary)


def boundary_nodes(mesh: Mesh, boundary: str) -> np.ndarray:
    """Return the scalar nodes on a named boundary."""
    return np.unique(np.concatenate([group.ravel() for group in mesh.facets[boundary]]))


def nodal_normals(mesh: Mesh, boundary: str) -> tuple[np.ndarray, np.ndarray]:
    """Return the nodes of a boundary and the unit outward normal (D, n) there, the mean over its facets."""
    sums = np.zeros((mesh.dimension, mesh.nodes.shape[1]))
    for facets in facet_bases(mesh, boundary, 2 * mesh.degree):
        shares = np.einsum("nq,dfq,fq->dnf", np.abs(facets.shapes), facets.normals, facets.dx)
        for total, share in zip(sums, shares, strict=True):
            total += np.bincount(facets.nodes.ravel(), share.ravel(), minlength=len(total))
    nodes = boundary_nodes(mesh, boundary)
    normals = sums[:, nodes]
    return nodes, normals / np.linalg.norm(normals, axis=0)


class _Places:
    """Directions held so far at every node: `axes[k]` the k-th one (D, nodes), `count` how many."""

    def __init__(self, mesh: Mesh):
        self.mesh = mesh
        dimension, nodes = mesh.nodes.shape
        self.axes = np.zeros((dimension, dimension, nodes))
        self.values = np.zeros((dimension, nodes))
        self.count = np.zeros(nodes, dtype=int)
        self.mine: dict[str, list[np.ndarray]] = {}

    def hold(self, support: Support) -> None:
        mesh = self.mesh
        self.mine[support.name] = []
        nodes = support_nodes(support, mesh)
        wanted = list(zip(np.eye(mesh.dimension), (support.x, support.y, support.z), strict=False))
        for axis, value in wanted:
            if value is not None:
                self._add(support.name, nodes, np.repeat(axis[:, None], len(nodes), axis=1), value)
        if support.normal is not None and support.boundary is not None:
            self._add(support.name, *nodal_normals(mesh, support.boundary), support.normal)
        elif all(value is None for _, value in wanted):
            raise Unsuitable([(support.name, None, "a support that holds x, y, z or the normal")])

    def _add(self, name: str, nodes: np.ndarray, direction: np.ndarray, value: Prescribed) -> None:
        """Hold a direction (D, n) at nodes, as far as it is not held yet."""
        wanted = values_at(value, self.mesh.nodes[:, nodes]) * np.ones(len(nodes))
        left = direction.copy()
        for axis, known in zip(self.axes, self.values, strict=True):
            along = (direction * axis[:, nodes]).sum(axis=0)
            left -= along * axis[:, nodes]
            wanted = wanted - along * known[nodes]
        length = np.linalg.norm(left, axis=0)
        new = length > PARALLEL
        chosen, slot = nodes[new], self.count[nodes[new]]
        self.axes[slot, :, chosen] = (left[:, new] / length[new]).T
        self.values[slot, chosen] = wanted[new] / length[new]
        self.count[chosen] += 1
        self.mine[name].append(self.mesh.dimension * chosen + slot)

    def result(self) -> Held:
        """Number the held unknowns; a node whose directions are no coordinates gets a frame of its own."""
        dimension, nodes = self.values.shape
        unused = np.arange(dimension)[:, None] >= self.count
        straight = (np.abs(self.axes).max(axis=1) > 1.0 - 1e-12) | unused
        turned = ~straight.all(axis=0)
        coordinate = np.abs(self.axes).argmax(axis=1)
        number = dimension * np.arange(nodes) + np.where(turned, np.arange(dimension)[:, None], coordinate)
        value = np.where(turned, 1.0, self.axes.sum(axis=1)) * self.values
        by_support, values = {}, np.zeros(dimension * nodes)
        for name, parts in self.mine.items():
            node, slot = np.divmod(np.concatenate([np.array([], dtype=int), *parts]), dimension)
            by_support[name] = number[slot, node]
            values[by_support[name]] = value[slot, node]
        numbers = np.sort(np.concatenate([np.array([], dtype=int), *by_support.values()]))
        return Held(numbers, values[numbers], by_support, self._frame(np.flatnonzero(turned)))

    def _frame(self, turned: np.ndarray) -> sparse.csr_matrix | None:
        """Return the matrix whose columns are the frames' axes: held directions, then what completes them."""
        if not len(turned):
            return None
        dimension, size = self.mesh.dimension, self.values.size
        known = self.axes[:, :, turned].transpose(2, 1, 0)
        kept = np.arange(dimension) < self.count[turned][:, None, None]
        blocks = np.where(kept, known, np.linalg.svd(known)[0])
        plain = np.ones(size)
        rows = unknowns(turned[None, :], dimension).T
        plain[rows] = 0.0
        across = np.repeat(rows, dimension, axis=1).ravel(), np.tile(rows, (1, dimension)).ravel()
        turned_part = sparse.coo_matrix((blocks.ravel(), across), shape=(size, size))
        return sparse.csr_matrix(turned_part + sparse.diags_array(plain))


def _require_no_rigid_motion(problem: Problem, mesh: Mesh, held: Held) -> None:
    """Check that the held unknowns stop every rigid motion: balanced loads hide a loose part.

    A ring can only move along its axis. An elastic support holds what its springs resist.
    """
    motions = rigid_motions(mesh.nodes - mesh.nodes.mean(axis=1, keepdims=True))
    names = MOTIONS[mesh.dimension]
    if problem.kind == "axisymmetric":
        motions, names = motions[1:2], names[1:2]
    flat = motions / np.where(np.arange(len(motions)) < mesh.dimension, 1.0, mesh.part.size)[:, None, None]
    vectors = flat.transpose(0, 2, 1).reshape(len(flat), -1)
    stopping = np.array([held.turned(vector) for vector in vectors])[:, held.numbers]
    gram = stopping @ stopping.T
    for support in problem.supports:
        if isinstance(support, ElasticSupport):
            gram += _resisted(problem, mesh, support, vectors)
    stopped, modes = np.linalg.eigh(gram)
    if stopped[0] <= LOOSE * max(stopped[-1], 1.0):
        way = names[int(np.abs(modes[:, 0]).argmax())]
        raise SolvingError(f"the supports do not hold the part: it can still {way}; hold it there")


def _resisted(problem: Problem, mesh: Mesh, support: ElasticSupport, vectors: np.ndarray) -> np.ndarray:
    """Return the work of the springs on rigid motions, relative to their stiffness."""
    matrix = foundation(problem, mesh, support)
    return np.asarray(vectors @ (matrix @ vectors.T) / max(float(abs(matrix).max()), 1e-300))
