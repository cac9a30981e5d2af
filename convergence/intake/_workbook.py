"""Workbooks: what kind the content is, whether it is safe to open, and the cells of one sheet.

Kinds are told by content, never by the name of the file. openpyxl, xlrd and our own reader of OpenDocument
tell errors of formulas from blank cells, which a faster library for all kinds does not.
"""

import io
from collections import defaultdict
from collections.abc import Callable
from pathlib import Path
from zipfile import BadZipFile, ZipFile

from convergence.errors import Fault, InputError, listing, nearest
from convergence.intake._grid import EVERYTHING, Area, Cell, Grid, Row
from convergence.intake._ods import ods_sheets
from convergence.intake._sheet import MOST_CELLS, Sheet, TooLarge
from convergence.intake._xls import xls_sheets
from convergence.intake._xlsx import xlsx_sheets

MOST_BYTES = 200_000_000
MOST_GROWTH = 200  # a table as XML shrinks to a tenth or a fiftieth
HARMLESS = 10_000_000

_ZIP, _OLE = b"PK\x03\x04", b"\xd0\xcf\x11\xe0"
_AS_WORKBOOK = "save it as a workbook (.xlsx, .ods) or as text (.csv)"


def is_workbook(raw: bytes) -> bool:
    """Say whether the content is that of a workbook, or claims to be."""
    return raw.startswith((_ZIP, _OLE))


def workbook_grid(
    raw: bytes, path: Path, holds_table: Callable[[Grid], bool], sheet: str | None, area: Area | None
) -> Grid:
    """Return the cells of the sheet that is named, else of the only visible one that holds a table."""
    try:
        sheets = _reader(raw, path)(raw)
        if sheet is not None:
            return _grid(_named(sheets, sheet, path), path, area)
        return _only_table(sheets, path, holds_table, area)
    except (InputError, MemoryError):
        raise
    except Exception as error:  # what the libraries raise on damaged files has no common base
        said = " ".join(str(error).split())[:100] or type(error).__name__
        if "encrypted" in said:
            raise _encrypted(path) from None
        raise _refused(path, f"a damaged workbook ({said})", "open and save it again") from None


def _refused(path: Path, what: str, right: str) -> InputError:
    return InputError([Fault(str(path), what, right)])


def _encrypted(path: Path) -> InputError:
    return _refused(path, "an encrypted workbook", "save it without a password")


def _reader(raw: bytes, path: Path) -> Callable[[bytes], list[Sheet]]:
    """Return what reads the kind of workbook that the content is."""
    if raw.startswith(_OLE):
        if _wide("EncryptedPackage") in raw:
            raise _encrypted(path)
        if _wide("Workbook") in raw or _wide("Book") in raw:
            return xls_sheets
        raise _refused(path, "a document, not a workbook", _AS_WORKBOOK)
    names, manifest = _checked_archive(raw, path)
    if "content.xml" in names:
        if b"encryption-data" in manifest:
            raise _encrypted(path)
        return ods_sheets
    if any(name.endswith("workbook.bin") for name in names):
        raise _refused(path, "a binary workbook (.xlsb)", "save it as .xlsx")
    if any(name.endswith("workbook.xml") for name in names):
        return xlsx_sheets
    raise _refused(path, "an archive, not a workbook", _AS_WORKBOOK)


def _wide(name: str) -> bytes:
    """Return how a document of the old kind writes the name of a part."""
    return name.encode("utf-16-le") + b"\0\0"


def _checked_archive(raw: bytes, path: Path) -> tuple[list[str], bytes]:
    """Return the names in an archive and its manifest; `InputError` where it would unpack to far too much.

    Sizes are those of the directory; where it lies, reading ends at the size it states, with an error.
    """
    try:
        with ZipFile(io.BytesIO(raw)) as archive:
            size = sum(part.file_size for part in archive.infolist())
            if size > min(MOST_BYTES, max(HARMLESS, MOST_GROWTH * len(raw))):
                what = f"a workbook that would unpack to {size / 1e6:,.0f} MB from {len(raw) / 1e6:,.1f} MB"
                raise _refused(path, what, "save the sheet of the table alone")
            names = archive.namelist()
            listed = "META-INF/manifest.xml" in names
            return names, archive.read("META-INF/manifest.xml") if listed else b""
    except (BadZipFile, NotImplementedError, RuntimeError, EOFError, OSError) as error:
        raise _refused(path, f"a damaged workbook ({error})", "open and save it again") from None


def _named(sheets: list[Sheet], name: str, path: Path) -> Sheet:
    for fold in (str, str.casefold):
        for sheet in sheets:
            if fold(sheet.name) == fold(name):
                return sheet
    raise _refused(path, f"no sheet {name!r}", nearest(name, [sheet.name for sheet in sheets]))


def _grid(sheet: Sheet, path: Path, area: Area | None) -> Grid:
    rows: dict[int, dict[int, Cell]] = defaultdict(dict)
    try:
        for row, column, cell in sheet.cells(area or EVERYTHING):
            rows[row][column] = cell
    except TooLarge:
        where = f"{path}: sheet {sheet.name!r}"
        right = "name the range of the table, --range A3:F9"
        raise InputError([Fault(where, f"more than {MOST_CELLS:,} cells", right)]) from None
    return Grid(path, sheet.name, tuple(Row(number, rows[number]) for number in sorted(rows)))


def _only_table(
    sheets: list[Sheet], path: Path, holds_table: Callable[[Grid], bool], area: Area | None
) -> Grid:
    """Return the only visible sheet that holds a table, or the only one that is not empty."""
    filled: list[Grid] = []
    faults: list[Fault] = []
    for sheet in sheets:
        try:
            grids = [] if sheet.hidden else [_grid(sheet, path, area)]
            filled += [grid for grid in grids if grid.rows]
        except InputError as error:
            faults += error.faults
    found = [grid for grid in filled if holds_table(grid)] or filled
    if faults and not any(map(holds_table, filled)):
        raise InputError(faults)
    if len(found) == 1:
        return found[0]
    if found:
        names = listing([repr(grid.sheet) for grid in found])
        is_table = holds_table(found[0])
        what = f"{len(found)} sheets hold a table" if is_table else "no sheet holds a table that is known"
        raise _refused(path, what, f"name one with --sheet: {names}")
    hidden = listing([repr(sheet.name) for sheet in sheets if sheet.hidden])
    raise _refused(path, "no cells in any visible sheet", f"give a table; hidden sheets: {hidden}")
