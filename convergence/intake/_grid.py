"""A table as it stands in a file, cell by cell: rows of a text or of a sheet, without what is empty."""

import re
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path

from convergence.errors import Fault, InputError

_AREA = re.compile(r"\$?([A-Za-z]{1,3})\$?(\d{1,7}):\$?([A-Za-z]{1,3})\$?(\d{1,7})")


@dataclass(frozen=True)
class Cell:
    """What a cell prints; `stored` where it is a number of a spreadsheet, `flaw` where it cannot be used."""

    text: str
    stored: bool = False
    flaw: str = ""


@dataclass(frozen=True)
class Row:
    """The cells of a row that are not empty, by column from 1; `width` is that of a line of text, 0 else."""

    number: int
    cells: Mapping[int, Cell]
    width: int = 0


@dataclass(frozen=True)
class Grid:
    """Rows that are not empty, in order; `sheet` is "" for a text."""

    path: Path
    sheet: str
    rows: tuple[Row, ...]

    @property
    def file(self) -> str:
        """Return where the whole of it stands."""
        return f"{self.path}: sheet {self.sheet!r}" if self.sheet else str(self.path)

    def row(self, row: int) -> str:
        """Return where a row stands."""
        return f"{self.file}: row {row}" if self.sheet else f"{self.path}:{row}"

    def cell(self, row: int, column: int, name: str) -> str:
        """Return where a cell stands: by its letters in a sheet, by the name of its column in a text."""
        if self.sheet:
            return f"{self.file}: cell {letters(column)}{row}"
        return f"{self.path}:{row}: column {name!r}"


@dataclass(frozen=True)
class Area:
    """A rectangle of a sheet, rows and columns from 1, both ends included."""

    top: int
    left: int
    bottom: int
    right: int

    def holds(self, row: int, column: int) -> bool:
        return self.top <= row <= self.bottom and self.left <= column <= self.right


EVERYTHING = Area(1, 1, 1 << 20, 1 << 14)  # the largest sheet a workbook may have


def area_of(word: str) -> Area:
    """Return the rectangle that a range such as A3:F9 names; `InputError` where it is none."""
    found = _AREA.fullmatch(word.strip())
    if not found:
        raise InputError([Fault(f"range {word}", "not a range of cells", "write e.g. A3:F9")])
    columns = sorted((_column(found[1]), _column(found[3])))
    rows = sorted((int(found[2]), int(found[4])))
    return Area(rows[0], columns[0], rows[1], columns[1])


def letters(column: int) -> str:
    """Return the letters of a column of a sheet: A for 1, AA for 27."""
    text = ""
    while column:
        column, rest = divmod(column - 1, 26)
        text = chr(ord("A") + rest) + text
    return text


def _column(text: str) -> int:
    number = 0
    for letter in text.upper():
        number = 26 * number + ord(letter) - ord("A") + 1
    return number
