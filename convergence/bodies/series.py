"""A series of meshes of files: the same part, from coarse to fine by their measured sizes."""

from collections.abc import Mapping, Sequence
from itertools import pairwise

import numpy as np

from convergence.bodies.file_mesh import FileMesh
from convergence.bodies.repairs import jacobians
from convergence.errors import Fault, InputError
from convergence.fem.element import SIMPLICES, element
from convergence.fem.outer_facets import facet_corners, outer_facets

# A straight side as long as the radius of the circle it stands for is 0.13 of its length away from it in its
# middle: meshes of one part may be apart by as much of the size of each facet of their boundaries.
SAG = 0.15
BOX = 2.0 * SAG
DIGITS = 1e-5  # of the size of a part: what its places may be apart by, as files print few digits
SAME = 1e-9  # of the size of a mesh: nodes as near as that are the same


def measure(mesh: FileMesh) -> float:
    """Return the area or volume of all cells, exact for curved cells."""
    total = 0.0
    for group in mesh.groups:
        kind = element(group.shape, group.degree)
        bent = kind.degree - 1 if kind.shape in SIMPLICES else kind.degree
        local, weights = kind.rule(max(1, kind.dimension * bent))
        for _, _, jacobian in jacobians(mesh.nodes, kind, group.cell_nodes, local):
            total += float((jacobian @ weights).sum())
    return total


def check_series(found: Sequence[FileMesh]) -> tuple[tuple[FileMesh, ...], tuple[str, ...]]:
    """Return meshes of one part from coarse to fine, with a remark where they stood in another order.

    InputError where two are the same mesh, or where one is of another part than the finest: in a plane and
    in space, in another box, or of another area or volume, by more than straight
    sides on a curved boundary make.
    """
    measures = [measure(mesh) for mesh in found]
    sizes = [(own / mesh.cells) ** (1.0 / mesh.dimension) for own, mesh in zip(measures, found, strict=True)]
    order = sorted(range(len(found)), key=lambda at: -sizes[at])
    ordered = tuple(found[at] for at in order)
    finest = ordered[-1]
    faults = []
    for coarser, finer in pairwise(ordered):
        if _same(coarser, finer):
            right = "each mesh of a series must be finer than the one before it"
            faults.append(Fault(str(finer.path), f"the same mesh as {coarser.path.name}", right))
    for at in order[:-1]:
        mesh = found[at]
        if other := _other_part(mesh, finest, measures[at], measures[order[-1]]):
            right = "the meshes of a series must be of the same part, in the same place and unit"
            faults.append(Fault(str(mesh.path), f"another part than {finest.path.name}: {other}", right))
    if faults:
        raise InputError(faults)
    if order == sorted(order):
        return ordered, ()
    names = ", ".join(mesh.path.name for mesh in ordered)
    return ordered, (f"the files are put in order, coarse to fine: {names}",)


def _same(one: FileMesh, other: FileMesh) -> bool:
    if one.nodes.shape != other.nodes.shape:
        return False
    return bool(np.abs(one.nodes - other.nodes).max() <= SAME * np.ptp(one.nodes, axis=1).max())


def _other_part(mesh: FileMesh, finest: FileMesh, own: float, whole: float) -> str:
    """Return in what a mesh is of another part than the finest, "" where it is of the same."""
    if mesh.dimension != finest.dimension:
        return "one lies in a plane, the other does not"
    ends, theirs = _ends(mesh), _ends(finest)
    span = float(np.ptp(ends, axis=0).max())
    facets = _outer_corners(mesh)
    flat = _flat(mesh, facets, ends, DIGITS * span)
    longest, bulge = _curving(mesh, facets, flat)
    for (side, axis), apart in np.ndenumerate(np.abs(ends - theirs)):
        if apart > DIGITS * span + (0.0 if (side, axis) in flat else BOX * longest):
            here, there = (f"{low:g} … {high:g}" for low, high in (ends[:, axis], theirs[:, axis]))
            return f"{'xyz'[mesh.axes[axis]]} is {here}, there {there}"
    if abs(own - whole) > DIGITS * whole + SAG * bulge:
        word = "area" if mesh.dimension == 2 else "volume"
        return f"its {word} is {own:.6g}, there {whole:.6g}"
    return ""


def _ends(mesh: FileMesh) -> np.ndarray:
    """Return the lowest and highest coordinates (2, D)."""
    return np.array([mesh.nodes.min(axis=1), mesh.nodes.max(axis=1)])


def _outer_corners(mesh: FileMesh) -> list[np.ndarray]:
    """Return the vertices (k, f) of the outer facets, one array for each k and group."""
    found = []
    for group in mesh.groups:
        for facets, _ in outer_facets(group.shape, group.degree, group.cell_nodes):
            found.append(facets[: facet_corners(mesh.dimension, len(facets))])
    return found


def _flat(
    mesh: FileMesh, facets: Sequence[np.ndarray], ends: np.ndarray, near: float
) -> dict[tuple[int, int], list[np.ndarray]]:
    """Return which facets lie in the plane at an end of the part, by the end and its axis, where it is flat.

    It is where a vertex has all its facets in the plane: one facet alone may stand for a round.
    """
    found = {}
    every = _facets_of_nodes(mesh, facets)
    for (side, axis), end in np.ndenumerate(ends):
        inside = [(np.abs(mesh.nodes[axis][part] - end) <= near).all(axis=0) for part in facets]
        own = _facets_of_nodes(mesh, [part[:, mask] for part, mask in zip(facets, inside, strict=True)])
        if ((own > 0) & (own == every)).any():
            found[side, axis] = inside
    return found


def _facets_of_nodes(mesh: FileMesh, facets: Sequence[np.ndarray]) -> np.ndarray:
    every = np.concatenate([part.ravel() for part in facets])
    return np.bincount(every, minlength=mesh.nodes.shape[1])


def _curving(
    mesh: FileMesh, facets: Sequence[np.ndarray], flat: Mapping[tuple[int, int], Sequence[np.ndarray]]
) -> tuple[float, float]:
    """Return the longest side of facets that may be curved, and the sum of longest sides times sizes."""
    longest, total = 0.0, 0.0
    for number, part in enumerate(facets):
        known = np.any([np.zeros(part.shape[1], dtype=bool), *(m[number] for m in flat.values())], axis=0)
        corners = mesh.nodes[:, part[:, ~known]]
        sides = np.linalg.norm(corners - np.roll(corners, 1, axis=1), axis=0).max(axis=0)
        size = sides
        if mesh.dimension == 3:
            one = corners[:, 2] - corners[:, 0]
            other = corners[:, -1 if len(part) == 4 else 1] - corners[:, 1 if len(part) == 4 else 0]
            size = 0.5 * np.linalg.norm(np.cross(one, other, axis=0), axis=0)
        longest = max(longest, float(sides.max(initial=0.0)))
        total += float((sides * size).sum())
    return longest, total
