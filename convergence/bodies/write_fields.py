"""A pointwise map, or a displacement, as a VTU file for any viewer of fields on meshes.

For each reading the file has value, limit (the best estimate), half_width, relative (half-width over the
scale of the tolerance), order and verdict; numbers have the seven digits of single precision. Verdicts are
codes, spelled out in the field's name.
"""

from collections.abc import Iterator, Sequence
from pathlib import Path

import numpy as np

from convergence.bodies.conventions import KINDS, positions
from convergence.bodies.nodal_fields import DISPLACEMENT
from convergence.bodies.pointwise import WORDS, JudgedField, PointwiseMap
from convergence.fem.element import Element
from convergence.fem.mesh import Mesh

NOT_JUDGED = -1
VERDICT = "verdict " + ", ".join(f"{code} {word}" for code, word in enumerate(WORDS))


def write_fields(path: Path, maps: Sequence[PointwiseMap]) -> None:
    """Write maps of the same readings, such as those of regions or of cells of several shapes, as one file.

    Nodes that were not judged have NaN, and the verdict -1.
    """
    import meshio

    starts = np.cumsum([0, *(one.finest.nodes.shape[1] for one in maps)])
    points = np.concatenate([_in_space(one.finest.nodes) for one in maps])
    cells = [
        _block(one.finest.kind, one.finest.cell_nodes + start)
        for one, start in zip(maps, starts, strict=False)
    ]
    parts = [dict(_columns(one)) for one in maps]
    fields = {name: np.concatenate([part[name] for part in parts]) for name in parts[0]}
    meshio.write(path, meshio.Mesh(points, cells, point_data=fields), file_format="vtu")


def write_displacement(path: Path, made: Mesh, displacement: np.ndarray) -> None:
    """Write nodes, cells and a displacement (D, nodes) as they are, in double precision."""
    import meshio

    cells = [_block(made.element, made.cell_nodes)]
    fields = {DISPLACEMENT: _in_space(displacement)}
    meshio.write(path, meshio.Mesh(_in_space(made.nodes), cells, point_data=fields), file_format="vtu")


def _columns(one: PointwiseMap) -> Iterator[tuple[str, np.ndarray]]:
    """Yield the fields of a map on all its nodes, by name."""
    n = one.finest.nodes.shape[1]
    if DISPLACEMENT in one.finest.fields:
        yield DISPLACEMENT, _in_space(one.finest.fields[DISPLACEMENT]).astype(np.float32)
    for judged in one.fields:
        for name, values in _parts(judged):
            whole = np.full(n, np.nan, dtype=np.float32)
            whole[one.nodes] = values
            yield f"{judged.reading.name} {name}", whole
        words = np.full(n, NOT_JUDGED, dtype=np.int8)
        words[one.nodes] = judged.word
        yield f"{judged.reading.name} {VERDICT}", words


def _parts(judged: JudgedField) -> tuple[tuple[str, np.ndarray], ...]:
    return (
        ("value", judged.values),
        ("limit", judged.limit),
        ("half_width", judged.half_width),
        ("relative", judged.relative),
        ("order", judged.order),
    )


def _block(kind: Element, cell_nodes: np.ndarray) -> tuple[str, np.ndarray]:
    """Return the name and the cells (m, k) in the order of files."""
    theirs = np.empty_like(cell_nodes)
    theirs[positions(kind.shape, kind.degree)] = cell_nodes
    whole = len(kind.nodes)
    alike = (name for name, one in KINDS.items() if (one.shape, one.nodes) == (kind.shape, whole))
    return next(alike), np.ascontiguousarray(theirs.T)


def _in_space(rows: np.ndarray) -> np.ndarray:
    """Return vectors (D, n) as rows of three numbers (n, 3)."""
    found = np.zeros((rows.shape[1], 3))
    found[:, : len(rows)] = rows.T
    return found
