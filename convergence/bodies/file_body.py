"""The body in a file: cells of the highest dimension, in our order, the right way round, with all nodes."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from pathlib import Path

import numpy as np
from scipy import sparse

from convergence.bodies.file_cells import Block, CellGroup, completed, ordered, standard
from convergence.bodies.repairs import coincident, face_keys, joined, shared_faces, turn, used_nodes
from convergence.errors import Fault, InputError, listing
from convergence.fem.element import element

PLANE = 1e-6  # of the size of a mesh: a coordinate that changes by less is constant
TOGETHER = 1e-7  # of the size of a mesh: nodes this near are one where nodes are merged
SHOWN = 5


@dataclass(frozen=True, eq=False)
class Body:
    """places (D, n + added) of the file's nodes and those added by `weights` (added, n); groups on them.

    `axes` are the coordinates of the file that are kept, `source` (n,) the node that each was merged into.
    """

    places: np.ndarray
    groups: tuple[CellGroup, ...]
    blocks: tuple[tuple[Block, ...], ...]
    weights: sparse.csr_array
    axes: tuple[int, ...]
    source: np.ndarray
    remarks: tuple[str, ...]


def body(path: Path, points: np.ndarray, blocks: Sequence[Block], merge: bool) -> Body:
    """Return the body of points (n, 2 or 3) and blocks of cells; InputError has every fault of its cells."""
    own = _of_the_body(path, blocks)
    _require_nodes(path, points, own)
    axes = _axes(path, points, own)
    places = points[:, axes].T
    planar = ["the cells lie in a plane and are read as a plane mesh"] if len(axes) < points.shape[1] else []
    source, merged = _merged(places, own, merge)
    mine, orders = zip(
        *(standard(places, replace(block, cells=source[block.cells])) for block in own), strict=True
    )
    cells = [ordered(block) for block in mine]
    added = completed(cells, mine, places.shape[1])
    places = np.hstack([places, (added.weights @ places.T).T])
    given, members = _grouped(mine, cells)
    groups, turned = _repaired(path, places, given)
    remarks = (*planar, *merged, *filter(None, orders), *added.remarks, *turned)
    return Body(places, groups, members, added.weights, tuple(axes), source, remarks)


def _of_the_body(path: Path, blocks: Sequence[Block]) -> list[Block]:
    dimension = max((block.dimension for block in blocks if len(block.cells)), default=0)
    mine = [block for block in blocks if block.dimension == dimension and block.kind and len(block.cells)]
    if dimension < 2 or not mine:
        found = listing(sorted({block.name for block in blocks if len(block.cells)}))
        right = "a body needs triangles, quadrilaterals, tetrahedra, hexahedra or wedges of degree 1 or 2"
        raise InputError([Fault(str(path), f"no cells of a body (found: {found})", right)])
    return mine


def _require_nodes(path: Path, points: np.ndarray, blocks: Sequence[Block]) -> None:
    faults = []
    finite = np.isfinite(points).all(axis=1)
    for block in blocks:
        outside = np.asarray(((block.cells < 0) | (block.cells >= len(points))).any(axis=1))
        inside = np.where(outside[:, None], 0, block.cells)
        lost = ~outside & ~finite[inside].all(axis=1)
        row = np.sort(block.cells, axis=1)
        twice = ~outside & np.equal(row[:, 1:], row[:, :-1]).any(axis=1)
        for bad, what, right in (
            (outside, "nodes that are not in the file", f"its nodes are 0 to {len(points) - 1}"),
            (lost, "nodes whose place is not a number", "every place must be finite"),
            (twice, "the same node twice", "write collapsed cells as the shape they have"),
        ):
            if bad.any():
                faults.append(_at(path, block.numbers[bad], what, right))
    if faults:
        raise InputError(faults)


def _at(path: Path, numbers: np.ndarray, what: str, right: str, near: Sequence[float] = ()) -> Fault:
    """Return the fault of the cells of those numbers; `near` is the place of the first."""
    shown = ", ".join(str(number) for number in numbers[:SHOWN])
    more = f", … ({len(numbers)} cells)" if len(numbers) > SHOWN else ""
    first = " of the first" if len(numbers) > 1 else ""
    place = f", place{first} ({', '.join(f'{x:g}' for x in near)})" if len(near) else ""
    return Fault(f"{path}: cell{'s' * (len(numbers) > 1)} {shown}{more}{place}", what, right)


def _axes(path: Path, points: np.ndarray, blocks: Sequence[Block]) -> list[int]:
    """Return the coordinates that change; cells of a plane must lie in a plane of two coordinates."""
    every = list(range(points.shape[1]))
    if blocks[0].dimension == len(every):
        return every
    used = points[used_nodes(len(points), (block.cells for block in blocks))]
    spans = np.ptp(used, axis=0)
    constant = np.flatnonzero(spans <= PLANE * max(float(spans.max()), float(np.abs(used).max())))
    if len(constant) != 1:
        right = "turn the mesh so that one coordinate is the same for all its nodes, or use a solid mesh"
        raise InputError([Fault(str(path), "shells that do not lie in a plane of two coordinates", right)])
    return [axis for axis in every if axis != constant[0]]


def _merged(places: np.ndarray, blocks: Sequence[Block], merge: bool) -> tuple[np.ndarray, list[str]]:
    """Return the node each node is read as, and a remark; cells that nowhere hold together are joined."""
    alone = np.arange(places.shape[1])
    used = used_nodes(places.shape[1], (block.cells for block in blocks))
    twice = coincident(places[:, used])
    if not twice:
        return alone, []
    keys = [
        face_keys(element(b.kind.shape, b.kind.degree), ordered(b), places.shape[1]) for b in blocks if b.kind
    ]
    loose = shared_faces(keys)[0] == 0 and sum(len(block.cells) for block in blocks) > 1
    if not (merge or loose):
        right = "a crack, or bodies that are not joined; `merge` joins them"
        return alone, [f"nodes that lie on others and are kept apart ({right}): {twice}"]
    size = float(np.linalg.norm(np.ptp(places[:, used], axis=1)))
    alone[used] = used[joined(places[:, used], TOGETHER * size)]
    why = "no cell shared a face with another" if loose else "as asked"
    merged = len(used) - len(np.unique(alone[used]))
    return alone, [f"nodes merged into others at their place ({why}): {merged}"]


def _grouped(
    blocks: Sequence[Block], cells: Sequence[np.ndarray]
) -> tuple[list[CellGroup], tuple[tuple[Block, ...], ...]]:
    """Return the cells of all blocks of one shape and degree together, and the blocks of each group."""
    sorts: dict[tuple[str, int], list[int]] = {}
    for at, block in enumerate(blocks):
        assert block.kind is not None
        sorts.setdefault((block.kind.shape, block.kind.degree), []).append(at)
    groups, members = [], []
    for of in sorts.values():
        kind = blocks[of[0]].kind
        assert kind is not None
        numbers = np.concatenate([blocks[at].numbers for at in of])
        groups.append(
            CellGroup(kind.shape, kind.degree, np.concatenate([cells[at] for at in of], axis=1), numbers)
        )
        members.append(tuple(blocks[at] for at in of))
    return groups, tuple(members)


def _repaired(
    path: Path, places: np.ndarray, groups: Sequence[CellGroup]
) -> tuple[tuple[CellGroup, ...], list[str]]:
    """Return the groups with every cell the right way round; InputError where cells are folded or flat."""
    faults, remarks, sound = [], [], []
    for group in groups:
        found = turn(places, element(group.shape, group.degree), group.cell_nodes)
        for bad, what, right in (
            (found.flat, "without volume", "its nodes must not lie in a plane or on a line"),
            (found.folded, "that is folded", "its Jacobian must be positive: move or reorder its nodes"),
        ):
            if bad.any():
                middle = places[:, group.cell_nodes[:, np.argmax(bad)]].mean(axis=1)
                faults.append(_at(path, group.numbers[bad], f"{group.shape} {what}", right, middle.tolist()))
        if found.turned.any():
            remarks.append(
                f"cells of shape {group.shape} that were inside out and are turned: {found.turned.sum()}"
            )
        sound.append(replace(group, cell_nodes=found.cell_nodes))
    keys = [face_keys(element(g.shape, g.degree), g.cell_nodes, places.shape[1]) for g in sound]
    thrice = shared_faces(keys)[1]
    for group, part in zip(sound, keys, strict=True):
        if len(thrice) and np.isin(part, thrice).any():
            what = "a face that three cells or more have"
            numbers = group.numbers[np.isin(part, thrice).any(axis=0)]
            faults.append(_at(path, numbers, what, "a face belongs to one cell or to two"))
    if faults:
        raise InputError(faults)
    return tuple(sound), remarks
