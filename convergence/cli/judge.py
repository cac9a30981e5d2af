"""`meshassay judge`: a verdict on tables, studies or the folders of runs, without solving."""

from pathlib import Path

import click

from convergence.errors import Fault, InputError


@click.command()
@click.argument("inputs", nargs=-1, required=True, type=click.Path(path_type=Path))
@click.option("--json", "as_json", is_flag=True, help="Print one object, an array for several inputs.")
@click.option("--out", type=click.Path(path_type=Path), help="Write a report into this folder.")
@click.option("--kind", "kinds", multiple=True, metavar="NAME=KIND", help="What a column of a table is.")
@click.option("--degree", type=click.IntRange(1, 10), help="Degree of the elements of a table.")
@click.option("--tolerance", metavar="5%|0.05", help="Accepted error of a table's values.")
@click.option("--dimension", type=click.Choice([2, 3]), help="Dimension, where sizes follow from counts.")
def judge(
    inputs: tuple[Path, ...],
    as_json: bool,
    out: Path | None,
    kinds: tuple[str, ...],
    degree: int | None,
    tolerance: str | None,
    dimension: int | None,
) -> int:
    """Judge INPUTS: a table (.csv), a study (.toml) or the folder of a run, all its cases if it has some.

    The four options on tables are for bare tables; a study states them itself.
    """
    from convergence.cli import _judging
    from convergence.cli._report import report
    from convergence.cli._show import show, show_json

    said = _judging.Said(_judging.kinds_of(kinds), degree, _judging.tolerance_of(tolerance), dimension)
    judged: list[_judging.Judged | _judging.JudgedCases] = []
    faults: list[Fault] = []
    for path in inputs:
        try:
            judged.append(_judging.judge_path(path, said))
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    if as_json:
        show_json(judged)
    for number, one in enumerate(judged):
        if not as_json:
            click.echo("\n" * (number > 0), nl=False)
            show(one, methods=True)
        if out:
            folder = out if len(judged) == 1 else out / one.name
            click.echo(f"Report: {report(one, folder)}", err=as_json)
    return 0 if all(one.all_sound for one in judged) else 1
