"""The table within a grid: its named columns with their units, and its rows.

Titles above the header, blank rows, a row of units and footnotes are not part of it; a header that is
repeated further down must have the same units.
"""

from collections.abc import Collection, Iterator, Mapping
from dataclasses import dataclass, replace

from convergence.errors import Fault, InputError
from convergence.intake._cells import split_unit
from convergence.intake._grid import Grid, Row, letters
from convergence.intake._header import has_number, header_at, units_in


@dataclass(frozen=True)
class Columns:
    """Where each name stands and its unit, "" where none is stated; `repeated`: lines of the header again."""

    header: Row
    at: Mapping[str, int]
    units: Mapping[str, str]
    repeated: tuple[int, ...] = ()


def cut(grid: Grid, known: Collection[str]) -> tuple[Columns, list[Row], list[Fault], list[str]]:
    """Return the columns, the rows, the faults of rows and remarks; `InputError` where there is no table."""
    at = header_at(grid, known)
    if at is None and any(map(has_number, grid.rows)):
        right = "the first row names the columns, e.g. h,deflection"
        raise InputError([Fault(grid.row(grid.rows[0].number), "no header", right)])
    if at is None or not any(map(has_number, grid.rows[at + 1 :])):
        right = "give a header and one row for each mesh"
        raise InputError([Fault(grid.file, "no rows of numbers", right)])
    header, below = grid.rows[at], grid.rows[at + 1 :]
    stated = units_in(below[0])
    columns = _columns(grid, header, stated or {}, below)
    again = tuple(row.number for row in below if _is_header(row, columns))
    columns = replace(columns, repeated=again)
    rows, faults, remarks = _rows(grid, columns, below[1:] if stated else below)
    return columns, rows, faults, [*_nameless(grid, columns, below), *remarks]


def _names(row: Row) -> dict[int, tuple[str, str]]:
    """Return name and unit of each cell of a header."""
    return {column: split_unit(" ".join(cell.text.split())) for column, cell in row.cells.items()}


def _columns(grid: Grid, header: Row, stated: Mapping[int, str], below: tuple[Row, ...]) -> Columns:
    """Return the columns of a header; `stated` are the units of the row below it."""
    where, faults = grid.row(header.number), []
    at: dict[str, int] = {}
    units: dict[str, str] = {}
    for column, (name, unit) in _names(header).items():
        other = stated.get(column, "")
        if name.casefold() in map(str.casefold, at):
            faults.append(Fault(where, "two columns of one name", "give each column its own", name))
        if unit and other and unit != other:
            right = f"state one: the row below says {other!r}"
            faults.append(Fault(where, f"two units of the column {name!r}", right, unit))
        at[name], units[name] = column, unit or other
    for column, row in _unnamed(header, below):
        if has_number(Row(row.number, {column: row.cells[column]})):
            place = grid.cell(row.number, column, "") if grid.sheet else where
            faults.append(Fault(place, "a column without a name", "name every column"))
    if faults:
        raise InputError(faults)
    return Columns(header, at, units)


def _unnamed(header: Row, below: tuple[Row, ...]) -> list[tuple[int, Row]]:
    """Return the columns that have cells but no name, each with its first row, with a number if it has one.

    What stands beyond the header of a text is a row that is too long.
    """
    found: dict[int, Row] = {}
    for row in below:
        for column in row.cells.keys() - header.cells.keys():
            first = found.setdefault(column, row)
            if not has_number(Row(0, {column: first.cells[column]})):
                found[column] = row
    return [(column, found[column]) for column in sorted(found) if column <= (header.width or column)]


def _nameless(grid: Grid, columns: Columns, below: tuple[Row, ...]) -> Iterator[str]:
    for column, _ in _unnamed(columns.header, below):
        shown = letters(column) if grid.sheet else str(column)
        yield f"column {shown} has no name and no number and is ignored"


def _rows(grid: Grid, columns: Columns, below: tuple[Row, ...]) -> tuple[list[Row], list[Fault], list[str]]:
    rows, faults, remarks = list[Row](), list[Fault](), list[str]()
    width = columns.header.width
    for row in below:
        stated = _repeated_units(row, columns)
        if stated is not None:
            faults += _other_units(grid, row, columns, stated)
        elif _is_footnote(row):
            remarks.append(f"row {row.number} has no number and is ignored")
        elif not grid.sheet and (row.width < width or max(row.cells) > width):
            right = f"the header has {width}"
            more = "; decimal commas need another separator, such as ;" if row.width > width else ""
            faults.append(Fault(grid.row(row.number), f"a row of {row.width} cells", right + more))
        else:
            rows.append(row)
    return rows, faults, remarks


def _is_footnote(row: Row) -> bool:
    flawed = any(cell.flaw for cell in row.cells.values())
    return len(row.cells) == 1 and not has_number(row) and not flawed


def _repeated_units(row: Row, columns: Columns) -> dict[int, str] | None:
    """Return the units of a row that repeats the header or has nothing but units, else None."""
    if _is_header(row, columns):
        return {column: unit for column, (_, unit) in _names(row).items() if unit}
    return units_in(row)


def _is_header(row: Row, columns: Columns) -> bool:
    names = {column: name.casefold() for column, (name, _) in _names(row).items()}
    return names == {column: name.casefold() for name, column in columns.at.items()}


def _other_units(grid: Grid, row: Row, columns: Columns, stated: Mapping[int, str]) -> Iterator[Fault]:
    """Yield a fault for each unit that is not that of the header."""
    for name, column in columns.at.items():
        unit, first = stated.get(column, ""), columns.units[name]
        if unit and unit != first:
            right = f"convert these rows to {first or 'one unit'}, as above"
            yield Fault(grid.cell(row.number, column, name), "another unit than above", right, unit)
