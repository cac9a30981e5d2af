"""A table of forces: one row a load or a reaction, with its force, moment and point, by load case.

Columns in any order, units in brackets behind their names: `what` (load or reaction), `name`, `case`; `fx`,
`fy` and `fz`; `mx`, `my` and `mz`, in a plane `mz` or `m`; `x`, `y` and `z`. An empty cell is zero. Units may
differ from column to column: all are converted to those of the first force and the first coordinate.
"""

from collections.abc import Iterator
from decimal import Decimal
from pathlib import Path

import numpy as np

from convergence.errors import Fault, InputError
from convergence.intake._cases import load_cases
from convergence.intake._cells import number, resolution
from convergence.intake._force_columns import FORCE, MOMENT, NUMBERS, POINT, ForceColumns, force_columns
from convergence.intake._raw_table import Place, RawTable, raw_table
from convergence.statics import COMPONENTS, IN_PLANE, Actions, Printout

NAMES = ("what", "type", "kind", *FORCE, "force x", "force y", "force z")
IS_LOAD = {"load": True, "loads": True, "applied": True, "reaction": False, "reactions": False}


def read_force_table(path: Path, place: Place | None = None) -> Printout:
    """Return the loads and reactions of a table; `InputError` has every fault."""
    raw = raw_table(path, place or Place(), known=NAMES)
    found = force_columns(raw.texts, raw.units, raw.grid.file)
    cases = load_cases(raw, found.headers.get("case"))
    faults = [*raw.faults, *cases.faults, *_cell_faults(found, raw), *_without_point(found, raw)]
    if faults:
        raise InputError(faults)
    whole = _actions(found, len(raw.rows))
    actions = {case: whole.of(np.isin(np.arange(len(raw.rows)), rows)) for case, rows in cases.rows.items()}
    remarks = [*raw.remarks, *(f"column {header!r} is not used" for header in found.unused)]
    if set(POINT).isdisjoint(found.cells):
        remarks.append("no row has a point (x, y): moments are not balanced")
    for case, one in actions.items():
        of = f"case {case!r}" if case else "the table"
        if one.is_load.all() or not one.is_load.any():
            remarks.append(f"{of} lists no {'reaction' if one.is_load.any() else 'load'}")
    return Printout(
        raw.source, actions, _components(found), found.force_unit, found.length_unit, tuple(remarks)
    )


def _cell_faults(found: ForceColumns, raw: RawTable) -> Iterator[Fault]:
    """Yield a fault for every cell that is no number, and every row that is neither load nor reaction."""
    for row in range(len(raw.rows)):
        what = found.cells["what"][row]
        if what.casefold() not in IS_LOAD:
            where = raw.where(row, found.headers["what"])
            yield Fault(where, "neither load nor reaction", "write load or reaction", what)
        for name in (name for name in NUMBERS if name in found.cells):
            header, cell = found.headers[name], found.cells[name][row]
            lost = not cell and raw.printed(row, header).lower() == "nan"
            if lost or (cell and number(cell) is None):
                right = "write a number such as 1234.5 or 1.2e3, or leave the cell empty for zero"
                yield Fault(raw.where(row, header), "not a number", right, cell or "nan")


def _without_point(found: ForceColumns, raw: RawTable) -> Iterator[Fault]:
    """Yield a fault for every force without a point, where others have one."""
    axes = [name for name in POINT if name in found.cells]
    for row in range(len(raw.rows)):
        force = any(number(found.cells[name][row] or "0") for name in FORCE if name in found.cells)
        for name in axes:
            header = found.headers[name]
            if force and not found.cells[name][row] and (row, header) not in raw.faulty:
                yield Fault(raw.where(row, header), "a force without its point", "give all its coordinates")


def _actions(found: ForceColumns, rows: int) -> Actions:
    values, rounding = {}, {}
    for name in NUMBERS:
        cells, factor = found.cells.get(name, [""] * rows), found.factors.get(name, 1.0)
        coarsest = resolution(_printed_alike(found, name) or ["0"])
        values[name] = factor * np.array([number(cell or "0") for cell in cells], dtype=float)
        rounding[name] = factor * np.array([_half_unit(cell, coarsest) for cell in cells])
    forces, moments, points = (np.array([values[name] for name in group]) for group in (FORCE, MOMENT, POINT))
    return Actions(
        is_load=np.array([IS_LOAD[cell.casefold()] for cell in found.cells["what"]]),
        names=tuple(found.cells.get("name", [""] * rows)),
        force=forces,
        moment=moments,
        point=points,
        force_rounding=np.array([rounding[name] for name in FORCE]),
        moment_rounding=np.array([rounding[name] for name in MOMENT]),
    )


def _printed_alike(found: ForceColumns, name: str) -> list[str]:
    """Return the cells of all columns of the same meaning and unit: they were printed in one way."""
    group = next(group for group in (FORCE, MOMENT, POINT) if name in group)
    alike = [one for one in group if one in found.cells and found.factors[one] == found.factors.get(name)]
    return [cell for one in alike for cell in found.cells[one] if cell]


def _half_unit(cell: str, coarsest: float) -> float:
    """Return how far rounding may have moved a cell: never more than in the largest number of its kind.

    A spreadsheet drops trailing zeros: 1250 beside 1187.25 was printed to hundredths.
    """
    if not cell:
        return 0.0
    exponent = Decimal(cell.replace("D", "e").replace("d", "e")).as_tuple().exponent
    return min(float(Decimal(5).scaleb(int(exponent) - 1)), coarsest)


def _components(found: ForceColumns) -> tuple[str, ...]:
    names = COMPONENTS if found.solid else IN_PLANE
    if set(POINT).isdisjoint(found.cells):
        return tuple(name for name in names if name.startswith("F"))
    return names
