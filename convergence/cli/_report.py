"""The reports of what was judged, in a folder."""

import sys
from collections.abc import Mapping, Sequence
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Any

import click

from convergence.case_folders import case_folders
from convergence.cli._judging import Judged, JudgedCases
from convergence.statics import Balance

if TYPE_CHECKING:
    from convergence.comparison import Comparison
    from convergence.report.forms import Forms
    from convergence.report.pictures import Draw

WHOLE = "../report.html"  # the report of all load cases, seen from the folder of one


def report(
    judged: Judged | JudgedCases,
    folder: Path,
    *,
    draw_all: "Draw | None" = None,
    forms: "Forms | None" = None,
    day: str = "",
) -> list[Path]:
    """Write the report into the folder, those of cases into theirs within it; return its forms.

    `draw_all` draws the figures, one by one where None; `forms` are HTML alone where None; `day` is the
    date that stands in it, today where "".
    """
    from convergence.report.forms import HTML

    chosen, day = forms or HTML, day or date.today().isoformat()
    chosen = replace(chosen, decimal_mark=chosen.decimal_mark or judged.decimal_mark)
    if isinstance(judged, Judged):
        return _report(judged, folder, draw_all, chosen, day, "")
    from convergence.report.cases_page import write_cases

    places = case_folders(judged.cases)
    for name, case in judged.cases.items():
        _report(case, folder / places[name], draw_all, chosen, day, WHOLE)
    first = next(iter(judged.cases.values()))
    return write_cases(
        judged.findings,
        folder,
        title=judged.title,
        loads=judged.loads,
        study_text=judged.study_text,
        study_name=judged.name,
        command=_command(),
        date=day,
        record=first.record,
        inputs=first.inputs,
        forms=chosen,
    )


def _report(
    judged: Judged, folder: Path, draw_all: "Draw | None", forms: "Forms", day: str, up: str
) -> list[Path]:
    from convergence.report.document import write_report
    from convergence.report.pictures import one_by_one

    if judged.maps:
        from convergence.bodies.write_fields import write_fields
        from convergence.report.sections_map import MAP

        folder.mkdir(parents=True, exist_ok=True)
        write_fields(folder / MAP, judged.maps)
    return write_report(
        judged.findings,
        folder,
        fields=judged.fields or _fields(judged),
        units=judged.units,
        study_text=judged.study_text,
        study_name=judged.name,
        command=_command(),
        date=day,
        draw_all=draw_all or one_by_one,
        record=judged.record,
        inputs=judged.inputs,
        forms=forms,
        up=up,
    )


def report_balances(found: Mapping[str, Balance], folder: Path, name: str, forms: "Forms") -> list[Path]:
    """Write the report of a printout into the folder; return its forms."""
    from convergence.report.balance_page import write_balances

    day = date.today().isoformat()
    return write_balances(found, folder, name=name, command=_command(), date=day, forms=forms)


def report_comparisons(
    found: "Mapping[str, Comparison]", folder: Path, title: str, forms: "Forms"
) -> list[Path]:
    """Write the report of a comparison into the folder; return its forms."""
    from convergence.report.comparison_page import write_comparisons

    day = date.today().isoformat()
    return write_comparisons(found, folder, title=title, command=_command(), date=day, forms=forms)


def say_where(written: Sequence[Path], as_json: bool) -> None:
    """Say where the forms of a report are, beside JSON on the other stream."""
    for path in written:
        click.echo(f"Report: {path}", err=as_json)


def _command() -> str:
    return "meshassay " + " ".join(sys.argv[1:])


def _fields(judged: Judged) -> list[Any]:
    """Return the fields of the levels that are kept beside the ladder, coarse to fine."""
    from convergence.fields import load_fields

    if judged.kept is None:
        return []
    paths = sorted((judged.kept / "levels").glob("level-*.npz"), key=lambda path: int(path.stem[6:]))
    return [load_fields(path) for path in paths[: len(judged.findings.ladder.levels)]]
