"""The reports of what was judged, in a folder."""

import sys
from datetime import date
from pathlib import Path
from typing import Any

from convergence.cli._judging import Judged, JudgedCases


def report(judged: Judged | JudgedCases, folder: Path) -> Path:
    """Write the report into the folder, those of cases into theirs within it; return the page."""
    folder.mkdir(parents=True, exist_ok=True)
    if isinstance(judged, Judged):
        return _report(judged, folder)
    from convergence.report.cases_page import write_cases

    for name, case in judged.cases.items():
        report(case, folder / name)
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


def _report(judged: Judged, folder: Path) -> Path:
    from convergence.report.document import write_report

    return write_report(
        judged.findings,
        folder,
        fields=_fields(folder, len(judged.findings.ladder.levels)),
        units=judged.units,
        study_text=judged.study_text,
        study_name=judged.name,
        command=_command(),
        date=date.today().isoformat(),
    )


def _command() -> str:
    return "meshassay " + " ".join(sys.argv[1:])


def _fields(folder: Path, levels: int) -> list[Any]:
    """Return the fields of the levels that are kept beside the ladder, coarse to fine."""
    from convergence.fields import load_fields

    paths = sorted((folder / "levels").glob("level-*.npz"), key=lambda path: int(path.stem[6:]))
    return [load_fields(path) for path in paths[:levels]]
