"""A bare table: one row a mesh, one column of sizes, every other numeric column a quantity.

The column of sizes is h (cell size), or cells, nodes or dofs; from a count N the size is
h = (1/N)^(1/dimension), a relative size: only ratios of h matter. Columns `cells`, `dofs`, `seconds` and
`memory` (in MB) beside it are the cost of each level.
"""

import csv
import math
from dataclasses import dataclass
from pathlib import Path
from typing import Annotated, Literal

from convergence.errors import Fault, InputError, listing
from convergence.intake._cells import number, resolution, split_unit
from convergence.results import Ladder, Level
from convergence.textfile import read_text

COUNTS = ("cells", "nodes", "dofs")
SIZES = ("h", *COUNTS)
NO_QUANTITIES = (*SIZES, "seconds", "memory")


@dataclass(frozen=True)
class _Row:
    line: int
    cells: list[str]


def table(
    *,
    file: Annotated[str, "a table with one row a mesh, separated by commas, semicolons or tabs"],
    size: Annotated[
        str | None, "the column of sizes; the first of h, cells, nodes, dofs if not given"
    ] = None,
    dimension: Annotated[Literal[2, 3], "dimension of the mesh, where sizes follow from counts"] = 2,
) -> tuple[Ladder, dict[str, str]]:
    """Return the ladder a study's [table] names, and the unit of each column."""
    return read_table(Path(file), size=size, dimension=dimension)


def read_table(path: Path, *, size: str | None = None, dimension: int = 2) -> tuple[Ladder, dict[str, str]]:
    """Return the ladder, coarse to fine, and the unit per column; `InputError` has every fault.

    Lines that start with # and empty lines are skipped. An empty cell or "nan" means that a level has
    no value. Equal sizes with different values are kept: what they mean is for the judgement to say.
    Counts that the table does not give are 0, seconds and memory NaN.
    """
    header, rows = _rows(read_text(path, "a table (.csv)"), path)
    columns, units = _columns(header, rows, path)
    by = _size_column(list(columns), size, str(path))
    empty = [name for name, cells in columns.items() if name != by and all(map(_no_number, cells))]
    kept = {name: cells for name, cells in columns.items() if name not in empty}
    faults = _cell_faults(kept, by, [f"{path}:{row.line}" for row in rows])
    quantities = [name for name in kept if name != by and name.lower() not in NO_QUANTITIES]
    if not quantities:
        ignored = "".join(f" ({name!r} has none, {columns[name][0]!r} for one)" for name in empty)
        right = f"add a column of numbers beside the sizes{ignored}"
        faults.append(Fault(str(path), "no column of a quantity", right))
    if faults:
        raise InputError(faults)
    levels = _levels(kept, by, quantities, dimension)
    remarks = [f"column {name!r} has no number and is ignored" for name in empty]
    if len(levels) < len(rows):
        remarks.append(f"rows that repeat another exactly are dropped: {len(rows) - len(levels)}")
    if by.lower() in COUNTS:
        remarks.append(f"sizes are relative, h = (1/N)^(1/{dimension}) from the column {by!r}")
    printed = {name: [cell for cell in kept[name] if not _no_number(cell)] for name in quantities}
    ladder = Ladder(
        levels=tuple(levels),
        source=str(path),
        remarks=tuple(remarks),
        resolution={name: resolution(cells) for name, cells in printed.items()},
        h_unit="" if by.lower() in COUNTS else units[by],
    )
    return ladder, {name: units[name] for name in (by, *quantities)}


def _rows(text: str, path: Path) -> tuple[_Row, list[_Row]]:
    """Cut the text into its header and rows, each with its line; empty lines and # lines are left out."""
    lines = text.replace("\r\n", "\n").replace("\r", "\n").split("\n")
    lines = ["" if line.lstrip().startswith("#") else line for line in lines]
    head = next((line for line in lines if line.strip()), "")
    separator = max((",", ";", "\t"), key=head.count)
    reader = csv.reader(lines, delimiter=separator, skipinitialspace=True, strict=True)
    rows = []
    try:
        for cells in reader:
            if any(map(str.strip, cells)):
                rows.append(_Row(reader.line_num, [cell.strip() for cell in cells]))
    except csv.Error as error:
        where = f"{path}:{reader.line_num}"
        raise InputError([Fault(where, f"not a table ({error})", "separate the cells by commas")]) from None
    if len(rows) < 2:
        raise InputError([Fault(str(path), "no rows of numbers", "give a header and one row for each mesh")])
    return rows[0], rows[1:]


def _columns(header: _Row, rows: list[_Row], path: Path) -> tuple[dict[str, list[str]], dict[str, str]]:
    """Return the cells and the unit of each column by its name, without columns that are blank."""
    where, width = f"{path}:{header.line}", len(header.cells)
    if all(number(cell) is not None for cell in header.cells):
        raise InputError([Fault(where, "no header", "the first row names the columns, e.g. h,deflection")])
    ragged = [row for row in rows if len(row.cells) < width or any(row.cells[width:])]
    if ragged:
        right = f"the header has {width}"
        raise InputError(
            Fault(f"{path}:{row.line}", f"a row of {len(row.cells)} cells", right) for row in ragged
        )
    table = [[cell, *(row.cells[k] for row in rows)] for k, cell in enumerate(header.cells)]
    columns: dict[str, list[str]] = {}
    units = {}
    faults = []
    for cell, *cells in (column for column in table if any(column)):
        name, unit = split_unit(cell)
        if not name:
            faults.append(Fault(where, "a column without a name", "name every column"))
        elif name.casefold() in map(str.casefold, columns):
            faults.append(Fault(where, "two columns of one name", "give each column its own", name))
        columns[name], units[name] = cells, unit
    if faults:
        raise InputError(faults)
    return columns, units


def _size_column(names: list[str], size: str | None, where: str) -> str:
    folded = {name.lower(): name for name in names}
    wanted = SIZES if size is None else (size.lower(),)
    found = next((folded[name] for name in wanted if name in folded), None)
    if found is None:
        what = "no column of sizes" if size is None else f"no column {size!r}"
        right = f"name one of the columns {', '.join(SIZES[:-1])} or {SIZES[-1]}; found: {listing(names)}"
        raise InputError([Fault(where, what, right)])
    return found


def _no_number(cell: str) -> bool:
    return math.isnan(_value(cell))


def _cell_faults(columns: dict[str, list[str]], by: str, places: list[str]) -> list[Fault]:
    """Return a fault for every cell that is no number, and every size or count that cannot be one."""
    faults = []
    for row, place in enumerate(places):
        for name, cells in columns.items():
            cell = cells[row]
            value = number(cell)
            where = f"{place}: column {name!r}"
            if value is None:
                right = "write a number such as 1234.5 or 1.2e3, or leave the cell empty"
                faults.append(Fault(where, "not a number", right, cell))
            elif name == by and not value > 0:
                faults.append(Fault(where, "not a size", "give a number above 0", cell))
            elif name.lower() in COUNTS and (value <= 0 or value % 1 > 0):
                faults.append(Fault(where, "not a count", "give a whole number above 0", cell))
    return faults


def _levels(columns: dict[str, list[str]], by: str, quantities: list[str], dimension: int) -> list[Level]:
    """Return the levels from coarse to fine, each row once."""
    levels = []
    for row in dict.fromkeys(zip(*columns.values(), strict=True)):
        values = dict(zip(columns, map(_value, row), strict=True))
        cost = {name.lower(): value for name, value in values.items() if not math.isnan(value)}
        size = values[by]
        levels.append(
            Level(
                h=size ** (-1.0 / dimension) if by.lower() in COUNTS else size,
                cells=int(cost.get("cells", 0)),
                dofs=int(cost.get("dofs", 0)),
                seconds=cost.get("seconds", math.nan),
                values={name: values[name] for name in quantities},
                memory=cost.get("memory", math.nan),
            )
        )
    return sorted(levels, key=lambda level: -level.h)


def _value(cell: str) -> float:
    value = number(cell)
    return math.nan if value is None else value
