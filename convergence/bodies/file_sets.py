"""Named nodes, cells and boundaries of a file: sets, physical groups, and whole numbers that mark cells."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from convergence.bodies.file_cells import Block
from convergence.fem.element import CORNERS

# cell data of whole numbers that mark parts of a mesh: meshio's names, and common ones
MARKS = (
    *("gmsh:physical", "medit:ref", "netgen:index", "mat_id", "material", "materialid", "materialids"),
    *("material_id", "region", "regionid", "region_id", "ref", "domain", "domain_id", "subdomain"),
    *("cell_tags", "cell_markers", "physical", "attribute", "part_id", "partid", "cellentityids"),
)
NONE_IS_ZERO = ("gmsh:physical", "cell_tags")
MOST = 200  # marks of one kind of cell: numbers beyond are no names of parts


@dataclass(frozen=True, eq=False)
class Sets:
    """Numbers of nodes, of cells per group of cells, and vertices (k, f) of facets per k, by name.

    `bounding` are the places of the blocks whose cells are such facets.
    """

    nodes: Mapping[str, np.ndarray]
    cells: Mapping[str, tuple[np.ndarray, ...]]
    facets: Mapping[str, tuple[np.ndarray, ...]]
    bounding: frozenset[int]


def sets_of(raw: Any, members: Sequence[Sequence[Block]], blocks: Sequence[Block], new: np.ndarray) -> Sets:
    """Return the sets of a meshio.Mesh; `new` (n,) are the numbers of its nodes, -1 where gone."""
    every = _named(raw, blocks)
    bounding = [block for block in blocks if block.dimension == members[0][0].dimension - 1]
    cells, facets, named = {}, {}, set()
    for name, chosen in every.items():
        mine = tuple(_in_group(group, chosen) for group in members)
        if any(len(part) for part in mine):
            cells[name] = mine
        faces = _facets(bounding, chosen, new)
        if faces:
            facets[name] = faces
            named |= {block.place for block in bounding if block.place in chosen}
    nodes = {name: new[np.asarray(numbers, dtype=int).ravel()] for name, numbers in raw.point_sets.items()}
    for name, chosen in every.items():
        points = [
            block.cells[chosen[block.place]].ravel()
            for block in blocks
            if block.dimension == 0 and block.place in chosen
        ]
        nodes |= {name: new[np.concatenate(points)]} if points else {}
    kept = {name: np.unique(numbers[numbers >= 0]) for name, numbers in nodes.items()}
    return Sets(
        {name: numbers for name, numbers in kept.items() if len(numbers)}, cells, facets, frozenset(named)
    )


def _named(raw: Any, blocks: Sequence[Block]) -> dict[str, dict[int, np.ndarray]]:
    """Return name -> place of a block -> its cells of that name."""
    found: dict[str, dict[int, np.ndarray]] = {}
    for name, parts in raw.cell_sets.items():
        if not str(name).startswith("gmsh:"):
            for place, part in enumerate(parts[: len(blocks)]):
                numbers = np.asarray([] if part is None else part).astype(int).ravel()
                numbers = numbers[(numbers >= 0) & (numbers < len(blocks[place].cells))]
                if len(numbers):
                    found.setdefault(str(name), {})[place] = numbers
    for key, parts in raw.cell_data.items():
        marks = [np.asarray(part) for part in parts]
        if str(key).lower() in MARKS and all(part.ndim == 1 and _whole(part) for part in marks):
            names = _names_of_marks(raw, str(key))
            for block, part in zip(blocks, marks, strict=True):
                marked = np.unique(part)
                for mark in marked[(marked != 0) | (key not in NONE_IS_ZERO)][:MOST]:
                    word = _word(block.dimension, max(b.dimension for b in blocks))
                    for name in names.get((int(mark), block.dimension), (f"{word}_{int(mark)}",)):
                        own, members = found.setdefault(name, {}), np.flatnonzero(part == mark)
                        own[block.place] = np.union1d(own.get(block.place, members), members)
    return found


def _word(dimension: int, highest: int) -> str:
    return "region" if dimension == highest else "boundary" if dimension else "point"


def _whole(values: np.ndarray) -> bool:
    return values.dtype.kind in "iu" or (values.dtype.kind == "f" and bool((values == np.rint(values)).all()))


def _names_of_marks(raw: Any, key: str) -> dict[tuple[int, int], tuple[str, ...]]:
    """Return the names of each (mark, dimension), where the file has names."""
    if key == "cell_tags":
        families = getattr(raw, "cell_tags", {})
        return {(int(mark), d): tuple(map(str, names)) for mark, names in families.items() for d in range(4)}
    if key not in ("gmsh:physical", "netgen:index"):
        return {}
    pairs = ((name, np.asarray(value).ravel()) for name, value in raw.field_data.items())
    return {(int(value[0]), int(value[1])): (str(name),) for name, value in pairs if value.size == 2}


def _in_group(group: Sequence[Block], chosen: Mapping[int, np.ndarray]) -> np.ndarray:
    starts = np.cumsum([0, *(len(block.cells) for block in group)])
    parts = [
        start + chosen[block.place]
        for start, block in zip(starts, group, strict=False)
        if block.place in chosen
    ]
    return np.concatenate(parts) if parts else np.array([], dtype=int)


def _facets(
    blocks: Sequence[Block], chosen: Mapping[int, np.ndarray], new: np.ndarray
) -> tuple[np.ndarray, ...]:
    """Return the vertices (k, f) of the chosen cells of one dimension less that lie on the body."""
    by_count: dict[int, list[np.ndarray]] = {}
    for block in blocks:
        if block.place in chosen and (block.kind or block.dimension == 1):
            corners = CORNERS[block.kind.shape if block.kind else "line"]
            vertices = new[block.cells[chosen[block.place]][:, :corners].T]
            by_count.setdefault(corners, []).append(vertices[:, (vertices >= 0).all(axis=0)])
    joined = (np.concatenate(parts, axis=1) for parts in by_count.values())
    return tuple(part for part in joined if part.size)
