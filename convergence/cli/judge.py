"""`meshassay judge`: a verdict on tables, studies or the folders of runs, without solving."""

from pathlib import Path
from typing import TYPE_CHECKING

import click

from convergence.cli._options import report_decimal
from convergence.numbers import DecimalMark

if TYPE_CHECKING:
    from convergence.intake._notation import Decimals


@click.command()
@click.argument("inputs", nargs=-1, required=True, type=click.Path(path_type=Path))
@click.option("--json", "as_json", is_flag=True, help="Print one object, an array for several inputs.")
@click.option("--out", type=click.Path(path_type=Path), help="Write a report into this folder.")
@click.option("--as", "forms", default="html", metavar="html,pdf,docx", help="Forms of the report (html).")
@report_decimal
@click.option(
    "--explain", "explained", multiple=True, metavar="NAME", help="Tell why a verdict is what it is."
)
@click.option("--kind", "kinds", multiple=True, metavar="NAME=KIND", help="What a column of a table is.")
@click.option("--degree", type=click.IntRange(1, 10), help="Degree of the elements of a table.")
@click.option("--tolerance", metavar="5%|0.05", help="Accepted error of a table's values.")
@click.option("--dimension", type=click.Choice([2, 3]), help="Dimension, where sizes follow from counts.")
@click.option("--sheet", metavar="NAME", help="Sheet of a workbook, where several hold a table.")
@click.option("--range", "area", metavar="A3:F9", help="Cells of a sheet that are the table.")
@click.option("--case-column", metavar="NAME", help="Column that names the load case.")
@click.option("--decimal", type=click.Choice(["point", "comma"]), help="Sign of the decimals of a table.")
def judge(
    inputs: tuple[Path, ...],
    as_json: bool,
    out: Path | None,
    forms: str,
    mark: DecimalMark | None,
    explained: tuple[str, ...],
    kinds: tuple[str, ...],
    degree: int | None,
    tolerance: str | None,
    dimension: int | None,
    sheet: str | None,
    area: str | None,
    case_column: str | None,
    decimal: "Decimals | None",
) -> int:
    """Judge INPUTS: tables, studies (.toml) or the folders of runs, with all their load cases.

    A table is a text (.csv, .txt), a workbook (.xlsx, .xls, .ods) or - for one pasted on standard input. The
    options on tables are for bare tables; a study states them itself.
    """
    from convergence.cli import _judging, _said
    from convergence.cli._explain import explain, names_of, require_known
    from convergence.cli._forms import forms_of
    from convergence.cli._report import report, say_where
    from convergence.cli._show import show, show_json
    from convergence.intake._raw_table import Place

    chosen = forms_of(forms, mark)
    place = Place(sheet, area, decimal)
    said = _said.Said(
        _said.kinds_of(kinds), degree, _said.tolerance_of(tolerance), dimension, place, case_column
    )
    judged = _judging.judge_paths(inputs, said)
    require_known(explained, names_of(judged))
    if as_json:
        show_json(judged)
    for number, one in enumerate(judged):
        if not as_json:
            click.echo("\n" * (number > 0), nl=False)
            show(one, methods=True)
            explain(explained, one)
        if out:
            folder = out if len(judged) == 1 else out / one.name
            say_where(report(one, folder, forms=chosen), as_json)
    return 0 if all(one.all_sound for one in judged) else 1
