"""Sheets of an Excel workbook (.xlsx, .xlsm), by openpyxl."""

import io
from collections.abc import Iterable, Iterator
from functools import partial
from typing import TYPE_CHECKING, Any
from warnings import catch_warnings, simplefilter

from convergence.intake._grid import Area, Cell
from convergence.intake._sheet import Found, Sheet, limited, stored

if TYPE_CHECKING:
    from openpyxl.workbook import Workbook

NOT_CALCULATED = "a formula without a stored value"


def xlsx_sheets(raw: bytes) -> list[Sheet]:
    """Return the worksheets; charts are none."""
    book = _opened(raw, values=True)
    return [
        Sheet(s.title, s.sheet_state != "visible", partial(_cells, raw, s.title)) for s in book.worksheets
    ]


def _opened(raw: bytes, *, values: bool) -> "Workbook":
    """Return the workbook with the stored values of formulas, or with the formulas."""
    from openpyxl import load_workbook

    with catch_warnings():
        simplefilter("ignore")  # on styles and extensions that do not matter here
        return load_workbook(io.BytesIO(raw), read_only=True, data_only=values, keep_links=False)


def _cells(raw: bytes, sheet: str, area: Area) -> Iterable[Found]:
    """Yield the cells; formulas are told from blanks only where none of the sheet has a stored value.

    A sheet that was calculated has formulas that yield an empty text: these are blank.
    """
    found = {(row, column): _cell(one) for row, column, one in _raw_cells(raw, sheet, area, values=True)}
    formulas = {
        (row, column): Cell(str(one.value), flaw=NOT_CALCULATED)
        for row, column, one in _raw_cells(raw, sheet, area, values=False)
        if one.data_type == "f"
    }
    if formulas.keys().isdisjoint(found):
        found |= formulas
    yield from limited((row, column, found[row, column]) for row, column in sorted(found))


def _raw_cells(raw: bytes, sheet: str, area: Area, *, values: bool) -> Iterator[tuple[int, int, Any]]:
    with catch_warnings():
        simplefilter("ignore")
        page = _opened(raw, values=values)[sheet]
        page.reset_dimensions()
        # no last column: empty rows would be filled up to it
        rows = page.iter_rows(area.top, area.bottom)
        yield from (
            (number, column, cell)
            for number, row in enumerate(rows, area.top)
            for column, cell in enumerate(row, 1)
            if cell.value is not None and area.holds(number, column)
        )


def _cell(cell: Any) -> Cell:
    value = cell.value
    if cell.data_type == "e":
        return Cell(str(value), flaw="an error in a formula")
    if isinstance(value, bool):
        return Cell(str(value).upper())
    if isinstance(value, int | float):
        return stored(value)
    return Cell(str(value).strip())
