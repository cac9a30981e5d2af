"""The folder a run leaves: the study's copy, the ladder, the levels, the report."""

import shutil
from dataclasses import replace
from pathlib import Path

from convergence.case_folders import case_folders
from convergence.errors import Fault, InputError
from convergence.intake.ladder_file import write_ladder
from convergence.results import Ladder
from convergence.study import Study
from convergence.textfile import write_text

STUDY = "study.toml"
LADDER = "ladder.csv"


def default_folder(name: str) -> Path:
    """Return where a study is kept if the user does not say."""
    return Path("out") / name


def keep_study(study: Study, folder: Path) -> None:
    """Copy the study and the files it needs, so that the folder can be judged by itself."""
    folder.mkdir(parents=True, exist_ok=True)
    write_text(folder / STUDY, study.text)
    companion = study.companion.table_file if study.companion else None
    for file in filter(None, (study.table_file, companion, study.printout, *study.files)):
        copy = folder / file.name
        if not (copy.exists() and copy.samefile(file)):
            shutil.copyfile(file, copy)


def keep_tables(study: Study, folder: Path) -> None:
    """Write the ladder of a table study, or that of each case in its folder."""
    places = case_folders(study.cases)
    for name, one in (study.cases or {"": study}).items():
        if one.table:
            place = folder / places.get(name, "") / one.subfolder
            place.mkdir(parents=True, exist_ok=True)
            write_ladder(replace(one.table, fingerprint=one.fingerprint), place / LADDER)


def same_study(study: Study, ladder: Ladder, path: Path) -> Ladder:
    """Return the ladder; `InputError` where it was made from another study."""
    if ladder.fingerprint != study.fingerprint:
        what = "the ladder was made from another study (model, sizes, quantities or version differ)"
        right = "run the study again; --out FOLDER keeps the old ladder"
        raise InputError([Fault(str(path), what, right)])
    return ladder
