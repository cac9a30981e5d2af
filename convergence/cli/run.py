"""`meshassay run STUDY`: solve the ladder of a study, judge it, write the report."""

import time
from collections.abc import Mapping, Sequence
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import click

from convergence.cli._options import report_decimal
from convergence.numbers import DecimalMark

if TYPE_CHECKING:
    from convergence.forecast import Budget
    from convergence.study import Study


@click.command()
@click.argument("study", type=click.Path(path_type=Path))
@click.option("--out", type=click.Path(path_type=Path), help="Folder of this run (default: out/STUDY).")
@click.option(
    "--budget",
    "budgets",
    multiple=True,
    help="Memory (10GB) or time (5min) this run may use; give it twice for both. A level that would need"
    " more is not solved, those before it are judged.",
)
@click.option(
    "--explain", "explained", multiple=True, metavar="NAME", help="Tell why a verdict is what it is."
)
@report_decimal
@click.option("--json", "as_json", is_flag=True, help="Print the findings as JSON.")
def run(
    study: Path,
    out: Path | None,
    budgets: tuple[str, ...],
    explained: tuple[str, ...],
    mark: DecimalMark | None,
    as_json: bool,
) -> int:
    """Solve STUDY level by level, judge it and write the report.

    Each level is kept when it is solved: a run that was stopped goes on where it was. A study of a table or
    of result files has nothing to solve; they are judged. A level that would not fit in memory is not begun.
    The load cases of a study are solved together; each has a report of its own in the folder of its name. A
    companion is climbed after the ladder, with what is left of the budget.
    """
    from convergence.cli._budget import budget_of
    from convergence.cli._drawing import drawing
    from convergence.cli._explain import explain, names_of, require_known
    from convergence.cli._folder import LADDER, default_folder, keep_study
    from convergence.cli._forms import forms_of
    from convergence.cli._judging import Judged, judge_saved
    from convergence.cli._report import report, say_where
    from convergence.cli._show import show, show_json
    from convergence.climbing import unknowns
    from convergence.intake.ladder_file import write_ladder
    from convergence.study import load

    budget = budget_of(budgets)
    asked = load(study)
    if not asked.fields:
        require_known(explained, [quantity.name for quantity in asked.quantities])
    folder = out or default_folder(asked.name)
    keep_study(asked, folder)
    ladders = [each for each in (asked, asked.companion) if each and not each.fields]
    sizes = {each.subfolder: [] if each.table_file else unknowns(each) for each in ladders}
    with drawing(max((max(counts, default=0) for counts in sizes.values()), default=0)) as draw_all:
        _climb(ladders, sizes, folder, budget)
        judged = judge_saved(asked, folder)
        if asked.fields and isinstance(judged, Judged):
            write_ladder(judged.findings.ladder, folder / LADDER)
        written = report(judged, folder, draw_all=draw_all, forms=forms_of("html", mark))
    require_known(explained, names_of([judged]))
    if as_json:
        show_json([judged])
    else:
        show(judged)
        explain(explained, judged)
    say_where(written, as_json)
    return 0 if judged.all_sound else 1


def _climb(
    ladders: "Sequence[Study]", sizes: Mapping[str, Sequence[int]], folder: Path, budget: "Budget"
) -> None:
    """Solve ladders one after the other within one budget; those of tables are written as they are."""
    from convergence.cli._folder import keep_tables
    from convergence.cli._progress import follow
    from convergence.climbing import climb

    begun = time.perf_counter()
    for each in ladders:
        if each.table_file:
            keep_tables(each, folder)
        else:
            left = replace(budget, seconds=budget.seconds - (time.perf_counter() - begun))
            follow(climb(each, folder, left), sizes[each.subfolder], each.subfolder)
