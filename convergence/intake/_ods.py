"""Sheets of an OpenDocument spreadsheet (.ods).

OpenDocument 1.3 part 3 (from memory): tables with repeated rows and cells, types of values. Errors of
formulas are marked by an extension that the programs in use share.
"""

import io
from collections.abc import Iterator
from functools import partial
from typing import Any, Literal
from xml.etree.ElementTree import Element, iterparse
from zipfile import ZipFile

from convergence.intake._grid import Area, Cell
from convergence.intake._sheet import Found, Sheet, limited, stored

_SPACE = "{urn:oasis:names:tc:opendocument:xmlns:%s:1.0}"
_TABLE, _OFFICE, _TEXT, _STYLE = (_SPACE % name for name in ("table", "office", "text", "style"))
_ERROR = "{urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0}value-type"
_NUMBERS = ("float", "percentage", "currency")


def ods_sheets(raw: bytes) -> list[Sheet]:
    """Return the sheets."""
    hidden: set[str | None] = set()
    sheets = []
    for _, one in _events(raw, "start"):
        if one.tag == f"{_STYLE}style":
            style = one.get(f"{_STYLE}name")
        elif one.tag == f"{_STYLE}table-properties" and one.get(f"{_TABLE}display") == "false":
            hidden.add(style)
        elif one.tag == f"{_TABLE}table":
            name = one.get(f"{_TABLE}name", "")
            is_hidden = one.get(f"{_TABLE}style-name") in hidden
            sheets.append(Sheet(name, is_hidden, partial(_cells, raw, name)))
    return sheets


def _events(raw: bytes, *kinds: Literal["start", "end"]) -> Iterator[tuple[str, Any]]:
    with ZipFile(io.BytesIO(raw)) as archive, archive.open("content.xml") as content:
        yield from iterparse(content, kinds)


def _cells(raw: bytes, sheet: str, area: Area) -> Iterator[Found]:
    yield from limited(found for found in _all_cells(raw, sheet, area) if area.holds(*found[:2]))


def _all_cells(raw: bytes, sheet: str, area: Area) -> Iterator[Found]:
    row, inside = 1, False
    for event, one in _events(raw, "start", "end"):
        if one.tag == f"{_TABLE}table":
            inside = event == "start" and one.get(f"{_TABLE}name", "") == sheet
        elif one.tag == f"{_TABLE}table-row" and event == "end":
            if inside:
                again = int(one.get(f"{_TABLE}number-rows-repeated", 1))
                cells = list(_of_row(one, area))
                for number in range(row, min(row + again, area.bottom + 1) if cells else row):
                    yield from ((number, column, cell) for column, cell in cells)
                row += again
            one.clear()


def _of_row(row: Element, area: Area) -> Iterator[tuple[int, Cell]]:
    """Yield the cells of a row that are not empty, by column; hidden parts of merged cells are empty."""
    column = 1
    for one in row:
        again = int(one.get(f"{_TABLE}number-columns-repeated", 1))
        cell = _cell(one) if one.tag == f"{_TABLE}table-cell" else None
        if cell:
            yield from ((at, cell) for at in range(column, min(column + again, area.right + 1)))
        column += again


def _cell(one: Element) -> Cell | None:
    """Return what a cell holds, None where it is empty."""
    kind = one.get(f"{_OFFICE}value-type", "")
    shown = "\n".join("".join(part.itertext()) for part in one.findall(f"{_TEXT}p")).strip()
    formula = one.get(f"{_TABLE}formula", "")
    if one.get(_ERROR) == "error" or (formula and shown.startswith(("#", "Err:"))):
        return Cell(shown, flaw="an error in a formula")
    if formula and not kind:
        return Cell(formula, flaw="a formula without a stored value")
    if kind in _NUMBERS:
        return stored(float(one.get(f"{_OFFICE}value", "nan")))
    text = one.get(f"{_OFFICE}{kind}-value") or shown
    return Cell(text) if text else None
