"""Sheets of an old Excel workbook (.xls), by xlrd."""

import io
from collections.abc import Iterator
from functools import partial
from typing import TYPE_CHECKING, Any

from convergence.intake._grid import Area, Cell
from convergence.intake._sheet import Found, Sheet, limited, stored

if TYPE_CHECKING:
    from xlrd.book import Book


def xls_sheets(raw: bytes) -> list[Sheet]:
    """Return the worksheets."""
    import xlrd

    book = xlrd.open_workbook(file_contents=raw, logfile=io.StringIO(), ragged_rows=True)
    return [Sheet(s.name, s.visibility != 0, partial(_cells, book, s)) for s in book.sheets()]


def _cells(book: "Book", sheet: Any, area: Area) -> Iterator[Found]:
    yield from limited(
        (row + 1, column + 1, _cell(book, cell))
        for row in range(sheet.nrows)
        for column, cell in enumerate(sheet.row(row))
        if cell.value != "" and area.holds(row + 1, column + 1)
    )


def _cell(book: "Book", cell: Any) -> Cell:
    import xlrd

    if cell.ctype == xlrd.XL_CELL_ERROR:
        return Cell(xlrd.error_text_from_code[cell.value], flaw="an error in a formula")
    if cell.ctype == xlrd.XL_CELL_NUMBER:
        return stored(cell.value)
    if cell.ctype == xlrd.XL_CELL_BOOLEAN:
        return Cell("TRUE" if cell.value else "FALSE")
    if cell.ctype == xlrd.XL_CELL_DATE:
        return Cell(str(xlrd.xldate_as_datetime(cell.value, book.datemode)))
    return Cell(str(cell.value).strip())
