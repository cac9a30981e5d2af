"""A table of any file as named columns of numbers as text, each cell with its place."""

from collections.abc import Collection, Mapping
from dataclasses import dataclass, replace
from pathlib import Path

from convergence.errors import Fault, InputError
from convergence.intake._cut import Columns, cut
from convergence.intake._grid import Cell, Grid, Row, area_of, letters
from convergence.intake._header import folded, holds_table
from convergence.intake._notation import Decimals, decimals, has_no_value, plain
from convergence.intake._text import decoded, text_grid
from convergence.textfile import read_bytes

_WORKBOOKS = (b"PK\x03\x04", b"\xd0\xcf\x11\xe0")


@dataclass(frozen=True)
class Place:
    """Which part of a file is the table: a sheet by name, a range such as A3:F9; the sign of its decimals.

    `content` is that of the file where it was read already, as from standard input.
    """

    sheet: str | None = None
    range: str | None = None
    decimal: Decimals | None = None
    content: bytes | None = None


@dataclass(frozen=True)
class RawTable:
    """What the cells of each column print, row by row: numbers in the notation of `_cells.number`.

    `faults` are those of cells and rows; a faulty cell prints "" and its (row, name) is among `faulty`.
    `source` says where the table stands.
    """

    grid: Grid
    source: str
    columns: Columns
    rows: tuple[Row, ...]
    texts: Mapping[str, list[str]]
    faulty: frozenset[tuple[int, str]]
    faults: tuple[Fault, ...]
    remarks: tuple[str, ...]

    @property
    def units(self) -> Mapping[str, str]:
        return self.columns.units

    def where(self, row: int, name: str) -> str:
        """Return where a cell stands; rows count from 0."""
        return self.grid.cell(self.rows[row].number, self.columns.at[name], name)

    def printed(self, row: int, name: str) -> str:
        """Return a cell as it stands in the file."""
        cell = self.rows[row].cells.get(self.columns.at[name])
        return cell.text if cell else ""


def raw_table(path: Path, place: Place, *, known: Collection[str], counts: Collection[str] = ()) -> RawTable:
    """Read the table of a file; `InputError` where there is none.

    `known` are names in small letters, one of which the header has; columns among `counts` are whole numbers.
    """
    grid = _grid(path, place, known)
    columns, rows, faults, remarks = cut(grid, known)
    cells = {name: [row.cells.get(k, Cell("")) for row in rows] for name, k in columns.at.items()}
    signs = decimals(cells, [name for name in cells if folded(name) in counts])
    table = RawTable(
        grid=grid,
        source=_source(grid, columns, rows),
        columns=columns,
        rows=tuple(rows),
        texts={},
        faulty=frozenset(),
        faults=(),
        remarks=tuple(remarks),
    )
    texts: dict[str, list[str]] = {}
    faulty: dict[tuple[int, str], Fault] = {}
    for name, column in cells.items():
        sign, doubtful = signs[name]
        if place.decimal:
            sign, doubtful = place.decimal, ""
        for index, cell in enumerate(column):
            where = table.where(index, name)
            if cell.flaw:
                faulty[index, name] = Fault(where, cell.flaw, "give the number itself", cell.text)
            elif doubtful and cell.text == doubtful:
                faulty[index, name] = _doubtful(where, cell.text)
                doubtful = ""
        texts[name] = [_plain(cell, sign) for cell in column]
    ordered = [fault for _, fault in sorted(faulty.items())]
    return replace(table, texts=texts, faulty=frozenset(faulty), faults=tuple([*faults, *ordered]))


def _grid(path: Path, place: Place, known: Collection[str]) -> Grid:
    raw = read_bytes(path, "a table (.csv, .xlsx, .ods)") if place.content is None else place.content
    area = area_of(place.range) if place.range else None
    if raw.startswith(_WORKBOOKS):
        from convergence.intake._workbook import workbook_grid

        return workbook_grid(raw, path, lambda grid: holds_table(grid, known), place.sheet, area)
    if place.sheet or area:
        what = "a text, which has neither sheets nor ranges"
        raise InputError([Fault(str(path), what, "leave out the sheet and the range")])
    return text_grid(decoded(raw, path), path, lambda grid: holds_table(grid, known))


def _plain(cell: Cell, sign: Decimals) -> str:
    """Return a number in the program's own notation, "" for no value, any other text as it is."""
    if cell.flaw or has_no_value(cell.text):
        return ""
    found = plain(cell.text, "point" if cell.stored else sign)
    return cell.text if found is None else found


def _doubtful(where: str, text: str) -> Fault:
    one, other = plain(text, "point"), plain(text, "comma")
    right = "say --decimal point or --decimal comma (in a study decimal = ...), or write one clearly"
    return Fault(where, f"may be {one} or {other}", right, text)


def _source(grid: Grid, columns: Columns, rows: list[Row]) -> str:
    """Return the file, for a workbook also the sheet and the range of the table."""
    if not grid.sheet:
        return str(grid.path)
    left, right = min(columns.at.values()), max(columns.at.values())
    last = rows[-1].number if rows else columns.header.number
    return f"{grid.file}, {letters(left)}{columns.header.number}:{letters(right)}{last}"
