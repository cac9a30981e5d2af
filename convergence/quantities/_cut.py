"""Cut of a solid by a plane, and the traction on it.

Each cell is split into tetrahedra between its nodes, and these are cut as if their faces were flat. That is
exact where the cells have flat faces; on curved cells the outline of the cut is wrong by O(h²).
"""

from dataclasses import dataclass
from functools import cache
from itertools import product
from typing import Literal

import numpy as np
from scipy.spatial import Delaunay

from convergence.dimensions import Point
from convergence.errors import require
from convergence.fem.element import Shape, element
from convergence.fem.mesh import Mesh
from convergence.fem.solution import Solution
from convergence.quantities._place import Recovery, place_of, stress_in, stress_order, tensor, unit

ON_PLANE = 1e-9  # of the part's size: nodes as near as this count as in front of the plane
RULE_ORDER = 4
Component = Literal["normal", "x", "y", "z"]
Triangle = tuple[tuple[int, int], ...]


@dataclass(frozen=True)
class Cut:
    """Traction (3, n, q) from the front of the plane on what lies behind it, at `arm` (3, n, q) from `about`.

    `areas` (n, q) are the shares of the cut, `normal` the plane's.
    """

    traction: np.ndarray
    arm: np.ndarray
    areas: np.ndarray
    normal: np.ndarray

    def sum(self, vectors: np.ndarray, component: Component) -> float:
        """Return the integral over the cut of a component of vectors (3, n, q)."""
        along = self.normal if component == "normal" else np.eye(3)["xyz".index(component)]
        return float((np.einsum("i,inq->nq", along, vectors) * self.areas).sum())


def cut_order(degree: int, shape: str, recovery: Recovery) -> float:
    """Return the order of the stress, at most 2: that of the outline where cells are curved."""
    return min(2.0, stress_order(degree, shape, recovery))


def cut(
    solution: Solution,
    measure: str,
    at: Point | str,
    normal: tuple[float, ...],
    radius: float | None,
    recovery: Recovery,
) -> Cut:
    """Return the cut through a point. Unsuitable where the part is no solid or the plane misses it."""
    mesh = solution.mesh
    require((mesh.dimension == 3, "measure", measure, "a solid; section_force or section_moment in a plane"))
    about, across = np.array(place_of(mesh.part, at)), unit(normal, "normal", 3)
    cells, corners, local = _triangles(mesh, about, across)
    kind = element("triangle", 1)
    points, weights = kind.rule(RULE_ORDER)
    shapes = kind.shapes(points)
    sides = corners[:, 1:] - corners[:, :1]
    areas = np.linalg.norm(np.cross(sides[:, 0], sides[:, 1], axis=0), axis=0)[:, None] * weights
    arm = np.einsum("cvn,vq->cnq", corners, shapes) - about[:, None, None]
    if radius is not None:
        areas = np.where(np.linalg.norm(arm, axis=0) <= radius, areas, 0.0)
    require((float(areas.sum()) > 0.0, "at", at, "a plane that cuts the part, within `radius` where given"))
    stress = stress_in(solution, cells, np.einsum("cvn,vq->cnq", local, shapes), recovery)
    return Cut(np.einsum("ijnq,j->inq", tensor(stress), across), arm, areas, across)


def _triangles(mesh: Mesh, at: np.ndarray, normal: np.ndarray) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Return the triangles that make up a cut: cells (n,), corners (3, 3, n) in space and in the cells."""
    height = normal @ (mesh.nodes - at[:, None]) + ON_PLANE * mesh.part.size
    around = height[mesh.cell_nodes]
    met = np.flatnonzero((around.min(axis=0) < 0.0) & (around.max(axis=0) >= 0.0))
    tetrahedra = _tetrahedra(mesh.shape, mesh.degree)
    heights = around[:, met][tetrahedra]
    above = heights >= 0.0
    found: list[tuple[np.ndarray, ...]] = [(np.zeros(0, int), np.zeros((3, 3, 0)), np.zeros((3, 3, 0)))]
    for pattern in product((False, True), repeat=4):
        which, column = np.nonzero((above == np.array(pattern)[None, :, None]).all(axis=1))
        numbers, height_of = tetrahedra[which].T, heights[which, :, column].T
        places = mesh.nodes[:, mesh.cell_nodes[numbers, met[column]]]
        local = mesh.element.nodes[numbers].transpose(2, 0, 1)
        for triangle in _cut_tetrahedron(pattern):
            a, b = np.array(triangle).T
            share = height_of[a] / (height_of[a] - height_of[b])
            between = [values[:, a] + share * (values[:, b] - values[:, a]) for values in (places, local)]
            found.append((met[column], *between))
    cells, corners, inside = (np.concatenate(parts, axis=-1) for parts in zip(*found, strict=True))
    return cells, corners, inside


@cache
def _tetrahedra(shape: Shape, degree: int) -> np.ndarray:
    """Return the nodes (k, 4) of tetrahedra that fill a cell."""
    nodes = element(shape, degree).nodes
    simplices = Delaunay(nodes).simplices
    volumes = np.abs(np.linalg.det(nodes[simplices[:, 1:]] - nodes[simplices[:, :1]]))
    return np.asarray(simplices[volumes > 1e-9])


def _cut_tetrahedron(above: tuple[bool, ...]) -> list[Triangle]:
    """Return the triangles of a cut by the edges their corners lie on; `above` tells the vertices apart."""
    up, down = ([v for v in range(4) if above[v] == side] for side in (True, False))
    if len(up) == 2:
        (a, b), (c, d) = up, down
        return [((a, c), (a, d), (b, d)), ((a, c), (b, d), (b, c))]
    return [tuple((u, v) for u in up for v in down)] if up and down else []
