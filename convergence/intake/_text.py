"""Tables as text: the encoding, and the sign between the cells, found from the text itself."""

import csv
import re
from collections.abc import Callable, Iterator, Sequence
from pathlib import Path

from convergence.errors import Fault, InputError
from convergence.intake._grid import Cell, Grid, Row

MOST_LINES = 100_000

_SEPARATORS = ("\t", ";", ",")
_BLANKS = (r"\s{2,}", r"(?<=[\])])\s+|\s+(?![\[(])")  # a unit in brackets belongs to the name before it
_ERROR_WORD = re.compile(r"#(DIV/0!|N/A|NAME\?|NULL!|NUM!|REF!|VALUE!)", re.IGNORECASE)
_NO_TEXT = re.compile(r"[\x00-\x08\x0e-\x1f]")


def decoded(raw: bytes, path: Path) -> str:
    """Return the text of a table in UTF-8, UTF-16 or Windows' Western European code page."""
    for encoding in (_wide(raw), "utf-8-sig", "cp1252"):
        try:
            text = raw.decode(encoding) if encoding else "\0"
        except UnicodeDecodeError:
            continue
        if not _NO_TEXT.search(text):
            break
    else:
        right = "give a table as text (.csv, .txt) or a workbook (.xlsx, .xls, .ods)"
        raise InputError([Fault(str(path), "neither a text nor a workbook", right)])
    if len(text.splitlines()) > MOST_LINES:
        what = f"a text of more than {MOST_LINES:,} lines"
        raise InputError([Fault(str(path), what, "give a table with one row a mesh")])
    if not text.strip():
        raise InputError([Fault(str(path), "the file is empty", "give a table")])
    if text.lstrip().startswith("<"):
        right = "open it in a spreadsheet and save it as .xlsx, .ods or .csv"
        raise InputError([Fault(str(path), "a page of HTML or XML, not a table", right)])
    return text.replace("\r\n", "\n").replace("\r", "\n")


def _wide(raw: bytes) -> str:
    """Return the encoding of a text with two bytes a letter, "" where it has not."""
    if raw.startswith((b"\xff\xfe", b"\xfe\xff")):
        return "utf-16"
    for encoding, high in (("utf-16-le", raw[1::2]), ("utf-16-be", raw[::2])):
        if len(raw) > 3 and high.count(0) > 0.9 * len(high):
            return encoding
    return ""


def text_grid(text: str, path: Path, holds_table: Callable[[Grid], bool]) -> Grid:
    """Return the rows of a text, cut where that shows a table, else at the sign most lines have.

    Lines that start with # are comments; where the header is one too, as numerical programs write it, it
    counts. Runs of blanks separate cells where no other sign shows a table.
    """
    lines = text.split("\n")
    bare = ["" if _is_comment(line) else line for line in lines]
    for cut in (bare, [line.lstrip().removeprefix("#") if _is_comment(line) else line for line in lines]):
        for separator in (*_SEPARATORS, *_BLANKS):
            try:
                grid = Grid(path, "", tuple(_rows(cut, separator)))
            except csv.Error:
                continue
            if holds_table(grid):
                return grid
    return _most_likely(bare, path)


def _is_comment(line: str) -> bool:
    start = line.lstrip()
    return start.startswith("#") and not _ERROR_WORD.match(start)


def _most_likely(lines: Sequence[str], path: Path) -> Grid:
    """Return the rows cut at the sign most lines have; `InputError` where a quotation mark is left open."""
    counts = {separator: sum(separator in line for line in lines) for separator in _SEPARATORS}
    separator = max(_SEPARATORS, key=lambda one: counts[one])
    reader = _rows(lines, separator if counts[separator] else _BLANKS[1])
    rows: list[Row] = []
    try:
        rows.extend(reader)
    except csv.Error as error:
        where = f"{path}:{len(lines) if 'end of data' in str(error) else rows[-1].number + 1 if rows else 1}"
        what = f"not a table ({error})"
        raise InputError([Fault(where, what, "separate the cells by commas")]) from None
    return Grid(path, "", tuple(rows))


def _rows(lines: Sequence[str], separator: str) -> Iterator[Row]:
    """Yield the rows that are not blank. A separator of more than one letter is a pattern."""
    if separator in _SEPARATORS:
        reader = csv.reader(lines, delimiter=separator, skipinitialspace=True, strict=True)
        found = ((reader.line_num, cells) for cells in reader)
    else:
        found = ((n, re.split(separator, line.strip())) for n, line in enumerate(lines, 1))
    for number, cells in found:
        texts = [cell.strip() for cell in cells]
        if any(texts):
            yield Row(number, {k: Cell(t) for k, t in enumerate(texts, 1) if t}, len(texts))
