"""`meshassay run STUDY`: solve the ladder of a study, judge it, write the report."""

from dataclasses import replace
from pathlib import Path

import click


@click.command()
@click.argument("study", type=click.Path(path_type=Path))
@click.option("--out", type=click.Path(path_type=Path), help="Folder of this run (default: out/STUDY).")
@click.option("--json", "as_json", is_flag=True, help="Print the findings as JSON.")
def run(study: Path, out: Path | None, as_json: bool) -> int:
    """Solve STUDY level by level, judge it and write the report.

    Each level is kept when it is solved: a run that was stopped goes on where it was. A table study
    has nothing to solve; its table is judged.
    """
    from convergence.cli._folder import LADDER, default_folder, keep_study
    from convergence.cli._judging import judge_study
    from convergence.cli._progress import follow
    from convergence.cli._report import report
    from convergence.cli._show import show_json, show_table
    from convergence.intake.ladder_file import read_ladder, write_ladder
    from convergence.study import load

    asked = load(study)
    folder = out or default_folder(asked.name)
    keep_study(asked, folder)
    if asked.table:
        write_ladder(replace(asked.table, fingerprint=asked.fingerprint), folder / LADDER)
    elif asked.ladder:
        from convergence.climbing import climb

        follow(climb(asked, folder), asked.ladder.levels, asked.ladder.ratio)
    case = judge_study(asked, read_ladder(folder / LADDER), folder)
    page = report(case, folder)
    if as_json:
        show_json([case.findings])
    else:
        show_table(case.findings)
    click.echo(f"Report: {page}", err=as_json)
    return 0 if case.findings.all_sound else 1
