"""`meshassay balance`: whether the loads and reactions that a solver printed are in equilibrium."""

from pathlib import Path
from typing import TYPE_CHECKING

import click

from convergence.cli._options import report_decimal
from convergence.numbers import DecimalMark

if TYPE_CHECKING:
    from convergence.intake._notation import Decimals


@click.command()
@click.argument("file", type=click.Path(path_type=Path))
@click.option(
    "--about", metavar="X,Y[,Z]", help="Point of the moments, in the table's unit (default: origin)."
)
@click.option("--tolerance", metavar="0.1%|0.001", help="Accepted share of the load (default: 0.1 %).")
@click.option("--sheet", metavar="NAME", help="Sheet of a workbook, where several hold a table.")
@click.option("--range", "area", metavar="A3:F9", help="Cells of a sheet that are the table.")
@click.option("--decimal", type=click.Choice(["point", "comma"]), help="Sign of the decimals of the table.")
@click.option("--json", "as_json", is_flag=True, help="Print the sums as JSON.")
@click.option("--out", type=click.Path(path_type=Path), help="Write a report into this folder.")
@click.option("--as", "forms", default="html", metavar="html,pdf,docx", help="Forms of the report (html).")
@report_decimal
def balance(
    file: Path,
    about: str | None,
    tolerance: str | None,
    sheet: str | None,
    area: str | None,
    decimal: "Decimals | None",
    as_json: bool,
    out: Path | None,
    forms: str,
    mark: DecimalMark | None,
) -> int:
    """Balance FILE, a table (text or workbook) with one row a load or a reaction.

    Columns: what (load or reaction), name, case; fx, fy, fz; mx, my, mz; x, y, z; with units in brackets.
    Exit code 0 if every load case balances, 1 if one does not or the printed digits cannot tell.
    """
    from convergence.cli._balanced import point_of, show_balances
    from convergence.cli._forms import forms_of
    from convergence.cli._said import tolerance_of
    from convergence.cli._show import show_object
    from convergence.errors import Fault, InputError, Unsuitable
    from convergence.intake._raw_table import Place
    from convergence.intake.force_table import read_force_table
    from convergence.statics import ACCEPTED, balances

    point, accepted, chosen = point_of(about), tolerance_of(tolerance), forms_of(forms, mark)
    try:
        found = balances(read_force_table(file, Place(sheet, area, decimal)), point, accepted or ACCEPTED)
    except Unsuitable as error:
        raise InputError(
            Fault(f"--{key}", f"unsuitable {key}", right, about) for key, _, right in error.problems
        ) from None
    if as_json:
        from convergence.report.balance_page import balances_object

        show_object(balances_object(found))
    else:
        show_balances(found)
    if out:
        from convergence.cli._report import report_balances, say_where

        say_where(report_balances(found, out, file.stem, chosen), as_json)
    return 0 if all(one.passed for one in found.values()) else 1
