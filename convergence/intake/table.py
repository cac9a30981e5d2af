"""A bare table: one row a mesh, one column of sizes, every other numeric column a quantity.

The column of sizes is h (cell size), or cells, nodes or dofs; from a count N the size is
h = (1/N)^(1/dimension), a relative size: only ratios of h matter. Columns `cells`, `dofs`, `seconds` and
`memory` (in MB) beside it are the cost of each level. A column of load cases cuts the table into ladders.
Text (UTF-8, UTF-16, Windows) and workbooks (.xlsx, .xlsm, .xls, .ods) are told by their content.
"""

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Annotated, Literal

from convergence.errors import Fault, InputError, listing
from convergence.intake._cases import load_cases
from convergence.intake._cells import number, resolution
from convergence.intake._header import folded
from convergence.intake._notation import Decimals
from convergence.intake._raw_table import Place, RawTable, raw_table
from convergence.results import Ladder, Level

COUNTS = ("cells", "nodes", "dofs")
SIZES = ("h", *COUNTS)
SAME = {
    **{name: "h" for name in ("cell size", "element size", "mesh size")},
    **{name: "cells" for name in ("elements", "number of cells", "number of elements")},
    **{name: "dofs" for name in ("dof", "degrees of freedom", "unknowns", "number of dofs")},
    "number of nodes": "nodes",
}
NO_QUANTITIES = (*SIZES, "seconds", "memory")


@dataclass(frozen=True)
class Tables:
    """The ladder of each load case, under "" where the table has no column of cases; the unit per column."""

    ladders: Mapping[str, Ladder]
    units: Mapping[str, str]
    case_column: str = ""

    def meaning(self) -> dict[str, str]:
        """Return what each load case is in the table."""
        return {name: f"{self.case_column} = {name}" for name in self.ladders if name}


def table(
    *,
    file: Annotated[str, "a table with one row a mesh: text (.csv, .txt) or a workbook (.xlsx, .xls, .ods)"],
    sheet: Annotated[str | None, "sheet of a workbook; the only one with a table if not given"] = None,
    range: Annotated[str | None, "cells of a sheet, e.g. A3:F9; all if not given"] = None,
    size: Annotated[
        str | None, "the column of sizes; the first of h, cells, nodes, dofs if not given"
    ] = None,
    case: Annotated[str | None, "the column that names the load case; case or load case if not given"] = None,
    decimal: Annotated[Decimals | None, "sign of the decimals, where the cells leave it open"] = None,
    dimension: Annotated[Literal[2, 3], "dimension of the mesh, where sizes follow from counts"] = 2,
) -> Tables:
    """Return the ladders that a study's [table] names."""
    return read_table(Path(file), Place(sheet, range, decimal), size=size, case=case, dimension=dimension)


def read_table(
    path: Path,
    place: Place | None = None,
    *,
    size: str | None = None,
    case: str | None = None,
    dimension: int = 2,
) -> Tables:
    """Return the ladders, coarse to fine, and the unit per column; `InputError` has every fault.

    Lines that start with # and empty lines are skipped. An empty cell, "-" or "nan" means that a level has
    no value; an empty cell of the column of cases means the case above. Equal sizes with different values
    are kept: what they mean is for the judgement to say. Counts that the table does not give are 0, seconds
    and memory NaN.
    """
    counts = {*COUNTS, *(name for name, same in SAME.items() if same in COUNTS)}
    known = {*SIZES, *SAME, *([folded(size)] if size else [])}
    raw = raw_table(path, place or Place(), known=known, counts=counts)
    by, cases = _size_column(raw, size), load_cases(raw, case)
    empty = [name for name in raw.texts if name not in (by, cases.column) and not _has_number(raw, name)]
    kept = [name for name in raw.texts if name not in (*empty, cases.column)]
    quantities = [name for name in kept if name != by and _role(name) not in NO_QUANTITIES]
    faults = [*raw.faults, *cases.faults, *_cell_faults(raw, by, kept)]
    if not quantities and not raw.faults:
        ignored = "".join(f" ({name!r} has none, {raw.printed(0, name)!r} for one)" for name in empty)
        right = f"add a column of numbers beside the sizes{ignored}"
        faults.append(Fault(raw.grid.file, "no column of a quantity", right))
    if "" in cases.rows:
        faults += _second_table(raw, by)
    if faults:
        raise InputError(faults)
    shared = [*raw.remarks, *(f"column {name!r} has no number and is ignored" for name in empty)]
    if cases.column and "" in cases.rows:
        shared.append(f"column {cases.column!r} names the meshes, as it differs in every row")
    ladders = {
        name: _ladder(raw, rows, shared, by=by, quantities=quantities, kept=kept, dimension=dimension)
        for name, rows in cases.rows.items()
    }
    case_column = "" if "" in ladders else cases.column
    return Tables(ladders, {name: raw.units[name] for name in (by, *quantities)}, case_column)


def _role(name: str) -> str:
    """Return h, cells, nodes, dofs, seconds or memory for a column of that meaning, else its own name."""
    return SAME.get(folded(name), folded(name))


def _has_number(raw: RawTable, name: str) -> bool:
    return any(not math.isnan(_value(text)) for text in raw.texts[name])


def _size_column(raw: RawTable, size: str | None) -> str:
    names = list(raw.texts)
    if size is None:
        found = next((name for role in SIZES for name in names if _role(name) == role), None)
    else:
        found = next((name for name in names if folded(name) == folded(size)), None)
    if found is None:
        what = "no column of sizes" if size is None else f"no column {size!r}"
        right = f"name one of the columns {', '.join(SIZES[:-1])} or {SIZES[-1]}; found: {listing(names)}"
        raise InputError([Fault(raw.grid.file, what, right)])
    return found


def _second_table(raw: RawTable, by: str) -> list[Fault]:
    """Return a fault where the header is repeated and sizes as well: that is another table."""
    sizes = raw.texts[by]
    if not raw.columns.repeated or len(set(sizes)) == len(sizes):
        return []
    right = "add a column that names the load case, or give the range of one table"
    return [Fault(raw.grid.row(raw.columns.repeated[0]), "a second table with the same sizes", right)]


def _cell_faults(raw: RawTable, by: str, kept: Sequence[str]) -> Iterator[Fault]:
    """Yield a fault for every cell that is no number, and every size or count that cannot be one."""
    for row in range(len(raw.rows)):
        for name in kept:
            if (row, name) in raw.faulty:
                continue
            value, where = number(raw.texts[name][row]), raw.where(row, name)
            printed = raw.printed(row, name)
            if value is None:
                right = "write a number such as 1234.5 or 1.2e3, or leave the cell empty"
                yield Fault(where, "not a number", right, printed)
            elif name == by and not value > 0:
                yield Fault(where, "not a size", "give a number above 0", printed)
            elif _role(name) in COUNTS and (value <= 0 or value % 1 > 0):
                yield Fault(where, "not a count", "give a whole number above 0", printed)


def _ladder(
    raw: RawTable,
    rows: Sequence[int],
    remarks: Sequence[str],
    *,
    by: str,
    quantities: Sequence[str],
    kept: Sequence[str],
    dimension: int,
) -> Ladder:
    """Return the ladder of some rows of a table."""
    relative = _role(by) in COUNTS
    texts = {name: [raw.texts[name][row] for row in rows] for name in kept}
    levels = _levels(texts, by, quantities, dimension if relative else None)
    more = []
    if len(levels) < len(rows):
        more.append(f"rows that repeat another exactly are dropped: {len(rows) - len(levels)}")
    if relative:
        more.append(f"sizes are relative, h = (1/N)^(1/{dimension}) from the column {by!r}")
    printed = {name: [text for text in texts[name] if not math.isnan(_value(text))] for name in quantities}
    return Ladder(
        levels=tuple(levels),
        source=raw.source,
        remarks=(*remarks, *more),
        resolution={name: resolution(found) for name, found in printed.items() if found},
        h_unit="" if relative else raw.units[by],
    )


def _levels(
    texts: Mapping[str, list[str]], by: str, quantities: Sequence[str], dimension: int | None
) -> list[Level]:
    """Return the levels from coarse to fine, each row once; with a dimension the sizes are counts."""
    levels = []
    for row in dict.fromkeys(zip(*texts.values(), strict=True)):
        values = dict(zip(texts, map(_value, row), strict=True))
        cost: dict[str, float] = {}
        for name, value in values.items():
            if not math.isnan(value):
                cost.setdefault(_role(name), value)
        size = values[by]
        levels.append(
            Level(
                h=size ** (-1.0 / dimension) if dimension else size,
                cells=int(cost.get("cells", 0)),
                dofs=int(cost.get("dofs", 0)),
                seconds=cost.get("seconds", math.nan),
                values={name: values[name] for name in quantities},
                memory=cost.get("memory", math.nan),
            )
        )
    return sorted(levels, key=lambda level: -level.h)


def _value(text: str) -> float:
    value = number(text)
    return math.nan if value is None else value
