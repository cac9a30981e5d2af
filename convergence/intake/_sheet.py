"""A sheet of a workbook that is read when it is asked for, and what each kind of workbook has in common."""

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from itertools import islice

from convergence.intake._grid import Area, Cell

MOST_CELLS = 200_000

Found = tuple[int, int, Cell]  # row and column from 1


class TooLarge(Exception):
    """A sheet has more cells than any table of a few meshes."""


@dataclass(frozen=True)
class Sheet:
    """`cells` yields those of an area that are not empty, in the order of their rows."""

    name: str
    hidden: bool
    cells: Callable[[Area], Iterable[Found]]


def limited(cells: Iterable[Found]) -> Iterator[Found]:
    """Yield the cells; `TooLarge` where they are too many."""
    found = iter(cells)
    yield from islice(found, MOST_CELLS)
    if next(found, None) is not None:
        raise TooLarge


def stored(value: float) -> Cell:
    """Return the cell of a number: the shortest text that gives the same double, without a trailing .0."""
    return Cell(repr(float(value)).removesuffix(".0"), stored=True)
