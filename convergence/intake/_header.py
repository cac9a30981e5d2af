"""Where a table begins: the row of its header, and the units below or within it."""

import re
from collections.abc import Collection

from convergence.intake._cells import split_unit
from convergence.intake._grid import Grid, Row
from convergence.intake._notation import has_no_value, is_number

_UNITS = (
    "mm|cm|dm|km|m|µm|μm|um|nm|in|inch|ft|yd|N|daN|kN|MN|kgf|lbf|kip|Pa|hPa|kPa|MPa|GPa|bar|psi|ksi|Msi|J|mJ|kJ|MJ"
    "|W|kW|Hz|kHz|s|ms|sec|min|h|d|g|kg|t|to|K|°C|C|°F|F|rad|mrad|deg|°|%|‰|KB|MB|GB|Nm|Nmm|kNm"
)
_POWER = r"(?:\^?\(?-?\d(?:[./]\d)?\)?|[²³⁴]|\*\*\d)?"
_UNIT = re.compile(rf"(?:{_UNITS}){_POWER}(?:[ */·.⋅]\(?(?:{_UNITS}){_POWER}\)?)*")
_BRACKETS = re.compile(r"[\[(](.*)[\])]")


def header_at(grid: Grid, known: Collection[str]) -> int | None:
    """Return which row is the header: the first with one of the known names, other cells and no number.

    Where there is none, the row above the first one with a number, None where that has none above it.
    """
    for index, row in enumerate(grid.rows):
        if len(row.cells) > 1 and names_of(row) & set(known) and not has_number(row):
            return index
    first = next((index for index, row in enumerate(grid.rows) if has_number(row)), 0)
    return first - 1 if first else None


def holds_table(grid: Grid, known: Collection[str]) -> bool:
    """Say whether a header with a known name stands above a row with a number."""
    at = header_at(grid, known)
    if at is None or not names_of(grid.rows[at]) & set(known):
        return False
    return any(map(has_number, grid.rows[at + 1 :]))


def names_of(row: Row) -> set[str]:
    """Return the names of a header as they are compared."""
    return {folded(split_unit(cell.text)[0]) for cell in row.cells.values() if not cell.stored}


def folded(name: str) -> str:
    """Return a name in small letters, one blank for blanks and underscores."""
    return re.sub(r"[\s_]+", " ", name.strip()).lower()


def has_number(row: Row) -> bool:
    """Say whether a cell of the row is a number."""
    return any(cell.stored or is_number(cell.text) for cell in row.cells.values())


def units_in(row: Row) -> dict[int, str] | None:
    """Return the unit of each column where the row has nothing but units, else None."""
    found: dict[int, str] = {}
    for column, cell in row.cells.items():
        if has_no_value(cell.text):
            continue
        unit = unit_of(cell.text)
        if cell.stored or cell.flaw or unit is None:
            return None
        found[column] = unit
    return found or None


def unit_of(text: str) -> str | None:
    """Return the unit of a cell such as "mm" or "[N/mm²]", None where it is none."""
    inner = _BRACKETS.fullmatch(text)
    if inner:
        return "" if has_no_value(inner[1].strip()) else inner[1].strip()
    return text if _UNIT.fullmatch(text) else None
