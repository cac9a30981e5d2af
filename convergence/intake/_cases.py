"""Load cases of a table: a column names the case of each row."""

from collections.abc import Mapping
from dataclasses import dataclass

from convergence.errors import Fault, InputError, nearest
from convergence.intake._header import folded
from convergence.intake._raw_table import RawTable

NAMES = ("case", "load case", "loadcase", "lc")


@dataclass(frozen=True)
class LoadCases:
    """The rows of each case in the order of the table, all under "" where no `column` names cases."""

    column: str
    rows: Mapping[str, list[int]]
    faults: tuple[Fault, ...] = ()


def load_cases(raw: RawTable, asked: str | None) -> LoadCases:
    """Return the rows of each case; names that differ in capitals only are one.

    An empty cell means the case above, as in cells that were merged. A column that is not asked for and has
    another name in every row names the meshes, not cases.
    """
    column = _column(raw, asked)
    if column is None:
        return LoadCases("", {"": list(range(len(raw.rows)))})
    names: dict[str, str] = {}
    rows: dict[str, list[int]] = {}
    faults = []
    above = ""
    for row in range(len(raw.rows)):
        above = " ".join(raw.printed(row, column).split()) or above
        if above:
            rows.setdefault(names.setdefault(above.casefold(), above), []).append(row)
        else:
            faults.append(Fault(raw.where(row, column), "no load case", "name the case of the first row"))
    if asked is None and not faults and len(rows) == len(raw.rows) > 1:
        return LoadCases(column, {"": list(range(len(raw.rows)))})
    return LoadCases(column, rows, tuple(faults))


def _column(raw: RawTable, asked: str | None) -> str | None:
    for name in raw.texts:
        if folded(name) == folded(asked) if asked is not None else folded(name) in NAMES:
            return name
    if asked is None:
        return None
    raise InputError([Fault(raw.grid.file, f"no column {asked!r}", nearest(asked, raw.texts))])
