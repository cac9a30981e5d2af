"""The tables of a table study: the ladder, what its columns are, and the table of a companion ladder."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Annotated, Any

from convergence.columns import Degree, bare_quantities, formal_order, read_column
from convergence.dimensions import Units
from convergence.errors import listing, nearest
from convergence.intake.table import Tables, table
from convergence.results import Ladder, Quantity
from convergence.sections import Sections
from convergence.textfile import digest_of


@dataclass(frozen=True)
class TableStudy:
    """What the tables of a table study say; the columns of a ladder are under the names of the quantities.

    `ladders` are those of the load cases, one under "" without any; `meaning` says what each case is.
    `columns` are the names in the file, by quantity; `companion` is the same on a second ladder.
    """

    ladders: Mapping[str, Ladder]
    meaning: Mapping[str, str]
    file: Path
    said: Mapping[str, Any]
    quantities: tuple[Quantity, ...]
    columns: Mapping[str, str]
    companion: "TableStudy | None" = None

    def parts(self, case: str = "") -> dict[str, Any]:
        """Return everything that changes a number of the ladder of a case."""
        return {
            "table": digest_of(self.file),
            "said": {**self.said, "file": ""},
            "columns": self.columns,
            "case": case,
        }


def read_table_study(sections: Sections, units: Units) -> TableStudy | None:
    """Read [table], [companion] and [quantities], None where the table cannot be read."""
    read = _table(sections, "table")
    if read is None:
        return None
    tables, path, said = read
    found = tables.units
    asked = sections.named("quantities", "quantity")
    pairs = [
        sections.keep((q, source), faults)
        for q, source, faults in (read_column(sections.file, name, units, found) for name in asked)
    ]
    columns = {quantity.name: source for quantity, source in pairs if quantity}
    quantities = tuple(quantity for quantity, _ in pairs if quantity)
    if not sections.file.data.get("quantities"):
        first = next(iter(tables.ladders.values()))
        quantities = bare_quantities(first, found, kinds={}, degree=None, relative=None)
        columns = {quantity.name: quantity.name for quantity in quantities}
    main = TableStudy(_renamed(tables, columns), tables.meaning(), path, said, quantities, columns)
    if "companion" not in sections.file.data:
        return main
    return replace(main, companion=_companion(sections, main))


def companion(
    *, degree: Annotated[Degree | None, "degree of its elements, that of the quantities if not given"] = None
) -> int | None:
    """Return what [companion] says beside what [table] does: the table of a second ladder."""
    return degree


def _companion(sections: Sections, main: TableStudy) -> TableStudy | None:
    read = _table(sections, "companion", "degree")
    said = {key: value for key, value in sections.table("companion").items() if key == "degree"}
    own = sections.bound(companion, said, "companion")
    if read is None or own is None:
        return None
    tables, path, where = read
    found = tables.units
    if tables.ladders.keys() != main.ladders.keys():
        what = f"{path.name} has {_cases(tables.ladders)}"
        sections.fault(("companion", "file"), what, f"{_cases(main.ladders)}, as in [table]")
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
    renamed = _renamed(tables, main.columns)
    return TableStudy(renamed, tables.meaning(), path, where, quantities, main.columns)


def _cases(ladders: Mapping[str, Ladder]) -> str:
    return "no load cases" if "" in ladders else f"the load cases {listing(list(ladders))}"


def _of_degree(quantity: Quantity, degree: int | None) -> Quantity:
    if degree is None:
        return quantity
    return replace(quantity, degree=degree, formal_order=formal_order(quantity.kind, degree))


def _table(sections: Sections, section: str, *also: str) -> tuple[Tables, Path, dict[str, Any]] | None:
    """Return the ladders of a table, its path and what the study says of it."""
    arguments = sections.bound(table, sections.table(section), section, also=also)
    if arguments is None:
        return None
    path = sections.beside(arguments["file"])
    read = sections.called(table, {**arguments, "file": str(path)}, section)
    return None if read is None else (read, path, arguments)


def _renamed(found: Tables, columns: Mapping[str, str]) -> dict[str, Ladder]:
    """Return the ladders with the columns under the names of the quantities, and their places."""
    names = {name + end: source + end for name, source in columns.items() for end in ("", ".x", ".y", ".z")}
    renamed = {}
    for case, ladder in found.ladders.items():
        levels = tuple(
            replace(lv, values={new: lv.values[old] for new, old in names.items() if old in lv.values})
            for lv in ladder.levels
        )
        fine = {new: ladder.resolution[old] for new, old in names.items() if old in ladder.resolution}
        renamed[case] = replace(ladder, levels=levels, resolution=fine)
    return renamed
