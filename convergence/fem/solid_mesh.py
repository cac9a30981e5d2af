"""Nodes, cells and facets of a swept part: the mesh of its plan, repeated on every plane of nodes.

Wedges and tetrahedra stand on the triangles of the plan. The rectangles between them are halved from the
vertex that comes first along a fixed direction, so that neighbours agree and refined meshes are alike.
"""

from collections.abc import Iterator, Mapping
from itertools import pairwise

import numpy as np

from convergence.fem.element import Element, Shape, element
from convergence.fem.grid import Grids, chain_facets, cut
from convergence.fem.solid_part import Cap, Face, Side, SolidPart

DIRECTION = np.array([1.0, 0.6180339887498949])  # along no edge that a drawing would have
PLAN: dict[str, Shape] = {"hexahedron": "quadrilateral", "wedge": "triangle", "tetrahedron": "triangle"}
# three tetrahedra in a wedge over v0, v1, v2: (vertex, 0 at the bottom or 1 at the top)
TETRAHEDRA = (
    ((0, 0), (1, 0), (2, 0), (2, 1)),
    ((0, 0), (1, 0), (2, 1), (1, 1)),
    ((0, 0), (0, 1), (1, 1), (2, 1)),
)
Arrays = tuple[
    np.ndarray, np.ndarray, dict[str, tuple[np.ndarray, ...]], dict[str, int], dict[str, np.ndarray]
]


def solid_arrays(part: SolidPart, counts: Mapping[int, int], shape: Shape, degree: int) -> Arrays:
    """Return nodes, cell_nodes, facets, vertices and regions as `Mesh` wants them."""
    sweep = _Swept(part, counts, shape, degree)
    cells, owner = sweep.cells()
    facets = {name: tuple(sweep.facets(faces)) for name, faces in part.boundaries.items()}
    used = np.zeros(sweep.flat.size * len(sweep.s), dtype=bool)
    used[cells] = True
    number = np.cumsum(used) - 1
    x, y = sweep.places
    places = part.sweep.place(x[None, :], y[None, :], sweep.s[:, None]).reshape(3, -1)
    regions = part.regions or {"body": tuple(range(len(part.plan.blocks)))}
    vertices = {}
    for plane, (name, _) in enumerate(part.planes):
        for point, node in sweep.flat.points.items():
            if f"{point}_{name}" in part.points:
                vertices[f"{point}_{name}"] = int(number[node + sweep.base[plane] * sweep.flat.size])
    return (
        places[:, used],
        number[cells],
        {name: tuple(number[group] for group in groups) for name, groups in facets.items()},
        vertices,
        {name: np.flatnonzero(np.isin(owner, members)) for name, members in regions.items()},
    )


class _Swept:
    """The plan's grids and the planes of nodes; node n of the plan on plane k is n + k × plan nodes."""

    def __init__(self, part: SolidPart, counts: Mapping[int, int], shape: Shape, degree: int):
        self.part, self.degree = part, degree
        self.kind, self.plan_kind = element(shape, degree), element(PLAN[shape], degree)
        self.flat = Grids(part.plan, counts, degree)
        self.places = self.flat.places(straight_diagonals=shape != "hexahedron")
        self.rank = DIRECTION @ self.places
        self.steps = [degree * counts[family] for family in part.layer_families]
        self.base = part.plane_numbers(counts, degree)
        shares = [np.linspace(0.0, 1.0, n + 1) for n in self.steps]
        levels = [part.steps(layer, share)[1:] for layer, share in enumerate(shares)]
        self.s = np.concatenate([[part.planes[0][1]], *levels])

    def cells(self) -> tuple[np.ndarray, np.ndarray]:
        """Return the nodes (k, m) of all cells and the block of the plan each belongs to."""
        flat = [cut(ids, self.plan_kind) for ids in self.flat.blocks]
        found, owner = [], []
        for layer, steps in enumerate(self.steps):
            members = self.part.members(layer)
            plan = np.concatenate([flat[block] for block in members], axis=1)
            blocks = np.repeat(members, [flat[block].shape[1] for block in members])
            column = self._tetrahedra(plan) if self.kind.shape == "tetrahedron" else self._prisms(plan)
            start = self.flat.size * (self.base[layer] + np.arange(0, steps, self.degree))
            cells = column[:, None, :] + start[:, None]
            found.append(cells.reshape(len(column), -1))
            owner.append(np.tile(np.repeat(blocks, column.shape[1] // plan.shape[1]), len(start)))
        return np.concatenate(found, axis=1), np.concatenate(owner)

    def _prisms(self, plan: np.ndarray) -> np.ndarray:
        """Return the cells of one step over the cells of the plan: hexahedra or wedges."""
        flat = self.plan_kind.nodes
        rows = []
        for x, y, z in self.kind.nodes:
            node = int(np.hypot(*(flat - (x, y)).T).argmin())
            rows.append(plan[node] + self.flat.size * round(self.degree * z))
        return np.array(rows)

    def _tetrahedra(self, plan: np.ndarray) -> np.ndarray:
        """Return three tetrahedra over each triangle (k, 3 m), those of a triangle together."""
        between = _between(plan, self.plan_kind)
        order = np.argsort(self.rank[plan[:3]], axis=0)
        odd = (order == np.array([[0, 2, 1], [1, 0, 2], [2, 1, 0]])[:, :, None]).all(axis=1).any(axis=0)
        many = np.arange(plan.shape[1])
        pieces = []
        for vertices in TETRAHEDRA:
            turned = (vertices[0], vertices[1], vertices[3], vertices[2])
            rows = []
            for a, b in _parents(self.kind):
                even_nodes = self._middle(between, order, many, vertices[a], vertices[b])
                odd_nodes = self._middle(between, order, many, turned[a], turned[b])
                rows.append(np.where(odd, odd_nodes, even_nodes))
            pieces.append(np.array(rows))
        return np.stack(pieces, axis=2).reshape(len(pieces[0]), -1)

    def _middle(
        self,
        between: np.ndarray,
        order: np.ndarray,
        many: np.ndarray,
        first: tuple[int, int],
        second: tuple[int, int],
    ) -> np.ndarray:
        """Return the node between two vertices of the wedges, a vertex where they are the same."""
        up = self.degree * (first[1] + second[1]) // 2
        nodes = np.asarray(between[order[first[0]], order[second[0]], many])
        return np.asarray(nodes + self.flat.size * up)

    def facets(self, faces: tuple[Face, ...]) -> Iterator[np.ndarray]:
        """Yield the outward facets of faces, in groups of one shape."""
        groups: dict[int, list[np.ndarray]] = {}
        for face in faces:
            found = self._side(face) if isinstance(face, Side) else self._cap(face)
            groups.setdefault(len(found), []).append(found)
        for group in groups.values():
            yield np.hstack(group)

    def _cap(self, face: Cap) -> np.ndarray:
        cells = cut(self.flat.blocks[face.block], self.plan_kind)
        if face.block in self.part.members(face.plane):  # the part is above: turn the facet down
            mirrored = self.plan_kind.nodes[:, ::-1]
            cells = cells[[int(np.hypot(*(self.plan_kind.nodes - at).T).argmin()) for at in mirrored]]
        return np.asarray(cells + self.flat.size * self.base[face.plane])

    def _side(self, face: Side) -> np.ndarray:
        chain = self.flat.along(*face.edge)
        levels = np.arange(self.base[face.layer], self.base[face.layer + 1] + 1)
        grid = chain[:, None] + self.flat.size * levels[None, :]
        if self.kind.shape != "tetrahedron":
            return cut(grid, element("quadrilateral", self.degree))
        first = chain_facets(chain, self.degree)
        rising = np.repeat(self.rank[first[0]] < self.rank[first[1]], (len(levels) - 1) // self.degree)
        halved = cut(grid, element("triangle", self.degree))
        turned = cut(grid[::-1], element("triangle", self.degree)).reshape(len(halved), len(first[0]), -1)
        mirrored = [1, 0, 2, 3, 5, 4][: len(halved)]
        turned = turned[:, ::-1].reshape(len(halved), -1)[mirrored]
        return np.where(np.repeat(rising, 2), halved, turned)


def _parents(kind: Element) -> list[tuple[int, int]]:
    """Return the two vertices each node lies between, the same twice for a vertex."""
    corners = kind.nodes[: kind.corners]
    pairs = [(a, b) for a in range(kind.corners) for b in range(a, kind.corners)]
    middles = np.array([0.5 * (corners[a] + corners[b]) for a, b in pairs])
    return [pairs[int(np.linalg.norm(middles - at, axis=1).argmin())] for at in kind.nodes]


def _between(plan: np.ndarray, kind: Element) -> np.ndarray:
    """Return the node (3, 3, m) between each two vertices of triangles."""
    found = np.zeros((3, 3, plan.shape[1]), dtype=np.int64)
    for node, (a, b) in enumerate(_parents(kind)):
        found[a, b] = found[b, a] = plan[node]
    return found


def edge_nodes(
    part: SolidPart, counts: Mapping[int, int], degree: int, points: tuple[str, ...]
) -> np.ndarray:
    """Return the nodes of a mesh along an edge through named points, ascending."""
    flat = Grids(part.plan, counts, degree)
    base = part.plane_numbers(counts, degree)
    known = {
        f"{point}_{plane}": (point, number)
        for number, (plane, _) in enumerate(part.planes)
        for point in flat.points
    }
    found = []
    for (point, plane), (other, further) in pairwise(known[name] for name in points):
        if plane == further:
            found.append(flat.along(point, other) + flat.size * base[plane])
        else:
            low, high = sorted((base[plane], base[further]))
            found.append(flat.points[point] + flat.size * np.arange(low, high + 1))
    return np.searchsorted(used_nodes(part, counts, degree), np.unique(np.concatenate(found)))


def used_nodes(part: SolidPart, counts: Mapping[int, int], degree: int) -> np.ndarray:
    """Return which nodes of the full sweep (all plan nodes on all planes) the part's own layers use."""
    grids = Grids(part.plan, counts, degree)
    base = part.plane_numbers(counts, degree)
    used = np.zeros((base[-1] + 1, grids.size), dtype=bool)
    for layer in range(part.layers):
        flat = np.unique(np.concatenate([grids.blocks[block].ravel() for block in part.members(layer)]))
        used[base[layer] : base[layer + 1] + 1, flat] = True
    return np.flatnonzero(used)
