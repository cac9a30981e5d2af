"""What the figures need of a solved level, as plain arrays; faces of degree 2 are cut into small ones."""

import numpy as np

from convergence.fem.element import Element, element
from convergence.fem.facets import SHAPES
from convergence.fem.mesh import Mesh
from convergence.fem.outer_facets import facet_element, facet_keys
from convergence.fem.pieces import pieces
from convergence.fem.recovery import cell_volumes, energy_error, nodal_values, recovered_von_mises
from convergence.fem.solution import Solution
from convergence.fields import Fields

SHARP = np.cos(np.radians(30.0))
MOST_FACES = 150_000  # more cannot be told apart in a picture; such levels leave no fields


def display(solution: Solution) -> Fields:
    """Return the fields of a solution: the cells of a plane, the surface of a solid."""
    mesh = solution.mesh
    if mesh.dimension == 1:
        return _rod(solution)
    stress = nodal_values(solution, recovered_von_mises(solution))
    error = energy_error(solution) / cell_volumes(solution)
    groups = [(mesh.cell_nodes, np.arange(mesh.cells))] if mesh.dimension == 2 else _surface(mesh)
    drawn: list[np.ndarray] = []
    owners: list[np.ndarray] = []
    edges: list[np.ndarray] = []
    for nodes, owner in groups:
        kind = element(SHAPES[3, mesh.degree, len(nodes)], mesh.degree)
        cuts = pieces(kind)
        corners = np.concatenate([nodes[list(piece)] for piece in cuts], axis=1)
        drawn.append(corners if len(groups) == 1 or len(corners) == 4 else corners[[0, 1, 2, 2]])
        owners.append(np.tile(owner, len(cuts)))
        edges.append(_edges(nodes, kind))
    cells = np.concatenate(drawn, axis=1)
    lines = np.concatenate(edges, axis=1)
    lines = lines[:, _once(lines[[0, -1]])[0]]
    boundary = _outline(cells) if mesh.dimension == 2 else _sharp(cells, mesh.nodes)
    used, cells = np.unique(cells, return_inverse=True)
    number = np.zeros(mesh.nodes.shape[1], dtype=np.int64)
    number[used] = np.arange(len(used))
    return Fields(
        points=mesh.nodes[:, used],
        cells=cells.reshape(-1, len(np.concatenate(owners))),
        edges=number[lines],
        boundary=number[boundary],
        displacement=solution.displacement[:, used],
        von_mises=stress[used],
        error=error[np.concatenate(owners)],
    )


def faces(mesh: Mesh) -> int:
    """Return how many faces the fields of a mesh have."""
    each = 4 if mesh.degree == 2 else 1
    if mesh.dimension < 3:
        return mesh.cells * each
    return each * sum(int(group.shape[1]) for groups in mesh.facets.values() for group in groups)


def _rod(solution: Solution) -> Fields:
    """Return a rod as a strip, as thick as a round rod of the same section."""
    mesh = solution.mesh
    x = mesh.nodes[0]
    radius = np.sqrt(solution.problem.depth(x) / np.pi)
    stress = nodal_values(solution, recovered_von_mises(solution))
    start, end = mesh.cell_nodes[:2]
    upper = len(x)
    cells = np.array([start, end, end + upper, start + upper])
    u = solution.displacement[0]
    return Fields(
        points=np.array([np.tile(x, 2), np.concatenate([-radius, radius])]),
        cells=cells,
        edges=_segments(cells),
        boundary=_outline(cells),
        displacement=np.array([np.tile(u, 2), np.zeros(2 * upper)]),
        von_mises=np.tile(stress, 2),
        error=energy_error(solution) / cell_volumes(solution),
    )


def _surface(mesh: Mesh) -> list[tuple[np.ndarray, np.ndarray]]:
    """Return the facets of all boundaries (k, f), each once, by shape, with the cell behind each."""
    found: dict[int, list[np.ndarray]] = {}
    for groups in mesh.facets.values():
        for group in groups:
            found.setdefault(len(group), []).append(group)
    size = mesh.nodes.shape[1]
    faces = [mesh.cell_nodes[list(face)] for face in mesh.element.faces]
    keys = np.concatenate([facet_keys(face, size) for face in faces])
    order = np.argsort(keys)
    surface = []
    for same in found.values():
        nodes = np.concatenate(same, axis=1)
        corners = facet_element(3, mesh.degree, len(nodes)).corners
        wanted = facet_keys(nodes[:corners], size)
        once = np.sort(np.unique(wanted, return_index=True)[1])
        cells = order[np.searchsorted(keys, wanted[once], sorter=order)] % mesh.cells
        surface.append((nodes[:, once], cells))
    return surface


def _edges(nodes: np.ndarray, kind: Element) -> np.ndarray:
    """Return the nodes along each edge (2, e), with the middle (3, e) at degree 2, of each face."""
    corners = kind.nodes[: kind.corners]
    rows = []
    for a in range(kind.corners):
        b = (a + 1) % kind.corners
        middle = int(np.hypot(*(kind.nodes - 0.5 * (corners[a] + corners[b])).T).argmin())
        rows.append(nodes[[a, b] if kind.degree == 1 else [a, middle, b]])
    return np.concatenate(rows, axis=1)


def _once(segments: np.ndarray) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Return first place, group of each and size of the groups of equal segments (2, n)."""
    low, high = np.sort(segments, axis=0).astype(np.int64)
    _, first, group, count = np.unique(
        low * (segments.max() + 1) + high, return_index=True, return_inverse=True, return_counts=True
    )
    return first, group, count


def _segments(cells: np.ndarray) -> np.ndarray:
    return np.array([cells, np.roll(cells, -1, axis=0)]).reshape(2, -1)


def _outline(cells: np.ndarray) -> np.ndarray:
    """Return the segments (2, b) that belong to one cell only."""
    segments = _segments(cells)
    first, _, count = _once(segments)
    return segments[:, first[count == 1]]


def _sharp(cells: np.ndarray, points: np.ndarray) -> np.ndarray:
    """Return the segments (2, b) at which the surface turns by more than 30°."""
    a, b, c = points[:, cells[:3]].transpose(1, 0, 2)
    normals = np.cross(b - a, c - a, axis=0)
    normals = np.tile(normals / np.linalg.norm(normals, axis=0), len(cells))
    segments = _segments(cells)
    first, group, _ = _once(segments)
    sums = [np.bincount(group, row) for row in normals]
    turned = np.linalg.norm(sums, axis=0) < 2.0 * np.sqrt(0.5 * (1.0 + SHARP))
    proper = segments[0, first] != segments[1, first]
    return segments[:, first[turned & proper]]
