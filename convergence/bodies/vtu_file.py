"""VTU files: one unstructured grid of VTK, read whole; compressed data unpack to no more than they declare.

The format is that of "VTK XML formats" in the VTK documentation. It is read here and not by meshio, which
refuses the newer versions of it, loses all pieces but the last, and unpacks without a bound.
"""

import base64
import lzma
import re
import zlib
from dataclasses import dataclass
from itertools import pairwise
from pathlib import Path
from xml.etree import ElementTree

import numpy as np

TYPES = {"Float": "f", "Int": "i", "UInt": "u"}
MOST_TIMES, MOST_BYTES = 1_000, 4_000_000_000  # zlib packs no more than about thousandfold
# VTK's number of each kind of cell, as meshio calls it, and its dimension
CELLS = {
    **{1: ("vertex", 0), 3: ("line", 1), 5: ("triangle", 2), 7: ("polygon", 2), 8: ("pixel", 2)},
    **{9: ("quad", 2), 10: ("tetra", 3), 11: ("voxel", 3), 12: ("hexahedron", 3), 13: ("wedge", 3)},
    **{14: ("pyramid", 3), 21: ("line3", 1), 22: ("triangle6", 2), 23: ("quad8", 2), 24: ("tetra10", 3)},
    **{25: ("hexahedron20", 3), 26: ("wedge15", 3), 27: ("pyramid13", 3), 28: ("quad9", 2)},
    **{29: ("hexahedron27", 3), 32: ("wedge18", 3), 34: ("triangle7", 2), 42: ("polyhedron", 3)},
    **{68: ("VTK_LAGRANGE_CURVE", 1), 69: ("VTK_LAGRANGE_TRIANGLE", 2)},
    **{70: ("VTK_LAGRANGE_QUADRILATERAL", 2), 71: ("VTK_LAGRANGE_TETRAHEDRON", 3)},
    **{72: ("VTK_LAGRANGE_HEXAHEDRON", 3), 73: ("VTK_LAGRANGE_WEDGE", 3)},
}


@dataclass(frozen=True, eq=False)
class Cells:
    """Cells of one kind that stand together in the file: (m, k) nodes."""

    type: str
    data: np.ndarray
    dim: int


@dataclass(frozen=True, eq=False)
class Grid:
    """A grid as the file has it, with the attributes of a meshio.Mesh that are read of one."""

    points: np.ndarray
    cells: list[Cells]
    point_data: dict[str, np.ndarray]
    cell_data: dict[str, list[np.ndarray]]
    field_data: dict[str, np.ndarray]
    point_sets: dict[str, np.ndarray]
    cell_sets: dict[str, list[np.ndarray]]


def read_vtu(path: Path) -> Grid:
    """Return the grid of a VTU file; ValueError says what is wrong with it."""
    content = path.read_bytes()
    start = re.search(rb"<AppendedData[^>]*>\s*_", content)
    text = content if start is None else content[: start.start()] + b"</VTKFile>"
    try:
        root = ElementTree.fromstring(text)
    except ElementTree.ParseError as error:
        raise ValueError(f"the file ends early or is damaged: {error}") from None
    grid = root.find("UnstructuredGrid")
    if root.tag != "VTKFile" or grid is None:
        raise ValueError("no unstructured grid of VTK in it")
    pieces = grid.findall("Piece")
    if len(pieces) != 1:
        raise ValueError(f"it has {len(pieces)} pieces: save it as one")
    appended = b"" if start is None else content[start.end() :]
    raw = start is not None and b'"raw"' in start[0]
    return _grid(pieces[0], _Packed(root, appended, raw, len(content)))


def _grid(piece: ElementTree.Element, packed: "_Packed") -> Grid:
    sections = {part.tag: part for part in piece}
    points = packed.arrays(sections.get("Points"))
    cells = packed.arrays(sections.get("Cells"))
    if len(points) != 1 or not {"connectivity", "offsets", "types"} <= set(cells):
        raise ValueError("its points or cells are missing")
    places = next(iter(points.values()))
    whole, counts = int(piece.get("NumberOfPoints", "-1")), int(piece.get("NumberOfCells", "-1"))
    fields = packed.arrays(sections.get("PointData"))
    own = packed.arrays(sections.get("CellData"))
    for what, values, count in (
        *(("points", values, whole) for values in (places,)),
        *((f"field {name!r}", values, whole) for name, values in fields.items()),
        *((f"field {name!r}", values, counts) for name, values in own.items()),
        *((f"cells' {name}", cells[name], counts) for name in ("offsets", "types")),
    ):
        if len(values) != count:
            raise ValueError(f"{what} of another mesh: {len(values)} values where {count} are due")
    blocks, ranges = _blocks(cells["connectivity"], cells["offsets"], cells["types"])
    split = {name: [values[a:b] for a, b in ranges] for name, values in own.items()}
    return Grid(places, blocks, fields, split, {}, {}, {})


def _blocks(
    connectivity: np.ndarray, offsets: np.ndarray, types: np.ndarray
) -> tuple[list[Cells], list[tuple[int, int]]]:
    """Return the cells of one kind and number of nodes that stand together, and their ranges."""
    starts = np.concatenate([[0], offsets.astype(np.int64)])
    sizes = np.diff(starts)
    if (sizes < 0).any() or starts[-1] != len(connectivity):
        raise ValueError("its cells have other numbers of nodes than it says")
    changes = np.flatnonzero((types[1:] != types[:-1]) | (sizes[1:] != sizes[:-1])) + 1
    ends = [0, *changes.tolist(), len(types)] if len(types) else []
    blocks = []
    for first, last in pairwise(ends):
        name, dimension = CELLS.get(int(types[first]), (f"VTK cell {types[first]}", 3))
        nodes = connectivity[starts[first] : starts[last]].reshape(last - first, -1)
        blocks.append(Cells(name, nodes.astype(np.int64, copy=False), dimension))
    return blocks, list(pairwise(ends))


class _Packed:
    """The arrays of a file: as text, in base64, or appended, packed or not."""

    def __init__(self, root: ElementTree.Element, appended: bytes, raw: bool, size: int):
        self.order = ">" if root.get("byte_order") == "BigEndian" else "<"
        self.header = np.dtype(f"{self.order}u{8 if root.get('header_type') == 'UInt64' else 4}")
        self.compressor = root.get("compressor", "")
        self.appended, self.raw = appended, raw
        self.left = min(MOST_TIMES * size, MOST_BYTES)

    def arrays(self, section: ElementTree.Element | None) -> dict[str, np.ndarray]:
        """Return the arrays of a section by name, (n,) or (n, components)."""
        found = {}
        for number, one in enumerate([] if section is None else section.findall("DataArray")):
            kind = re.fullmatch(r"(Float|Int|UInt)(8|16|32|64)", one.get("type", ""))
            if kind:
                dtype = np.dtype(f"{self.order}{TYPES[kind[1]]}{int(kind[2]) // 8}")
                components = int(one.get("NumberOfComponents") or 1)
                values = self._values(one, dtype)
                if values.size % components:
                    raise ValueError(f"field {one.get('Name')!r} is not whole")
                values = values if components == 1 else values.reshape(-1, components)
                found[one.get("Name", f"field {number}")] = values.astype(dtype.newbyteorder("="), copy=False)
        return found

    def _values(self, one: ElementTree.Element, dtype: np.dtype) -> np.ndarray:
        if one.get("format", "ascii") == "ascii":
            return np.fromstring(one.text or "", dtype=dtype.newbyteorder("="), sep=" ")
        if one.get("format") == "appended":
            data, raw = memoryview(self.appended)[int(one.get("offset", "0")) :], self.raw
        else:
            data, raw = memoryview((one.text or "").strip().encode()), False
        unpacked = self._unpacked(data, raw) if self.compressor else self._plain(data, raw)
        return np.frombuffer(unpacked, dtype=dtype)

    def _plain(self, data: memoryview, raw: bool) -> bytes:
        """Return data behind their size, which in base64 is a text of its own or one with its data."""
        head, start = self._numbers(data, 1, raw)
        if raw or bytes(data[start - 1 : start]) == b"=":
            return self._bytes(data[start:], int(head[0]), raw)
        return self._bytes(data, self.header.itemsize + int(head[0]), raw)[self.header.itemsize :]

    def _unpacked(self, data: memoryview, raw: bool) -> bytes:
        """Return blocks unpacked, each to no more than the block size that is declared."""
        blocks = int(self._numbers(data, 1, raw)[0][0])
        if blocks > len(data):
            raise ValueError("it ends early or is damaged")
        head, start = self._numbers(data, 3 + blocks, raw)
        most = int(head[1])
        self.left -= most * blocks
        if self.left < 0:
            raise ValueError("it would unpack to more than a thousand times its size, or 4 GB")
        packed = self._bytes(data[start:], int(head[3:].sum()), raw)
        ends = np.concatenate([[0], np.cumsum(head[3:], dtype=np.int64)])
        return b"".join(self._block(packed[a:b], most) for a, b in pairwise(ends.tolist()))

    def _block(self, packed: bytes, most: int) -> bytes:
        if self.compressor == "vtkZLibDataCompressor":
            return zlib.decompressobj().decompress(packed, most)
        if self.compressor == "vtkLZMADataCompressor":
            return lzma.LZMADecompressor().decompress(packed, most)
        raise ValueError(f"it is packed by {self.compressor}: save it with zlib, or not packed")

    def _numbers(self, data: memoryview, count: int, raw: bool) -> tuple[np.ndarray, int]:
        """Return the numbers of a header and where it ends."""
        size = count * self.header.itemsize
        found = np.frombuffer(self._bytes(data, size, raw), dtype=self.header)
        return found, size if raw else -(-size // 3) * 4

    def _bytes(self, data: memoryview, size: int, raw: bool) -> bytes:
        found = bytes(data[:size]) if raw else base64.b64decode(data[: -(-size // 3) * 4])[:size]
        if len(found) < size:
            raise ValueError("it ends early or is damaged")
        return found
