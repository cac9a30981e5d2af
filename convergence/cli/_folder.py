"""The folder a run leaves: the study's copy, the ladder, the levels, the report."""

import shutil
from datetime import date
from pathlib import Path
from typing import Any

from convergence.dimensions import Units
from convergence.errors import Fault, InputError
from convergence.results import Findings, Ladder
from convergence.study import Study
from convergence.textfile import write_text

STUDY = "study.toml"
LADDER = "ladder.csv"


def default_folder(name: str) -> Path:
    """Return where a study is kept if the user does not say."""
    return Path("out") / name


def keep_study(study: Study, folder: Path) -> None:
    """Copy the study, and its table where it has one, so that the folder can be judged by itself."""
    folder.mkdir(parents=True, exist_ok=True)
    write_text(folder / STUDY, study.text)
    if study.table_file:
        copy = folder / study.table_file.name
        if not (copy.exists() and copy.samefile(study.table_file)):
            shutil.copyfile(study.table_file, copy)


def same_study(study: Study, ladder: Ladder, path: Path) -> Ladder:
    """Return the ladder; `InputError` where it was made from another study."""
    if ladder.fingerprint != study.fingerprint:
        what = "the ladder was made from another study (model, sizes, quantities or version differ)"
        right = "run the study again; --out FOLDER keeps the old ladder"
        raise InputError([Fault(str(path), what, right)])
    return ladder


def report(
    findings: Findings, folder: Path, *, units: Units, study_text: str, name: str, command: str
) -> Path:
    """Write the report into the folder; return its page."""
    from convergence.report.document import write_report

    folder.mkdir(parents=True, exist_ok=True)
    return write_report(
        findings,
        folder,
        fields=_fields(folder, len(findings.ladder.levels)),
        units=units,
        study_text=study_text,
        study_name=name,
        command=command,
        date=date.today().isoformat(),
    )


def _fields(folder: Path, levels: int) -> list[Any]:
    """Return the fields of the levels that are kept beside the ladder, coarse to fine."""
    from convergence.fields import load_fields

    paths = sorted((folder / "levels").glob("level-*.npz"), key=lambda path: int(path.stem[6:]))
    return [load_fields(path) for path in paths[:levels]]
