"""The report of a judged case, in a folder."""

import sys
from datetime import date
from pathlib import Path
from typing import Any

from convergence.cli._judging import Case


def report(case: Case, folder: Path) -> Path:
    """Write the report into the folder; return its page."""
    from convergence.report.document import write_report

    folder.mkdir(parents=True, exist_ok=True)
    return write_report(
        case.findings,
        folder,
        fields=_fields(folder, len(case.findings.ladder.levels)),
        units=case.units,
        study_text=case.study_text,
        study_name=case.name,
        command="meshassay " + " ".join(sys.argv[1:]),
        date=date.today().isoformat(),
    )


def _fields(folder: Path, levels: int) -> list[Any]:
    """Return the fields of the levels that are kept beside the ladder, coarse to fine."""
    from convergence.fields import load_fields

    paths = sorted((folder / "levels").glob("level-*.npz"), key=lambda path: int(path.stem[6:]))
    return [load_fields(path) for path in paths[:levels]]
