"""How the columns of a table share the width of a page, and tables that are too wide for one."""

from collections.abc import Sequence
from dataclasses import replace

from convergence.report.content import Cell, Table, lines

A4_WIDTH = 108  # characters of the size of a table between the margins of our page
SNUG, PADDING = 2, 3  # characters that the sides of a cell take at least, and where there is room
WHOLE = 10  # rows of a table that is not parted by the end of a page
LONGEST_WORD = 24  # characters; longer ones are broken


def bands(table: Table, room: int = A4_WIDTH) -> list[Table]:
    """Return the table in parts that are no wider than `room` characters, each with its first column.

    Most tables have one part. A column is as narrow as its longest word allows.
    """
    first, *others = [SNUG + _least(column) for column in _columns(table)]
    parts: list[list[int]] = [[]]
    for x, least in enumerate(others, start=1):
        taken = first + sum(others[y - 1] for y in parts[-1])
        if parts[-1] and taken + least > room:
            parts.append([])
        parts[-1].append(x)
    return [table] if len(parts) == 1 else [_part(table, [0, *part]) for part in parts]


def shares(table: Table, room: int = A4_WIDTH) -> list[float]:
    """Return the share of each column of `room` characters: for its longest word, then for whole lines.

    What is left of the width goes to all columns alike, but none gets more than its longest line takes.
    """
    columns = _columns(table)
    widths: list[float] = [PADDING + _least(column) for column in columns]
    wanted = [_most(column, room) - width for column, width in zip(columns, widths, strict=True)]
    left = max(0.0, room - sum(widths))
    order = sorted(range(len(wanted)), key=lambda x: wanted[x])
    for place, x in enumerate(order):
        more = max(0.0, min(wanted[x], left / (len(order) - place)))
        widths[x], left = widths[x] + more, left - more
    return [width / max(room, sum(widths)) for width in widths]


def is_narrow(table: Table) -> bool:
    """Return whether no line of the table need be broken."""
    return sum(_most(column, A4_WIDTH) for column in _columns(table)) <= A4_WIDTH


def _columns(table: Table) -> list[list[str]]:
    """Return the lines of each column, its head among them."""
    columns: Sequence[Sequence[Cell]] = list(zip(table.head, *table.rows, strict=True))
    return [[words.text or " " for cell in column for words in lines(cell)] for column in columns]


def _least(column: Sequence[str]) -> int:
    return min(LONGEST_WORD, max(len(word) for line in column for word in line.split(" ")))


def _most(column: Sequence[str], room: int) -> int:
    return PADDING + min(room, max(map(len, column)))


def _part(table: Table, columns: Sequence[int]) -> Table:
    head = [table.head[x] for x in columns]
    return replace(table, head=head, rows=[[row[x] for x in columns] for row in table.rows])
