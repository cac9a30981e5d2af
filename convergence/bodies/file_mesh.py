"""A mesh and its fields from a file of another program, in our own cells; repairs are stated and counted."""

from collections.abc import Mapping, Sequence, Set
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from convergence.bodies.columns import together
from convergence.bodies.file_body import Body, body
from convergence.bodies.file_cells import Block, blocks_of
from convergence.bodies.file_cells import CellGroup as CellGroup
from convergence.bodies.file_sets import sets_of
from convergence.bodies.raw_file import read_raw
from convergence.bodies.repairs import used_nodes

JUMP = 1e-6  # of its largest value: a field that differs by more where nodes are merged has a jump there


@dataclass(frozen=True, eq=False)
class FileMesh:
    """The cells of the highest dimension of a file, the nodes they use, fields and sets.

    nodes (D, n); node_numbers (n,) those in the file from 0, -1 for nodes added. point_fields (c, n);
    cell_fields (c, m) and cell_sets have one array per group of cells; facet_sets are vertices (k, f), one
    array for each k. `axes` are the coordinates of the file that were kept, `lost` counts cells of the body
    of kinds that we do not have: with any, the mesh has holes that the part has not.
    """

    path: Path
    nodes: np.ndarray
    groups: tuple[CellGroup, ...]
    node_numbers: np.ndarray
    point_fields: Mapping[str, np.ndarray]
    cell_fields: Mapping[str, tuple[np.ndarray, ...]]
    node_sets: Mapping[str, np.ndarray]
    cell_sets: Mapping[str, tuple[np.ndarray, ...]]
    facet_sets: Mapping[str, tuple[np.ndarray, ...]]
    remarks: tuple[str, ...]
    axes: tuple[int, ...]
    lost: int = 0

    @property
    def dimension(self) -> int:
        return len(self.nodes)

    @property
    def cells(self) -> int:
        return sum(group.cell_nodes.shape[1] for group in self.groups)


def read_file_mesh(
    path: Path, *, fields: bool = True, merge: bool = False, step: int | None = None
) -> FileMesh:
    """Return the mesh of a file, and its fields unless they are not wanted; InputError has every fault.

    Nodes that coincide are kept apart (a crack has such nodes) unless `merge` is set, or no cell shares a
    face with another. Of a series in time the last step is read, or that of number `step`, from 1.
    """
    raw, heard = read_raw(path, step)
    points, blocks = np.asarray(raw.points, dtype=float), blocks_of(raw)
    found = body(path, points, blocks, merge)
    used = used_nodes(found.places.shape[1], (group.cell_nodes for group in found.groups))
    new = np.full(found.places.shape[1], -1)
    new[used] = np.arange(len(used))
    sets = sets_of(raw, found.blocks, blocks, new[found.source])
    skipped = _left_out(len(points), used, found, blocks, sets.bounding)
    point_fields, jumps = _point_fields(raw, found, used) if fields else ({}, [])
    return FileMesh(
        path=path,
        nodes=found.places[:, used],
        groups=tuple(CellGroup(g.shape, g.degree, new[g.cell_nodes], g.numbers) for g in found.groups),
        node_numbers=np.where(used < len(points), used, -1),
        point_fields=point_fields,
        cell_fields=_cell_fields(raw, found.blocks) if fields else {},
        node_sets=sets.nodes,
        cell_sets=sets.cells,
        facet_sets=sets.facets,
        remarks=(*heard, *found.remarks, *skipped, *jumps),
        axes=found.axes,
        lost=_lost(found, blocks),
    )


def _left_out(
    count: int, used: np.ndarray, found: Body, blocks: Sequence[Block], named: Set[int]
) -> list[str]:
    """Return remarks on nodes and cells of the file that are not in the mesh and name no boundary of it."""
    mine = {block.place for group in found.blocks for block in group} | named
    dimension = found.blocks[0][0].dimension
    skipped: dict[str, int] = {}
    for block in blocks:
        if block.place not in mine and len(block.cells):
            why = "not supported" if block.dimension == dimension else "not of the body"
            label = f"cells of kind {block.name} left out ({why})"
            skipped[label] = skipped.get(label, 0) + len(block.cells)
    orphans = count - int(np.isin(found.source, used).sum())
    told = [f"nodes of no cell left out: {orphans}"] if orphans else []
    return told + [f"{label}: {number}" for label, number in skipped.items()]


def _lost(found: Body, blocks: Sequence[Block]) -> int:
    dimension = found.blocks[0][0].dimension
    return sum(len(b.cells) for b in blocks if b.dimension == dimension and b.kind is None)


def _point_fields(raw: Any, found: Body, used: np.ndarray) -> tuple[dict[str, np.ndarray], list[str]]:
    """Return the fields at nodes, and remarks on those that differ where nodes were merged."""
    fields, remarks = {}, []
    for name, values in raw.point_data.items():
        rows = _rows(values)
        if rows is not None:
            whole = _averaged(rows, found.source)
            jump = np.abs(rows - whole[:, found.source]).max(initial=0.0)
            if jump > JUMP * np.abs(rows).max(initial=0.0):
                remarks.append(
                    f"field {name!r} differs at merged nodes by up to {2.0 * jump:.3g}: their mean is taken"
                )
            fields[str(name)] = np.hstack([whole, (found.weights @ whole.T).T])[:, used]
    singles = [name for name, rows in fields.items() if len(rows) == 1]
    made = {name: np.vstack([fields[column] for column in own]) for name, own in together(singles).items()}
    return {**fields, **{name: rows for name, rows in made.items() if name not in fields}}, remarks


def _averaged(rows: np.ndarray, source: np.ndarray) -> np.ndarray:
    """Return values (c, n) with the mean of the merged nodes at the node that stands for them."""
    if (source == np.arange(len(source))).all():
        return rows
    count = np.bincount(source, minlength=len(source))
    sums = np.array([np.bincount(source, row, minlength=len(source)) for row in rows])
    return np.asarray(sums / np.maximum(count, 1))


def _cell_fields(raw: Any, groups: Sequence[Sequence[Block]]) -> dict[str, tuple[np.ndarray, ...]]:
    fields = {}
    for name, parts in raw.cell_data.items():
        rows = [[_rows(parts[block.place]) for block in group] for group in groups]
        whole = [[row for row in group if row is not None] for group in rows]
        if all(len(group) == len(own) for group, own in zip(rows, whole, strict=True)):
            fields[str(name)] = tuple(np.hstack(group) for group in whole)
    singles = [name for name, parts in fields.items() if len(parts[0]) == 1]
    for name, own in together(singles).items():
        if name not in fields:
            fields[name] = tuple(np.vstack([fields[c][at] for c in own]) for at in range(len(groups)))
    return fields


def _rows(values: Any) -> np.ndarray | None:
    """Return values (n,), (n, c) or (n, c, d) as numbers (components, n), None where they are none."""
    array = np.asarray(values)
    if array.dtype.kind not in "fiub":
        return None
    return np.ascontiguousarray(array.reshape(len(array), -1).T, dtype=float)
