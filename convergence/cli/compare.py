"""`meshassay compare`: whether two ladders of one part agree, or what a revision changes."""

from dataclasses import replace
from pathlib import Path

import click

from convergence.cli._options import report_decimal
from convergence.numbers import DecimalMark


@click.command()
@click.argument("first", type=click.Path(path_type=Path))
@click.argument("second", type=click.Path(path_type=Path))
@click.option("--match", "matches", multiple=True, metavar="FIRST=SECOND", help="Quantities of other names.")
@click.option("--revisions", is_flag=True, help="Two revisions of a part: state the change.")
@click.option("--kind", "kinds", multiple=True, metavar="NAME=KIND", help="What a column of bare tables is.")
@click.option(
    "--degree", "degrees", multiple=True, type=click.IntRange(1, 10), help="Of the elements; twice for both."
)
@click.option("--dimension", type=click.Choice([2, 3]), help="Dimension, where sizes follow from counts.")
@click.option("--json", "as_json", is_flag=True, help="Print the comparison as JSON.")
@click.option("--out", type=click.Path(path_type=Path), help="Write a report into this folder.")
@click.option("--as", "forms", default="html", metavar="html,pdf,docx", help="Forms of the report (html).")
@report_decimal
def compare(
    first: Path,
    second: Path,
    matches: tuple[str, ...],
    revisions: bool,
    kinds: tuple[str, ...],
    degrees: tuple[int, ...],
    dimension: int | None,
    as_json: bool,
    out: Path | None,
    forms: str,
    mark: DecimalMark | None,
) -> int:
    """Compare FIRST and SECOND, each a table, a study or the folder of a run; nothing is solved.

    Quantities are matched by name. Exit code 0 if the intervals of all of them meet.
    """
    from convergence.cli import _comparing
    from convergence.cli._forms import forms_of
    from convergence.cli._show import show_object

    chosen = forms_of(forms, mark)
    match = _comparing.matches_of(matches)
    said = _comparing.said_of(kinds, match, degrees, dimension)
    both = _comparing.judge_both((first, second), said)
    found = _comparing.compare_judged(both, (first, second), match, revisions)
    if as_json:
        from convergence.report.comparison_page import comparisons_object

        show_object(comparisons_object(found))
    else:
        _comparing.show_comparisons(found)
    if out:
        from convergence.cli._report import report_comparisons, say_where

        title = f"{first.name} and {second.name}"
        chosen = replace(chosen, decimal_mark=chosen.decimal_mark or both[0].decimal_mark)
        say_where(report_comparisons(found, out, title, chosen), as_json)
    return 0 if all(one.all_meet for one in found.values()) else 1
