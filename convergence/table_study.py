"""The tables of a table study: the ladder, what its columns are, and the table of a companion ladder."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Annotated

from convergence.columns import Degree, bare_quantities, formal_order, read_column
from convergence.dimensions import Units
from convergence.errors import nearest
from convergence.intake.table import table
from convergence.results import Ladder, Quantity
from convergence.sections import Sections


@dataclass(frozen=True)
class TableStudy:
    """What the tables of a table study say; the columns of the ladder are under the names of the quantities.

    `columns` are the names in the file, by quantity; `companion` is the same on a second ladder.
    """

    ladder: Ladder
    file: Path
    dimension: int
    quantities: tuple[Quantity, ...]
    columns: Mapping[str, str]
    companion: "TableStudy | None" = None


def read_table_study(sections: Sections, study: Path, units: Units) -> TableStudy | None:
    """Read [table], [companion] and [quantities], None where the table cannot be read."""
    read = _table(sections, "table", study)
    if read is None:
        return None
    ladder, found, path, dimension = read
    asked = sections.named("quantities", "quantity")
    pairs = [
        sections.keep((q, source), faults)
        for q, source, faults in (read_column(sections.file, name, units, found) for name in asked)
    ]
    columns = {quantity.name: source for quantity, source in pairs if quantity}
    quantities = tuple(quantity for quantity, _ in pairs if quantity)
    if not sections.file.data.get("quantities"):
        quantities = bare_quantities(ladder, found, kinds={}, degree=None, relative=None)
        columns = {quantity.name: quantity.name for quantity in quantities}
    main = TableStudy(_renamed(ladder, columns), path, dimension, quantities, columns)
    if "companion" not in sections.file.data:
        return main
    return replace(main, companion=_companion(sections, study, main))


def companion(
    *, degree: Annotated[Degree | None, "degree of its elements, that of the quantities if not given"] = None
) -> int | None:
    """Return what [companion] says beside what [table] does: the table of a second ladder."""
    return degree


def _companion(sections: Sections, study: Path, main: TableStudy) -> TableStudy | None:
    read = _table(sections, "companion", study, "degree")
    said = {key: value for key, value in sections.table("companion").items() if key == "degree"}
    own = sections.bound(companion, said, "companion")
    if read is None or own is None:
        return None
    ladder, found, path, dimension = read
    if path.name == main.file.name:
        sections.fault(("companion", "file"), "the name of the file of [table]", "another table", path.name)
    for quantity in main.quantities:
        column = main.columns[quantity.name]
        if column not in found:
            what = f"{path.name} has no column {column!r}"
            sections.fault(("companion", "file"), what, nearest(column, found))
        elif found[column] != quantity.unit:
            what = f"the column {column!r} is in {found[column] or 'no unit'}"
            sections.fault(("companion", "file"), what, f"{quantity.unit or 'no unit'}, as in [table]")
    quantities = tuple(_of_degree(quantity, companion(**own)) for quantity in main.quantities)
    return TableStudy(_renamed(ladder, main.columns), path, dimension, quantities, main.columns)


def _of_degree(quantity: Quantity, degree: int | None) -> Quantity:
    if degree is None:
        return quantity
    return replace(quantity, degree=degree, formal_order=formal_order(quantity.kind, degree))


def _table(
    sections: Sections, section: str, study: Path, *also: str
) -> tuple[Ladder, dict[str, str], Path, int] | None:
    """Return the ladder of a table, the units of its columns, its path and dimension."""
    arguments = sections.bound(table, sections.table(section), section, also=also)
    if arguments is None:
        return None
    path = _beside(study, arguments["file"])
    read = sections.called(table, {**arguments, "file": str(path)}, section)
    return None if read is None else (*read, path, arguments["dimension"])


def _beside(study: Path, file: str) -> Path:
    """Return the table's path from the study's folder; a copy of the study has its table beside it."""
    path = study.parent / file
    copy = study.parent / Path(file).name
    return copy if copy.exists() and not path.exists() else path


def _renamed(found: Ladder, columns: Mapping[str, str]) -> Ladder:
    """Return the ladder with the columns under the names of the quantities, and their places."""
    names = {name + end: source + end for name, source in columns.items() for end in ("", ".x", ".y", ".z")}
    levels = tuple(
        replace(lv, values={new: lv.values[old] for new, old in names.items() if old in lv.values})
        for lv in found.levels
    )
    fine = {new: found.resolution[old] for new, old in names.items() if old in found.resolution}
    return replace(found, levels=levels, resolution=fine)
