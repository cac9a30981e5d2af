"""[equilibrium] of a study: the loads and reactions that another solver printed, balanced case by case."""

from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import Annotated

from convergence.dimensions import POSITIVE, Ratio
from convergence.errors import nearest
from convergence.intake._notation import Decimals
from convergence.intake._raw_table import Place
from convergence.intake.force_table import read_force_table
from convergence.sections import Sections
from convergence.statics import ACCEPTED, Balance, balances

EQUILIBRIUM = "equilibrium"


def equilibrium(
    *,
    file: Annotated[str, "a table of loads and reactions, one a row: text or a workbook"],
    sheet: Annotated[str | None, "sheet of a workbook; the only one with a table if not given"] = None,
    range: Annotated[str | None, "cells of a sheet, e.g. A3:F9; all if not given"] = None,
    decimal: Annotated[Decimals | None, "sign of the decimals, where the cells leave it open"] = None,
    case: Annotated[str | None, "the load case of the table that belongs to this study"] = None,
    about: Annotated[
        tuple[float, float] | tuple[float, float, float] | None,
        "the point of the moments, in the table's unit of length, the origin if not given",
    ] = None,
    tolerance: Annotated[Ratio, POSITIVE, "accepted out-of-balance, a share of the load"] = ACCEPTED,
) -> tuple[str | None, dict[str, Balance]]:
    """Return the case that was asked for and the balance of every case of the table."""
    return case, balances(read_force_table(Path(file), Place(sheet, range, decimal)), about, tolerance)


def printed_balances(
    sections: Sections, cases: Sequence[str], others: Sequence[Path], *, solved: bool
) -> tuple[Path | None, Mapping[str, Balance]]:
    """Return the file and the balances by the cases of the study, under "" where it has none.

    `others` are the other files of the study: they are kept beside each other under their own names.
    """
    if solved:
        what = "a study that is solved computes its own reactions"
        sections.fault((EQUILIBRIUM,), what, f"remove [{EQUILIBRIUM}]")
        return None, {}
    arguments = sections.bound(equilibrium, sections.table(EQUILIBRIUM), EQUILIBRIUM)
    if arguments is None:
        return None, {}
    path = sections.beside(arguments["file"])
    if any(path.name == other.name and path != other for other in others):
        sections.fault((EQUILIBRIUM, "file"), "the name of another file of the study", "rename it", path.name)
    read = sections.called(equilibrium, {**arguments, "file": str(path)}, EQUILIBRIUM)
    if read is None:
        return path, {}
    asked, found = read
    if cases:
        _needed(sections, "file", cases, found)
        return path, found
    if asked is None and len(found) == 1:
        asked = next(iter(found))
    if asked is None:
        what = f"{path.name} has the load cases {', '.join(found)}"
        sections.fault((EQUILIBRIUM, "case"), what, 'say which one belongs here, case = "NAME"')
        return path, {}
    _needed(sections, "case", [asked], found)
    return path, {"": found[asked]} if asked in found else {}


def _needed(sections: Sections, key: str, names: Sequence[str], found: Mapping[str, Balance]) -> None:
    for name in names:
        if name not in found:
            known = [case for case in found if case]
            right = nearest(name, known) if known else "add a column 'case' to it"
            sections.fault((EQUILIBRIUM, key), "the table has no such load case", right, name)
