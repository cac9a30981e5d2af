"""`meshassay run STUDY`: solve the ladder of a study, judge it, write the report."""

import time
from dataclasses import replace
from pathlib import Path

import click


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
@click.option("--json", "as_json", is_flag=True, help="Print the findings as JSON.")
def run(
    study: Path, out: Path | None, budgets: tuple[str, ...], as_json: bool, explained: tuple[str, ...]
) -> int:
    """Solve STUDY level by level, judge it and write the report.

    Each level is kept when it is solved: a run that was stopped goes on where it was. A study of a table or
    of result files has nothing to solve; they are judged. A level that would not fit in memory is not begun.
    The load cases of a study are solved together; each has a report of its own in the folder of its name. A
    companion is climbed after the ladder, with what is left of the budget.
    """
    from convergence.cli._budget import budget_of
    from convergence.cli._drawing import drawing
    from convergence.cli._explain import explain, require_known
    from convergence.cli._folder import LADDER, default_folder, keep_study, keep_tables
    from convergence.cli._judging import Judged, judge_saved
    from convergence.cli._progress import follow
    from convergence.cli._report import report, say_where
    from convergence.cli._show import show, show_json
    from convergence.climbing import climb, unknowns
    from convergence.intake.ladder_file import write_ladder
    from convergence.study import load

    budget = budget_of(budgets)
    asked = load(study)
    folder = out or default_folder(asked.name)
    keep_study(asked, folder)
    begun = time.perf_counter()
    ladders = [each for each in (asked, asked.companion) if each and not each.fields]
    sizes = {each.subfolder: [] if each.table_file else unknowns(each) for each in ladders}
    with drawing(max((max(counts, default=0) for counts in sizes.values()), default=0)) as draw_all:
        for each in ladders:
            if each.table_file:
                keep_tables(each, folder)
            else:
                left = replace(budget, seconds=budget.seconds - (time.perf_counter() - begun))
                follow(climb(each, folder, left), sizes[each.subfolder], each.subfolder)
        judged = judge_saved(asked, folder)
        if asked.fields and isinstance(judged, Judged):
            write_ladder(judged.findings.ladder, folder / LADDER)
        written = report(judged, folder, draw_all=draw_all)
    require_known(explained, [judged])
    if as_json:
        show_json([judged])
    else:
        show(judged)
        explain(explained, judged)
    say_where(written, as_json)
    return 0 if judged.all_sound else 1
