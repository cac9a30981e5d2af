"""The reports of what was judged, in a folder."""

import sys
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Any

from convergence.cli._judging import Judged, JudgedCases

if TYPE_CHECKING:
    from convergence.report.pictures import Draw


def report(judged: Judged | JudgedCases, folder: Path, draw_all: "Draw | None" = None) -> Path:
    """Write the report into the folder, those of cases into theirs within it; return the page.

    `draw_all` draws the figures, one by one where None.
    """
    folder.mkdir(parents=True, exist_ok=True)
    if isinstance(judged, Judged):
        return _report(judged, folder, draw_all)
    from convergence.report.cases_page import write_cases

    for name, case in judged.cases.items():
        report(case, folder / name, draw_all)
    return write_cases(
        judged.findings,
        folder,
        title=judged.title,
        loads=judged.loads,
        study_text=judged.study_text,
        study_name=judged.name,
        command=_command(),
        date=date.today().isoformat(),
    )


def _report(judged: Judged, folder: Path, draw_all: "Draw | None") -> Path:
    from convergence.report.document import write_report
    from convergence.report.pictures import one_by_one

    return write_report(
        judged.findings,
        folder,
        fields=_fields(folder, len(judged.findings.ladder.levels)),
        units=judged.units,
        study_text=judged.study_text,
        study_name=judged.name,
        command=_command(),
        date=date.today().isoformat(),
        draw_all=draw_all or one_by_one,
    )


def _command() -> str:
    return "meshassay " + " ".join(sys.argv[1:])


def _fields(folder: Path, levels: int) -> list[Any]:
    """Return the fields of the levels that are kept beside the ladder, coarse to fine."""
    from convergence.fields import load_fields

    paths = sorted((folder / "levels").glob("level-*.npz"), key=lambda path: int(path.stem[6:]))
    return [load_fields(path) for path in paths[:levels]]
